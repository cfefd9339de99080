"""The frequency page: loop gain as Bode and Nyquist plots, and both sensitivities."""

from tuner.window.frequency.bode import MagnitudePanel, PhasePanel, SensitivityPanel
from tuner.window.frequency.nyquist import NyquistPanel
from tuner.window.frequency.words import NO_GAIN
from tuner.window.panel_page import PanelPage
from tuner.window.shown import Shown
from tuner.window.theme import Theme

MAGNITUDE, PHASE, NYQUIST, SENSITIVITY = "Bode magnitude", "Bode phase", "Nyquist plot", "Sensitivity"


class FrequencyPage(PanelPage):
    """All plots over frequency."""

    name = "Frequency"
    wants_frequency = True

    def __init__(self, theme: Theme) -> None:
        super().__init__(
            theme,
            (MagnitudePanel(MAGNITUDE, theme), PhasePanel(PHASE, theme)),
            (NyquistPanel(NYQUIST, theme), SensitivityPanel(SENSITIVITY, theme)),
        )

    def show(self, shown: Shown) -> None:
        """Show an answer in every plot, or say that there is no loop gain."""
        if shown.frequency is None:
            return
        if shown.frequency.w.size:
            super().show(shown)
            return
        for panel in self.panels.values():
            panel.show_empty(NO_GAIN)
