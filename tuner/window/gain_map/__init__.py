"""The gain map: the footing over any two gains, with both of them under one hand."""

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.gain_map.page import GainMapPage
from tuner.window.gain_map.question import PaintMap, drawing_by, reading_by
from tuner.window.rulers.painting import ReasonAt
from tuner.window.theme import Theme


def build_gain_map(
    document: Document, theme: Theme, paint_map: PaintMap, reason_at: ReasonAt, *, synchronous: bool = False
) -> GainMapPage:
    """Return the page of the gain map of a document.

    Parameters
    ----------
    paint_map, reason_at : callable
        The roads from a sheet to the classes over two gains, and to the reason at one place.
    synchronous : bool
        Answer at once, without threads, for tests.
    """
    painter = Beside(drawing_by(paint_map), synchronous=synchronous)
    reader = Beside(reading_by(reason_at), synchronous=synchronous)
    return GainMapPage(document, theme, painter, reader)
