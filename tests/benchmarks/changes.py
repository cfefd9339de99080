"""What many changes of a loop cost in memory: assessed, painted on the rulers and drawn as far as there is time."""

import gc
import sys
from pathlib import Path

from PySide6.QtCore import QCoreApplication

from tests.benchmarks.row import Row
from tests.benchmarks.windows import Stage, stage_of_a_drag, wait

CHANGES = 100_000
WARM = CHANGES // 5
"""Changes that fill caches, pools and the undo history, before growth counts."""

DRAG = 100
"""Changes that make one step of undo."""

BURST = 4
"""Changes that come before the window has time to draw."""

_GAINS = {"kp": (1.0, 40.0), "ki": (0.01, 0.4), "kd": (1.0, 60.0), "filter_time": (0.2, 8.0), "b": (0.0, 1.4)}


def rows() -> list[Row]:
    """Change one gain after the other, through calm, ringing and running away, and compare the memory in between."""
    with stage_of_a_drag() as stage:
        _change(stage, 0, WARM)
        before = _resident()
        _change(stage, WARM, CHANGES)
        after = _resident()
        answers = stage.painted.asked
    growth = after - before
    return [
        Row(
            "changes_growth_mb",
            f"growth of memory from {WARM:,} to {CHANGES:,} changes of the loop in the window",
            "MB",
            "<= 10",
            growth,
            None,
            before,
            growth / before,
            "memory after the first of them",
            f"The rulers were asked for {answers:,} times, the newest each time they were free.",
        )
    ]


def _change(stage: Stage, begin: int, end: int) -> None:
    """Change the gains in turn, a drag at a time, and let the window work off what comes."""
    document = stage.window.document
    for number in range(begin, end):
        drag, step = divmod(number, DRAG)
        name, (low, high) = list(_GAINS.items())[drag % len(_GAINS)]
        document.change_value(name, low + (high - low) * step / DRAG, merge_key=f"drag {drag}")
        if number % BURST == 0:
            QCoreApplication.processEvents()
        if number % (WARM // 10) == 0:
            sys.stderr.write(f"{number:7,} changes: {_resident():.1f} MB\n")
    document.revert()
    wait(stage)


def _resident() -> float:
    """Return the memory that the process holds, MB."""
    gc.collect()
    for line in Path("/proc/self/status").read_text(encoding="ascii").splitlines():
        if line.startswith("VmRSS:"):
            return float(line.split()[1]) / 1024.0
    return float("nan")
