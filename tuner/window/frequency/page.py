"""The frequency page: loop gain as Bode and Nyquist plots, and both sensitivities."""

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtWidgets import QSplitter

from tuner.window.frequency.bode import MagnitudePanel, PhasePanel, SensitivityPanel
from tuner.window.frequency.nyquist import NyquistPanel
from tuner.window.plots.panel import Panel
from tuner.window.shown import Shown
from tuner.window.theme import Theme

MAGNITUDE, PHASE, NYQUIST, SENSITIVITY = "Bode magnitude", "Bode phase", "Nyquist plot", "Sensitivity"

OPEN = "The loop is open: there is no loop gain to show."


class FrequencyPage(QObject):
    """All plots over frequency; `show` hands them an answer."""

    name = "Frequency"
    wants_frequency = True
    menu_wanted = Signal(object, object)
    """A `Panel`, and where on the screen."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self.panels: dict[str, Panel] = {
            MAGNITUDE: MagnitudePanel(MAGNITUDE, theme),
            PHASE: PhasePanel(PHASE, theme),
            NYQUIST: NyquistPanel(NYQUIST, theme),
            SENSITIVITY: SensitivityPanel(SENSITIVITY, theme),
        }
        self.widget = _split(Qt.Orientation.Horizontal)
        for names in ((MAGNITUDE, PHASE), (NYQUIST, SENSITIVITY)):
            side = _split(Qt.Orientation.Vertical)
            for name in names:
                side.addWidget(self.panels[name].widget)
            side.setSizes([500, 500])
            self.widget.addWidget(side)
        self.widget.setSizes([500, 500])
        for panel in self.panels.values():
            panel.menu_wanted.connect(lambda at, panel=panel: self.menu_wanted.emit(panel, at))
        theme.changed.connect(self._dress)

    def show(self, shown: Shown) -> None:
        """Show an answer in every plot, or say that there is no loop gain."""
        if shown.frequency is None:
            return
        if not shown.frequency.w.size:
            self.say_empty(OPEN)
            self.show_stale()
            return
        for panel in self.panels.values():
            panel.show(shown)

    def show_stale(self) -> None:
        """Grey every curve."""
        for panel in self.panels.values():
            panel.show_stale()

    def show_whole(self) -> None:
        """Show every plot whole again."""
        for panel in self.panels.values():
            panel.show_whole()

    def forget(self) -> None:
        """Forget ranges and curves of a loop that is left."""
        for panel in self.panels.values():
            panel.forget()

    def say_empty(self, sentence: str) -> None:
        """Say in every plot why it is empty."""
        for panel in self.panels.values():
            panel.say_empty(sentence)

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler."""
        for panel in self.panels.values():
            panel.hold(held)

    def _dress(self) -> None:
        for panel in self.panels.values():
            panel.dress()


def _split(orientation: Qt.Orientation) -> QSplitter:
    splitter = QSplitter(orientation)
    splitter.setChildrenCollapsible(False)
    splitter.setHandleWidth(4)
    return splitter
