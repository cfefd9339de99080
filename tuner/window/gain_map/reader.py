"""Reads the map: says both gains and the class where mouse or keys are, and why, once they rest."""

from PySide6.QtCore import QObject, QTimer

from tuner.footing.classes import UNKNOWN
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.question import PlaceReading, PlaceRequest, Values
from tuner.window.gain_map.view import MapView
from tuner.window.rulers.reading_line import ReadingLine
from tuner.window.shown import Failure

REST = 60
"""Milliseconds that mouse or keys rest at a place before its reason is computed."""

Place = tuple[Values, Axis, Axis, Sheet]


class MapReader(QObject):
    """Asks a worker for the reason at the place that the map looks at, and says it in a line.

    Parameters
    ----------
    document : Document
        Whose sheet is read.
    view : MapView
        Says which place is looked at.
    line : ReadingLine
        Says what holds there.
    worker : Beside
        Answers a `PlaceRequest` with a `PlaceReading`.
    """

    def __init__(self, document: Document, view: MapView, line: ReadingLine, worker: Beside[PlaceRequest]) -> None:
        super().__init__(view)
        self._document, self._view, self._line, self._worker = document, view, line, worker
        self._asked = 0
        self._place: Place | None = None
        self._reading: PlaceReading | None = None
        self._rest = QTimer(self, singleShot=True, interval=REST)
        self._rest.timeout.connect(self._ask)
        worker.answered.connect(self._answered)
        worker.failed.connect(self._failed)
        view.place_changed.connect(self.look)

    def look(self) -> None:
        """Take up another place, or the same one of another sheet; what is on the way for the one before is dropped."""
        values = self._view.place
        place = None if values is None else (values, *self._view.axes, self._document.sheet)
        if place != self._place:
            self._place, self._reading = place, None
            self._asked += 1
            self._rest.stop()
            if place is not None:
                self._rest.start()
        self.say()

    def say(self) -> None:
        """Say what is known of the place; the exact reason once it is there, until then the class that is painted."""
        if self._place is None:
            self._line.show_legend()
            return
        values, x, y, _sheet = self._place
        where = f"{x.in_words(values[0])}, {y.in_words(values[1])}"
        if self._reading is not None:
            self._line.show_place(where, self._reading.grade, self._reading.sentence)
        else:
            self._line.show_place(where, self._view.grade_at(values), "")

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._rest.stop()
        self._worker.close()

    def _ask(self) -> None:
        if self._place is not None:
            (across, upwards), x, y, sheet = self._place
            self._worker.submit(PlaceRequest(self._asked, sheet, ((x.name, across), (y.name, upwards))))

    def _answered(self, reading: PlaceReading) -> None:
        if reading.number == self._asked:
            self._reading = reading
            self.say()

    def _failed(self, failure: Failure) -> None:
        """Say why nothing can be known of the place."""
        if failure.number == self._asked:
            self._reading = PlaceReading(failure.number, UNKNOWN, failure.sentence)
            self.say()
