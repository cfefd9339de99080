"""The folder of an environment, and the state file in it that tells whether it is complete.

The state file is written first as ``being made`` and last as ``ready``, so an environment whose making was
interrupted is never taken for a whole one. Its lines: the state, the checkout, the real path of the Python that it
was made with, a checksum of ``pyproject.toml``, what the machine lacks, then one requirement a line.
"""

import os
import sys
import zlib
from collections.abc import Iterator
from pathlib import Path

HANDED_OVER = "TRIMWRIGHT_ENVIRONMENT"
"""The variable that tells a program in which environment it has been started, so that it need not look again."""

READY, BEING_MADE = "ready", "being made"
WINDOW_LACKS, NOTHING_LACKS = "lacks the libraries of the window", "lacks nothing"
_HEAD = 5


class Folder:
    """One environment: where it lies and what state it is in."""

    def __init__(self, path: Path) -> None:
        self.path = path

    @property
    def python(self) -> Path:
        """The interpreter of the environment."""
        return self.path / ("Scripts/python.exe" if os.name == "nt" else "bin/python")

    @property
    def _state_file(self) -> Path:
        return self.path / "trimwright-state.txt"

    @property
    def state(self) -> str:
        """The text of the state file; empty when there is none."""
        try:
            return self._state_file.read_text(encoding="utf-8")
        except OSError:
            return ""

    @state.setter
    def state(self, text: str) -> None:
        new = self._state_file.with_name("trimwright-state.new")
        new.write_text(text, encoding="utf-8")
        new.replace(self._state_file)

    @property
    def can_be_added_to(self) -> bool:
        """Whether there is a Python of its own to install into, whose making was not interrupted."""
        # Without the configuration file its Python is that of the system, and pip would install there.
        has_python = self.python.exists() and (self.path / "pyvenv.cfg").is_file()
        return has_python and not self.state.startswith(BEING_MADE)

    @property
    def lacks_window(self) -> bool:
        """Whether the libraries of the window were missing when the environment was made."""
        return WINDOW_LACKS in self.state.splitlines()[:_HEAD]

    def mark_ready(self, root: Path, requirements: list[str], lacks_window: bool) -> None:
        """Write down that the environment is complete: the last thing done to it."""
        lacks = WINDOW_LACKS if lacks_window else NOTHING_LACKS
        head = [READY, str(root), os.path.realpath(self.python), checksum(root), lacks]
        self.state = "\n".join([*head, *requirements, ""])

    def is_ready(self, root: Path, testing: bool) -> bool:
        """Tell whether the environment is complete, belongs to this checkout, and its Python is still there."""
        lines = self.state.splitlines()
        if len(lines) <= _HEAD or not self.python.exists():
            return False
        if lines[:3] != [READY, str(root), os.path.realpath(self.python)]:
            return False
        if lines[3] == checksum(root) and not testing:
            return True
        from tuner.bootstrap.requirements import requirements

        return set(requirements(root, testing)) <= set(lines[_HEAD:])


def candidates(root: Path) -> Iterator[Folder]:
    """Yield where the environment of this checkout may lie: in it, or for a read-only one in the user's cache."""
    yield Folder(root / ".venv")
    name = f"{root.name}-{zlib.crc32(str(root).encode()):08x}"
    yield Folder(user_cache() / "environments" / name)


def choose(root: Path) -> Folder:
    """Return the folder to make the environment in."""
    beside, cached = candidates(root)
    writable = os.access(beside.path if beside.path.is_dir() else root, os.W_OK)
    return beside if writable and os.access(root, os.W_OK) else cached


def user_cache() -> Path:
    """Return the user's cache folder of the program, as ``tuner.places.cache`` does without its library."""
    if sys.platform == "win32":
        return Path(os.environ.get("LOCALAPPDATA") or Path.home() / "AppData/Local", "trimwright", "Cache")
    if sys.platform == "darwin":
        return Path.home() / "Library/Caches/trimwright"
    return Path(os.environ.get("XDG_CACHE_HOME") or Path.home() / ".cache", "trimwright")


def is_inside(folder: "str | Path") -> bool:
    """Tell whether this process runs in the environment of that folder."""
    return os.path.realpath(folder) == os.path.realpath(sys.prefix)


def checksum(root: Path) -> str:
    """Return a checksum of the project file, compared before its requirements are read at all."""
    return f"{zlib.crc32((root / 'pyproject.toml').read_bytes()):08x}"
