"""The editors of the blocks of the loop: loop, plant, actuator, sensor, controller, trial, limits."""

from tuner.session.document import Document
from tuner.window.editors.panel import EditorPanel
from tuner.window.theme import Theme


def build_editors(document: Document, theme: Theme) -> EditorPanel:
    """Return the column of the editors of a document."""
    return EditorPanel(document, theme)
