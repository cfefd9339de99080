"""Demonstrations into the page, and records out of it."""

from collections.abc import Iterator
from pathlib import Path

from PySide6.QtCore import QObject, QTimer

from tuner.errors import SheetError, TrimwrightError
from tuner.places import demonstrations as shipped
from tuner.window.asking import Asking
from tuner.window.rehearsal.page import RehearsalPage
from tuner.window.sheet_files import suggested_name


class RehearsalFiles(QObject):
    """Asks for files on behalf of a page; a record is written a piece at a time, so that nothing stands still."""

    def __init__(self, page: RehearsalPage, asking: Asking) -> None:
        super().__init__(page)
        self._page, self._asking = page, asking
        self._pieces: Iterator[int] = iter(())
        self._path = Path()
        self._last = shipped()
        self._timer = QTimer(self, interval=0)
        self._timer.timeout.connect(self._write_piece)
        page.guard = self.may_let_go
        page.bar.play_wanted.connect(self.play)
        page.bar.save_wanted.connect(self.save)

    def play(self) -> None:
        """Ask for a demonstration and play it; tell every fault of one that cannot be used."""
        from tuner.files import demonstrations

        path = self._asking.demonstration_to_open(self._last)
        if path is None:
            return
        self._last = path.parent
        try:
            staged = demonstrations.read(path)
        except SheetError as error:
            self._asking.tell("No demonstration", f"{path.name} cannot be played.", [str(one) for one in error.faults])
            return
        self._page.play(staged)

    def save(self) -> None:
        """Ask for a file and begin to write the record."""
        from tuner.rehearse.saving import save

        runner = self._page.runner
        if runner.recorder is None or (loop := runner.recorded) is None:
            return
        path = self._asking.record_to_save(Path.cwd() / suggested_name(f"{loop.title} record", ".csv"))
        if path is None:
            return
        runner.record(False)
        self._path = path
        self._pieces = save(runner.recorder, path, loop)
        self._page.set_saving(f"Saving the record to {path.name}…")
        self._timer.start()

    def may_let_go(self) -> bool:
        """Tell whether the record may be let go: it is saved, or that is agreed to."""
        samples = self._page.runner.unsaved
        sentence = f"The record of the rehearsal has {samples:,} samples that are not saved."
        return not samples or self._asking.agree("Unsaved record", sentence, "Let it go")

    def _write_piece(self) -> None:
        try:
            written = next(self._pieces, None)
        except TrimwrightError as refusal:
            self._end("The record was not saved.")
            self._asking.tell("No record", "The record was not saved.", [str(refusal)])
            return
        if written is None:
            self._page.runner.note_saved()
            self._end(f"The record is in {self._path.name}.")
        else:
            self._page.set_saving(f"Saving the record to {self._path.name}: {written:,} samples written.")

    def _end(self, words: str) -> None:
        self._timer.stop()
        self._page.end_saving(words)
