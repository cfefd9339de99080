"""Sheets for the tests of commands, of our own invention."""

from pathlib import Path

MET = """
sheet = 1
[loop]
title = "Bath"
controlled = { unit = "degC", low = 0, high = 100, resting = 40 }
manipulated = { unit = "%", low = 0, high = 100, resting = 30 }
[plant]
expression = "2/(5 s + 1)"
[controller]
sample_time = 0.5
kp = 2
ki = 0.5
[trial]
reference = 5
disturbance = 3
duration = 40
[limits]
settling_time = 30
"""

MISSED = MET.replace("settling_time = 30", "settling_time = 0.1").replace("Bath", "Slow bath")
UNSTABLE = MET.replace("kp = 2", "kp = 12").replace("Bath", "Wild bath")
BAD = MET.replace("kp = 2", "kp = 2\nkq = 3").replace("duration = 40", "duration = -40")


def put(folder: Path, **sheets: str) -> list[str]:
    """Write sheets into a folder and return their paths."""
    paths = [folder / f"{name}.toml" for name in sheets]
    for path, text in zip(paths, sheets.values(), strict=True):
        path.write_text(text, encoding="utf-8")
    return [str(path) for path in paths]
