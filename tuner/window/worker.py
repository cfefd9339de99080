"""Assesses requests beside the main thread: the newest wins, and curves come before a verdict that takes time."""

import logging
import time
from collections import OrderedDict
from collections.abc import Callable
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from PySide6.QtCore import QObject, QThread, Signal

from tuner.errors import TrimwrightError
from tuner.judge.assessment import Assessment, MemberResult
from tuner.model.sheet import Sheet
from tuner.session.tunings import KeptTuning
from tuner.window.ending import end
from tuner.window.shown import Draw, Failure, Glance, KeptResult, Request, Shown, Sketch, Sketched
from tuner.window.slot import Slot

QUICK = 0.005
"""Seconds that a whole family may take before anything is shown ahead of its verdict."""

OUTLINED = 0.012
"""Seconds that its curves may take to be shown ahead of its verdict; beyond, those of the nominal plant come first."""

SLOW = 0.050
"""Seconds from which on a family waits for the hand to rest, so that it does not hold up the nominal curves."""

FRAME = 0.030
"""Seconds that the rest waits after the first curves at most, while the main thread paints undisturbed."""

REST = 0.060
"""Seconds that such a family waits for a newer request."""

LATE, LATE_TIMES = 0.150, 4.0
"""Seconds, or times its cost, after which the family is due although the hand still moves."""

if TYPE_CHECKING:
    from tuner.simulate.curves import FrequencyCurves

_REMEMBERED = 32

_log = logging.getLogger(__name__)

_Answer = Callable[[Request], Shown]


@dataclass(slots=True)
class Assessing:
    """Turns a request into answers; has no thread of its own.

    Parameters
    ----------
    sketch, glance, draw : callable
        The first half of the road from sheet to assessment, a short cut for a first picture, and the overlay.
    cost : float
        Seconds that the last whole family took.
    half : float
        Seconds that the first half of that took.
    ended : float
        When it was done, on the clock of `time.perf_counter`.
    """

    sketch: Sketch
    glance: Glance
    draw: Draw
    cost: float = float("inf")
    half: float = float("inf")
    ended: float = float("-inf")
    _begun: "_Begun | None" = None
    _kept: OrderedDict[tuple[Sheet, str], MemberResult | None] = field(default_factory=OrderedDict)

    def first(self, request: Request) -> Shown:
        """Answer as fast as can be: with all curves, where those of the family do not take long."""
        return self.outlined(request) if self._answers_in_outline(request) else self.nominal(request)

    def _answers_in_outline(self, request: Request) -> bool:
        # Margins are part of the curves over frequency.
        return self.half <= OUTLINED and not request.frequency

    def nominal(self, request: Request) -> Shown:
        """Answer for the nominal plant alone, and for the plant that is looked at."""
        return self._shown(request, self.glance(request.sheet, request.looked_at))

    def outlined(self, request: Request) -> Shown:
        """Answer with the curves of the whole family, and the measures of the nominal plant."""
        self._begun = self._begin(request)
        return self._shown(request, self._begun.sketched.outlined(request.looked_at), outlined=True)

    def whole(self, request: Request) -> Shown:
        """Answer for the whole family."""
        begun, self._begun = self._begun, None
        if begun is None or begun.sheet is not request.sheet:
            begun = self._begin(request)
        began = time.perf_counter()
        shown = self._shown(request, begun.sketched.judged(), whole=True)
        self.ended = time.perf_counter()
        self.cost = self.half + self.ended - began
        return shown

    def _begin(self, request: Request) -> "_Begun":
        began = time.perf_counter()
        sketched = self.sketch(request.sheet, request.sheet.trial.family_size)
        self.half = time.perf_counter() - began
        return _Begun(request.sheet, sketched)

    def due(self) -> bool:
        """Tell whether the last whole family is so old that the next one should wait no longer."""
        return time.perf_counter() - self.ended > max(LATE, LATE_TIMES * self.cost)

    def _shown(self, request: Request, assessment: Assessment, *, whole: bool = False, outlined: bool = False) -> Shown:
        seen = assessment.seen_from(request.looked_at) if request.looked_at else assessment
        overlay = self.draw(request.sheet, seen)
        results = (self._result(request, tuning) for tuning in request.kept)
        kept = tuple(found for found in results if found is not None)
        curves = _curves(request.sheet, seen) if request.frequency else None
        plant = "" if seen is assessment else request.looked_at
        return Shown(
            number=request.number,
            sheet=request.sheet,
            assessment=assessment,
            overlay=overlay,
            kept=kept,
            whole=whole,
            outlined=outlined,
            frequency=curves,
            looked_at=plant,
            seen=seen if plant else None,
            family_view=request.family_view,
        )

    def _result(self, request: Request, tuning: KeptTuning) -> KeptResult | None:
        """Return what a kept tuning makes of the plant that is looked at; None when that cannot be computed."""
        law = replace(tuning.controller, as_found=None)
        asked = replace(request.sheet, controller=law, limits=()), request.looked_at
        if asked not in self._kept:
            self._kept[asked] = self._run(*asked)
        self._kept.move_to_end(asked)
        while len(self._kept) > _REMEMBERED:
            self._kept.popitem(last=False)
        member = self._kept[asked]
        if member is None:
            return None
        return KeptResult(tuning.name, tuning.label, member, _response(asked[0], member) if request.frequency else None)

    def _run(self, sheet: Sheet, plant: str) -> MemberResult | None:
        try:
            return self.glance(sheet, plant).seen_from(plant).nominal
        except TrimwrightError:
            return None


