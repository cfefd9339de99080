"""The page of tunings: a sentence on how they compare, and the table; computed only while it is in sight."""

from collections.abc import Mapping

from PySide6.QtCore import QObject
from PySide6.QtWidgets import QVBoxLayout

from tuner.compare.tuning_table import Tuning
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.elided import RoleLabel
from tuner.window.in_sight import InSight, Question, Request
from tuner.window.pictures import Pictured
from tuner.window.seen import Seen
from tuner.window.shown import Shown
from tuner.window.theme import Theme
from tuner.window.tunings.compared import ComparedTunings
from tuner.window.tunings.words import summary, table_words
from tuner.window.words_table import TableWords, WordsTable

COMPARING = "The tunings are being compared; the first time on a machine that takes a while."


class TuningsPage(QObject):
    """The page.

    Parameters
    ----------
    document : Document
        Whose tunings are compared.
    theme : Theme
        The look.
    worker : Beside
        Answers a `Request` with an `Answer` whose finding is a `ComparedTunings`.
    """

    name = "Tunings"
    wants_frequency = False

    def __init__(self, document: Document, theme: Theme, worker: Beside[Request]) -> None:
        super().__init__()
        self._document = document
        self._awake = False
        self.line, self.table = RoleLabel(theme), WordsTable("Tunings compared", theme)
        self.answers = InSight(worker)
        self.compared: ComparedTunings | None = None
        self.widget = Seen()
        self.line.setContentsMargins(8, 4, 8, 4)
        column = QVBoxLayout(self.widget)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self.line)
        column.addWidget(self.table, 1)
        theme.changed.connect(self.line.dress)
        self._connect()
        self.line.dress()
        self.say_empty(COMPARING)
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
        """Begin to compute although the loop cannot be assessed as it is now: another tuning may."""
        self._wake()

    def show_whole(self) -> None:
        """Do nothing: the table always is whole."""

    def forget(self) -> None:
        """Forget what is shown of a loop that is left."""
        self.answers.forget()
        self.compared = None
        self.table.show_words(TableWords())
        self.say_empty(COMPARING)
        self.refresh()

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show."""
        if self.compared is None:
            self.line.setText(sentence)

    def hold(self, _held: bool) -> None:
        """Do nothing: there are no ranges to keep."""

    def set_visible(self, visible: bool) -> None:
        """Say whether the page is in sight."""
        self.answers.activate(visible and self._awake)

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._stop_listening()
        self.answers.close()

    # Inside -----------------------------------------------------------------------------------------------------

    def refresh(self) -> None:
        """Ask for the table of what the document holds, unless it is the one shown."""
        kept = tuple(Tuning(one.name, one.label, one.controller) for one in self._document.kept)
        self.answers.want(Question(self._document.sheet, kept))

    def _answered(self, found: ComparedTunings) -> None:
        self.compared = found
        self.line.setText(summary(found.table))
        self.table.show_words(table_words(found))

    def _failed(self, sentence: str) -> None:
        self.table.show_pale()
        self.line.setText(sentence)

    def _wake(self) -> None:
        if not self._awake:
            self._awake = True
            self.set_visible(self.widget.isVisible())

    def _connect(self) -> None:
        self._stop_listening = self._document.listen(self.refresh)
        self.widget.seen.connect(self.set_visible)
        self.answers.answered.connect(self._answered)
        self.answers.late.connect(self.table.show_pale)
        self.answers.failed.connect(self._failed)
