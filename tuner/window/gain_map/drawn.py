"""Keeps the map drawn: asks for it coarse at once and finer while nothing changes, and shows what comes back."""

from PySide6.QtCore import QObject, QTimer

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.gain_map.question import MapAnswer, MapRequest, Question, Values
from tuner.window.gain_map.view import MapView
from tuner.window.shown import Failure

STAGES = (17, 33, 65)
"""Places of each scale that are computed, coarse first; with the last ones come more, close to the present gains."""

LATE = 250
"""Milliseconds after which a map that a change made untrue is shown paler, if nothing newer has come."""

COMPUTING = "The map is being computed; the first time on a machine that takes a while."


class DrawnMap(QObject):
    """Asks a worker for the map of a question, the newest first, while the map is in sight.

    Parameters
    ----------
    document : Document
        Whose sheet is mapped.
    view : MapView
        Shows the map.
    worker : Beside
        Answers a `MapRequest` with a `MapAnswer`.
    """

    def __init__(self, document: Document, view: MapView, worker: Beside[MapRequest]) -> None:
        super().__init__(view)
        self._document, self._view, self._worker = document, view, worker
        self._wanted: Question | None = None
        self._asked = self._shown = self._first = self._stage = 0
        self._pending = self._active = self._held = False
        self._near: Values = (None, None)
        self._late = QTimer(self, singleShot=True, interval=LATE)
        self._late.timeout.connect(self._fade)
        worker.answered.connect(self._answered)
        worker.failed.connect(self._failed)

    @property
    def whole(self) -> bool:
        """Whether the finest map of the present question has come."""
        return not self._pending and self._stage == len(STAGES)

    def want(self, question: Question) -> None:
        """Take up a question, unless it is the one that is being answered."""
        if question == self._wanted:
            self._look_closely()
            return
        if not question.has_axes_of(self._wanted):
            self._forget_map()
        self._wanted = question
        self._stage, self._pending = 0, False
        if self._view.answer is not None:
            self._show(self._view.answer, faded=self._view.faded)
            if not self._late.isActive():
                self._late.start()
        self._go_on()

    def activate(self, active: bool) -> None:
        """Compute from now on, or no more: nobody sees the map."""
        self._active = active
        self._go_on()

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a gain; while it is, nothing finer than the first map is computed."""
        self._held = held
        self._look_closely()
        self._go_on()

    def forget(self) -> None:
        """Forget the map, and what is on the way."""
        self._wanted = None
        self._stage, self._pending = 0, False
        self._forget_map()

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._active = False
        self._late.stop()
        self._worker.close()

    def _look_closely(self) -> None:
        """Have the last stage done again when the present gains have left the places that were looked at closely."""
        axes = self._view.axes
        pairs = zip(axes, self._view.values, self._near, strict=True)
        if self.whole and not self._held and not all(axis.is_close(value, near) for axis, value, near in pairs):
            self._stage = len(STAGES) - 1
            self._go_on()

    def _forget_map(self) -> None:
        self._first = self._asked + 1
        self._late.stop()
        self._view.show_map(None)
        self._view.say(COMPUTING)

    def _go_on(self) -> None:
        """Ask for the next finer map, when there is one to ask for."""
        waits = self._pending or self._stage == len(STAGES) or (self._held and self._stage > 0)
        if self._wanted is None or not self._active or waits:
            return
        self._pending = True
        self._asked += 1
        last = self._stage == len(STAGES) - 1
        self._near = self._view.values if last else (None, None)
        self._worker.submit(MapRequest(self._asked, self._wanted, STAGES[self._stage], self._near))

    def _answered(self, answer: MapAnswer) -> None:
        if answer.number < max(self._first, self._shown):
            return
        self._shown = answer.number
        if answer.number == self._asked and self._pending:
            self._pending = False
            self._stage += 1
        is_true = answer.question == self._wanted
        if is_true:
            self._late.stop()
        self._show(answer, faded=self._view.faded and not is_true)
        self._go_on()

    def _failed(self, failure: Failure) -> None:
        if failure.number < self._asked or not self._pending:
            return
        self._forget_map()
        self._pending, self._stage, self._near = False, len(STAGES), self._view.values
        self._view.say(failure.sentence)

    def _fade(self) -> None:
        """Show paler what is not true of the present sheet any more."""
        if self._view.answer is not None and self._view.answer.question != self._wanted:
            self._show(self._view.answer, faded=True)

    def _show(self, answer: MapAnswer, *, faded: bool) -> None:
        """Show a map, its contours only if they are of the measure that is wanted now."""
        measure = "" if self._wanted is None else self._wanted.measure
        fitting = answer.for_measure(measure)
        if fitting is not self._view.answer or faded != self._view.faded:
            self._view.show_map(fitting, faded=faded)
