"""The rulers: sliders of the gains, each to be painted along its whole length with the footing it would give there."""

from tuner.session.document import Document
from tuner.window.rulers.panel import RulerPanel
from tuner.window.theme import Theme


def build_rulers(document: Document, theme: Theme) -> RulerPanel:
    """Return the panel of the rulers of a document."""
    return RulerPanel(document, theme)
