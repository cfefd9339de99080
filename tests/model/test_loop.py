"""The loop and its signals as data."""

from tuner.model.loop import Loop, Manipulated, Signal


def test_a_bare_loop_counts_in_seconds_without_ranges() -> None:
    """What is not said is absent: no range, no rate, rest at zero."""
    loop = Loop("A")
    assert (loop.time_unit, loop.controlled, loop.manipulated) == ("s", Signal(), Manipulated())
    assert (loop.manipulated.low, loop.manipulated.high, loop.manipulated.rate) == (None, None, None)
    assert loop.controlled.resting == 0.0


def test_loops_compare_by_what_they_say() -> None:
    """Equal text, equal loop; the manipulated signal is not a controlled one of the same numbers."""
    assert Loop("A", controlled=Signal("y")) == Loop("A", controlled=Signal("y"))
    assert Manipulated("y") != Signal("y")
