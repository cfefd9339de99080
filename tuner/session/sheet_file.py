"""Where a sheet comes from and goes to."""

from dataclasses import dataclass, replace
from pathlib import Path

from tuner.errors import SheetError, TrimwrightError
from tuner.model.sheet import Sheet
from tuner.session.recent import remember


class FileChangedError(TrimwrightError):
    """A save that would overwrite what somebody else wrote into the file meanwhile."""


@dataclass(frozen=True, slots=True)
class SheetFile:
    """The file of a sheet, and what is in it.

    Parameters
    ----------
    opened : Sheet
        As it was read first.
    saved : Sheet or None
        As it was written last; None for work found unsaved.
    path : Path or None
        Its file; None before it has one.
    text : str
        The text of the file as last read or written, whose comments a save keeps.
    """

    opened: Sheet
    saved: Sheet | None
    path: Path | None
    text: str

    def written(self, sheet: Sheet, path: Path) -> "SheetFile":
        """Write a sheet to a file, comments kept, and return what is in it then.

        Raises
        ------
        SheetError
            When the file cannot be written.
        """
        from tuner.files.sheet import read_text, write

        write(path, sheet, self.text)
        remember(path)
        return replace(self, path=path, text=read_text(path), saved=sheet)

    def own_path(self) -> Path:
        """Return the path to save to.

        Raises
        ------
        TrimwrightError
            When there is no file yet.
        FileChangedError
            When the file is not as it was read or written last.
        """
        from tuner.files.sheet import is_unchanged

        if self.path is None:
            raise TrimwrightError("this sheet has no file yet: choose one to save it as")
        if self.path.exists() and not is_unchanged(self.path, self.text):
            raise FileChangedError(
                f"{self.path} was changed by somebody else since it was read: save under another name, or open it again"
            )
        return self.path


def read_file(path: Path) -> SheetFile:
    """Read a sheet's file, which then heads the list of recent ones.

    Raises
    ------
    SheetError
        With every fault of the file.
    """
    from tuner.files.sheet import parse, read_text

    text = read_text(path)
    sheet = parse(text, str(path))
    remember(path)
    return SheetFile(sheet, sheet, path, text)


def unsaved_file(sheet: Sheet, path: Path | None, text: str) -> SheetFile:
    """Return the file of work found unsaved; opened is what its text says, or the work where there is none."""
    from tuner.files.sheet import parse

    try:
        opened = parse(text)
    except SheetError:
        opened = sheet
    return SheetFile(opened, None, path, text)
