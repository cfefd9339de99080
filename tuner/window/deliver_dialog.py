"""Hands a controller over: where to, in which languages, with the verdict in sight, and the proof at the end."""

from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Protocol

from PySide6.QtGui import QCloseEvent
from PySide6.QtWidgets import (
    QCheckBox,
    QDialog,
    QDialogButtonBox,
    QGridLayout,
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QPlainTextEdit,
    QProgressBar,
    QPushButton,
    QVBoxLayout,
    QWidget,
)

from tuner.errors import TrimwrightError
from tuner.window.asking import Asking
from tuner.window.cautions import CAUTION
from tuner.window.ribbon import verdict_words
from tuner.window.shown import Shown
from tuner.window.task import Task
from tuner.window.theme import Theme

RESPONSIBILITY = "I answer for delivering a loop that does not meet its acceptance sheet."

LANGUAGES = (
    ("json", "JSON: the gains and the law as data"),
    ("python", "Python: a class to run or to read"),
    ("c", "C: one source and one header, no memory of its own"),
)


class Proved(Protocol):
    """One entry of the proof."""

    @property
    def file(self) -> str:
        """Name of the file."""

    @property
    def how(self) -> str:
        """What was run, in words."""

    @property
    def proved(self) -> bool:
        """Whether every answer was the same."""


class Deliverer(Protocol):
    """Writes the delivery of an answer and returns what proves it; raises a `TrimwrightError` when it refuses."""

    def __call__(
        self, shown: Shown, folder: Path, languages: Sequence[str], *, accept_unmet: bool, overwrite: bool
    ) -> Sequence[Proved]:
        """Deliver."""


