"""Unsaved work, kept in the user's cache so that a crash or a power cut costs nothing."""

import json
import os
import sys
from dataclasses import dataclass, replace
from pathlib import Path
from uuid import uuid4

from tuner import places
from tuner.errors import TrimwrightError
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.session.storage import write_whole
from tuner.session.tunings import KeptTuning


@dataclass(frozen=True, slots=True)
class Unsaved:
    """Work found from an earlier run that ended without saving.

    Parameters
    ----------
    store : Path
        Where it was found.
    sheet : Sheet
        The sheet as it was.
    kept : tuple of KeptTuning
        The tunings kept beside it.
    path : Path or None
        The file that it belongs to.
    original_text : str
        The text of that file as last read or written.
    """

    store: Path
    sheet: Sheet
    kept: tuple[KeptTuning, ...]
    path: Path | None
    original_text: str

    def restore_into(self, document: Document) -> None:
        """Show the work in a document; it stays unsaved until it is saved."""
        document.recover(self.sheet, self.kept, self.path, self.original_text)


class Autosave:
    """Keeps the unsaved work of one document; call `keep` every few seconds and `discard` at a proper end.

    A lock that the operating system drops with this process tells work in use from work left behind.
    """

    def __init__(self, document: Document) -> None:
        self._document = document
        self._store = _folder() / f"{uuid4().hex}.json"
        self._lock = -1
        self._stored: tuple[Sheet, tuple[KeptTuning, ...]] | None = None

    def keep(self) -> bool:
        """Store what is unsaved, or drop the store when nothing is; tell whether there is a store now."""
        document = self._document
        if not document.dirty:
            self.discard()
            return False
        state = (document.sheet, document.kept)
        if state == self._stored:
            return True
        if self._lock < 0:
            self._lock = _claim(self._store)
        done = self._lock >= 0 and write_whole(self._store, _packed(document))
        self._stored = state if done else None
        return done

    def discard(self) -> None:
        """Drop the store: everything is saved, or was given up on purpose."""
        self._stored = None
        if self._lock >= 0:
            os.close(self._lock)
            self._lock = -1
            drop(self._store)


def left_behind() -> tuple[Unsaved, ...]:
    """Return the unsaved work of runs that ended without saving, newest first; what cannot be read is passed over."""
    try:
        stores = sorted(_folder().glob("*.json"), key=lambda store: store.stat().st_mtime, reverse=True)
    except OSError:
        return ()
    found = [_unpacked(store) for store in stores if not _in_use(store)]
    return tuple(unsaved for unsaved in found if unsaved is not None)


def drop(store: Path) -> None:
    """Drop a store, after its work was restored and stored anew, or was not wanted."""
    for file in (store, store.with_suffix(".lock")):
        file.unlink(missing_ok=True)


def _folder() -> Path:
    return places.cache() / "unsaved"


def _packed(document: Document) -> str:
    from tuner.files.sheet import render

    kept = [
        {"name": one.name, "label": one.label, "text": render(replace(document.sheet, controller=one.controller))}
        for one in document.kept
    ]
    path = str(document.path) if document.path else None
    work = {"path": path, "original": document.original_text, "text": render(document.sheet), "kept": kept}
    return json.dumps(work, ensure_ascii=False)


def _unpacked(store: Path) -> Unsaved | None:
    from tuner.files.sheet import parse

    try:
        work = json.loads(store.read_text(encoding="utf-8"))
        kept = tuple(KeptTuning(one["name"], one["label"], parse(one["text"]).controller) for one in work["kept"])
        path = Path(work["path"]) if work["path"] else None
        return Unsaved(store, parse(work["text"]), kept, path, str(work["original"]))
    except (OSError, ValueError, KeyError, TypeError, TrimwrightError):
        return None


def _claim(store: Path) -> int:
    """Return the descriptor of a lock held beside a store, -1 when there can be none."""
    try:
        store.parent.mkdir(parents=True, exist_ok=True)
        descriptor = os.open(store.with_suffix(".lock"), os.O_RDWR | os.O_CREAT, 0o600)
    except OSError:
        return -1
    if _try_lock(descriptor):
        return descriptor
    os.close(descriptor)
    return -1


def _in_use(store: Path) -> bool:
    """Tell whether a running process, this one or another, holds the lock of a store."""
    if not store.with_suffix(".lock").exists():
        return False
    descriptor = _claim(store)
    if descriptor < 0:
        return True
    os.close(descriptor)
    return False


if sys.platform == "win32":
    import msvcrt

    def _try_lock(descriptor: int) -> bool:
        try:
            msvcrt.locking(descriptor, msvcrt.LK_NBLCK, 1)
        except OSError:
            return False
        return True

else:
    import fcntl

    def _try_lock(descriptor: int) -> bool:
        try:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except OSError:
            return False
        return True
