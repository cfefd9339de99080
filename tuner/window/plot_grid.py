"""The page of the trial: both steps, the effort, and the pole map."""

from tuner.window.panel_page import PanelPage
from tuner.window.plots.pole_panel import PolePanel
from tuner.window.plots.trace_panel import DisturbancePanel, EffortPanel, ReferencePanel
from tuner.window.theme import Theme

REFERENCE, DISTURBANCE, EFFORT, POLES = "Reference step", "Disturbance", "Effort", "Pole map"


class PlotGrid(PanelPage):
    """All plots of the trial."""

    name = "Trial"

    def __init__(self, theme: Theme) -> None:
        super().__init__(
            theme,
            (ReferencePanel(REFERENCE, theme), EffortPanel(EFFORT, theme)),
            (DisturbancePanel(DISTURBANCE, theme), PolePanel(POLES, theme)),
        )
