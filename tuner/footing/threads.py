"""The threads that kernels run in, a stretch of the work each; kernels let go of the interpreter's lock."""

import os
import sys
import threading
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from functools import cache
from itertools import pairwise
from os import cpu_count

NICE = 10
"""How much a thread or a process that gives way is put behind others; Unix counts from 0 to 19."""


def give_way() -> None:
    """Let this thread run when others have nothing to do, where the system lets threads differ: curves come first."""
    if sys.platform == "linux":  # elsewhere it would be the whole process
        os.setpriority(os.PRIO_PROCESS, threading.get_native_id(), NICE)


@cache
def pool() -> ThreadPoolExecutor:
    """Return the threads that kernels run in."""
    return ThreadPoolExecutor(cpu_count() or 1, thread_name_prefix="footing", initializer=give_way)


def spread_out(work: Callable[[int, int], object], count: int) -> None:
    """Let all threads share a range, a stretch each."""
    threads = min(cpu_count() or 1, count)
    places = [round(count * k / threads) for k in range(threads + 1)] if threads else []
    for done in [pool().submit(work, begin, end) for begin, end in pairwise(places)]:
        done.result()
