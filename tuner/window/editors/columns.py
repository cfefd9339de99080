"""How a table of parameters shares its width: in one line while all of it fits, else each name above its boxes."""

from collections.abc import Sequence
from dataclasses import dataclass

GAP = 4
"""Pixels between two columns."""


@dataclass(frozen=True, slots=True)
class Widths:
    """Pixels for a name, and for the boxes of its value, unit and spread."""

    name: int
    value: int
    unit: int
    spread: int


@dataclass(frozen=True, slots=True)
class Columns:
    """The widths of the columns; `stacked` when the names stand above the boxes."""

    widths: Widths
    stacked: bool


def columns_for(needs: Sequence[Widths], room: int) -> Columns:
    """Return columns that show every row whole where there is room, and share what is left over.

    Parameters
    ----------
    needs : sequence of Widths
        What each row needs, pixels.
    room : int
        What there is for all columns, pixels.
    """
    name = max(need.name for need in needs)
    boxes = [max(box) for box in zip(*((need.value, need.unit, need.spread) for need in needs), strict=True)]
    left = room - sum(boxes) - len(boxes) * GAP
    if left >= name:
        return Columns(Widths(left, *boxes), stacked=False)
    extra = max(left + GAP, 0) // len(boxes)
    return Columns(Widths(0, *(box + extra for box in boxes)), stacked=True)
