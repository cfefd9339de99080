"""All threads share a range without gap or overlap."""

import pytest

from tuner.footing.threads import spread_out


@pytest.mark.parametrize("count", [0, 1, 2, 7, 100])
def test_every_piece_is_done_once(count: int) -> None:
    """Whatever the number of threads."""
    done: list[int] = []
    spread_out(lambda begin, end: done.extend(range(begin, end)), count)
    assert sorted(done) == list(range(count))


def test_what_goes_wrong_in_a_thread_comes_out() -> None:
    """Nothing is swallowed."""

    def fail(_begin: int, _end: int) -> None:
        raise ArithmeticError("gone")

    with pytest.raises(ArithmeticError, match="gone"):
        spread_out(fail, 3)
