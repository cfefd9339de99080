"""All rulers of a window at once: many tunings, each around a whole family of plants, through the loop kernel.

The yardsticks are the same kernel in C, built by the compiler of this machine, and one linear loop in python-control.
"""

import ctypes
import os
import shutil
import subprocess
import tempfile
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import control
import numpy as np
from numpy.typing import NDArray

from tests.benchmarks.row import Row, Times, timed
from tests.published.sampled_by_control import closed_loop
from tuner.files.sheet import read
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.footing.tunings import Tunings
from tuner.model.family import family
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Sheet
from tuner.places import sample_plants
from tuner.simulate.batch import law_constants
from tuner.simulate.wiring import Wired, wire

Array = NDArray[np.float64]

RULERS = ("kp", "ki", "kd", "filter_time", "b")
NOTCHES, PLANTS, SAMPLES = 64, 25, 1001
THREADS = 2

COMPILE = ("-O3", "-march=native", "-ffast-math", "-fopenmp", "-shared", "-fPIC")
WIDE = ("-mprefer-vector-width=512",)
"""What a compiler has to be told on processors of this kind; others refuse it."""

_FAR = 1e9
"""A limit that no loop misses, so that every loop runs to its end with every plant."""


@dataclass(frozen=True, slots=True, eq=False)
class Work:
    """What a frame of rulers computes: every tuning with every plant."""

    sheet: Sheet
    grading: Grading
    constants: Array
    wired: Wired

    @property
    def loops(self) -> int:
        """Number of loops."""
        return len(self.constants) * PLANTS


def rows() -> list[Row]:
    """Measure the kernel, its twin in C, and python-control."""
    work = _work()
    frame = timed(lambda: _frame(work), 25)
    twin, said = _twin_times(work)
    one = timed(_linear_loop(work.sheet), 15)
    each, c_frame = frame.median / work.loops, twin.median if twin else None
    ratio = frame.median / c_frame if c_frame else None
    what = f"{work.loops} saturating loops of {SAMPLES} samples, {work.wired.held.growth.shape[1]} states, 2 threads"
    in_c = "the same in C, vectorised"
    return [
        Row("rulers_frame_ms", what, "ms", "<= 16.7", frame.median, frame.p99, c_frame, ratio, in_c, said),
        Row(
            "loop_vs_python_control",
            "one of those loops",
            "ms a loop; the ratio is how many times faster",
            ">= 2000",
            each,
            frame.p99 / work.loops,
            one.median,
            one.median / each,
            "control.step_response of the linear loop, as many samples",
        ),
        Row(
            "kernel_vs_c",
            "the same kernel, time for a sample of a loop",
            "ns",
            "ratio <= 1.25",
            1e6 * each / SAMPLES,
            1e6 * frame.p99 / work.loops / SAMPLES,
            1e6 * c_frame / work.loops / SAMPLES if c_frame else None,
            ratio,
            in_c,
            said,
        ),
    ]


def _work() -> Work:
    """Return five rulers around the tuning of a sample, each from a tenth to ten times its value."""
    sheet = read(sample_plants() / "heater.toml")
    step = sheet.controller.sample_time
    trial = replace(sheet.trial, duration=(SAMPLES - 1) * step)
    sheet = replace(sheet, trial=trial, limits=(("overshoot", _FAR), ("iae_reference", _FAR)))
    changes = [
        ((name, (sheet.controller.value(name) or 0.0) * factor),)
        for name in RULERS
        for factor in np.geomspace(0.1, 10.0, NOTCHES).tolist()
    ]
    tunings = Tunings(sheet.controller, changes)
    constants = [law_constants(replace(sheet, controller=one), step, 0.0) for one in tunings]
    wired = wire(sheet, family(sheet.plant, PLANTS), step)
    return Work(sheet, Grading(sheet, ground_of(sheet, PLANTS), tunings), np.array(constants), wired)


