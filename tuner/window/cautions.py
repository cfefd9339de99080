"""The usual cautions, short, said once where they matter; and what the program is."""

from PySide6.QtWidgets import QDialog, QDialogButtonBox, QLabel, QVBoxLayout, QWidget

from tuner import __version__
from tuner.window.theme import Theme

CAUTION = (
    "A loop is no safety function: interlocks and trips stay in force, and local codes and licensed practice decide. "
    "Start with the loop watched and a hand on manual."
)

ABOUT = (
    "Tunes a feedback loop with its limits in sight, over every plant that its spread allows, and delivers a "
    "controller file that was run against the simulation before it is handed over."
)


class AboutDialog(QDialog):
    """What the program is, and the cautions."""

    def __init__(self, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle("About Trimwright")
        self.setMinimumWidth(440)
        name = QLabel(f"Trimwright {__version__}")
        name.setFont(theme.font("title", strong=True))
        buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
        buttons.rejected.connect(self.reject)
        column = QVBoxLayout(self)
        column.setContentsMargins(16, 16, 16, 16)
        column.setSpacing(12)
        column.addWidget(name)
        for sentence in (ABOUT, CAUTION):
            column.addWidget(QLabel(sentence, wordWrap=True))
        column.addWidget(buttons)
