"""What a person reads: verdict, a table of limits with their worst plants, notes. No colour but on a terminal."""

import sys
from collections.abc import Iterator

from rich.console import Console
from rich.table import Table
from rich.text import Text

from tuner.judge.assessment import Assessment, LimitResult
from tuner.judge.wording import quantity, told_apart, unit_of
from tuner.model.measures import BY_NAME, MEASURES
from tuner.model.sheet import Sheet

STYLES = {"met": "green", "missed": "yellow", "unstable": "red"}

_WIDE = 500
"""Columns for output that no terminal shows: nothing is broken or cut."""


def console() -> Console:
    """Return the terminal, or a plain writer where the output is not one."""
    terminal = sys.stdout.isatty()
    return Console(file=sys.stdout, width=None if terminal else _WIDE, highlight=False, soft_wrap=not terminal)


def show(sheet: Sheet, assessment: Assessment, file: str, out: Console) -> None:
    """Print an assessment."""
    out.print(Text(f"{assessment.title}  ({file})" if file else assessment.title, style="bold"))
    out.print(Text(verdict_sentence(assessment), style=STYLES[assessment.verdict]))
    print_plain(_table(sheet, assessment), out)
    for note in assessment.notes:
        out.print(Text(f"- {note}"))
    out.print()
    out.file.flush()


def verdict_sentence(assessment: Assessment) -> str:
    """Say the verdict."""
    size = assessment.family_size
    plants = "the nominal plant alone" if size == 1 else f"the family of {size} plants"
    if assessment.verdict == "unstable":
        return assessment.instability.sentence if assessment.instability else f"Unstable, judged over {plants}."
    if not assessment.limits:
        return f"Stable, judged over {plants}; there are no limits to meet."
    count = len(assessment.limits)
    missed = sum(not limit.met for limit in assessment.limits)
    limits = "limit" if count == 1 else "limits"
    if missed:
        return f"Missed: {missed} of {count} {limits}, judged over {plants}."
    return f"Met: {count} of {count} {limits}, judged over {plants}."


def _table(sheet: Sheet, assessment: Assessment) -> Table:
    table = Table(box=None, pad_edge=False, show_edge=False, header_style="", padding=(0, 3, 0, 0))
    columns = ("", "value", "limit", "worst plant", "") if assessment.limits else ("", "value", "worst plant")
    for title in columns:
        table.add_column(title, no_wrap=title != "worst plant")
    for row in _limit_rows(sheet, assessment) if assessment.limits else _measure_rows(sheet, assessment):
        # As texts: a unit in square brackets is no markup.
        table.add_row(*(cell if isinstance(cell, Text) else Text(cell) for cell in row))
    return table


def _limit_rows(sheet: Sheet, assessment: Assessment) -> Iterator[tuple[str | Text, ...]]:
    for limit in assessment.limits:
        word = "met" if limit.met else "missed"
        value, bound = _value_and_bound(sheet, limit)
        yield BY_NAME[limit.measure].label, value, bound, limit.plant, Text(word, style=STYLES[word])


def _value_and_bound(sheet: Sheet, limit: LimitResult) -> tuple[str, str]:
    facts, unit = BY_NAME[limit.measure], unit_of(limit.measure, sheet.loop)
    digits = 4 if limit.value is None else told_apart(abs(limit.value) if facts.by_size else limit.value, limit.limit)
    bound = "at least" if facts.at_least else "at most"
    return quantity(limit.value, unit, digits), f"{bound} {quantity(limit.limit, unit, digits)}"


def _measure_rows(sheet: Sheet, assessment: Assessment) -> Iterator[tuple[str | Text, ...]]:
    for measure in MEASURES:
        worst = assessment.worst[measure.name]
        if worst.value is not None:
            yield measure.label, quantity(worst.value, unit_of(measure.name, sheet.loop)), worst.plant


def print_plain(table: Table, out: Console) -> None:
    """Print a table without the blanks that would fill its last column."""
    for line in out.render_lines(table, pad=False):
        text = Text.assemble(*((segment.text, segment.style or "") for segment in line))
        text.rstrip()
        out.print(text)
