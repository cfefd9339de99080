"""Trimwright: tune a feedback loop with its limits in sight and deliver a proved controller.

``tuner.assess(tuner.read("heater.toml"))`` judges a tuning sheet. Importing this package loads nothing heavy.
"""

from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from tuner.judge.assessment import Assessment
    from tuner.model.sheet import Sheet

__version__ = "0.1.0"


def read(path: "str | Path") -> "Sheet":
    """Return the tuning sheet in a file.

    Raises
    ------
    tuner.errors.SheetError
        With every fault found in it.
    """
    from tuner.files import sheet

    return sheet.read(Path(path))


def assess(sheet: "Sheet", family_size: int = 25) -> "Assessment":
    """Judge a tuning sheet over the family of plants that its spread makes.

    Loading the module of the same name puts that module in this function's place; it can be called just so.

    Raises
    ------
    tuner.errors.LoopError
        When the loop is well written but cannot be computed, with the reason.
    """
    from tuner.assess import assess as road

    return road(sheet, family_size)
