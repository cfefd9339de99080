"""The curves of the plots over time as plain numbers, and the plants that they belong to."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.judge.assessment import LimitResult, MemberResult
from tuner.judge.overlay import PLOT_OF, Plot
from tuner.judge.wording import shortfall
from tuner.model.family import NOMINAL
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace
from tuner.window.plots import thinning
from tuner.window.shown import FamilyView, Shown

Array = NDArray[np.float64]

LARGE = 60
"""A family of more plants than this is shown as its band and the curves of its worst plants."""


@dataclass(frozen=True, slots=True, eq=False)
class Line:
    """A curve to draw: its corners, what it is called where it runs, and the plant to look at when that is pressed."""

    t: Array
    values: Array
    name: str = ""
    plant: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Limited:
    """The pieces of the effort that a limit holds: all corners of its curve, and which join the next one."""

    t: Array
    values: Array
    connect: NDArray[np.int32]


@dataclass(frozen=True, slots=True, eq=False)
class Family:
    """Curves over shared times.

    Parameters
    ----------
    t : ndarray, shape (n,)
        Times.
    values : ndarray, shape (m, n)
        One curve a plant.
    worst : tuple of int
        Which of them are the worst of some limit.
    """

    t: Array
    values: Array
    worst: tuple[int, ...] = ()

    def curves(self, view: FamilyView) -> Array:
        """Return the curves to draw one by one: all, or of a large family those that count."""
        if view in ("none", "band"):
            return self.values[:0]
        if len(self.values) <= LARGE:
            return self.values
        others = () if view == "both" else range(LARGE)  # corners of the spread come first
        return self.values[sorted({*self.worst, *others})]

    def ground(self, view: FamilyView) -> Array:
        """Return the curves whose ground is to be filled: all or none."""
        return self.values if view in ("both", "band") else self.values[:0]


@dataclass(frozen=True, slots=True, eq=False)
class Lines:
    """The curves of one plot: the plant's that is looked at, its family's, the worst plant's, and kept tunings'."""

    nominal: Line
    family: Family
    kept: tuple[Line, ...] = ()
    second: Line | None = None
    limited: Limited | None = None
    worst: Line | None = None

    def says_the_same(self, other: "Lines") -> bool:
        """Tell whether the same plants have the same names, in two pictures of the same curves."""
        return _said(self.nominal) == _said(other.nominal) and _said(self.worst) == _said(other.worst)


def _said(line: Line | None) -> tuple[str, str] | None:
    return None if line is None else (line.name, line.plant)


def family_of_curves(shown: Shown, curve: Callable[[MemberResult], tuple[Array, Array]]) -> Family:
    """Return a curve of every plant but the first, over the times of the first such, to which others are brought."""
    members = shown.assessment.members[1:]
    if not members:
        return Family(np.empty(0), np.empty((0, 0)))
    curves = [curve(member) for member in members]
    t = curves[0][0]
    same = all(other is t or np.array_equal(other, t) for other, _ in curves[1:])
    values = np.stack([y if same else np.interp(t, times, y) for times, y in curves])
    plants = {limit.plant for limit in shown.assessment.limits}
    return Family(t, values, tuple(place for place, member in enumerate(members) if member.name in plants))


def worst_line(
    shown: Shown, plot: Plot, curve: Callable[[MemberResult], tuple[Array, Array]], before: Line | None = None
) -> Line | None:
    """Return the curve of the plant that misses a limit by most, or comes nearest to missing one, with its name.

    None where that plant is the one that is looked at, or where nothing is judged. Until an answer has a verdict it is
    the plant of `before`, the line drawn last; the same curve until it has that plant at all.
    """
    if not shown.whole:
        member = _member(shown, before.plant) if before is not None else None
        return Line(*curve(member), before.name, before.plant) if before is not None and member is not None else before
    limit = _worst_limit(shown.assessment.limits, plot)
    member = None if limit is None else _member(shown, limit.plant)
    if limit is None or member is None:
        return None
    return Line(*curve(member), f"worst {BY_NAME[limit.measure].label}: {drift_words(member)}", limit.plant)


def _member(shown: Shown, plant: str) -> MemberResult | None:
    """Return what a plant other than the first makes of the loop, by its name."""
    return next((member for member in shown.assessment.members[1:] if member.name == plant), None)


def drift_words(member: MemberResult) -> str:
    """Return how far a plant has drifted, in words."""
    return "nominal plant" if member.name == NOMINAL else member.drift or member.name


def looked_at_words(shown: Shown) -> str:
    """Return what the name of the main curve ends with: which plant it is, unless it is the nominal one."""
    return f", {drift_words(shown.assessment.nominal)}" if shown.looked_at else ""


def effort_corners(sheet: Sheet, trace: Trace) -> tuple[Array, Array]:
    """Return the corners of the effort: it holds from sample to sample, unless the controller is continuous."""
    if sheet.controller.sample_time <= 0.0:
        return trace.t, trace.u
    at = trace.sample_index
    return thinning.staircase(trace.t[at], trace.u[at], float(trace.t[-1]))


def limited_pieces(sheet: Sheet, trace: Trace) -> Limited | None:
    """Return where a limit holds the effort, along the corners of its curve; None where none does."""
    held = np.append(trace.limited, np.zeros(trace.sample_index.size - trace.limited.size, dtype=bool))
    if not held.any():
        return None
    t, u = effort_corners(sheet, trace)
    following = np.append(held[1:], False)
    if sheet.controller.sample_time > 0.0:
        joined = np.column_stack((held, held & following)).ravel()
    else:
        joined = np.interp(t, trace.t[trace.sample_index], held.astype(float)) > 0.5
    return Limited(t, u, joined.astype(np.int32))


def _worst_limit(limits: Sequence[LimitResult], plot: Plot) -> LimitResult | None:
    """Return the limit of a plot with the largest shortfall; of all limits where the plot has none of its own."""
    here = [limit for limit in limits if PLOT_OF[limit.measure] == plot]
    return max(here or limits, key=shortfall, default=None)
