"""What the table of tunings says: verdicts, what each misses in words, and every measure with what it is better by."""

from collections.abc import Iterator

from tuner.compare.tuning_table import ALIKE, AS_FOUND, AS_LEFT, Cell, Column, Row, TuningTable, change, standing
from tuner.judge.overlay import at_plant, missed
from tuner.judge.wording import minus, quantity, unit_of
from tuner.model.sheet import Sheet
from tuner.window.tunings.compared import ComparedTunings
from tuner.window.words_table import CellWords, TableWords

_DIGITS = 3
_ROLES = {"met": "firm_word", "missed": "lost_word", "unstable": "lost_word"}

ALONE = (
    "There is one tuning only: keep it with Ctrl+K before changing it, or note it as found in the Tuning menu, "
    "to compare with."
)

_Row = tuple[CellWords, tuple[CellWords, ...]]


def table_words(shown: ComparedTunings) -> TableWords:
    """Return the words of the table, a column for each tuning."""
    heads, rows = zip(*_rows(shown), strict=True)
    return TableWords(tuple(_column(column) for column in shown.table.columns), heads, rows)


def summary(table: TuningTable) -> str:
    """Say how the second tuning stands to the first, over all measures."""
    if len(table.columns) < 2:
        return ALONE
    first, second = (_called(column) for column in table.columns[:2])
    stands = [standing(row.measure, row.cells[1], row.cells[0]) for row in table.rows]
    better, worse = stands.count(1), stands.count(-1)
    return (
        f"{_capital(second)} is better than {first} in {better} measures and worse in {worse}. "
        "Every number is the worst over the family."
    )


def _called(column: Column) -> str:
    return column.name if column.name in (AS_FOUND, AS_LEFT) else f"tuning {column.name}"


def _capital(words: str) -> str:
    return f"{words[0].upper()}{words[1:]}"


def _column(column: Column) -> CellWords:
    return CellWords(_capital(_called(column)), strong=True, tip=column.tuning.label)


def _rows(shown: ComparedTunings) -> Iterator[_Row]:
    columns = shown.table.columns
    yield CellWords("verdict", "quiet"), tuple(_verdict(column) for column in columns)
    yield CellWords("misses", "quiet"), tuple(_misses(shown.sheet, column) for column in columns)
    for row in shown.table.rows:
        unit = unit_of(row.measure.name, shown.sheet.loop)
        cells = tuple(_cell(row, place, unit) for place in range(len(row.cells)))
        yield _head(row, unit), cells


def _head(row: Row, unit: str) -> CellWords:
    if row.limit is None:
        return CellWords(row.measure.label, "quiet", tip=row.measure.sentence)
    sign = "≥" if row.measure.at_least else "≤"
    return CellWords(f"{row.measure.label} {sign} {quantity(row.limit, unit)}", tip=row.measure.sentence)


def _verdict(column: Column) -> CellWords:
    if column.assessment is None:
        return CellWords("not computed", "quiet", tip=column.refusal)
    return CellWords(column.assessment.verdict, _ROLES[column.assessment.verdict], strong=True)


def _misses(sheet: Sheet, column: Column) -> CellWords:
    """Say each limit that is missed, with its worst plant."""
    if column.assessment is None:
        return CellWords(column.refusal, "quiet")
    members = {member.name: member for member in column.assessment.members}
    said = [
        missed(sheet, result, members[result.plant])
        for result in column.assessment.limits
        if not result.met and result.plant in members
    ]
    return CellWords(minus("; ".join(said)), "lost_word") if said else CellWords("none", "quiet")


def _cell(row: Row, place: int, unit: str) -> CellWords:
    cell = row.cells[place]
    value = minus(quantity(cell.value, unit, _DIGITS)).replace("inf", "∞")
    parts = [value, "missed" if cell.met is False else "", _difference(row, place)]
    role = "lost_word" if cell.met is False else "ink" if cell.value is not None else "quiet"
    return CellWords(", ".join(filter(None, parts)), role, cell.best, _tip(cell))


def _difference(row: Row, place: int) -> str:
    """Say by how much a tuning is better than the first, in % of that."""
    share = change(row.measure, row.cells[place], row.cells[0]) if place else None
    if share is None or abs(share) <= ALIKE:
        return ""
    return f"{quantity(100.0 * abs(share), '%', 2)} {'better' if share > 0.0 else 'worse'}"


def _tip(cell: Cell) -> str:
    if cell.reason:
        return f"Not there: {cell.reason}."
    return f"Worst{at_plant(cell.plant)}." if cell.plant else ""
