"""A table of words: what a cell says, in which colour and how strongly; for the eye and for a screen reader."""

from dataclasses import dataclass

from PySide6.QtCore import QAbstractTableModel, QModelIndex, QPersistentModelIndex, Qt
from PySide6.QtGui import QColor, QResizeEvent
from PySide6.QtWidgets import QAbstractItemView, QHeaderView, QTableView

from tuner.window.theme import Size, Theme

_LOOK = """
QTableView {{ background: {page}; border: 0; selection-background-color: {hover}; selection-color: {ink}; }}
QTableView::item {{ padding: 2px 8px; border: 0; }}
QTableView::item:focus {{ border: 1px solid {nominal}; }}
QHeaderView, QHeaderView::section {{ background: {page}; border: 0; }}
QHeaderView::section {{ padding: 2px 8px; color: {quiet}; }}
QTableCornerButton::section {{ background: {page}; border: 0; }}
"""

_PALE = 0.45
"""How much shows of what is not true any more."""
_HEADS = 192
"""Pixels for the heads of the rows."""
_NARROW = 208
"""Pixels below which a column is written small, and its heads with it."""
_SMALL_HEADS = 152

_Index = QModelIndex | QPersistentModelIndex


@dataclass(frozen=True, slots=True)
class CellWords:
    """What one cell says: its words, the role of their colour, whether they are strong, and what its tip adds."""

    text: str
    role: str = "ink"
    strong: bool = False
    tip: str = ""


@dataclass(frozen=True, slots=True)
class TableWords:
    """What a table says: heads of columns and of rows, and the cells, row by row."""

    columns: tuple[CellWords, ...] = ()
    heads: tuple[CellWords, ...] = ()
    rows: tuple[tuple[CellWords, ...], ...] = ()


class WordsModel(QAbstractTableModel):
    """Hands the words to Qt."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.words = TableWords()
        self.pale = False
        self.size: Size = "body"

    def show_words(self, words: TableWords) -> None:
        """Take other words; a table of the same shape keeps its place."""
        same = (len(words.columns), len(words.heads)) == (len(self.words.columns), len(self.words.heads))
        if not same:
            self.beginResetModel()
        self.words = words
        if same:
            self.tell()
        else:
            self.endResetModel()

    def tell(self) -> None:
        """Say that all of it may have changed."""
        last = self.index(len(self.words.heads) - 1, len(self.words.columns) - 1)
        self.dataChanged.emit(self.index(0, 0), last)
        self.headerDataChanged.emit(Qt.Orientation.Horizontal, 0, max(len(self.words.columns) - 1, 0))
        self.headerDataChanged.emit(Qt.Orientation.Vertical, 0, max(len(self.words.heads) - 1, 0))

    def rowCount(self, parent: _Index | None = None) -> int:
        """Return how many rows there are; none below a cell."""
        return 0 if parent is not None and parent.isValid() else len(self.words.heads)

    def columnCount(self, parent: _Index | None = None) -> int:
        """Return how many columns there are; none below a cell."""
        return 0 if parent is not None and parent.isValid() else len(self.words.columns)

    def data(self, index: _Index, role: int = Qt.ItemDataRole.DisplayRole) -> object:
        """Return what Qt asks of a cell."""
        return self._said(self.words.rows[index.row()][index.column()], role)

    def headerData(self, section: int, orientation: Qt.Orientation, role: int = Qt.ItemDataRole.DisplayRole) -> object:
        """Return what Qt asks of a head."""
        heads = self.words.columns if orientation == Qt.Orientation.Horizontal else self.words.heads
        if role == Qt.ItemDataRole.TextAlignmentRole:
            return int(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignTop)
        return self._said(heads[section], role) if section < len(heads) else None

    def _said(self, cell: CellWords, role: int) -> object:
        if role == Qt.ItemDataRole.DisplayRole:
            return cell.text
        if role == Qt.ItemDataRole.ForegroundRole:
            return self._colour(cell.role)
        if role == Qt.ItemDataRole.FontRole:
            return self._theme.font(self.size, strong=cell.strong)
        if role == Qt.ItemDataRole.ToolTipRole:
            return cell.tip or None
        if role == Qt.ItemDataRole.TextAlignmentRole:
            return int(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignTop)
        return None

    def _colour(self, role: str) -> QColor:
        colour = self._theme.colour(role)
        if self.pale:
            colour.setAlphaF(_PALE)
        return colour


class WordsTable(QTableView):
    """The table; its columns share the room, long words take several lines."""

    def __init__(self, name: str, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.words = WordsModel(theme)
        self.setModel(self.words)
        self.setAccessibleName(name)
        self.setShowGrid(False)
        self.setWordWrap(True)
        self.setEditTriggers(QAbstractItemView.EditTrigger.NoEditTriggers)
        self.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setVerticalScrollMode(QAbstractItemView.ScrollMode.ScrollPerPixel)
        self.setTabKeyNavigation(False)
        self.setCornerButtonEnabled(False)
        across, upwards = self.horizontalHeader(), self.verticalHeader()
        across.setSectionResizeMode(QHeaderView.ResizeMode.Stretch)
        across.setHighlightSections(False)
        upwards.setHighlightSections(False)
        upwards.setFixedWidth(_HEADS)
        upwards.setMinimumSectionSize(20)
        theme.changed.connect(self._dress)
        self._dress()

    def show_words(self, words: TableWords) -> None:
        """Show other words, all of them true."""
        self.words.pale = False
        self.words.show_words(words)
        self._fit()

    def show_pale(self) -> None:
        """Show the words paler: they are not true any more."""
        if not self.words.pale:
            self.words.pale = True
            self.words.tell()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Give every row the lines that it needs in the new width."""
        super().resizeEvent(event)
        self._fit()

    def _fit(self) -> None:
        """Write small where columns are narrow, and give every row the lines that it needs."""
        count = max(len(self.words.words.columns), 1)
        is_narrow = (self.width() - _HEADS) / count < _NARROW
        size: Size = "small" if is_narrow else "body"
        if size != self.words.size:
            self.words.size = size
            self.verticalHeader().setFixedWidth(_SMALL_HEADS if is_narrow else _HEADS)
            self.words.tell()
        self.resizeRowsToContents()

    def _dress(self) -> None:
        self.setStyleSheet(_LOOK.format(**self._theme.palette.colours))
        self.words.tell()
