"""A layout that fills rows from the left and begins another where there is no more room."""

from PySide6.QtCore import QPoint, QRect, QSize, Qt
from PySide6.QtWidgets import QLayout, QLayoutItem, QWidget


class FlowLayout(QLayout):
    """Places widgets side by side at the size they ask for, in as many rows as it takes."""

    def __init__(self, parent: QWidget, spacing: int) -> None:
        super().__init__(parent)
        self._placed: list[QLayoutItem] = []
        self._gap = spacing
        self.setContentsMargins(0, 0, 0, 0)

    def addItem(self, item: QLayoutItem) -> None:
        """Add an item at the end."""
        self._placed.append(item)

    def drop(self, widget: QWidget) -> None:
        """Take a widget out and let it go."""
        self.removeWidget(widget)
        widget.hide()
        widget.deleteLater()

    def count(self) -> int:
        """Return how many items there are."""
        return len(self._placed)

    def itemAt(self, index: int) -> QLayoutItem | None:
        """Return an item, None beyond the end."""
        return self._placed[index] if 0 <= index < len(self._placed) else None

    def takeAt(self, index: int) -> QLayoutItem | None:
        """Take an item out, None beyond the end."""
        return self._placed.pop(index) if 0 <= index < len(self._placed) else None

    def expandingDirections(self) -> Qt.Orientation:
        """Ask for no more room than the items need."""
        return Qt.Orientation(0)

    def hasHeightForWidth(self) -> bool:
        """Say that the height follows the width."""
        return True

    def heightForWidth(self, width: int) -> int:
        """Return the height of the rows at a width."""
        return self._arrange(QRect(0, 0, width, 0), move=False)

    def setGeometry(self, rect: QRect) -> None:
        """Place the items."""
        super().setGeometry(rect)
        self._arrange(rect, move=True)

    def sizeHint(self) -> QSize:
        """Return the size of the largest item."""
        return self.minimumSize()

    def minimumSize(self) -> QSize:
        """Return the size of the largest item."""
        size = QSize(0, 0)
        for item in self._placed:
            size = size.expandedTo(item.sizeHint())
        return size

    def _arrange(self, rect: QRect, *, move: bool) -> int:
        """Place the items in rows; return the height that they take."""
        x, y, row = rect.left(), rect.top(), 0
        for item in self._placed:
            size = item.sizeHint()
            if x > rect.left() and x + size.width() > rect.right() + 1:
                x, y, row = rect.left(), y + row + self._gap // 2, 0
            if move:
                item.setGeometry(QRect(QPoint(x, y), size))
            x, row = x + size.width() + self._gap, max(row, size.height())
        return y + row - rect.top()
