"""Undo and redo over frozen states."""

from itertools import pairwise

from hypothesis import given
from hypothesis import strategies as st

from tuner.session.history import DEPTH, History

CHANGES = st.lists(st.tuples(st.integers(0, 5), st.sampled_from([None, "a", "b"])), max_size=40)


def _after(changes: list[tuple[int, str | None]]) -> History[int]:
    history: History[int] = History(0)
    for state, key in changes:
        history = history.changed(state, f"to {state}", key)
    return history


@given(CHANGES)
def test_undoing_everything_returns_the_first_state(changes: list[tuple[int, str | None]]) -> None:
    """Any sequence of changes, undone as often as there are steps, ends where it began, with nothing left to undo."""
    history = _after(changes).released()
    for _ in history.past:
        history = history.undone()
    assert history.present == 0
    assert history.past == ()


@given(CHANGES, st.integers(0, 40))
def test_redo_takes_undo_back(changes: list[tuple[int, str | None]], steps: int) -> None:
    """Going back any number of steps and forward as many is where one was."""
    history = _after(changes).released()
    there = history
    count = min(steps, len(history.past))
    for _ in range(count):
        there = there.undone()
    for _ in range(count):
        there = there.redone()
    assert there == history


@given(CHANGES)
def test_every_step_changed_something(changes: list[tuple[int, str | None]]) -> None:
    """No undo step is without effect, once the hand is off."""
    history = _after(changes).released()
    states = [*(step.state for step in history.past), history.present]
    assert all(before != after for before, after in pairwise(states))


def test_changes_under_one_key_are_one_step() -> None:
    """A drag is one step until it is released; the next drag of the same ruler is another."""
    history = History(0).changed(1, "drag", "kp").changed(2, "drag", "kp").released()
    history = history.changed(3, "drag", "kp")
    assert [step.state for step in history.past] == [0, 2]


def test_a_drag_back_to_its_start_leaves_no_step() -> None:
    """A drag that ends where it began is not worth an undo."""
    history = History(0).changed(1, "drag", "kp").changed(0, "drag", "kp").released()
    assert history == History(0)


def test_a_change_forgets_the_future() -> None:
    """After undo and another change there is nothing to redo."""
    history = History(0).changed(1, "one").undone().changed(2, "two")
    assert history.future == ()
    assert history.redone() == history


def test_the_past_is_bounded() -> None:
    """The oldest steps go once there are as many as are kept."""
    history = _after([(state, None) for state in range(1, DEPTH + 11)])
    assert len(history.past) == DEPTH
    assert history.past[0].state == 10
