"""The rehearsal: the loop in time on a strip chart, under the hand."""

from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rehearsal.page import RehearsalPage
from tuner.window.rehearsal.preparing import prepare
from tuner.window.rehearsal.runner import Runner
from tuner.window.theme import Theme


def build_rehearsal(
    document: Document, theme: Theme, *, synchronous: bool = False, runner: Runner | None = None
) -> RehearsalPage:
    """Return the page of the rehearsal of a document.

    Parameters
    ----------
    synchronous : bool
        Make a loop ready at once, without a thread, for tests.
    runner : Runner or None
        What runs it, for tests with a clock of their own.
    """
    return RehearsalPage(document, theme, Beside(prepare, synchronous=synchronous), runner)
