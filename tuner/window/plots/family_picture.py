"""The family behind the main curve: the ground that it covers and its curves, drawn once for as long as it stays."""

from dataclasses import dataclass

import numpy as np

from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent
from tuner.window.plots.items import Curve
from tuner.window.plots.lines import Family
from tuner.window.plots.panel import PlotView
from tuner.window.shown import FamilyView
from tuner.window.theme import Theme

_BINS = 150

NO_FAMILY = Family(np.empty(0), np.empty((0, 0)))


@dataclass(frozen=True, slots=True, eq=False)
class _Drawn:
    """What a family was drawn from, and for which picture."""

    family: Family
    view: FamilyView
    seen: Extent
    columns: int
    shade: str

    def same_as(self, other: "_Drawn | None") -> bool:
        """Tell whether the picture would be the same."""
        if other is None or other.family is not self.family:
            return False
        return (other.view, other.seen, other.columns, other.shade) == (self.view, self.seen, self.columns, self.shade)


class FamilyPicture:
    """Two curves of a plot, part of what stays in it.

    Parameters
    ----------
    view : PlotView
        The plot.
    theme : Theme
        The look.
    second : bool
        Whether it is the family of a second curve, which is paler and has no ground.
    """

    def __init__(self, view: PlotView, theme: Theme, *, second: bool = False) -> None:
        self._theme, self._second = theme, second
        self._drawn: _Drawn | None = None
        self.band = Curve(smooth=False, depth=-50.0)
        self.curves = Curve(smooth=False, depth=-40.0)
        for curve in (self.band, self.curves):
            view.addItem(curve, ignoreBounds=True)
            curve.join(view.still)

    def draw(self, family: Family, view: FamilyView, seen: Extent, columns: int) -> None:
        """Draw a family into a picture of so many columns, unless it is there already."""
        drawn = _Drawn(family, view, seen, columns, self._theme.palette.shade)
        if drawn.same_as(self._drawn):
            return
        self._drawn = drawn
        self.curves.set_colour(self._theme.colour("band" if self._second else "family"))
        self.curves.show_points(thinning.bundle(family.t, family.curves(view), seen, min(_BINS, columns // 2)))
        if not self._second:
            self.band.set_colour(self._theme.colour("band"))
            self.band.show_pairs(thinning.envelope(family.t, family.ground(view), seen, columns * 3 // 2))
