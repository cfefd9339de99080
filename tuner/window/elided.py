"""A line of words that is shortened where there is no room, and then said whole in its tip."""

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QPainter, QPaintEvent, QResizeEvent
from PySide6.QtWidgets import QLabel, QSizePolicy

from tuner.window.theme import Theme


class ElidedLabel(QLabel):
    """A label of one line.

    Parameters
    ----------
    text : str
        The words.
    alignment : Qt.AlignmentFlag
        Where they stand.
    stretch : bool
        Whether the label takes any width it is given and asks for none; else it asks for the width of its words.
    """

    def __init__(
        self, text: str = "", alignment: Qt.AlignmentFlag = Qt.AlignmentFlag.AlignLeft, *, stretch: bool = True
    ) -> None:
        super().__init__(text)
        self.setTextFormat(Qt.TextFormat.PlainText)
        self.setAlignment(alignment | Qt.AlignmentFlag.AlignVCenter)
        if stretch:
            self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Fixed)

    def setText(self, text: str) -> None:
        """Show other words; does nothing when they are the same."""
        if text != self.text():
            super().setText(text)
            self._tip()

    def minimumSizeHint(self) -> QSize:
        """Ask for the height of a line and for no width."""
        return QSize(0, super().minimumSizeHint().height())

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Give or take the tip as the room changes."""
        super().resizeEvent(event)
        self._tip()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the words as far as there is room."""
        painter = QPainter(self)
        painter.setPen(self.palette().color(self.foregroundRole()))
        painter.drawText(self.contentsRect(), self.alignment(), self._fitted())

    def _fitted(self) -> str:
        return self.fontMetrics().elidedText(self.text(), Qt.TextElideMode.ElideRight, self.contentsRect().width())

    def _tip(self) -> None:
        self.setToolTip(self.text() if self._fitted() != self.text() else "")


class RoleLabel(ElidedLabel):
    """A line of words in the colour of a role."""

    def __init__(self, theme: Theme, *, stretch: bool = True) -> None:
        super().__init__(stretch=stretch)
        self._theme, self._role = theme, "quiet"

    def set_role(self, role: str) -> None:
        """Take the colour of a role; does nothing when it has it."""
        if role != self._role:
            self._role = role
            self.dress()

    def dress(self) -> None:
        """Take over the colours of the theme."""
        self.setStyleSheet(f"color: {self._theme.palette.colours[self._role]}")
