"""Every question that the window asks a person, behind one door that tests can stand in for."""

from collections.abc import Sequence
from pathlib import Path
from typing import Literal

from PySide6.QtWidgets import (
    QDialog,
    QDialogButtonBox,
    QFileDialog,
    QLabel,
    QMessageBox,
    QPlainTextEdit,
    QVBoxLayout,
    QWidget,
)

Unsaved = Literal["save", "discard", "cancel"]
LeftBehind = Literal["restore", "drop", "later"]

_SHEETS = "Tuning sheets (*.toml);;All files (*)"
_PICTURES = "PNG pictures (*.png)"
_DEMONSTRATIONS = "Demonstrations (*.toml);;All files (*)"
_RECORDS = "Records (*.csv);;All files (*)"


class Asking:
    """Asks with dialogs over a window."""

    def __init__(self, parent: QWidget) -> None:
        self._parent = parent

    def sheet_to_open(self, start: Path) -> Path | None:
        """Ask for a sheet to open, beginning in a folder."""
        name, _ = QFileDialog.getOpenFileName(self._parent, "Open tuning sheet", str(start), _SHEETS)
        return Path(name) if name else None

    def sheet_to_save(self, suggested: Path) -> Path | None:
        """Ask where a sheet is to be saved; a name without an ending gets that of a sheet."""
        name, _ = QFileDialog.getSaveFileName(self._parent, "Save tuning sheet", str(suggested), _SHEETS)
        return _with_ending(name, ".toml")

    def picture_to_save(self, suggested: Path) -> Path | None:
        """Ask where a picture is to be saved; a name without an ending gets that of a picture."""
        name, _ = QFileDialog.getSaveFileName(self._parent, "Save picture of the plot", str(suggested), _PICTURES)
        return _with_ending(name, ".png")

    def demonstration_to_open(self, start: Path) -> Path | None:
        """Ask for a demonstration to play, beginning in a folder."""
        name, _ = QFileDialog.getOpenFileName(self._parent, "Play demonstration", str(start), _DEMONSTRATIONS)
        return Path(name) if name else None

    def record_to_save(self, suggested: Path) -> Path | None:
        """Ask where a record is to be saved; a name without an ending gets that of a record."""
        name, _ = QFileDialog.getSaveFileName(self._parent, "Save record", str(suggested), _RECORDS)
        return _with_ending(name, ".csv")

    def folder(self, start: Path) -> Path | None:
        """Ask for a folder, which may be a new one."""
        name = QFileDialog.getExistingDirectory(self._parent, "Folder of the delivery", str(start))
        return Path(name) if name else None

    def about_unsaved(self, name: str) -> Unsaved:
        """Ask what becomes of changes that are not saved."""
        button = QMessageBox.StandardButton
        box = QMessageBox(self._parent)
        box.setWindowTitle("Unsaved changes")
        box.setText(f"{name} has changes that are not saved.")
        box.setStandardButtons(button.Save | button.Discard | button.Cancel)
        box.setDefaultButton(button.Save)
        chosen = box.exec()
        return "save" if chosen == button.Save else "discard" if chosen == button.Discard else "cancel"

    def about_left_behind(self, name: str) -> LeftBehind:
        """Ask what becomes of unsaved work that an earlier run left behind."""
        role = QMessageBox.ButtonRole
        box = QMessageBox(self._parent)
        box.setWindowTitle("Unsaved work found")
        box.setText(f"An earlier run ended before {name} was saved.")
        restore = box.addButton("Bring it back", role.AcceptRole)
        box.addButton("Ask again later", role.RejectRole)
        lose = box.addButton("Drop it", role.DestructiveRole)
        box.setDefaultButton(restore)
        box.exec()
        return "restore" if box.clickedButton() is restore else "drop" if box.clickedButton() is lose else "later"

    def agree(self, title: str, sentence: str, action: str) -> bool:
        """Ask for agreement to one action, named on its button."""
        box = QMessageBox(self._parent)
        box.setWindowTitle(title)
        box.setText(sentence)
        yes = box.addButton(action, QMessageBox.ButtonRole.AcceptRole)
        box.addButton(QMessageBox.StandardButton.Cancel)
        box.exec()
        return box.clickedButton() is yes

    def tell(self, title: str, opening: str, sentences: Sequence[str]) -> None:
        """Say some sentences, however many, in a box that scrolls."""
        Telling(title, opening, sentences, self._parent).exec()


class Telling(QDialog):
    """Sentences to be read, and to be copied."""

    def __init__(self, title: str, opening: str, sentences: Sequence[str], parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle(title)
        self.setMinimumWidth(480)
        said = QLabel(opening, wordWrap=True)
        self.sentences = QPlainTextEdit("\n\n".join(sentences), readOnly=True)
        self.sentences.setAccessibleName(title)
        self.sentences.setMinimumHeight(160)
        buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
        buttons.rejected.connect(self.reject)
        column = QVBoxLayout(self)
        column.setContentsMargins(16, 16, 16, 16)
        column.setSpacing(12)
        column.addWidget(said)
        column.addWidget(self.sentences)
        column.addWidget(buttons)


def _with_ending(name: str, ending: str) -> Path | None:
    if not name:
        return None
    path = Path(name)
    return path if path.suffix else path.with_suffix(ending)
