"""The gain map page: two gains as axes, the footing as areas, a measure as contours, both gains under one hand."""

from collections.abc import Iterator, Mapping

from PySide6.QtCore import QObject
from PySide6.QtWidgets import QVBoxLayout

from tuner.footing.classes import UNKNOWN, WORDS
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.gain_map.axis import Axis, axis_of
from tuner.window.gain_map.choosers import Choosers
from tuner.window.gain_map.drawn import DrawnMap
from tuner.window.gain_map.question import MapRequest, PlaceRequest, Values, question_of
from tuner.window.gain_map.reader import MapReader
from tuner.window.gain_map.view import MapView
from tuner.window.pictures import Pictured
from tuner.window.rulers.reading_line import CLASSES, Piece, ReadingLine
from tuner.window.seen import Seen
from tuner.window.shown import Shown
from tuner.window.theme import Theme

LEGEND = (*CLASSES, Piece("Click or drag sets both gains; arrows nudge them, with Shift by more"))


class GainMapPage(QObject):
    """The page; it computes only while it is in sight.

    Parameters
    ----------
    document : Document
        Whose gains are mapped and set.
    theme : Theme
        The look.
    painter, reader : Beside
        Answer a `MapRequest` and a `PlaceRequest`.
    """

    name = "Gain map"
    wants_frequency = False

    def __init__(
        self, document: Document, theme: Theme, painter: Beside[MapRequest], reader: Beside[PlaceRequest]
    ) -> None:
        super().__init__()
        self._document = document
        self._awake = False
        self._grasped = document.sheet
        self.choosers, self.view = Choosers(theme), MapView(theme)
        self.line = ReadingLine(theme, legend=LEGEND)
        self.widget = Seen()
        column = QVBoxLayout(self.widget)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self.choosers)
        column.addWidget(self.view, 1)
        column.addWidget(self.line)
        self.drawn = DrawnMap(document, self.view, painter)
        self.reader = MapReader(document, self.view, self.line, reader)
        self._connect()
        self.refresh()

    @property
    def panels(self) -> Mapping[str, Pictured]:
        """The page itself, of which a picture can be had."""
        return {self.name: self}

    # What a page does -------------------------------------------------------------------------------------------

    def show(self, _shown: Shown) -> None:
        """Begin to compute: the first curves of the window had the machine to themselves."""
        self._wake()

    def show_stale(self) -> None:
        """Begin to compute although the loop cannot be assessed as it is now."""
        self._wake()

    def show_whole(self) -> None:
        """Do nothing: the map always is whole."""

    def forget(self) -> None:
        """Forget the map of a loop that is left."""
        self.drawn.forget()
        self.refresh()

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show."""
        self.view.say(sentence)

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler."""
        self.drawn.hold(held)

    def set_visible(self, visible: bool) -> None:
        """Say whether the page is in sight."""
        if visible:
            self.refresh()
        self.drawn.activate(visible and self._awake)

    def close(self) -> None:
        """Ask no more, and end both workers."""
        self._stop_listening()
        self.drawn.close()
        self.reader.close()

    # Inside -----------------------------------------------------------------------------------------------------

    def refresh(self) -> None:
        """Show what the document holds, and ask for its map unless it is the one shown."""
        self.choosers.show_sheet(self._document.sheet)
        x, y = (axis_of(self._document, parameter) for parameter in self.choosers.gains)
        self.view.show_values(x, y, self._values(x, y), tuple(self._spots(x, y)))
        self.drawn.want(question_of(self._document.sheet, x, y, self.choosers.chosen_measure))
        self.reader.look()
        self._describe()

    def _connect(self) -> None:
        self._stop_listening = self._document.listen(self.refresh)
        self.choosers.changed.connect(self.refresh)
        self.widget.seen.connect(self.set_visible)
        self.view.map_changed.connect(self._describe)
        self.view.map_changed.connect(self.reader.say)
        self.view.grasped.connect(self._on_grasped)
        self.view.wanted.connect(self._on_wanted)
        self.view.let_go.connect(self._on_let_go)
        self.view.withdrawn.connect(self._on_withdrawn)

    def _wake(self) -> None:
        if not self._awake:
            self._awake = True
            self.set_visible(self.widget.isVisible())

    def _values(self, x: Axis, y: Axis) -> Values:
        controller = self._document.sheet.controller
        return controller.value(x.name), controller.value(y.name)

    def _spots(self, x: Axis, y: Axis) -> Iterator[tuple[str, Values]]:
        """Yield the tunings worth finding again that are elsewhere than the present one."""
        for across, upwards in zip(self._document.marks(x.name), self._document.marks(y.name), strict=True):
            values = (across.value, upwards.value)
            if values != self._values(x, y):
                yield across.label, values

    def _describe(self) -> None:
        """Say the present gains and their class to assistive technology."""
        (x, y), values = self.view.axes, self.view.values
        grade = self.view.grade_at(values)
        word = "" if grade == UNKNOWN else f" {WORDS[grade]} there."
        where = f"{x.in_words(values[0])}, {y.in_words(values[1])}."
        self.view.setAccessibleDescription(f"{where}{word} Arrows nudge both gains, with Shift by more.")

    def _on_grasped(self) -> None:
        self._grasped = self._document.sheet
        self.drawn.hold(True)

    def _on_let_go(self) -> None:
        self._document.release()
        self.drawn.hold(False)

    def _on_wanted(self, values: Values) -> None:
        x, y = self.view.axes
        self._document.change_values({x.name: values[0], y.name: values[1]}, merge_key="hand on the gain map")

    def _on_withdrawn(self) -> None:
        """Go back to where the hand began; a drag that came back there by itself is no step to undo."""
        if self._document.sheet != self._grasped:
            self._document.undo()
