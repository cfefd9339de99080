"""Keeps unsaved work every few seconds, and offers what an earlier run left behind."""

from PySide6.QtCore import QObject, QTimer

from tuner.session.autosave import Autosave, Unsaved, drop, left_behind
from tuner.session.document import Document
from tuner.window.asking import Asking

EVERY = 5_000
"""Milliseconds between two looks at what is unsaved."""


class Keeping(QObject):
    """Guards one document; `end` says that the run came to a proper end."""

    def __init__(self, document: Document, asking: Asking) -> None:
        super().__init__()
        self._document, self._asking = document, asking
        self._autosave = Autosave(document)
        self._timer = QTimer(self, interval=EVERY)
        self._timer.timeout.connect(self.keep)
        self._timer.start()

    def keep(self) -> None:
        """Keep what is unsaved now."""
        self._autosave.keep()

    def end(self) -> None:
        """Let go of what was kept: it is saved, or was given up on purpose."""
        self._timer.stop()
        self._autosave.discard()

    def offer_left_behind(self) -> None:
        """Ask what becomes of the newest work that an earlier run left behind; older work waits for its turn."""
        found = left_behind()
        if not found:
            return
        answer = self._asking.about_left_behind(_name(found[0]))
        if answer == "restore":
            found[0].restore_into(self._document)
            self.keep()
        if answer != "later":
            drop(found[0].store)


def _name(unsaved: Unsaved) -> str:
    file = f" ({unsaved.path.name})" if unsaved.path else ""
    return f"{unsaved.sheet.loop.title}{file}"
