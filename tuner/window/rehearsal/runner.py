"""Runs a rehearsal by the clock on the wall, a slice at a time, and hands on what the hand or a demonstration does."""

import time
from collections.abc import Callable
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QObject, QTimer, Signal

from tuner.errors import LoopError
from tuner.model.controller import Controller
from tuner.model.demonstration import Deed
from tuner.model.loop import Loop
from tuner.model.sheet import Sheet
from tuner.rehearse.pacing import Pacer
from tuner.rehearse.recording import MOST_SAMPLES, Recorder
from tuner.rehearse.script import Played, Script, do
from tuner.rehearse.wording import told

if TYPE_CHECKING:  # both load much that a window without a rehearsal does not need
    from tuner.files.demonstrations import Staged
    from tuner.rehearse.rehearsal import Rehearsal

FRAME: Final = 33
"""Milliseconds between two slices."""

SLICE: Final = 0.010
"""Seconds that a slice may take of the main thread; what is not run by then runs later, the loop is slower then."""

_CHUNK: Final = 200
"""Samples that run in one go within a slice."""

SECONDS: Final = {"s": 1.0, "min": 60.0, "h": 3600.0}
"""Seconds in each unit of time."""


FULL: Final = f"The record has ended: it holds {MOST_SAMPLES:,} samples, as many as it can."


