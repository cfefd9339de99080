"""A loop made ready."""

from tests.window import made_up
from tuner.window.rehearsal.preparing import Wanted, prepare


def test_the_loop_is_at_rest() -> None:
    """What was tried beforehand leaves no trace."""
    wanted = Wanted(3, made_up.sheet())
    ready = prepare(wanted, lambda: False)
    assert ready.wanted is wanted
    assert ready.rehearsal.time == 0.0
    assert ready.rehearsal.sheet == made_up.sheet()
