"""A table of words: what a cell says to the eye and to assistive technology, and how it fits its room."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QAccessible, QColor
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.window.theme import Theme
from tuner.window.words_table import CellWords, TableWords, WordsTable

Role = Qt.ItemDataRole

WORDS = TableWords(
    (CellWords("as found", strong=True), CellWords("as left")),
    (CellWords("overshoot", "quiet", tip="Highest excursion."), CellWords("misses")),
    (
        (CellWords("3 %"), CellWords("4 %", "lost_word", strong=True, tip="Worst at gain +15 %.")),
        (CellWords("none"), CellWords("a long sentence that needs more room than there is " * 4)),
    ),
)


@pytest.fixture
def table(theme: Theme, qtbot: QtBot) -> WordsTable:
    """Return a table in sight."""
    made = WordsTable("Tunings compared", theme)
    qtbot.addWidget(made)
    made.resize(900, 300)
    made.show_words(WORDS)
    made.show()
    QApplication.processEvents()
    return made


def test_cells_say_words_in_their_colour(table: WordsTable, theme: Theme) -> None:
    """Words, colour, weight and tip are those of the cell."""
    cell = table.words.index(0, 1)
    assert cell.data(Role.DisplayRole) == "4 %"
    assert cell.data(Role.ForegroundRole) == theme.colour("lost_word")
    assert cell.data(Role.FontRole) == theme.font("body", strong=True)
    assert cell.data(Role.ToolTipRole) == "Worst at gain +15 %."
    assert table.words.index(0, 0).data(Role.ToolTipRole) is None


def test_heads_are_those_of_columns_and_rows(table: WordsTable) -> None:
    """Each with its own words and tip."""
    model = table.words
    assert [model.headerData(i, Qt.Orientation.Horizontal) for i in (0, 1)] == ["as found", "as left"]
    assert [model.headerData(i, Qt.Orientation.Vertical) for i in (0, 1)] == ["overshoot", "misses"]
    assert model.headerData(0, Qt.Orientation.Vertical, Role.ToolTipRole) == "Highest excursion."
    assert model.headerData(7, Qt.Orientation.Vertical) is None


def test_it_is_read_by_assistive_technology(table: WordsTable) -> None:
    """Its name, its heads and each of its cells."""
    reader = QAccessible.queryAccessibleInterface(table)
    assert reader.text(QAccessible.Text.Name) == "Tunings compared"
    said = [reader.child(place).text(QAccessible.Text.Name) for place in range(reader.childCount())]
    assert {"as found", "as left", "overshoot", "misses", "3 %", "4 %"} <= set(said)


def test_arrows_go_from_cell_to_cell_and_tab_leaves(table: WordsTable) -> None:
    """The keyboard reads the table, and is not caught in it."""
    table.setFocus()
    table.setCurrentIndex(table.words.index(0, 0))
    QTest.keyClick(table, Qt.Key.Key_Right)
    QTest.keyClick(table, Qt.Key.Key_Down)
    assert (table.currentIndex().row(), table.currentIndex().column()) == (1, 1)
    assert not table.tabKeyNavigation()


def test_long_words_take_several_lines(table: WordsTable) -> None:
    """The row is as high as they need, and higher where there is less room."""
    wide = table.rowHeight(1)
    assert wide > table.rowHeight(0)
    table.resize(500, 300)
    QApplication.processEvents()
    assert table.rowHeight(1) > wide


def test_narrow_columns_are_written_small(table: WordsTable, theme: Theme) -> None:
    """And large again when there is room."""
    small, body = theme.font("small").pixelSize(), theme.font("body").pixelSize()
    for width, size in ((500, small), (900, body)):
        table.resize(width, 300)
        QApplication.processEvents()
        assert table.words.index(0, 0).data(Role.FontRole).pixelSize() == size


def test_other_words_of_the_same_shape_keep_the_place(table: WordsTable) -> None:
    """The cell that the keyboard is at stays; another shape begins anew."""
    table.setCurrentIndex(table.words.index(1, 0))
    table.show_words(TableWords(WORDS.columns, WORDS.heads, WORDS.rows[::-1]))
    assert (table.currentIndex().row(), table.currentIndex().column()) == (1, 0)
    assert table.words.index(0, 0).data() == "none"
    table.show_words(TableWords(WORDS.columns[:1], WORDS.heads, tuple(row[:1] for row in WORDS.rows)))
    assert not table.currentIndex().isValid()
    assert table.words.columnCount() == 1


def test_what_is_not_true_any_more_is_paler(table: WordsTable) -> None:
    """Until other words are shown."""

    def colour() -> QColor:
        found = table.words.index(0, 0).data(Role.ForegroundRole)
        assert isinstance(found, QColor)
        return found

    table.show_pale()
    assert colour().alphaF() < 0.6
    table.show_words(WORDS)
    assert colour().alphaF() == 1.0


def test_it_follows_the_theme(table: WordsTable, theme: Theme) -> None:
    """Words and ground are those of the shade that holds."""
    theme.choose("dark")
    assert table.words.index(0, 0).data(Role.ForegroundRole) == theme.colour("ink")
    assert theme.palette.colours["page"] in table.styleSheet()


def test_an_empty_table_is_no_fault(theme: Theme, qtbot: QtBot) -> None:
    """Nothing to show is shown as nothing."""
    made = WordsTable("empty", theme)
    qtbot.addWidget(made)
    made.show_words(TableWords())
    made.show_pale()
    assert (made.words.rowCount(), made.words.columnCount()) == (0, 0)
