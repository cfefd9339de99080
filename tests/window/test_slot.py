"""A slot hands over the newest thing only, and lets everybody go when it closes."""

import threading
import time

from tuner.window.slot import Slot


def test_the_newest_replaces_what_waits() -> None:
    """Of three things left, the taker gets the last."""
    slot: Slot[int] = Slot()
    for number in (1, 2, 3):
        slot.put(number)
    assert slot.take() == 3


def test_newer_tells_without_taking() -> None:
    """Whether something waits can be asked as often as one likes."""
    slot: Slot[int] = Slot()
    assert not slot.newer(0.0)
    slot.put(1)
    assert slot.newer(0.0)
    assert slot.take() == 1


def test_closing_lets_a_waiting_taker_go() -> None:
    """A thread that waits for a thing gets None and ends."""
    slot: Slot[int] = Slot()
    taken: list[int | None] = []
    taker = threading.Thread(target=lambda: taken.append(slot.take()))
    taker.start()
    slot.close()
    taker.join(5.0)
    assert taken == [None]


def test_nothing_is_taken_after_closing() -> None:
    """What waits when the slot closes is dropped, and so is what comes later."""
    slot: Slot[int] = Slot()
    slot.put(1)
    slot.close()
    slot.put(2)
    assert slot.take() is None
    assert slot.newer(0.0)


def test_a_nudge_ends_a_wait_for_newer_things() -> None:
    """Who waits until nudged goes on at once, also when the nudge came first; others wait for their time."""
    slot: Slot[int] = Slot()
    slot.put(1)
    slot.take()
    slot.nudge()
    assert not slot.newer(60.0, until_nudged=True)
    assert not slot.newer(0.01)


def test_a_nudge_is_about_the_last_thing_taken() -> None:
    """The next one taken is waited for again."""
    slot: Slot[int] = Slot()
    slot.nudge()
    slot.put(1)
    slot.take()
    began = time.perf_counter()
    assert not slot.newer(0.05, until_nudged=True)
    assert time.perf_counter() - began >= 0.04
