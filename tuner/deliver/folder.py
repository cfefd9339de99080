"""All or nothing: files are made beside their folder and moved into it only when every one of them is good."""

import shutil
import tempfile
from collections.abc import Iterator, Sequence
from contextlib import contextmanager, suppress
from pathlib import Path

from tuner.errors import DeliveryError


def refuse_folder(folder: Path, files: Sequence[str], others: Sequence[str], *, overwrite: bool) -> None:
    """Refuse a folder that files cannot go to.

    Parameters
    ----------
    files : sequence of str
        Names of the files to be written.
    others : sequence of str
        Names of the files that a delivery may hold but this one does not: they would stay from an older one.

    Raises
    ------
    DeliveryError
        When it is a file, or files would be overwritten that may not be.
    """
    if "\0" in str(folder):
        raise DeliveryError(f"{str(folder)!r}: expected the name of a folder, found a null character in it")
    try:
        _refuse_files(folder, files, others, overwrite=overwrite)
    except OSError as error:
        raise DeliveryError(f"{folder}: cannot be looked into: {error.strerror}") from error


def _refuse_files(folder: Path, files: Sequence[str], others: Sequence[str], *, overwrite: bool) -> None:
    if folder.exists() and not folder.is_dir():
        raise DeliveryError(f"{folder}: expected a folder, found a file")
    there = [name for name in files if (folder / name).exists()]
    if there and not overwrite:
        raise DeliveryError(f"{folder}: already holds {_listed(there)}; say so if they may be overwritten")
    stale = [name for name in others if (folder / name).exists()]
    if stale:
        raise DeliveryError(f"{folder}: also holds {_listed(stale)} of an older delivery; deliver or remove those too")


@contextmanager
def filling(folder: Path) -> Iterator[Path]:
    """Give an empty folder to write into, and move what is in it to `folder` at the end; on a failure, nothing.

    Raises
    ------
    DeliveryError
        When the disk refuses.
    """
    missing = [parent for parent in (folder, *folder.parents) if not parent.exists()]
    try:
        folder.parent.mkdir(parents=True, exist_ok=True)
        beside = Path(tempfile.mkdtemp(prefix=".delivery-", dir=folder.parent))
        try:
            (beside / "new").mkdir()
            yield beside / "new"
            _move(beside / "new", folder, beside / "old")
        finally:
            shutil.rmtree(beside, ignore_errors=True)
    except BaseException as error:
        _remove_empty(missing)
        if isinstance(error, OSError):
            raise DeliveryError(f"{folder}: cannot be written to: {error.strerror or error}") from error
        raise


def _move(new: Path, folder: Path, old: Path) -> None:
    """Move every file into the folder; when one fails, take the others out again and put the old ones back."""
    old.mkdir()
    folder.mkdir(exist_ok=True)
    moved: list[Path] = []
    kept: list[Path] = []
    try:
        for file in sorted(new.iterdir()):
            target = folder / file.name
            if target.exists():
                kept.append(target.replace(old / file.name))
            moved.append(file.replace(target))
    except BaseException:
        for target in moved:
            target.unlink()
        for file in kept:
            file.replace(folder / file.name)
        raise


def _remove_empty(folders: Sequence[Path]) -> None:
    """Remove folders that were made for nothing, innermost first."""
    for folder in folders:
        with suppress(OSError):  # it was not made after all, or holds what someone else put there
            folder.rmdir()


def _listed(names: Sequence[str]) -> str:
    return " and ".join([", ".join(names[:-1])] * bool(names[:-1]) + [names[-1]])
