"""A progress bar on stderr for work that lasts longer than a second, where a person watches."""

import sys
import time
from collections.abc import Iterator, Sequence
from typing import TypeVar

PATIENCE = 1.0
"""Seconds of work without a bar."""

Item = TypeVar("Item")


def watched(items: Sequence[Item], what: str) -> Iterator[Item]:
    """Yield the items; show how far it is once the work lasts, unless stderr is no terminal."""
    if len(items) < 2 or not sys.stderr.isatty():
        yield from items
        return
    start = time.monotonic()
    for done, item in enumerate(items):
        if time.monotonic() - start > PATIENCE:
            yield from _with_bar(items, done, what)
            return
        yield item


def _with_bar(items: Sequence[Item], done: int, what: str) -> Iterator[Item]:
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task(what, total=len(items), completed=done)
        for item in items[done:]:
            yield item
            bar.advance(task)
