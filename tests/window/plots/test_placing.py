"""Words find a place where they cover no others, or none."""

from tuner.window.plots.placing import Box, place_words

FRAME = Box(0.0, 0.0, 100.0, 100.0)


def test_words_keep_their_place_where_it_is_free() -> None:
    """What does not overlap is not moved."""
    boxes = [Box(0.0, 0.0, 20.0, 10.0), Box(0.0, 50.0, 20.0, 60.0)]
    assert place_words(boxes, FRAME) == boxes


def test_words_move_off_those_before_them() -> None:
    """The second of two in one place moves up or down by a line."""
    first, second = place_words([Box(0.0, 50.0, 20.0, 60.0)] * 2, FRAME)
    assert first == Box(0.0, 50.0, 20.0, 60.0)
    assert second is not None
    assert not second.meets(first)


def test_words_are_brought_inside_the_frame() -> None:
    """What stands out is moved in."""
    (placed,) = place_words([Box(95.0, -4.0, 115.0, 6.0)], FRAME)
    assert placed == Box(80.0, 0.0, 100.0, 10.0)


def test_words_for_what_is_not_seen_get_no_place() -> None:
    """The name of something far outside is not shown at the edge."""
    assert place_words([Box(0.0, 500.0, 20.0, 510.0)], FRAME) == [None]


def test_words_without_room_get_no_place() -> None:
    """After five lines around one place there is no more."""
    placed = place_words([Box(0.0, 50.0, 20.0, 60.0)] * 7, FRAME)
    assert placed[5:] == [None, None]


def test_a_box_holds_the_points_inside() -> None:
    """Its edges are part of it."""
    box = Box(0.0, 10.0, 20.0, 30.0)
    assert box.holds(0.0, 30.0)
    assert not box.holds(21.0, 20.0)
    assert not box.holds(10.0, 5.0)
