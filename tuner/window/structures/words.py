"""What the table of structures says: verdicts, figures, what each needs, and what must be known beside the numbers."""

from collections.abc import Iterator
from typing import TYPE_CHECKING

from tuner.compare.figures import QUANTITIES, Figure, Quantity, best_of
from tuner.judge.overlay import at_plant
from tuner.judge.wording import minus, number, quantity
from tuner.model.units import unit_in
from tuner.window.structures.compared import Compared
from tuner.window.structures.overlaid import ROLES
from tuner.window.words_table import CellWords, TableWords

if TYPE_CHECKING:
    from tuner.compare.comparison import Comparison

VERDICT_ROLES = {"met": "firm_word", "missed": "lost_word", "unstable": "lost_word"}

_NEEDS = "What it has to know or measure."
_STABILITY = "Whether it can make a plant unstable that is stable by itself."
_DIGITS = 3


def table_words(shown: Compared) -> TableWords:
    """Return the words of the table, a column for each structure."""
    heads, rows = zip(*_rows(shown), strict=True)
    return TableWords(tuple(_column(one) for one in shown.comparisons), heads, rows)


def summary(shown: Compared) -> str:
    """Return what must be known before anything is compared: where the feedforward comes from."""
    forward = next((one for one in shown.comparisons if one.structure.kind == "feedforward"), None)
    return " ".join(forward.remarks) if forward else ""


def _column(one: "Comparison") -> CellWords:
    return CellWords(f"{one.name[0].upper()}{one.name[1:]}", f"{ROLES[one.structure.kind]}_word", strong=True)


_Row = tuple[CellWords, tuple[CellWords, ...]]


def _rows(shown: Compared) -> Iterator[_Row]:
    all_of_them = shown.comparisons
    yield CellWords("verdict", "quiet"), tuple(_verdict(one) for one in all_of_them)
    for asked, figures, best in _figures(shown):
        unit = unit_in(asked.unit, shown.sheet.loop)
        cells = zip(figures, best, shown.comparisons, strict=True)
        head = CellWords(asked.label, "quiet", tip=f"{asked.sentence} Worst over the family.")
        yield head, tuple(_figure(figure, unit, one, is_best=first) for figure, first, one in cells)
    yield CellWords("needs", "quiet", tip=_NEEDS), tuple(CellWords(_needs(one)) for one in all_of_them)
    yield CellWords("can destabilise", "quiet", tip=_STABILITY), tuple(CellWords(one.stability) for one in all_of_them)
    yield CellWords("to know", "quiet"), tuple(CellWords(" ".join(one.remarks), "quiet") for one in all_of_them)


def _figures(shown: Compared) -> Iterator[tuple[Quantity, list[Figure | None], tuple[bool, ...]]]:
    found = [{figure.name: figure for figure in one.figures} for one in shown.comparisons]
    for asked in QUANTITIES:
        figures = [figures.get(asked.name) for figures in found]
        yield asked, figures, best_of(asked, [figure.worst if figure else None for figure in figures])


def _figure(figure: Figure | None, unit: str, one: "Comparison", *, is_best: bool) -> CellWords:
    if figure is None:
        return CellWords("—", "quiet")
    if figure.worst is None:
        is_known = one.assessment is not None and one.assessment.verdict == "unstable"  # the first row says so
        return CellWords("none" if is_known else f"none: {figure.reason}", "quiet", tip=_nominal(figure, unit))
    drift = one.assessment.drift_of(figure.plant) if one.assessment else figure.plant
    tip = f"Worst{at_plant(drift)}. {_nominal(figure, unit)}"
    nominal = minus(number(figure.nominal or 0.0, _DIGITS)).replace("inf", "∞")
    return CellWords(f"{_said(figure.worst, unit)} (nominal {nominal})", strong=is_best, tip=tip)


def _nominal(figure: Figure, unit: str) -> str:
    return f"Nominal plant: {_said(figure.nominal, unit)}."


def _said(value: float | None, unit: str) -> str:
    return minus(quantity(value, unit, _DIGITS)).replace("inf", "∞")


def _verdict(one: "Comparison") -> CellWords:
    if one.assessment is None:
        return CellWords("not compared", "quiet")
    return CellWords(one.assessment.verdict, VERDICT_ROLES[one.assessment.verdict], strong=True)


def _needs(one: "Comparison") -> str:
    return ", ".join(one.structure.needs)
