"""The files opened last, over all runs of the program."""

import json
from collections.abc import Sequence
from pathlib import Path

from tuner import places
from tuner.session.storage import write_whole

LENGTH = 10
"""Files remembered."""


def recent_files() -> tuple[Path, ...]:
    """Return the files opened last that still exist, newest first; none when the list cannot be read."""
    try:
        listed = json.loads(_list().read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return ()
    paths = [Path(item) for item in listed if isinstance(item, str)] if isinstance(listed, list) else []
    return tuple(path for path in paths if path.is_file())[:LENGTH]


def remember(path: Path) -> tuple[Path, ...]:
    """Put a file at the head of the list and return it; a list that cannot be written is let be."""
    whole = path.resolve()
    paths = (whole, *(other for other in recent_files() if other != whole))[:LENGTH]
    _store(paths)
    return paths


def forget_all() -> None:
    """Empty the list."""
    _store(())


def _store(paths: Sequence[Path]) -> None:
    write_whole(_list(), json.dumps([str(path) for path in paths], indent=1, ensure_ascii=False))


def _list() -> Path:
    return places.settings() / "recent.json"
