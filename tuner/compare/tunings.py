"""Tunings of one loop beside each other: as found, as left and those that were kept, on the same trial and family."""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace
from math import inf, isfinite

from tuner.assess import assess
from tuner.errors import LoopError
from tuner.judge.assessment import Assessment, MemberResult, WorstCase
from tuner.judge.verdict import meets
from tuner.model.controller import Controller
from tuner.model.measures import MEASURES, Measure
from tuner.model.sheet import Sheet

AS_FOUND, AS_LEFT = "as found", "as left"

Stop = Callable[[], bool]
"""Tells whether a table is not wanted any more."""


@dataclass(frozen=True, slots=True)
class Tuning:
    """A tuning to compare: what it is called, what it is in words, and its controller."""

    name: str
    label: str
    controller: Controller


@dataclass(frozen=True, slots=True, eq=False)
class Column:
    """One tuning, judged; `refusal` says in a sentence why there is no assessment."""

    tuning: Tuning
    assessment: Assessment | None
    refusal: str = ""

    @property
    def name(self) -> str:
        """What the tuning is called."""
        return self.tuning.name


@dataclass(frozen=True, slots=True)
class Cell:
    """A measure of one tuning at its worst over the family.

    Parameters
    ----------
    value : float or None
        The size of measures that are bounded by size; None where it does not exist.
    plant : str
        The plant that gave it, how far it has drifted; '' without an assessment.
    none : bool
        Whether None means "none", which is good.
    met : bool or None
        Whether the limit of the measure is met; None without one.
    best : bool
        Whether no other tuning is better, and some are not as good.
    reason : str
        Where there is no value, why, as the end of a sentence.
    """

    value: float | None
    plant: str = ""
    none: bool = False
    met: bool | None = None
    best: bool = False
    reason: str = ""


@dataclass(frozen=True, slots=True)
class Row:
    """A measure of all tunings, in the order of the columns; `limit` is that of the sheet, None for none."""

    measure: Measure
    limit: float | None
    cells: tuple[Cell, ...]


@dataclass(frozen=True, slots=True, eq=False)
class TuningTable:
    """Measures of tunings: those with limits first, in the order of the sheet."""

    columns: tuple[Column, ...]
    rows: tuple[Row, ...]


def tunings_of(sheet: Sheet, kept: Iterable[Tuning] = ()) -> tuple[Tuning, ...]:
    """Return the tunings of a sheet: as found, where it says so, as left, which is the present one, and kept ones."""
    found, left = sheet.controller.as_found, replace(sheet.controller, as_found=None)
    met_on_site = (Tuning(AS_FOUND, "the gains met on site", found),) if found is not None else ()
    return (*met_on_site, Tuning(AS_LEFT, "the present gains", left), *kept)


def compare_tunings(
    sheet: Sheet, kept: Iterable[Tuning] = (), family_size: int | None = None, *, stop: Stop = lambda: False
) -> TuningTable:
    """Assess tunings of a sheet with the same trial, the same family and the same limits.

    Parameters
    ----------
    kept : iterable of Tuning
        Tunings to compare with beside those that the sheet holds, see `tunings_of`.
    family_size : int or None
        As `assess` takes it.
    stop : callable
        Asked before each tuning; what is not wanted any more ends there, with those that are done.
    """
    columns: list[Column] = []
    for tuning in tunings_of(sheet, kept):
        if stop():
            break
        columns.append(judged(sheet, tuning, family_size))
    return table(sheet, columns)


def judged(sheet: Sheet, tuning: Tuning, family_size: int | None = None) -> Column:
    """Return a tuning with its assessment, or why it has none."""
    tuned = replace(sheet, controller=replace(tuning.controller, as_found=None))
    try:
        return Column(tuning, assess(tuned, family_size))
    except LoopError as error:
        return Column(tuning, None, f"It cannot be computed: {error}.")


def table(sheet: Sheet, columns: Sequence[Column]) -> TuningTable:
    """Return the measures of tunings that are judged already, side by side."""
    limits = dict(sheet.limits)
    measures = sorted(MEASURES, key=lambda measure: _place(measure, limits))
    return TuningTable(tuple(columns), tuple(_row(measure, limits.get(measure.name), columns) for measure in measures))


def _place(measure: Measure, limits: dict[str, float]) -> int:
    return list(limits).index(measure.name) if measure.name in limits else len(limits)


def _row(measure: Measure, limit: float | None, columns: Sequence[Column]) -> Row:
    cells = [_cell(measure, limit, column.assessment) for column in columns]
    best = _best(measure, cells)
    return Row(measure, limit, tuple(replace(cell, best=is_best) for cell, is_best in zip(cells, best, strict=True)))


def _cell(measure: Measure, limit: float | None, assessment: Assessment | None) -> Cell:
    if assessment is None:
        return Cell(None, reason="it cannot be computed")
    worst = assessment.worst[measure.name]
    met = None if limit is None else meets(measure, worst, limit)
    value = abs(worst.value) if measure.by_size and worst.value is not None else worst.value
    reason = _reason(measure, worst, assessment.members) if value is None else ""
    return Cell(value, assessment.drift_of(worst.plant), worst.none, met, reason=reason)


def _reason(measure: Measure, worst: WorstCase, members: Sequence[MemberResult]) -> str:
    found = (member.reasons.get(measure.name, "") for member in members if member.name == worst.plant)
    return next(found, "")


def _best(measure: Measure, cells: Sequence[Cell]) -> list[bool]:
    """Tell which cells are the best; none where all are alike."""
    badness = [_badness(measure, cell) for cell in cells]
    least = min(badness, default=inf)
    if len(set(badness)) < 2:
        return [False] * len(cells)
    return [bad == least for bad in badness]


def _badness(measure: Measure, cell: Cell) -> float:
    if cell.value is None:
        return -inf if cell.none else inf
    return -cell.value if measure.at_least else cell.value


def change(measure: Measure, cell: Cell, base: Cell) -> float | None:
    """Return by how many parts a cell is better than another: 0.25 is a quarter of the other's value.

    Above 0 is better, below 0 worse; None where either has no finite value, or the other's is 0.
    """
    if cell.value is None or base.value is None or not base.value:
        return None
    if not (isfinite(cell.value) and isfinite(base.value)):
        return None
    share = (cell.value - base.value) / abs(base.value)
    return share if measure.at_least else -share
