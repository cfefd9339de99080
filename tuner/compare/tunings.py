"""Tunings of one loop beside each other: as found, as left and those that were kept, on the same trial and family."""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from math import inf

from tuner.assess import assess
from tuner.compare.tuning_table import AS_FOUND, AS_LEFT, Cell, Column, Row, Tuning, TuningTable, badness
from tuner.errors import LoopError
from tuner.footing.classes import Overtaken, never
from tuner.judge.assessment import Assessment, MemberResult, WorstCase
from tuner.judge.verdict import meets
from tuner.model.measures import MEASURES, Measure
from tuner.model.sheet import Sheet


def tunings_of(sheet: Sheet, kept: Iterable[Tuning] = ()) -> tuple[Tuning, ...]:
    """Return the tunings of a sheet: as found, where it says so, as left, which is the present one, and kept ones."""
    found, left = sheet.controller.as_found, replace(sheet.controller, as_found=None)
    met_on_site = (Tuning(AS_FOUND, "the gains met on site", found),) if found is not None else ()
    return (*met_on_site, Tuning(AS_LEFT, "the present gains", left), *kept)


def compare_tunings(
    sheet: Sheet, kept: Iterable[Tuning] = (), family_size: int | None = None, *, stop: Callable[[], bool] = never
) -> TuningTable:
    """Assess tunings of a sheet with the same trial, the same family and the same limits.

    Parameters
    ----------
    kept : iterable of Tuning
        Tunings to compare with beside those that the sheet holds, see `tunings_of`.
    family_size : int or None
        As `assess` takes it.
    stop : callable
        Asked before each tuning whether an answer is not wanted any more.

    Raises
    ------
    Overtaken
        When it is not.
    """
    columns: list[Column] = []
    for tuning in tunings_of(sheet, kept):
        if stop():
            raise Overtaken
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
    found = [badness(measure, cell) for cell in cells]
    least = min(found, default=inf)
    if len(set(found)) < 2:
        return [False] * len(cells)
    return [bad == least for bad in found]
