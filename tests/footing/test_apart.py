"""A process of its own paints what this one would, refuses in the same words, and ends when it is told to."""

import subprocess
import sys
import time
from collections.abc import Iterator
from dataclasses import replace
from itertools import chain, repeat
from pathlib import Path

import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.files.sheet import read
from tuner.footing import apart
from tuner.footing.apart import Apart
from tuner.footing.classes import Overtaken, PaintedTrack, Track, never
from tuner.footing.gain_map import paint_map
from tuner.footing.rulers import paint_rulers
from tuner.model.plant import ExpressionPlant
from tuner.places import sample_plants

HEATER = replace(read(sample_plants() / "heater.toml"), limits=(("overshoot", 8.0),))
TRACKS = (Track("kp", 2.0 * np.geomspace(0.1, 10.0, 9)), Track("ki", 0.06 * np.geomspace(0.1, 10.0, 9)))

ALGEBRAIC = replace(HEATER, plant=ExpressionPlant("exp(s) / (s + 1)"))


@pytest.fixture(name="other", scope="module")
def _other() -> Iterator[Apart]:
    found = Apart()
    yield found
    found.close()


def process_of(other: Apart) -> "subprocess.Popen[bytes]":
    """Return the process behind it."""
    assert other._running is not None
    return other._running.process


def said(tracks: tuple[PaintedTrack, ...]) -> list[object]:
    """Return what tracks say, as plain values."""
    return [(one.name, one.values.tolist(), one.classes.tolist(), one.edges) for one in tracks]


def test_rulers_are_those_of_this_process(other: Apart) -> None:
    """Fine and coarse; and they come from another process."""
    for fine in (False, True):
        found = other.paint_rulers(HEATER, TRACKS, stop=never, fine=fine)
        assert said(found) == said(paint_rulers(HEATER, TRACKS, fine=fine))
    assert process_of(other).poll() is None


def test_a_map_is_that_of_this_process(other: Apart) -> None:
    """Classes and what is watched."""
    found, here = other.paint_map(HEATER, *TRACKS, "overshoot", stop=never), paint_map(HEATER, *TRACKS, "overshoot")
    assert np.array_equal(found.classes, here.classes)
    assert np.array_equal(found.worst, here.worst, equal_nan=True)


def test_a_refusal_is_the_same_sentence(other: Apart) -> None:
    """As a loop that cannot be computed."""
    with pytest.raises(LoopError) as here:
        paint_rulers(ALGEBRAIC, TRACKS)
    with pytest.raises(LoopError) as there:
        other.paint_rulers(ALGEBRAIC, TRACKS, stop=never)
    assert str(there.value) == str(here.value)


def test_a_fault_of_the_program_is_told_here(other: Apart) -> None:
    """What nobody foresaw is raised where it was asked, and the process goes on."""
    process = process_of(other)
    with pytest.raises(RuntimeError, match="AttributeError"):
        other.paint_rulers(None, TRACKS, stop=never)  # type: ignore[arg-type]
    other.paint_rulers(HEATER, TRACKS, stop=never)
    assert process_of(other) is process


def test_an_answer_that_is_not_wanted_is_not_waited_for(other: Apart) -> None:
    """The next question gets its own answer, not that of the one before."""
    many = tuple(Track("kp", 2.0 * np.geomspace(0.1, 10.0, 1500)) for _ in range(6))
    wanted, long = chain((False,), repeat(True)), replace(HEATER, trial=replace(HEATER.trial, duration=2400.0))
    with pytest.raises(Overtaken):
        other.paint_rulers(long, many, stop=lambda: next(wanted))
    assert said(other.paint_rulers(HEATER, TRACKS, stop=never)) == said(paint_rulers(HEATER, TRACKS))


def test_a_process_that_died_is_started_anew(other: Apart) -> None:
    """The question that it did not answer is asked again."""
    before = process_of(other)
    before.kill()
    before.wait()
    assert said(other.paint_rulers(HEATER, TRACKS, stop=never)) == said(paint_rulers(HEATER, TRACKS))
    assert process_of(other) is not before


def test_without_a_process_this_one_paints(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where the system lets none be started, and where each dies at once."""
    for program in ("/nowhere/python", sys.executable):
        monkeypatch.setattr(sys, "executable", program)
        monkeypatch.setattr(apart, "__name__", "tuner.footing.nowhere")
        alone = Apart()
        assert said(alone.paint_rulers(HEATER, TRACKS, stop=never)) == said(paint_rulers(HEATER, TRACKS))
        alone.close()


def test_closing_ends_it_at_once() -> None:
    """Whatever it does; what is asked from then on is not wanted any more."""
    closing = Apart()
    closing.start()
    process = process_of(closing)
    closing.close()
    assert process.poll() is not None
    with pytest.raises(Overtaken):
        closing.paint_rulers(HEATER, TRACKS, stop=never)


def test_it_ends_with_the_program_that_asks() -> None:
    """Also when that dies without a word."""
    text = (
        "from tuner.footing.apart import Apart\n"
        "one = Apart(); one.start()\n"
        "print(one._running.process.pid, flush=True)\n"
        "import os; os._exit(1)"
    )
    done = subprocess.run([sys.executable, "-c", text], capture_output=True, text=True, check=False)
    pid = int(done.stdout)
    end = time.monotonic() + 20.0
    while is_running(pid) and time.monotonic() < end:
        time.sleep(0.05)
    assert not is_running(pid)


def is_running(pid: int) -> bool:
    """Return whether a process lives; one that nobody has taken leave of yet does not."""
    try:
        return Path(f"/proc/{pid}/stat").read_text(encoding="ascii").rpartition(")")[2].split()[0] != "Z"
    except FileNotFoundError:
        return False
