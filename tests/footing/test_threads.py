"""All threads share a range without gap or overlap."""

import os
import sys
import threading

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


@pytest.mark.skipif(sys.platform != "linux", reason="elsewhere a thread cannot stand behind the others alone")
def test_threads_of_kernels_give_way() -> None:
    """They stand behind the thread that gave them work, which stays where it was."""
    before = os.getpriority(os.PRIO_PROCESS, threading.get_native_id())
    found: list[int] = []
    spread_out(lambda _begin, _end: found.append(os.getpriority(os.PRIO_PROCESS, threading.get_native_id())), 2)
    assert min(found) >= max(before, 10)
    assert os.getpriority(os.PRIO_PROCESS, threading.get_native_id()) == before
