"""What the chart holds: the newest samples, as they are or as their extremes, in a room that never grows."""

import numpy as np
import pytest

from tuner.rehearse.strip import Strip
from tuner.window.rehearsal import ring
from tuner.window.rehearsal.ring import Ring


def strip(first: int, count: int) -> Strip:
    """Return samples one second apart whose output is a sawtooth, the effort its negative."""
    t = np.arange(first, first + count, dtype=float)
    y = t % 7.0
    no = np.zeros(count, dtype=bool)
    return Strip(t, t, y, y + 1.0, -y, np.zeros(count), no, no, no)


@pytest.mark.parametrize("cuts", [(1,), (3, 5), (40,), (100, 1, 2)])
def test_it_holds_the_newest_samples(cuts: tuple[int, ...]) -> None:
    """However the samples are cut, the last span is there, in order."""
    held, first = Ring(20.0, 1.0), 0
    for turn in range(60):
        count = cuts[turn % len(cuts)]
        held.add(strip(first, count))
        first += count
    signals = held.signals()
    newest = np.arange(max(first - 21, 0), first, dtype=float)
    assert np.array_equal(signals.t, newest)
    assert np.array_equal(signals.y, newest % 7.0)
    assert np.array_equal(signals.u, -(newest % 7.0))


def test_its_room_never_grows() -> None:
    """As many bytes after a million samples as before."""
    held = Ring(1000.0, 1.0)
    size = held.size
    for turn in range(100):
        held.add(strip(10_000 * turn, 10_000))
    assert held.size == size


def test_too_many_samples_become_their_extremes(monkeypatch: pytest.MonkeyPatch) -> None:
    """Every few samples leave their lowest and highest, in their order in time; no peak is lost."""
    monkeypatch.setattr(ring, "MOST", 100)
    held = Ring(1000.0, 1.0)
    assert held.each == 21
    for first in range(0, 2000, 40):
        held.add(strip(first, 40))
    signals = held.signals()
    assert len(signals.t) <= 102
    assert np.all(np.diff(signals.t) > 0.0)
    assert signals.t[0] <= 1000.0
    pairs = signals.y.reshape(-1, 2)
    assert np.array_equal(pairs.min(axis=1), np.zeros(len(pairs)))
    assert np.array_equal(pairs.max(axis=1), np.full(len(pairs), 6.0))
    # 21 samples are three whole teeth, each of which rises from its lowest point.
    assert np.all(pairs[:, 0] < pairs[:, 1])
