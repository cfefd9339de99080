"""The page of tunings: as found, as left and kept ones beside each other, measure by measure."""

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.theme import Theme
from tuner.window.tunings.compared import CompareTunings, comparing_by
from tuner.window.tunings.page import TuningsPage


def build_tunings(
    document: Document, theme: Theme, compare: CompareTunings, *, synchronous: bool = False
) -> TuningsPage:
    """Return the page of tunings of a document.

    Parameters
    ----------
    compare : callable
        The road from a sheet and kept tunings to their table.
    synchronous : bool
        Answer at once, without threads, for tests.
    """
    return TuningsPage(document, theme, Beside(comparing_by(compare), synchronous=synchronous))
