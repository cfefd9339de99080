"""What a plot draws beside its curves, as plain numbers in the plot's coordinates: areas, strokes and words."""

from collections.abc import Iterator
from dataclasses import dataclass
from math import inf, isfinite, pi, radians, tan
from typing import Literal

from tuner.judge.overlay import Band, Instant, Level, Overlay, Plot
from tuner.judge.wording import quantity
from tuner.model.sheet import Sheet
from tuner.window.plots.extent import Extent, of_levels

Side = Literal["above", "below", "middle"]
Anchor = Literal["left", "right", "centre"]


@dataclass(frozen=True, slots=True)
class Area:
    """A region; corners may lie at infinity. `hatched` is for where a curve cannot or must not be."""

    corners: tuple[tuple[float, float], ...]
    role: str
    hatched: bool = False

    @property
    def upright(self) -> bool:
        """Whether it is a rectangle along the axes, which is filled faster than any other shape."""
        across, upwards = ({corner[axis] for corner in self.corners} for axis in (0, 1))
        return len(self.corners) == 4 and len(across) == len(upwards) == 2


@dataclass(frozen=True, slots=True)
class Stroke:
    """A straight line between two points; ends may lie at infinity along an axis."""

    x0: float
    y0: float
    x1: float
    y1: float
    role: str
    dashed: bool = False
    measure: str = ""


@dataclass(frozen=True, slots=True)
class Words:
    """Words at a place: to the left or right of it, above or below; with a plant, pressing them looks at it."""

    x: float
    y: float
    text: str
    role: str
    anchor: Anchor = "right"
    side: Side = "above"
    plant: str = ""


@dataclass(frozen=True, slots=True)
class Marks:
    """Everything beside the curves of one plot."""

    areas: tuple[Area, ...] = ()
    strokes: tuple[Stroke, ...] = ()
    words: tuple[Words, ...] = ()

    def levels(self) -> Extent | None:
        """Return the heights that a plot should leave in sight, None when there are none."""
        return of_levels(y for s in self.strokes for y in (s.y0, s.y1) if isfinite(y) and s.role != "grid")


def rectangle(left: float, right: float, low: float, high: float) -> tuple[tuple[float, float], ...]:
    """Return the corners of a rectangle."""
    return (left, low), (right, low), (right, high), (left, high)


def trace_marks(plot: Plot, sheet: Sheet, overlay: Overlay) -> Marks:
    """Return the marks of a plot over time."""
    areas: list[Area] = []
    strokes: list[Stroke] = []
    words: list[Words] = []
    for piece in _pieces(plot, sheet, overlay):
        areas += piece.areas
        strokes += piece.strokes
        words += piece.words
    return Marks(tuple(areas), tuple(strokes), tuple(words))


def _pieces(plot: Plot, sheet: Sheet, overlay: Overlay) -> Iterator[Marks]:
    end = sheet.trial.duration
    yield from (_band(band) for band in overlay.bands if band.plot == plot)
    yield from (_level(level, end) for level in overlay.levels if level.plot == plot)
    yield from (_instant(instant) for instant in overlay.instants if instant.plot == plot)


def _band(band: Band) -> Marks:
    edges = tuple(Stroke(band.start, at, band.end, at, "limit", measure=band.measure) for at in (band.low, band.high))
    gate = Stroke(band.start, band.low, band.start, band.high, "limit", measure=band.measure)
    side: Side = "below"
    return Marks(
        (Area(rectangle(band.start, band.end, band.low, band.high), "limit_zone"),),
        (*edges, gate),
        (Words(band.end, band.low, band.label, "limit_word", "right", side),),
    )


def _level(level: Level, end: float) -> Marks:
    side: Side = "below" if level.keep == "above" else "above"
    if not level.keep:
        stroke = Stroke(0.0, level.value, end, level.value, "reference", dashed=True)
        return Marks((), (stroke,), (Words(end, level.value, "reference r", "quiet", "right", side),))
    beyond = inf if level.keep == "below" else -inf
    low, high = sorted((level.value, beyond))
    areas = () if level.measure else (Area(rectangle(-inf, inf, low, high), "limit", hatched=True),)
    stroke = Stroke(0.0, level.value, end, level.value, "limit", measure=level.measure)
    inside: Side = side if level.measure else ("below" if level.keep == "below" else "above")
    return Marks(areas, (stroke,), (Words(end, level.value, level.label, "limit_word", "right", inside),))


def _instant(instant: Instant) -> Marks:
    stroke = Stroke(instant.at, instant.low, instant.at, instant.high, "limit", measure=instant.measure)
    return Marks((), (stroke,), (Words(instant.at, instant.low, instant.label, "limit_word", "left", "above"),))


def pole_marks(sheet: Sheet, overlay: Overlay) -> Marks:
    """Return the marks of the pole map, real part to the right, imaginary part upwards."""
    unit = sheet.loop.time_unit
    areas = [Area(rectangle(0.0, inf, -inf, inf), "lost", hatched=True)]
    strokes = [Stroke(0.0, -inf, 0.0, inf, "quiet")]
    words = []
    if overlay.wedge is not None:
        slope = tan(radians(overlay.wedge.angle))
        areas += _outside_wedge(slope)
        strokes += [Stroke(0.0, 0.0, -_FAR, sign * slope * _FAR, "limit", measure="damping") for sign in (1.0, -1.0)]
        words.append(Words(-1.0, slope, overlay.wedge.label, "limit_word", "left", "middle"))
    if overlay.boundary is not None:
        at = overlay.boundary.real
        areas.append(Area(rectangle(at, 0.0, -inf, inf), "limit_zone"))
        strokes.append(Stroke(at, -inf, at, inf, "limit", measure="settling_time"))
        words.append(Words(at, -inf, overlay.boundary.label, "limit_word", "right", "above"))
    if sheet.controller.sample_time > 0.0:
        half = pi / sheet.controller.sample_time
        strokes += [Stroke(-inf, sign * half, 0.0, sign * half, "kept", dashed=True) for sign in (1.0, -1.0)]
        label = f"half the sampling frequency, {quantity(half, f'rad/{unit}', 3)}"
        words.append(Words(-inf, half, label, "kept_word", "left", "below"))
    return Marks(tuple(areas), tuple(strokes), tuple(words))


_FAR = 1e9
"""Far enough to be outside of any pole map, near enough to be mapped to pixels."""


def _outside_wedge(slope: float) -> list[Area]:
    """Return the two regions of the left half plane with less damping than the wedge."""
    far = _FAR * max(slope, 1.0)
    return [
        Area(((0.0, 0.0), (-_FAR, sign * slope * _FAR), (-_FAR, sign * far), (0.0, sign * far)), "limit_zone")
        for sign in (1.0, -1.0)
    ]
