"""The rulers: sliders of the gains, each painted along its whole length with the footing it would give there."""

from dataclasses import dataclass

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rulers.painted import PaintedRulers
from tuner.window.rulers.painting import Painter, PaintRulers, ReasonAt, reading_by
from tuner.window.rulers.panel import RulerPanel
from tuner.window.rulers.reader import RulerReader
from tuner.window.theme import Theme


@dataclass(frozen=True, slots=True)
class Footing:
    """What keeps the rulers of a window painted and read; it lives as long as the window does."""

    painted: PaintedRulers
    reader: RulerReader

    def close(self) -> None:
        """End both workers and wait for them."""
        self.painted.close()
        self.reader.close()


def build_rulers(document: Document, theme: Theme) -> RulerPanel:
    """Return the panel of the rulers of a document."""
    return RulerPanel(document, theme)


def keep_painted(
    document: Document, panel: RulerPanel, paint: PaintRulers, reason_at: ReasonAt, *, synchronous: bool = False
) -> Footing:
    """Paint and read the rulers of a document from now on; asleep until `painted.wake`.

    Parameters
    ----------
    paint, reason_at : callable
        The roads from a sheet to its painted tracks, and to the reason at one place.
    synchronous : bool
        Answer at once, without threads, for tests.
    """
    painter = Beside(Painter(paint).answer, synchronous=synchronous)
    read = Beside(reading_by(reason_at), synchronous=synchronous)
    return Footing(PaintedRulers(document, panel, painter), RulerReader(document, panel, read))
