"""The threads that kernels run in, a stretch of the work each; kernels let go of the interpreter's lock."""

from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from functools import cache
from itertools import pairwise
from os import cpu_count


@cache
def pool() -> ThreadPoolExecutor:
    """Return the threads that kernels run in."""
    return ThreadPoolExecutor(cpu_count() or 1, thread_name_prefix="footing")


def spread_out(work: Callable[[int, int], object], count: int) -> None:
    """Let all threads share a range, a stretch each."""
    threads = min(cpu_count() or 1, count)
    places = [round(count * k / threads) for k in range(threads + 1)] if threads else []
    for done in [pool().submit(work, begin, end) for begin, end in pairwise(places)]:
        done.result()