def _frame(work: Work) -> None:
    """Run every loop with every plant and read its overshoot and its error off."""
    none = np.zeros(len(work.constants), dtype=bool)
    work.grading.classes(none, none, settle=False)


def _linear_loop(sheet: Sheet) -> Callable[[], object]:
    """Return what python-control does for one linear loop: its step response at as many samples."""
    values = {parameter.name: parameter.value for parameter in sheet.plant.parameters}
    poles = (-1.0 / values["lag"], -1.0 / values["tail"])
    plant = ZeroPolePlant((), tuple(map(complex, poles)), values["gain"] * poles[0] * poles[1], values["delay"])
    closed = closed_loop(replace(sheet, plant=plant))
    response = control.ss(closed.A, closed.B[:, :1], closed.C[:1], closed.D[:1, :1], closed.dt)
    times = np.arange(SAMPLES) * sheet.controller.sample_time
    return lambda: control.step_response(response, times)


def _twin_times(work: Work) -> tuple[Times | None, str]:
    """Return how long the twin in C takes, or why there is none."""
    compiler = next((found for name in ("cc", "gcc", "clang") if (found := shutil.which(name))), None)
    if compiler is None:
        return None, "No yardstick: there is no C compiler on this machine."
    with tempfile.TemporaryDirectory() as folder:
        library = Path(folder) / "loops.so"
        peak, area = np.empty(work.loops), np.empty(work.loops)
        call = _built(compiler, COMPILE, library, work, (peak, area))
        if call is None:
            return None, f"No yardstick: {compiler} could not build the twin in C."
        times, off = timed(call, 25), _disagreement(work, area)
        wide = _built(compiler, (*COMPILE, *WIDE), library.with_name("wide.so"), work, (peak, area))
        wider = f" Told to use registers of 512 bits, it takes {timed(wide, 25).median:.1f} ms." if wide else ""
    return times, f"Their errors of the same loops differ by {off:.1e} of the step; the twin takes plain sums.{wider}"


def _built(
    compiler: str, options: Sequence[str], library: Path, work: Work, outputs: tuple[Array, Array]
) -> Callable[[], object] | None:
    """Return the call of a twin built with some options, None where it cannot be."""
    source, order = Path(__file__).with_name("loops.c"), work.wired.held.growth.shape[1]
    command = [compiler, *options, f"-DORDER={order}", str(source), "-o", str(library)]
    if os.name != "posix" or subprocess.run(command, capture_output=True, check=False).returncode:
        return None
    return _twin(ctypes.CDLL(str(library)), work, *outputs)


def _twin(library: ctypes.CDLL, work: Work, peak: Array, area: Array) -> Callable[[], object]:
    """Return the call of the twin, which writes the highest output and the summed error of every loop."""
    wired, trial = work.wired, work.sheet.trial
    arrays = (work.constants, *wired.held, wired.c, wired.direct, wired.delay)
    numbers = [ctypes.c_int64(number) for number in (PLANTS, len(work.constants), SAMPLES)]
    steps = (ctypes.c_double(trial.reference), ctypes.c_double(0.0), ctypes.c_int64(THREADS))
    inputs = [_address(np.ascontiguousarray(one)) for one in arrays]
    outputs = [_address(peak), _address(area)]
    return lambda: library.run(*numbers, *inputs, *steps, *outputs)


def _address(array: NDArray[np.number]) -> ctypes.c_void_p:
    """Return where an array lies; it lives as long as this does."""
    return array.ctypes.data_as(ctypes.c_void_p)


def _disagreement(work: Work, area: Array) -> float:
    """Return the largest difference between the errors of the kernel and of its twin, as a share of the step."""
    found = work.grading.watch("iae_reference", np.ones(len(work.constants), dtype=bool))
    worst = area.reshape(PLANTS, -1).max(axis=0) * work.sheet.controller.sample_time
    trial = work.sheet.trial
    return float(np.nanmax(np.abs(found - worst)) / abs(trial.reference) / trial.duration)
