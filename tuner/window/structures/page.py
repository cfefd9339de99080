"""The page of structures: three plots with all of them, and the table below; computed only while it is in sight."""

from collections.abc import Mapping

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtWidgets import QSplitter, QVBoxLayout

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.elided import RoleLabel
from tuner.window.in_sight import InSight, Question, Request, without_as_found
from tuner.window.pictures import Pictured
from tuner.window.seen import Seen
from tuner.window.shown import Shown
from tuner.window.structures.compared import Compared
from tuner.window.structures.overlaid import OverlaidPanel, overlaid_panels
from tuner.window.structures.words import summary, table_words
from tuner.window.theme import Theme
from tuner.window.words_table import TableWords, WordsTable

COMPARING = "The structures are being compared; the first time on a machine that takes a while."


class StructuresPage(QObject):
    """The page.

    Parameters
    ----------
    document : Document
        Whose loop is compared.
    theme : Theme
        The look.
    worker : Beside
        Answers a `Request` with an `Answer` whose finding is a `Compared`.
    """

    name = "Structures"
    wants_frequency = False
    menu_wanted = Signal(object, object)
    """A panel, and where on the screen."""

    def __init__(self, document: Document, theme: Theme, worker: Beside[Request]) -> None:
        super().__init__()
        self._document, self._theme = document, theme
        self._awake = False
        self.plots = overlaid_panels(theme)
        self.line, self.table = RoleLabel(theme), WordsTable("Structures compared", theme)
        self.answers = InSight(worker)
        self.compared: Compared | None = None
        self.widget = Seen()
        self._arrange()
        self._connect()
        self.line.dress()
        self.say_empty(COMPARING)
        self.refresh()

    @property
    def panels(self) -> Mapping[str, Pictured]:
        """The page itself and its plots, of which pictures can be had."""
        found: dict[str, Pictured] = {self.name: self}
        return found | {plot.name: plot for plot in self.plots}

    # What a page does -------------------------------------------------------------------------------------------

    def show(self, _shown: Shown) -> None:
        """Begin to compute: the first curves of the window had the machine to themselves."""
        self._wake()

    def show_stale(self) -> None:
        """Begin to compute although the loop cannot be assessed as it is now: another structure may."""
        self._wake()

    def show_whole(self) -> None:
        """Show every plot whole again."""
        for plot in self.plots:
            plot.show_whole()

    def forget(self) -> None:
        """Forget what is shown of a loop that is left."""
        self.answers.forget()
        self.compared = None
        for plot in self.plots:
            plot.forget()
            plot.show_empty(COMPARING)
        self.table.show_words(TableWords())
        self.refresh()

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show."""
        if self.compared is None:
            self.line.setText("")
            for plot in self.plots:
                plot.say_empty(sentence)

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler."""
        for plot in self.plots:
            plot.hold(held)

    def set_visible(self, visible: bool) -> None:
        """Say whether the page is in sight."""
        self.answers.activate(visible and self._awake)

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._stop_listening()
        self.answers.close()

    # Inside -----------------------------------------------------------------------------------------------------

    def refresh(self) -> None:
        """Ask for the comparison of what the document holds, unless it is the one shown."""
        self.answers.want(Question(without_as_found(self._document.sheet)))

    def _answered(self, found: Compared) -> None:
        self.compared = found
        for plot in self.plots:
            if found.judged:
                plot.show(found)
            else:
                plot.show_empty("None of the structures can be computed; the table says why.")
        self.line.setText(summary(found))
        self.table.show_words(table_words(found))

    def _fade(self) -> None:
        if self.compared is None:
            return
        for plot in self.plots:
            plot.show_stale()
        self.table.show_pale()

    def _failed(self, sentence: str) -> None:
        self._fade()
        self.say_empty(sentence)
        self.line.setText(sentence)

    def _wake(self) -> None:
        if not self._awake:
            self._awake = True
            self.set_visible(self.widget.isVisible())

    def _arrange(self) -> None:
        self.across, self.upwards = QSplitter(Qt.Orientation.Horizontal), QSplitter(Qt.Orientation.Vertical)
        for plot in self.plots:
            self.across.addWidget(plot.widget)
        for part in (self.across, self.table):
            self.upwards.addWidget(part)
        for splitter in (self.across, self.upwards):
            splitter.setChildrenCollapsible(False)
            splitter.setHandleWidth(4)
        self.table.setMinimumHeight(64)
        self.across.setSizes([400, 400, 400])
        self.upwards.setSizes([500, 400])
        self.line.setContentsMargins(8, 4, 8, 4)
        column = QVBoxLayout(self.widget)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self.line)
        column.addWidget(self.upwards, 1)

    def _connect(self) -> None:
        self._stop_listening = self._document.listen(self.refresh)
        self.widget.seen.connect(self.set_visible)
        self.answers.answered.connect(self._answered)
        self.answers.late.connect(self._fade)
        self.answers.failed.connect(self._failed)
        self._theme.changed.connect(self._dress)
        for plot in self.plots:
            self._tell_menu(plot)

    def _tell_menu(self, plot: OverlaidPanel) -> None:
        plot.menu_wanted.connect(lambda at: self.menu_wanted.emit(plot, at))

    def _dress(self) -> None:
        self.line.dress()
        for plot in self.plots:
            plot.dress()
