"""What shows on stderr, where a person watches, that work goes on which lasts longer than a second."""

import sys
import time
from collections.abc import Iterator, Sequence
from contextlib import AbstractContextManager, nullcontext
from typing import TypeVar

PATIENCE = 1.0
"""Seconds of work without a bar."""

Item = TypeVar("Item")


def watched(items: Sequence[Item], what: str, *, silent: bool = False) -> Iterator[Item]:
    """Yield the items; show how far it is once the work lasts, unless results appear on the terminal as they come.

    Work that is `silent` prints nothing meanwhile.
    """
    if len(items) < 2 or not sys.stderr.isatty() or (sys.stdout.isatty() and not silent):
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

    # Results go to stdout as always; only what is said on stderr meanwhile is put above the bar.
    with Progress(console=Console(stderr=True), transient=True, redirect_stdout=False) as bar:
        task = bar.add_task(what, total=len(items), completed=done)
        for item in items[done:]:
            yield item
            bar.advance(task)


def working(what: str) -> AbstractContextManager[object]:
    """Show that one long piece of work goes on, unless stderr is no terminal."""
    if not sys.stderr.isatty():
        return nullcontext()
    from rich.console import Console

    return Console(stderr=True).status(what)
