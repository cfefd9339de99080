"""Comparisons for a person: structures beside each other, and tunings beside each other, as tables and sentences."""

from collections.abc import Iterator, Sequence

from rich.console import Console
from rich.table import Table
from rich.text import Text

from tuner.cli.printing import STYLES, print_plain
from tuner.compare.comparison import Comparison
from tuner.compare.figures import QUANTITIES, Figure, best_of
from tuner.compare.tuning_table import Cell, Row, TuningTable
from tuner.judge.wording import quantity, unit_of
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in

BEST = "bold"


def show_structures(sheet: Sheet, comparisons: Sequence[Comparison], file: str, out: Console) -> None:
    """Print a comparison of structures: a table of figures, then what is said of each."""
    _print_title(sheet, file, out)
    table = _table(["worst over the family", *(one.name for one in comparisons)])
    for row in _structure_rows(sheet, comparisons):
        table.add_row(*row)
    print_plain(table, out)
    for one in comparisons:
        out.print(Text(f"{one.name[0].upper()}{one.name[1:]}", style=BEST))
        for sentence in sentences(one):
            out.print(Text(f"- {sentence}"))
    out.print()
    out.file.flush()


def show_tunings(sheet: Sheet, found: TuningTable, file: str, out: Console) -> None:
    """Print a table of tunings, and why one could not be computed."""
    _print_title(sheet, file, out)
    table = _table(["worst over the family", *(column.name for column in found.columns), "limit"])
    table.add_row(Text("verdict"), *_verdicts([column.assessment for column in found.columns]), Text(""))
    for row in found.rows:
        table.add_row(*_tuning_row(sheet, row))
    print_plain(table, out)
    for column in found.columns:
        if column.refusal:
            out.print(Text(f"- {column.name}: {column.refusal}"))
    out.print()
    out.file.flush()


def sentences(one: Comparison) -> Iterator[str]:
    """Yield what is said of a structure: what it needs, whether it can destabilise, and what else must be known."""
    *first, last = one.structure.needs
    yield f"Needs {', '.join(first)} and {last}." if first else f"Needs {last}."
    if one.stability:
        yield f"Can it make a stable plant unstable? {one.stability}"
    yield from one.remarks


def _print_title(sheet: Sheet, file: str, out: Console) -> None:
    title = sheet.loop.title
    out.print(Text(f"{title}  ({file})" if file else title, style=BEST))


def _table(columns: Sequence[str]) -> Table:
    table = Table(box=None, pad_edge=False, show_edge=False, header_style="", padding=(0, 3, 0, 0))
    for title in columns:
        table.add_column(Text(title))
    return table


def _structure_rows(sheet: Sheet, comparisons: Sequence[Comparison]) -> Iterator[list[Text]]:
    yield [Text("verdict"), *_verdicts([one.assessment for one in comparisons])]
    found = [{figure.name: figure for figure in one.figures} for one in comparisons]
    for asked in QUANTITIES:
        figures = [figures.get(asked.name) for figures in found]
        best = best_of(asked, [figure.worst if figure else None for figure in figures])
        unit = unit_in(asked.unit, sheet.loop)
        cells = [_figure_cell(figure, unit) for figure in figures]
        styled = [Text(cell, style=BEST if first else "") for cell, first in zip(cells, best, strict=True)]
        yield [Text(asked.label), *styled]


def _figure_cell(figure: Figure | None, unit: str) -> str:
    if figure is None:
        return ""
    if figure.worst is None:
        return f"none: {figure.reason}"
    return f"{quantity(figure.worst, unit)} (nominal {quantity(figure.nominal, unit)})"


def _verdicts(assessments: Sequence[object]) -> Iterator[Text]:
    for assessment in assessments:
        verdict = getattr(assessment, "verdict", "")
        yield Text(verdict or "none", style=STYLES.get(verdict, ""))


def _tuning_row(sheet: Sheet, row: Row) -> list[Text]:
    unit = unit_of(row.measure.name, sheet.loop)
    bound = "at least" if row.measure.at_least else "at most"
    limit = "" if row.limit is None else f"{bound} {quantity(row.limit, unit)}"
    return [Text(row.measure.label), *(_tuning_cell(cell, unit) for cell in row.cells), Text(limit)]


def _tuning_cell(cell: Cell, unit: str) -> Text:
    value = quantity(cell.value, unit)
    said = f"{value}, missed" if cell.met is False else value
    return Text(f"{said} (best)" if cell.best else said, style=STYLES["missed"] if cell.met is False else "")
