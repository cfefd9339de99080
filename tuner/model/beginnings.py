"""Numbers to begin with, where a block is added and nobody has said yet how large it is."""

from tuner.model.sheet import Sheet


def first_time(sheet: Sheet) -> float:
    """Return a time that a block may begin with: a fiftieth of the trial, two figures, in time units."""
    return float(f"{sheet.trial.duration / 50.0:.2g}")
