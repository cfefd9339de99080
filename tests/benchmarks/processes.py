"""Whole processes: from the command to the first paint of the window, and to the verdict on a sheet."""

import os
import subprocess
import sys
import tempfile
import time
from collections.abc import Sequence
from pathlib import Path
from typing import NamedTuple

from tests.benchmarks.row import MILLI, Row, summed_up
from tuner.places import sample_plants

ROOT = Path(__file__).resolve().parents[2]
REPEATS = 7
LIBRARIES = "import numpy, numba, PySide6.QtWidgets, pyqtgraph"
JUDGES_WITH = "import numpy, numba"


class Start(NamedTuple):
    """When a window was first painted, and when it first showed an answer, ms after the start of its process."""

    painted: float
    answered: float


def rows() -> list[Row]:
    """Start the window and the command some times, the kernels compiled before."""
    return [_start_row(), _judge_row()]


def _start_row() -> Row:
    _start()
    starts = [_start() for _ in range(REPEATS)]
    painted, answered = (summed_up(list(times)) for times in zip(*starts, strict=True))
    with tempfile.TemporaryDirectory() as folder:
        first = _start({"NUMBA_CACHE_DIR": folder})
    imports = summed_up([_ended(["-c", LIBRARIES]) for _ in range(REPEATS)])
    return Row(
        "start_ms",
        "from the start of the process to the first paint of the window, warm",
        "ms",
        "<= 1000",
        painted.median,
        painted.p99,
        imports.median,
        painted.median / imports.median,
        "a process that only imports the libraries",
        f"Warm, the first curves come after {answered.median:.0f} ms; with nothing compiled before, the window is "
        f"painted after {first.painted:.0f} ms (aimed at: 2500) and the curves come after {first.answered:.0f} ms.",
    )


def _judge_row() -> Row:
    judge = ["tuner", "judge", str(sample_plants() / "heater.toml"), "--json"]
    _ended(judge)
    found = summed_up([_ended(judge) for _ in range(REPEATS)])
    imports = summed_up([_ended(["-c", JUDGES_WITH]) for _ in range(REPEATS)])
    return Row(
        "judge_ms",
        "`judge` on one sheet, the whole process, warm",
        "ms",
        "<= 1000",
        found.median,
        found.p99,
        imports.median,
        found.median / imports.median,
        "a process that only imports numpy and numba",
    )


def _start(changes: dict[str, str] | None = None) -> Start:
    """Open the window in a process of its own, with settings of its own, and read what it says."""
    with tempfile.TemporaryDirectory() as folder:
        environment = {**os.environ, "QT_QPA_PLATFORM": "offscreen", "XDG_CONFIG_HOME": folder, **(changes or {})}
        began = time.perf_counter()
        with subprocess.Popen(
            [sys.executable, "-m", "tests.benchmarks.first_paint"],
            cwd=ROOT,
            env=environment,
            stdout=subprocess.PIPE,
            text=True,
        ) as process:
            said = {line.strip(): MILLI * (time.perf_counter() - began) for line in process.stdout or ()}
    return Start(said["painted"], said["answered"])


def _ended(arguments: Sequence[str]) -> float:
    """Return how long a process of this interpreter takes, ms."""
    began = time.perf_counter()
    subprocess.run([sys.executable, *arguments], cwd=ROOT, check=True, stdout=subprocess.DEVNULL)
    return MILLI * (time.perf_counter() - began)
