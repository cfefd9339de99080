"""The page of structures: feedforward alone, feedback alone and both, as curves over one another and as a table."""

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.structures.compared import CompareStructures, DrawPlain, comparing_by
from tuner.window.structures.page import StructuresPage
from tuner.window.theme import Theme


def build_structures(
    document: Document, theme: Theme, compare: CompareStructures, draw: DrawPlain, *, synchronous: bool = False
) -> StructuresPage:
    """Return the page of structures of a document.

    Parameters
    ----------
    compare : callable
        The road from a sheet to its comparisons.
    draw : callable
        Says what to draw over the curves of an assessment.
    synchronous : bool
        Answer at once, without threads, for tests.
    """
    return StructuresPage(document, theme, Beside(comparing_by(compare, draw), synchronous=synchronous))