@dataclass(frozen=True, slots=True, eq=False)
class _Begun:
    """Half of an answer."""

    sheet: Sheet
    sketched: Sketched


def _curves(sheet: Sheet, seen: Assessment) -> "FrequencyCurves":
    # Not before it is asked for: the first picture does not wait for compiled loops.
    from tuner.window.frequency.question import curves_of

    return curves_of(sheet, seen)


def _response(sheet: Sheet, member: MemberResult) -> "FrequencyCurves":
    from tuner.window.frequency.question import curves_of_one

    return curves_of_one(sheet, member)


class Assessor(QObject):
    """Takes requests on the main thread and answers there, through signals.

    Parameters
    ----------
    sketch, glance, draw : callable
        See `Assessing`.
    synchronous : bool
        Answer at once, inside `submit`, for tests that want no thread.
    """

    answered = Signal(object)
    """A `Shown`."""
    failed = Signal(object)
    """A `Failure`."""

    def __init__(self, sketch: Sketch, glance: Glance, draw: Draw, *, synchronous: bool = False) -> None:
        super().__init__()
        self._assessing = Assessing(sketch, glance, draw)
        self._slot: Slot[Request] = Slot()
        self._thread = None if synchronous else _Thread(self)

    def submit(self, request: Request) -> None:
        """Ask for a request; one that waits already is dropped for it."""
        if self._thread is None:
            self._answer_whole(request)
            return
        self._slot.put(request)
        if not self._thread.isRunning():
            self._thread.start()

    def go_on(self) -> None:
        """Say that the first picture is painted, so that the family need not wait for it."""
        self._slot.nudge()

    def close(self) -> None:
        """End the thread, and wait for it unless that takes long; nothing is answered from then on."""
        self._slot.close()
        if self._thread is not None:
            end(self._thread)

    def work(self) -> None:
        """Answer requests until `close`; runs in the thread."""
        while (request := self._slot.take()) is not None:
            self._answer(request)

    def _answer(self, request: Request) -> None:
        cost = self._assessing.cost
        if cost > QUICK:
            if not self._tell(request, self._assessing.first):
                return
            overtaken = self._slot.newer(REST) if cost > SLOW else self._slot.newer(FRAME, until_nudged=True)
            if self._slot.closed or (overtaken and not self._assessing.due()):
                return
        self._answer_whole(request)

    def _answer_whole(self, request: Request) -> None:
        self._tell(request, self._assessing.whole)

    def _tell(self, request: Request, answer: _Answer) -> bool:
        """Send an answer or a failure; tell whether there was an answer."""
        try:
            shown = answer(request)
        except TrimwrightError as fault:
            self.failed.emit(Failure(request.number, str(fault)))
        except Exception as fault:  # the window outlives whatever a room below it did not foresee
            _log.exception("A request could not be assessed.")
            sentence = f"The loop could not be computed; this is a fault of the program: {fault!r}"
            self.failed.emit(Failure(request.number, sentence))
        else:
            self.answered.emit(shown)
            return True
        return False


class _Thread(QThread):
    """Runs an assessor's work."""

    def __init__(self, assessor: Assessor) -> None:
        super().__init__()
        self._assessor = assessor

    def run(self) -> None:
        """Work until the assessor is closed."""
        self._assessor.work()
