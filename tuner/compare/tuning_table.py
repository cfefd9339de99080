"""A table of tunings as plain data: what is compared, what each comes to, and by how much one is better."""

from dataclasses import dataclass
from math import inf, isfinite

from tuner.judge.assessment import Assessment
from tuner.model.controller import Controller
from tuner.model.measures import Measure

AS_FOUND, AS_LEFT = "as found", "as left"

ALIKE = 0.005
"""Share of a value below which a difference is none."""


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


def badness(measure: Measure, cell: Cell) -> float:
    """Return a number by which cells of one measure are ordered, the best first."""
    if cell.value is None:
        return -inf if cell.none else inf
    return -cell.value if measure.at_least else cell.value


def standing(measure: Measure, cell: Cell, base: Cell) -> int:
    """Return 1 where a cell is better than another, -1 where it is worse, 0 where they are alike but for `ALIKE`."""
    one, other = badness(measure, cell), badness(measure, base)
    if one == other or (isfinite(other) and abs(one - other) <= ALIKE * abs(other)):
        return 0
    return 1 if one < other else -1
