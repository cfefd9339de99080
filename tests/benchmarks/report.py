"""The rows as a table for a person, or as JSON for a program."""

import json
import os
import platform
from collections.abc import Sequence

from tests.benchmarks.row import Row

NAMES = (
    "rulers_frame_ms",
    "loop_vs_python_control",
    "kernel_vs_c",
    "move_to_painted_ms",
    "move_to_rulers_ms",
    "ringing_vs_calm",
    "assess_ms",
    "start_ms",
    "judge_ms",
    "rehearsal_growth_mb",
)
"""The rows, in the order in which they are told."""

LONG = ("changes_growth_mb", "growth_exponent")
"""Rows that take minutes; measured only when they are asked for by name."""

_HEAD = ("name", "figure", "p99", "yardstick", "ratio", "goal")


def as_json(rows: Sequence[Row]) -> str:
    """Return the rows as one JSON object."""
    return json.dumps(
        {row.name: {"value": row.value, "p99": row.p99, "yardstick": row.yardstick, "ratio": row.ratio} for row in rows}
    )


def as_text(rows: Sequence[Row]) -> str:
    """Return the rows as a table, and below it what each figure and yardstick is."""
    lines = [_HEAD, *(_cells(row) for row in rows)]
    widths = [max(len(line[i]) for line in lines) for i in range(len(_HEAD))]
    table = ["  ".join(cell.ljust(width) for cell, width in zip(line, widths, strict=True)).rstrip() for line in lines]
    machine = f"{os.cpu_count()} processors, Python {platform.python_version()}, {platform.system()}"
    return "\n".join((*table, "", *(_explained(row) for row in rows), "", f"Measured on {machine}.", ""))


def _cells(row: Row) -> tuple[str, ...]:
    figures = (row.value, row.p99, row.yardstick, row.ratio)
    return (row.name, *(_told(figure) for figure in figures), row.goal)


def _told(figure: float | None) -> str:
    return "-" if figure is None else f"{figure:.4g}"


def _explained(row: Row) -> str:
    against = f" Yardstick: {row.against}." if row.against else ""
    note = f" {row.note}" if row.note else ""
    return f"{row.name}: {row.what}, {row.unit}.{against}{note}"
