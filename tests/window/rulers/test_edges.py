"""Where the footing changes along a ruler, in places and in words."""

import numpy as np
import pytest

from tuner.footing.classes import FIRM, LOST, SOFT, Edge, PaintedTrack
from tuner.session.ruler_range import RulerRange, notches
from tuner.window.rulers.edges import around, class_of, edge_number, in_words, stop_beyond

GAIN = RulerRange(0.1, 100.0, has_off=True)
TIME = RulerRange(0.1, 100.0, has_off=True, off=None)
WEIGHT = RulerRange(0.0, 1.5, logarithmic=False)


def track(span: RulerRange, first: int, *edges: tuple[float, int]) -> PaintedTrack:
    """Return a track along a range that begins with one class and takes another at each edge."""
    values = notches(span)
    classes = np.full(len(values), first, dtype=np.int8)
    found, below = [], first
    for value, above in edges:
        classes[values >= value] = above
        found.append(Edge(value, below, above))
        below = above
    return PaintedTrack("kp", values, classes, tuple(found))


CLIFF = track(GAIN, SOFT, (1.1, FIRM), (4.2, SOFT), (7.9, LOST))


@pytest.mark.parametrize(
    ("value", "words"),
    [
        (3.0, "firm; soft from 4.2, lost from 7.9; soft below 1.1"),
        (0.5, "soft; firm from 1.1, soft from 4.2"),
        (50.0, "lost; soft below 7.9, firm below 4.2"),
        (0.0, "soft; firm from 1.1, soft from 4.2"),
    ],
)
def test_the_distance_to_the_cliff_in_words(value: float, words: str) -> None:
    """The class at the value, then the next two edges above it, then the next two below."""
    assert in_words(CLIFF, GAIN, value) == words


def test_the_off_notch_in_words() -> None:
    """An edge under the scale is the change from off to on; an absent value stands in the notch."""
    integral = track(TIME, LOST, (0.05, FIRM))
    assert in_words(integral, TIME, 5.0) == "firm; lost when off"
    assert in_words(integral, TIME, None) == "lost; firm from 0.05"


def test_a_ruler_of_one_class_in_words() -> None:
    """Where there is no edge, the whole ruler is of one class."""
    assert in_words(track(GAIN, FIRM), GAIN, 3.0) == "firm along the whole ruler"


def test_the_class_and_the_edges_around_a_value() -> None:
    """The class is that of the stretch it lies in, with the edges at both ends of it."""
    assert [class_of(CLIFF, value) for value in (None, 1.2, 5.0, 8.0)] == [SOFT, FIRM, SOFT, LOST]
    below, above = around(CLIFF, 5.0)
    assert (below, above) == (CLIFF.edges[1], CLIFF.edges[2])
    assert around(CLIFF, 50.0)[1] is None
    assert around(CLIFF, None)[0] is None


def test_stops_lie_on_both_sides_of_every_edge() -> None:
    """Up and down the whole ruler, each step lands within 1 % of an edge, on the near side first, and ends."""
    places = steps(0.2, 1, 8)
    assert places == [1.089, 1.111, 4.158, 4.242, 7.821, 7.979, 7.979, 7.979]
    classes = [class_of(CLIFF, place) for place in places[:6]]
    assert classes == [SOFT, FIRM, FIRM, SOFT, SOFT, LOST]
    assert steps(7.979, -1, 6) == [7.821, 4.242, 4.158, 1.111, 1.089, 1.089]


def steps(value: float, direction: int, count: int) -> list[float | None]:
    """Return where so many steps from edge to edge lead, one after the other."""
    places: list[float | None] = [value]
    for _ in range(count):
        places += [stop_beyond(CLIFF, GAIN, places[-1], direction)]
    return places[1:]


def test_close_edges_share_the_place_between_them() -> None:
    """A firm stretch narrower than the reach of a step is not jumped over."""
    narrow = track(GAIN, SOFT, (4.0, FIRM), (4.04, SOFT))
    stops = [stop_beyond(narrow, GAIN, at, 1) for at in (1.0, 3.96, 4.02)]
    assert stops == [3.96, pytest.approx(4.02), pytest.approx(4.08, abs=0.001)]


def test_stops_on_a_linear_ruler_and_in_the_off_notch() -> None:
    """On a linear ruler the reach is a share of its length; below the scale lies off, an absent value for a time."""
    weight = track(WEIGHT, FIRM, (0.5, SOFT))
    assert [stop_beyond(weight, WEIGHT, at, 1) for at in (0.0, 0.485)] == [0.485, 0.515]
    integral = track(TIME, LOST, (0.05, FIRM))
    assert stop_beyond(integral, TIME, 5.0, -1) == 0.1
    assert stop_beyond(integral, TIME, 0.1, -1) is None
    assert stop_beyond(integral, TIME, None, 1) == 0.1
    assert stop_beyond(track(GAIN, LOST, (0.05, FIRM)), GAIN, 0.1, -1) == 0.0


def test_edges_are_told_in_three_digits() -> None:
    """An edge is known to half a percent, and no more is written."""
    assert [edge_number(Edge(value, FIRM, LOST)) for value in (4.2371, 0.00123456, 1234.5)] == [
        "4.24",
        "0.00123",
        "1230",
    ]
