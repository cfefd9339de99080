"""The four plots side by side, or one of them alone, with the room between them to be moved."""

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtWidgets import QSplitter

from tuner.window.plots.panel import Panel
from tuner.window.plots.pole_panel import PolePanel
from tuner.window.plots.trace_panel import DisturbancePanel, EffortPanel, ReferencePanel
from tuner.window.shown import Shown
from tuner.window.theme import Theme

REFERENCE, DISTURBANCE, EFFORT, POLES = "Reference step", "Disturbance", "Effort", "Pole map"


class PlotGrid(QObject):
    """All plots of the trial; `show` hands them an answer."""

    name = "Trial"
    wants_frequency = False
    menu_wanted = Signal(object, object)
    """A `Panel`, and where on the screen."""
    plant_wanted = Signal(str)
    """The name of a plant of the family that is to be looked at."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self.panels: dict[str, Panel] = {
            REFERENCE: ReferencePanel(REFERENCE, theme),
            DISTURBANCE: DisturbancePanel(DISTURBANCE, theme),
            EFFORT: EffortPanel(EFFORT, theme),
            POLES: PolePanel(POLES, theme),
        }
        self.left, self.right = _split(Qt.Orientation.Vertical), _split(Qt.Orientation.Vertical)
        self.widget = _split(Qt.Orientation.Horizontal)
        self._place()
        for panel in self.panels.values():
            panel.menu_wanted.connect(lambda at, panel=panel: self.menu_wanted.emit(panel, at))
            panel.plant_wanted.connect(self.plant_wanted)
        theme.changed.connect(self._dress)

    def show(self, shown: Shown) -> None:
        """Show an answer in every plot."""
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

    def show_alone(self, name: str) -> None:
        """Give one plot all the room; an empty name shows all four."""
        for other, panel in self.panels.items():
            panel.widget.setVisible(name in ("", other))
        for side, names in ((self.left, (REFERENCE, EFFORT)), (self.right, (DISTURBANCE, POLES))):
            side.setVisible(not name or name in names)

    def _place(self) -> None:
        for side, names in ((self.left, (REFERENCE, EFFORT)), (self.right, (DISTURBANCE, POLES))):
            for name in names:
                side.addWidget(self.panels[name].widget)
            side.setSizes([600, 500])
            self.widget.addWidget(side)
        self.widget.setSizes([500, 500])

    def _dress(self) -> None:
        for panel in self.panels.values():
            panel.dress()


def _split(orientation: Qt.Orientation) -> QSplitter:
    splitter = QSplitter(orientation)
    splitter.setChildrenCollapsible(False)
    splitter.setHandleWidth(4)
    return splitter
