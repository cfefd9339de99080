"""Reads the rulers: asks why the footing is what it is at the place looked at, once mouse or keys rest there."""

from PySide6.QtCore import QObject, QTimer

from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rulers.painting import Reading, ReasonRequest
from tuner.window.rulers.panel import Place, RulerPanel

REST = 60
"""Milliseconds that mouse or keys rest at a place before its reason is computed."""


class RulerReader(QObject):
    """Asks a worker for the reason at the place that the panel reads.

    Parameters
    ----------
    document : Document
        Whose sheet is read.
    panel : RulerPanel
        Says which place is looked at, and shows the answer.
    worker : Beside
        Answers a `ReasonRequest` with a `Reading`.
    """

    def __init__(self, document: Document, panel: RulerPanel, worker: Beside[ReasonRequest]) -> None:
        super().__init__(panel)
        self._document, self._panel, self._worker = document, panel, worker
        self._asked = 0
        self._looked_at: tuple[Place | None, Sheet] | None = None
        self._rest = QTimer(self, singleShot=True, interval=REST)
        self._rest.timeout.connect(self._ask)
        worker.answered.connect(self._answered)
        panel.place_changed.connect(self._look)
        self._stop_listening = document.listen(self._look)

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._stop_listening()
        self._rest.stop()
        self._worker.close()

    def _look(self) -> None:
        """Take up another place, or the same one of another sheet; what is on the way for the one before is dropped."""
        looked_at = (self._panel.place, self._document.sheet)
        if looked_at == self._looked_at:
            return
        self._looked_at = looked_at
        self._asked += 1
        self._panel.show_reading(None)
        self._rest.stop()
        if looked_at[0] is not None:
            self._rest.start()

    def _ask(self) -> None:
        place = self._panel.place
        if place is not None:
            self._worker.submit(ReasonRequest(self._asked, self._document.sheet, place.name, place.value))

    def _answered(self, reading: Reading) -> None:
        if reading.number == self._asked:
            self._panel.show_reading(reading)
