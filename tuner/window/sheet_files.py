"""Opening and saving: what is typed is never lost, and a file that cannot be used changes nothing."""

import tomllib
from collections.abc import Callable
from pathlib import Path

from tuner.errors import SheetError, TrimwrightError
from tuner.places import sample_plants
from tuner.session.document import Document
from tuner.session.recent import recent_files
from tuner.session.sheet_file import FileChangedError
from tuner.window.asking import Asking


class SheetFiles:
    """Takes a document through its files."""

    def __init__(self, document: Document, asking: Asking) -> None:
        self._document, self._asking = document, asking

    def open(self) -> None:
        """Ask for a sheet and open it."""
        if not self.may_leave():
            return
        start = self._document.path.parent if self._document.path else Path.cwd()
        if (path := self._asking.sheet_to_open(start)) is not None:
            self._open(path)

    def open_path(self, path: Path) -> None:
        """Open a sheet that is named already: a recent one, or one that was dropped."""
        if self.may_leave():
            self._open(path)

    def open_sample(self, path: Path) -> None:
        """Open a sample as a sheet without a file of its own, so that the sample stays as it is."""
        if self.may_leave():
            self._attempt(path, lambda: start_from(self._document, path))

    def save(self) -> bool:
        """Save to the sheet's file, or ask for one; tell whether it was saved."""
        if self._document.path is None:
            return self.save_as()
        try:
            self._document.save()
        except FileChangedError as refusal:
            return self._save_over(refusal)
        except TrimwrightError as refusal:
            return self._refused("Not saved", refusal)
        return True

    def save_as(self) -> bool:
        """Ask for a file and save to it; tell whether it was saved."""
        suggested = self._document.path or Path.cwd() / suggested_name(self._document.sheet.loop.title, ".toml")
        path = self._asking.sheet_to_save(suggested)
        if path is None:
            return False
        return self._save_to(path)

    def may_leave(self) -> bool:
        """Tell whether the open sheet may be left: it is saved, or its changes may go."""
        if not self._document.dirty:
            return True
        name = self._document.path.name if self._document.path else self._document.sheet.loop.title
        answer = self._asking.about_unsaved(name)
        return self.save() if answer == "save" else answer == "discard"

    def _open(self, path: Path) -> None:
        self._attempt(path, lambda: self._document.open(path))

    def _attempt(self, path: Path, opening: Callable[[], None]) -> None:
        try:
            opening()
        except (TrimwrightError, OSError, UnicodeDecodeError) as refusal:
            sentences = refusal.sentences() if isinstance(refusal, SheetError) else [str(refusal)]
            kept = "The sheet that was open stays open."
            count = "one fault" if len(sentences) == 1 else f"{len(sentences)} faults"
            self._asking.tell(f"{path.name} cannot be used", f"{path.name} has {count}. {kept}", sentences)

    def _save_over(self, refusal: FileChangedError) -> bool:
        path = self._document.path
        if path is not None and self._asking.agree("Changed meanwhile", f"{refusal}.", "Save over it"):
            return self._save_to(path)
        return False

    def _save_to(self, path: Path) -> bool:
        try:
            self._document.save_as(path)
        except (TrimwrightError, OSError) as refusal:
            return self._refused("Not saved", refusal)
        return True

    def _refused(self, title: str, refusal: Exception) -> bool:
        self._asking.tell(title, "The sheet was not saved and stays open.", [str(refusal)])
        return False


def start_from(document: Document, path: Path) -> None:
    """Show the sheet of a sample as a new one.

    Raises
    ------
    SheetError
        With every fault of the file.
    """
    from tuner.files import sheet as files

    document.start(files.read(path), path.read_text(encoding="utf-8"))


def samples() -> list[tuple[str, Path]]:
    """Return the title and the file of every sample that comes with the program, by title."""
    return sorted((_title(path), path) for path in sample_plants().glob("*.toml"))


def recent() -> list[Path]:
    """Return the files opened last, newest first."""
    return list(recent_files())


def suggested_name(title: str, ending: str) -> str:
    """Return a name of a file made from words: lower case, words joined by underscores."""
    words = "".join(letter if letter.isalnum() else " " for letter in title.lower()).split()
    return ("_".join(words) or "sheet") + ending


def _title(path: Path) -> str:
    try:
        return str(tomllib.loads(path.read_text(encoding="utf-8"))["loop"]["title"])
    except (OSError, ValueError, KeyError, TypeError):
        return path.stem
