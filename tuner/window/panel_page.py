"""A page of four plots in two columns: it hands answers to all of them."""

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtWidgets import QSplitter

from tuner.window.plots.panel import Panel
from tuner.window.shown import Shown
from tuner.window.theme import Theme

_UPPER, _LOWER = 600, 500
"""How the height of a column is divided at first."""


class PanelPage(QObject):
    """All plots of one page of the plot area.

    Parameters
    ----------
    theme : Theme
        The look.
    left, right : tuple of Panel
        The plots of both columns, from top to bottom.
    """

    name = ""
    wants_frequency = False
    menu_wanted = Signal(object, object)
    """A `Panel`, and where on the screen."""
    plant_wanted = Signal(str)
    """The name of a plant of the family that is to be looked at."""

    def __init__(self, theme: Theme, left: tuple[Panel[Shown], ...], right: tuple[Panel[Shown], ...]) -> None:
        super().__init__()
        rows = zip(left, right, strict=True)
        self.panels: dict[str, Panel[Shown]] = {panel.name: panel for row in rows for panel in row}
        self.widget = _split(Qt.Orientation.Horizontal)
        self.left, self.right = (_split(Qt.Orientation.Vertical) for _ in range(2))
        self._columns = ((self.left, left), (self.right, right))
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
        for side, panels in self._columns:
            side.setVisible(not name or any(panel.name == name for panel in panels))

    def _place(self) -> None:
        for side, panels in self._columns:
            for panel in panels:
                side.addWidget(panel.widget)
            side.setSizes([_UPPER, _LOWER])
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
