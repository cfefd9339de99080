"""Keeps the rulers painted: asks for their footing at every change, and shows what comes back."""

from PySide6.QtCore import QObject, QTimer

from tuner.footing.classes import Track
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rulers.painting import Painting, PaintRequest
from tuner.window.rulers.panel import RulerPanel
from tuner.window.shown import Failure, Shown
from tuner.window.worker import Assessor

WAITING = "The rulers are grey until their footing is computed; the first time on a machine that takes a while."

LATE = 250
"""Milliseconds after which paint that a change made untrue is shown paler, if nothing newer has come."""


class PaintedRulers(QObject):
    """Asks a worker for the footing of all rulers, newest sheet first, and never shows an older one than before.

    Parameters
    ----------
    document : Document
        Whose sheet is painted.
    panel : RulerPanel
        The rulers.
    worker : Beside
        Answers a `PaintRequest` with a `Painting`.
    """

    def __init__(self, document: Document, panel: RulerPanel, worker: Beside[PaintRequest]) -> None:
        super().__init__(panel)
        self._document, self._panel, self._worker = document, panel, worker
        self._awake = self._is_pale = False
        self._asked = self._shown = self._first = 0
        self._generation = document.generation
        self._wanted: tuple[Sheet, tuple[Track, ...]] | None = None
        self.painting: Painting | None = None
        self._late = QTimer(self, singleShot=True, interval=LATE)
        self._late.timeout.connect(self._fade)
        worker.answered.connect(self._answered)
        worker.failed.connect(self._failed)
        self._held = self._is_coarse = False
        panel.dragging_started.connect(self._hold)
        panel.dragging_finished.connect(self._let_go)
        self._stop_listening = document.listen(self.ask)

    @property
    def asked(self) -> int:
        """How often the footing was asked for."""
        return self._asked

    def wake(self) -> None:
        """Begin to ask."""
        if not self._awake:
            self._awake = True
            self.ask()

    def wake_after(self, curves: Assessor) -> None:
        """Begin to ask once the first verdict is drawn, or there is none."""
        curves.answered.connect(self._curves_came)
        curves.failed.connect(self._no_curves_came)

    def _curves_came(self, shown: Shown) -> None:
        if shown.whole and not self._awake:
            QTimer.singleShot(0, self, self.wake)

    def _no_curves_came(self, _failure: Failure) -> None:
        QTimer.singleShot(0, self, self.wake)

    def ask(self) -> None:
        """Ask for the footing of the sheet as it is now, unless it was asked for already."""
        if self._generation != self._document.generation:
            self._leave_loop()
        tracks = self._panel.tracks()
        if not self._awake or self._is_wanted(tracks):
            return
        self._wanted = (self._document.sheet, tracks)
        self._asked += 1
        if not self._late.isActive():
            self._late.start()
        self._is_coarse = self._held
        self._worker.submit(PaintRequest(self._asked, self._document.sheet, tracks, fine=not self._held))

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._stop_listening()
        self._late.stop()
        self._worker.close()

    def _hold(self) -> None:
        """Ask for less while a hand is on a ruler, so that what it sees keeps up with it."""
        self._held = True

    def _let_go(self) -> None:
        """Ask for all that was left out."""
        self._held = False
        if self._is_coarse:
            self._wanted = None
            self.ask()

    def _is_wanted(self, tracks: tuple[Track, ...]) -> bool:
        if self._wanted is None:
            return False
        sheet, before = self._wanted
        return sheet == self._document.sheet and _are_same(before, tracks)

    def _leave_loop(self) -> None:
        """Forget the loop that was open before, and what is on the way for it."""
        self._generation, self._first = self._document.generation, self._asked + 1
        self._wanted = self.painting = None
        self._is_pale = False
        self._panel.unpaint()

    def _answered(self, painting: Painting) -> None:
        if painting.number < max(self._first, self._shown):
            return
        self._shown, self.painting = painting.number, painting
        if painting.number == self._asked:
            self._late.stop()
            self._is_pale = False
        elif not self._is_pale:
            self._late.start()
        self._show()

    def _failed(self, failure: Failure) -> None:
        if failure.number < self._asked:
            return
        self._late.stop()
        self.painting = None
        self._panel.unpaint(failure.sentence)

    def _fade(self) -> None:
        """Show paler what is not true of the present sheet any more, or say why there is nothing to show yet."""
        self._is_pale = True
        self._show()

    def _show(self) -> None:
        """Show what there is; once late it stays pale until something is up to date, so that nothing flickers."""
        if self.painting is None:
            self._panel.explain_grey(WAITING)
        else:
            self._panel.paint(self.painting, self._document.sheet if self._is_pale else None)


def _are_same(one: tuple[Track, ...], other: tuple[Track, ...]) -> bool:
    """Tell whether tracks are along the same values; these are made once for each range, so identity is enough."""
    values = [(track.name, id(track.values)) for track in one]
    return values == [(track.name, id(track.values)) for track in other]