class Runner(QObject):
    """A rehearsal that runs while it is let.

    Parameters
    ----------
    clock : callable
        Seconds that never go back.
    """

    advanced = Signal(object)
    """The `Strip` that has just run."""
    changed = Signal()
    """Something about the loop or about running is another one now."""
    happened = Signal(object)
    """A `Played`: what was done, and what is said of it."""
    refused = Signal(str)
    """Why something was not done."""
    ticked = Signal()
    """A slice is over."""

    def __init__(self, clock: Callable[[], float] = time.monotonic) -> None:
        super().__init__()
        self._clock = clock
        self.rehearsal: Rehearsal | None = None
        self.staged: Staged | None = None
        self.recorder: Recorder | None = None
        self.recorded: Loop | None = None
        self.recording = False
        self._saved = 0
        self.pacer = Pacer(1.0)
        self._script: Script | None = None
        self._timer = QTimer(self, interval=FRAME)
        self._timer.timeout.connect(self.tick)

    # What it is like now ----------------------------------------------------------------------------------------

    @property
    def running(self) -> bool:
        """Whether time goes by."""
        return self._timer.isActive()

    @property
    def sheet(self) -> Sheet | None:
        """The loop with its controller as it is now."""
        return None if self.rehearsal is None else self.rehearsal.sheet

    @property
    def playing(self) -> bool:
        """Whether a demonstration still has something to do."""
        return self._script is not None and not self._script.over

    # Begin and end ----------------------------------------------------------------------------------------------

    def begin(self, rehearsal: "Rehearsal", staged: "Staged | None" = None) -> None:
        """Take over a loop at rest, with the demonstration that is played on it, if any; it does not run yet."""
        self.pause()
        speed = self.pacer.speed if staged is None else staged.demonstration.speed
        self.rehearsal, self.staged = rehearsal, staged
        self._script = None if staged is None else Script(staged.demonstration, rehearsal)
        self.pacer = Pacer(rehearsal.sample_time * SECONDS[rehearsal.sheet.loop.time_unit], speed)
        self._begin_record_anew(rehearsal)
        self.changed.emit()

    def forget(self) -> None:
        """Let the loop go; what was recorded stays until the next record."""
        self._timer.stop()
        self.rehearsal = self.staged = self._script = None
        self.recording = False
        self.changed.emit()

    def close(self) -> None:
        """Let everything go."""
        self.forget()
        self._let_record_go()

    def run(self) -> None:
        """Let time go by."""
        if self.rehearsal is not None and not self.running:
            self.pacer.pause()
            self._timer.start()
            self.changed.emit()

    def pause(self) -> None:
        """Let time stand still."""
        if self.running:
            self._timer.stop()
            self.changed.emit()

    def set_speed(self, speed: float) -> None:
        """Go at a factor of real time."""
        self.pacer.speed = speed
        self.changed.emit()

    # The hand ---------------------------------------------------------------------------------------------------

    def act(self, deed: Deed) -> None:
        """Do something to the loop; what cannot be done is told."""
        if self.rehearsal is None:
            return
        try:
            do(deed, self.rehearsal)
        except LoopError as refusal:
            self.refused.emit(str(refusal))
        else:
            self._note(told(deed, self.rehearsal.sheet.loop))
            self.refused.emit("")
        self.changed.emit()

    def retune(self, controller: Controller) -> None:
        """Go on with the controller that the rulers hold.

        Raises
        ------
        LoopError
            When the loop cannot go on with it.
        """
        if self.rehearsal is None or self.rehearsal.sheet.controller == controller:
            return
        self.rehearsal.set_controller(controller)
        self._note("controller changed on the rulers")
        self.changed.emit()

    # The record -------------------------------------------------------------------------------------------------

    def record(self, on: bool) -> None:
        """Begin a new record, or end the one that is made, which stays until the next one."""
        if on and not self.recording and self.rehearsal is not None:
            self._let_record_go()
            self.recorder, self.recorded = Recorder(), self.rehearsal.sheet.loop
        self.recording = on and self.recorder is not None
        self.changed.emit()

    @property
    def unsaved(self) -> int:
        """How many samples were recorded and not saved."""
        return 0 if self.recorder is None else self.recorder.samples - self._saved

    def note_saved(self) -> None:
        """Note that all that was recorded is saved."""
        self._saved = 0 if self.recorder is None else self.recorder.samples

    def _note(self, words: str) -> None:
        if self.recording and self.recorder is not None and self.rehearsal is not None:
            self.recorder.note(self.rehearsal.time, words)

    def _keep(self, played: Played) -> None:
        if played.words:
            self._note(played.words)

    def _begin_record_anew(self, rehearsal: "Rehearsal") -> None:
        """Let a record that has just begun go on with another loop; one that has samples ends with its own."""
        if self.recording and self.recorder is not None and self.recorder.samples == 0:
            self.recorded = rehearsal.sheet.loop
        else:
            self.recording = False

    def _let_record_go(self) -> None:
        if self.recorder is not None:
            self.recorder.close()
        self.recorder, self.recorded, self.recording, self._saved = None, None, False, 0

    # Running ----------------------------------------------------------------------------------------------------

    def tick(self) -> None:
        """Run what is due by now, within a slice."""
        if self.rehearsal is None:
            return
        due, began, ran = self.pacer.due(self._clock()), time.perf_counter(), 0
        while ran < due and (ran == 0 or time.perf_counter() - began < SLICE):
            count = self.go_on(min(due - ran, _CHUNK))
            if count == 0:
                self._ran_away()
                break
            ran += count
        self.pacer.took(ran, time.perf_counter() - began, self._clock())
        self.ticked.emit()

    def go_on(self, samples: int) -> int:
        """Do what the demonstration has to do by now, and run some samples at once; return how many ran."""
        if self.rehearsal is None:
            return 0
        if self._script is not None:
            self._play(self._script)
            samples = self._script.room(samples)
        strip = self.rehearsal.advance(samples)
        if self.recording and self.recorder is not None:
            self.recorder.add(strip)
            if self.recorder.full:
                self.record(False)
                self.refused.emit(FULL)
        self.advanced.emit(strip)
        return len(strip)

    def _play(self, script: Script) -> None:
        for played in script.play():
            self._keep(played)
            self.happened.emit(played)
            self.changed.emit()

    def _ran_away(self) -> None:
        from tuner.rehearse.rehearsal import RAN_AWAY

        self.refused.emit(RAN_AWAY)
        self.pause()