class DeliverDialog(QDialog):
    """The dialog of one delivery."""

    def __init__(self, shown: Shown, folder: Path, deliverer: Deliverer, theme: Theme, window: QWidget | None) -> None:
        super().__init__(window)
        self._shown, self._deliverer, self._theme = shown, deliverer, theme
        self.asking = Asking(self)
        self._task: Task | None = None
        self.setWindowTitle(f"Deliver {shown.assessment.title}")
        self.setMinimumWidth(600)
        self.folder = QLineEdit(str(folder))
        self.folder.setAccessibleName("Folder of the delivery")
        self.languages = {key: QCheckBox(words) for key, words in LANGUAGES}
        for box in self.languages.values():
            box.setChecked(True)
        self.overwrite = QCheckBox("Replace files of the same names")
        self.accept_unmet = QCheckBox(RESPONSIBILITY)
        self.outcome = QPlainTextEdit(readOnly=True, tabChangesFocus=True)
        self.outcome.setAccessibleName("Result of the delivery")
        self.outcome.setMinimumHeight(148)
        self.outcome.setVisible(False)
        self.progress = QProgressBar(maximum=0, textVisible=False)
        self.progress.setVisible(False)
        self.buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
        self.deliver_button = self.buttons.addButton("Deliver", QDialogButtonBox.ButtonRole.ActionRole)
        self.deliver_button.setDefault(True)
        self._arrange()
        self._connect()
        self._refresh()

    def deliver(self) -> None:
        """Write the files beside the main thread, and show what came of it."""
        chosen = [key for key, box in self.languages.items() if box.isChecked()]
        folder = Path(self.folder.text()).expanduser()
        accept, overwrite = self.accept_unmet.isChecked(), self.overwrite.isChecked()
        self._task = Task(
            lambda: self._deliverer(self._shown, folder, chosen, accept_unmet=accept, overwrite=overwrite), self
        )
        self._task.done.connect(self._delivered)
        self._task.refused.connect(self._refused)
        self._task.start()
        self._say("Writing the files and running each against the simulation…", "quiet")
        self.progress.setVisible(True)
        self._refresh()

    def done(self, result: int) -> None:
        """Wait for a delivery on its way before the dialog closes."""
        self._wait()
        super().done(result)

    def closeEvent(self, event: QCloseEvent) -> None:
        """Wait for a delivery on its way."""
        self._wait()
        super().closeEvent(event)

    @property
    def busy(self) -> bool:
        """Whether a delivery is on its way."""
        return self._task is not None

    def _wait(self) -> None:
        if self._task is not None:
            self._task.wait()

    def _delivered(self, proof: Sequence[Proved]) -> None:
        self._end()
        lines = [f"{'proved' if entry.proved else 'not proved'}: {entry.file}, {entry.how}" for entry in proof]
        all_proved = all(entry.proved for entry in proof)
        head = f"Delivered to {self.folder.text()}."
        self._say("\n".join([head, *lines]), "firm_word" if all_proved else "limit_word")

    def _refused(self, fault: Exception) -> None:
        self._end()
        said = str(fault) if isinstance(fault, TrimwrightError) else f"A fault of the program: {fault!r}"
        self._say(f"Nothing was written. {said}", "lost_word")

    def _end(self) -> None:
        self._wait()
        self._task = None
        self.progress.setVisible(False)
        self._refresh()

    def _say(self, words: str, role: str) -> None:
        self.outcome.setPlainText(words)
        self.outcome.setStyleSheet(f"color: {self._theme.palette.colours[role]}")
        self.outcome.setVisible(True)

    def _refresh(self) -> None:
        """Let the button work when there is a folder, a language, and, if need be, somebody who answers for it."""
        answered = self.accept_unmet.isChecked() or not self._needs_answer()
        chosen = any(box.isChecked() for box in self.languages.values())
        self.deliver_button.setEnabled(bool(answered and chosen and self.folder.text().strip() and not self.busy))

    def _needs_answer(self) -> bool:
        return self._shown.assessment.verdict != "met"

    def _arrange(self) -> None:
        column = QVBoxLayout(self)
        column.setContentsMargins(16, 16, 16, 16)
        column.setSpacing(12)
        column.addLayout(self._verdict())
        column.addLayout(self._choices())
        self.accept_unmet.setVisible(self._needs_answer())
        column.addWidget(self.accept_unmet)
        caution = QLabel(CAUTION, wordWrap=True)
        caution.setProperty("voice", "quiet")
        for part in (caution, self.progress, self.outcome):
            column.addWidget(part)
        column.addStretch(1)
        column.addWidget(self.buttons)

    def _verdict(self) -> QVBoxLayout:
        verdict, detail = verdict_words(self._shown.assessment)
        head = QLabel(verdict)
        head.setFont(self._theme.font("title", strong=True))
        met = not self._needs_answer()
        head.setStyleSheet(f"color: {self._theme.palette.colours['firm_word' if met else 'lost_word']}")
        column = QVBoxLayout()
        column.setSpacing(4)
        for part in (head, QLabel(detail, wordWrap=True)):
            column.addWidget(part)
        for callout in self._shown.overlay.callouts:
            column.addWidget(QLabel(callout.sentence, wordWrap=True))
        return column

    def _choices(self) -> QGridLayout:
        grid = QGridLayout()
        grid.setHorizontalSpacing(12)
        grid.setVerticalSpacing(4)
        row = QHBoxLayout()
        browse = QPushButton("Browse…")
        browse.setAutoDefault(False)
        browse.clicked.connect(self._browse)
        row.addWidget(self.folder, 1)
        row.addWidget(browse)
        label = QLabel("&Folder")
        label.setBuddy(self.folder)
        grid.addWidget(label, 0, 0)
        grid.addLayout(row, 0, 1)
        grid.addWidget(QLabel("Files"), 1, 0)
        for index, box in enumerate((*self.languages.values(), self.overwrite)):
            grid.addWidget(box, 1 + index, 1)
        grid.setColumnStretch(1, 1)
        return grid

    def _connect(self) -> None:
        self.buttons.rejected.connect(self.reject)
        self.deliver_button.clicked.connect(self.deliver)
        self.folder.textChanged.connect(self._refresh)
        for box in (*self.languages.values(), self.accept_unmet):
            box.toggled.connect(self._refresh)

    def _browse(self) -> None:
        if (folder := self.asking.folder(Path(self.folder.text()).expanduser())) is not None:
            self.folder.setText(str(folder))


def real_deliverer() -> Callable[..., Sequence[Proved]]:
    """Return the program's own delivery, loaded only now."""
    from tuner.deliver.delivery import deliver

    def work(
        shown: Shown, folder: Path, languages: Sequence[str], *, accept_unmet: bool, overwrite: bool
    ) -> Sequence[Proved]:
        made = deliver(
            shown.sheet,
            shown.assessment,
            folder,
            languages=languages,
            accept_unmet=accept_unmet,
            overwrite=overwrite,
        )
        return made.proof

    return work
