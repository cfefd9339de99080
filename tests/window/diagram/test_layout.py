"""Where the loop diagram puts everything: nothing overlaps, whatever the size and whatever is there."""

from itertools import combinations

import pytest

from tuner.window.diagram.layout import COMPACT, FULL, Box, laid_out

ALL = (
    "feedforward", "reference_filter", "law", "disturbance_feedforward", "limits", "actuator", "path", "plant",
    "sensor", "measurement_filter", "lead_lag", "notch",
)  # fmt: skip
BARE = ("law", "limits", "plant")
SIZES = [(960, COMPACT), (1280, COMPACT), (1280, FULL), (1600, FULL), (2560, FULL)]


def overlap(one: Box, other: Box) -> bool:
    """Tell whether two boxes share ground."""
    beside = abs(one.x - other.x) >= 0.5 * (one.width + other.width)
    above = abs(one.y - other.y) >= 0.5 * (one.height + other.height)
    return not (beside or above)


@pytest.mark.parametrize("size", SIZES)
@pytest.mark.parametrize("there", [ALL, BARE])
def test_nothing_overlaps_and_all_is_within(size: tuple[int, int], there: tuple[str, ...]) -> None:
    """Blocks, places for blocks, and switches."""
    found = laid_out(float(size[0]), float(size[1]), there, measured="path" in there)
    boxes = {key: box for key, box in found.boxes.items() if key != "path" or "path" in there}
    assert [pair for pair in combinations(boxes, 2) if overlap(boxes[pair[0]], boxes[pair[1]])] == []
    for box in boxes.values():
        assert box.x - box.width / 2 >= 0.0
        assert box.x + box.width / 2 <= size[0]
        assert box.y - box.height / 2 >= 0.0
        assert box.y + box.height / 2 <= size[1]


@pytest.mark.parametrize("there", [ALL, BARE])
def test_the_signal_goes_from_left_to_right(there: tuple[str, ...]) -> None:
    """The blocks on the way forward stand in the order of the signal, those on the way back the other way round."""
    boxes = laid_out(1600.0, float(FULL), there, measured=False).boxes
    forward = [boxes[key].x for key in ("reference_filter", "law", "limits", "actuator", "plant")]
    back = [boxes[key].x for key in ("sensor", "measurement_filter", "lead_lag", "notch", "law")]
    assert forward == sorted(forward)
    assert back == sorted(back, reverse=True)


def test_where_the_disturbance_comes_in() -> None:
    """At the plant's input, or behind the plant where it has a path of its own."""
    plain = laid_out(1600.0, float(FULL), BARE, measured=False)
    own = laid_out(1600.0, float(FULL), ALL, measured=True)
    assert set(plain.sums) == {"sum", "disturbance"}
    assert plain.sums["disturbance"][0] < plain.boxes["plant"].x
    assert set(own.sums) == {"sum", "behind"}
    assert own.sums["behind"][0] > own.boxes["plant"].x


def test_a_path_along_which_nothing_goes_is_absent() -> None:
    """Without feedforward both its wires are thin."""
    bare, full = (laid_out(1600.0, float(FULL), there, measured=False) for there in (BARE, ALL))
    assert [wire.path for wire in bare.wires].count("absent") == 2
    assert "absent" not in [wire.path for wire in full.wires]
