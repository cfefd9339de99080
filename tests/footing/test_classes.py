"""A painted track answers for any value by its edges."""

import numpy as np

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Edge, Track, painted, tuned
from tuner.model.controller import Controller

TRACK = Track("kp", np.array([1.0, 2.0, 4.0, 8.0]))
CLASSES = np.array([SOFT, FIRM, FIRM, LOST], dtype=np.int8)


def test_edges_come_in_order() -> None:
    """However they were found."""
    found = painted(TRACK, CLASSES, [Edge(6.0, FIRM, LOST), Edge(1.5, SOFT, FIRM)])
    assert [edge.value for edge in found.edges] == [1.5, 6.0]
    assert found.class_at(np.array([0.1, 1.6, 5.9, 6.1, 99.0])).tolist() == [SOFT, FIRM, FIRM, LOST, LOST]


def test_a_track_without_edges_is_one_class() -> None:
    """That of its notches; of none, nothing is known."""
    found = painted(TRACK, np.full(4, SOFT, dtype=np.int8), [])
    assert found.class_at(np.array([0.0, 3.0])).tolist() == [SOFT, SOFT]
    empty = painted(Track("kp", np.zeros(0)), np.zeros(0, dtype=np.int8), [])
    assert empty.class_at(np.array([1.0])).tolist() == [UNKNOWN]


def test_nought_leaves_a_number_out() -> None:
    """A wind-up time of 0 is none; a gain of 0 is 0."""
    assert tuned(Controller(windup_time=2.0), "windup_time", 0.0).windup_time is None
    assert tuned(Controller(gain_1=2.0), "kp", 0.0).gain_1 == 0.0
