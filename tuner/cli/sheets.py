"""The tuning sheets that a command line names: files, folders of them, or standard input."""

import os
import sys
from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path

from tuner.errors import Fault, SheetError
from tuner.model.sheet import Sheet

STANDARD_INPUT = "-"


@dataclass(frozen=True, slots=True)
class Source:
    """Where a sheet comes from, by the name that faults carry."""

    name: str

    def read(self) -> Sheet:
        """Return the sheet.

        Raises
        ------
        SheetError
            With every fault found in it.
        """
        from tuner.files import sheet

        if self.name == STANDARD_INPUT:
            # As bytes: a sheet is UTF-8 whatever the terminal's encoding.
            return sheet.parse(sheet.read_stream(sys.stdin.buffer, "standard input"), "standard input")
        return sheet.read(Path(self.name))


@dataclass(frozen=True, slots=True)
class Missing:
    """A folder that holds no sheet."""

    name: str

    def read(self) -> Sheet:
        """Refuse."""
        raise SheetError([Fault("", "a folder with tuning sheets (*.toml)", "none in it")], self.name)


def sources(words: Iterable[str]) -> list[Source | Missing]:
    """Return the sheets that words name, in order; a folder stands for the sheets in it, by name."""
    found: list[Source | Missing] = []
    for word in words:
        # Unlike Path's, this takes what cannot even be a name for no folder; reading it then says why.
        if word != STANDARD_INPUT and os.path.isdir(word):  # noqa: PTH112 - see above
            inside = sorted(path for path in Path(word).glob("*.toml") if path.is_file())
            found += [Source(str(path)) for path in inside] or [Missing(word)]
        else:
            found.append(Source(word))
    return found
