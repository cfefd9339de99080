"""Where everything of the loop diagram stands, as plain numbers: pixels from the top left corner."""

from collections.abc import Collection, Mapping
from dataclasses import dataclass
from typing import Literal

Path = Literal["signal", "feedforward", "feedback", "absent"]
"""Of which path a wire is; one along which nothing goes is absent."""

Point = tuple[float, float]


@dataclass(frozen=True, slots=True)
class Box:
    """A rectangle by its middle and its size."""

    x: float
    y: float
    width: float
    height: float


@dataclass(frozen=True, slots=True)
class Wire:
    """A line from point to point, with an arrow at its end or none."""

    points: tuple[Point, ...]
    path: Path = "signal"
    arrow: bool = False


@dataclass(frozen=True, slots=True)
class Layout:
    """Everything to be drawn.

    Parameters
    ----------
    boxes : mapping of str to Box
        Every block, there or not, and both switches, by their keys.
    wires : tuple of Wire
    sums : mapping of str to Point
        Summing junctions: of the effort, of the disturbance at the plant's input, and behind its own path.
    branches : tuple of Point
        Where a signal goes two ways.
    anchors : mapping of str to Point
        Where the names of signals stand.
    radius : float
        Of a summing junction.
    """

    boxes: Mapping[str, Box]
    wires: tuple[Wire, ...]
    sums: Mapping[str, Point]
    branches: tuple[Point, ...]
    anchors: Mapping[str, Point]
    radius: float


FULL, COMPACT = 124, 80
"""Heights with the values at the signals, and without."""

_MARGIN = 12.0
_X = {
    "r": 0.0,
    "branch_r": 0.05,
    "switch_forward": 0.095,
    "reference_filter": 0.115,
    "feedforward": 0.22,
    "law": 0.22,
    "sum": 0.3,
    "notch": 0.325,
    "limits": 0.375,
    "disturbance_feedforward": 0.445,
    "lead_lag": 0.445,
    "actuator": 0.555,
    "measurement_filter": 0.565,
    "disturbance": 0.63,
    "plant": 0.71,
    "path": 0.71,
    "sensor": 0.71,
    "behind": 0.785,
    "switch_back": 0.79,
    "branch_y": 0.84,
    "y": 0.855,
}
"""Places along the width, as shares of it."""

_TOP = ("feedforward", "disturbance_feedforward", "path", "switch_forward")
_BOTTOM = ("sensor", "measurement_filter", "lead_lag", "notch", "switch_back")
_PLUS, _SWITCH = 16.0, 28.0
_LAW = 1.25
"""How much wider the law is than other blocks: it has three gains to tell."""


def laid_out(width: float, height: float, there: Collection[str], *, measured: bool) -> Layout:
    """Return where everything stands.

    Parameters
    ----------
    there : collection of str
        Keys of the blocks that the loop has.
    measured : bool
        Whether the disturbance has a path of its own to the output.
    """
    place = _Place(width, height)
    boxes = {key: place.box(key, there=key in there) for key in _BLOCKS}
    boxes |= {key: Box(place.x(key), place.y(key), _SWITCH, _PLUS) for key in ("switch_forward", "switch_back")}
    radius = 7.0
    wires = (*_forward_wires(place, there), *_main_wires(place, measured=measured), *_disturbance_wires(place, there))
    sums = {"sum": place.at("sum"), "disturbance": place.at("disturbance")}
    if measured:
        sums = {"sum": place.at("sum"), "behind": place.at("behind")}
    anchors = {
        "r": place.at("r"), "u": (0.5 * (place.x("limits") + place.x("actuator")), place.middle),
        "d": (place.x("disturbance"), place.top), "y": place.at("y"),
    }  # fmt: skip
    branches = (place.at("branch_r"), place.at("branch_y"))
    return Layout(boxes, (*wires, *_back_wires(place)), sums, branches, anchors, radius)


_BLOCKS = (
    "feedforward", "reference_filter", "law", "disturbance_feedforward", "limits", "actuator", "path", "plant",
    "sensor", "measurement_filter", "lead_lag", "notch",
)  # fmt: skip


@dataclass(frozen=True, slots=True)
class _Place:
    """Turns shares of the width and rows into pixels."""

    width: float
    height: float

    @property
    def top(self) -> float:
        return 0.5 * self._block + (6.0 if self.height >= FULL else 3.0)

    @property
    def middle(self) -> float:
        return round(0.5 * self.height) - 2.0

    @property
    def bottom(self) -> float:
        return self.height - 0.5 * self._block - 4.0

    @property
    def _block(self) -> float:
        return 32.0 if self.height >= FULL else 22.0

    def x(self, key: str) -> float:
        return round(_MARGIN + _X[key] * (self.width - 2.0 * _MARGIN))

    def y(self, key: str) -> float:
        return self.top if key in _TOP else self.bottom if key in _BOTTOM else self.middle

    def at(self, key: str) -> Point:
        return self.x(key), self.y(key)

    def box(self, key: str, *, there: bool) -> Box:
        wide = min(108.0, max(68.0, 0.068 * self.width)) * (_LAW if key == "law" else 1.0)
        return Box(*self.at(key), *((round(wide), self._block) if there else (_PLUS, _PLUS)))


def _forward_wires(place: _Place, there: Collection[str]) -> tuple[Wire, ...]:
    path: Path = "feedforward" if "feedforward" in there else "absent"
    return (
        Wire((place.at("r"), place.at("law")), "signal"),
        Wire(
            (
                (place.x("branch_r"), place.middle),
                (place.x("branch_r"), place.top),
                (place.x("sum"), place.top),
                (place.x("sum"), place.middle - 7.0),
            ),
            path,
            arrow=True,
        ),
    )


def _main_wires(place: _Place, *, measured: bool) -> tuple[Wire, ...]:
    stations = ["law", "sum", "limits", "actuator", *([] if measured else ["disturbance"]), "plant"]
    stations += [*(["behind"] if measured else []), "y"]
    points = [place.at(key) for key in stations]
    return (Wire(tuple(points), "signal"), Wire((points[-2], points[-1]), "signal", arrow=True))


def _disturbance_wires(place: _Place, there: Collection[str]) -> tuple[Wire, ...]:
    top, start = place.top, place.x("disturbance")
    path: Path = "feedforward" if "disturbance_feedforward" in there else "absent"
    against = Wire(((start, top), (place.x("sum"), top), (place.x("sum"), place.middle - 7.0)), path, arrow=True)
    if "path" not in there:
        return against, Wire(((start, top), (start, place.middle - 7.0)), "signal", arrow=True)
    behind = place.x("behind")
    return against, Wire(((start, top), (behind, top), (behind, place.middle - 7.0)), "signal", arrow=True)


def _back_wires(place: _Place) -> tuple[Wire, ...]:
    law = place.x("law")
    return (
        Wire(
            (
                (place.x("branch_y"), place.middle),
                (place.x("branch_y"), place.bottom),
                (law, place.bottom),
                (law, place.middle + 17.0),
            ),
            "feedback",
            arrow=True,
        ),
    )
