"""How the cost of painting rulers grows with the family, the notches, the states of the plant, and the horizon.

Each is doubled again and again while the others stay; the cost should grow no faster than what is doubled. The exponent
is the slope of the straight line through the logarithms of the three largest: 1 is linear, less is better. With
``TRIMWRIGHT_PICTURES`` naming a folder, `growth.svg` is drawn there.
"""

import os
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from tests.benchmarks.row import Row, timed
from tuner.footing.classes import Track
from tuner.footing.rulers import paint_rulers
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread
from tuner.model.sheet import Sheet, Trial

PICTURES = "TRIMWRIGHT_PICTURES"

_FAMILIES = (25, 100, 400, 1600)
_NOTCHES = (64, 128, 256, 512)
_STATES = (2, 4, 8, 16)
_SAMPLES = (500, 1000, 2000, 4000)
_LAST = 3


@dataclass(frozen=True, slots=True)
class Series:
    """Costs, ms, of sizes that double."""

    what: str
    sizes: tuple[int, ...]
    costs: tuple[float, ...]

    @property
    def exponent(self) -> float:
        """The slope of cost over size, both as logarithms, at the large end."""
        sizes, costs = np.log(self.sizes[-_LAST:]), np.log(self.costs[-_LAST:])
        return float(np.polyfit(sizes, costs, 1)[0])


def rows() -> list[Row]:
    """Measure all four."""
    series = (
        _series("plants in the family", _FAMILIES, lambda size: _painting(family=size)),
        _series("notches of a ruler", _NOTCHES, lambda size: _painting(notches=size)),
        _series("states of the plant", _STATES, lambda size: _painting(states=size)),
        _series("samples of the trial", _SAMPLES, lambda size: _painting(samples=size)),
    )
    folder = os.environ.get(PICTURES, "")
    if folder:
        _draw(series, Path(folder) / "growth.svg")
    worst = max(series, key=lambda one: one.exponent)
    told = "; ".join(f"{one.what} {one.exponent:.2f} ({_costs(one)})" for one in series)
    return [
        Row(
            "growth_exponent",
            "cost of painting three rulers as one size doubles: the largest exponent of the four",
            "",
            "<= 1, linear",
            worst.exponent,
            None,
            1.0,
            worst.exponent,
            "linear growth",
            f"{told}.",
        )
    ]


def _costs(series: Series) -> str:
    pairs = (f"{size}: {cost:.0f} ms" for size, cost in zip(series.sizes, series.costs, strict=True))
    return ", ".join(pairs)


def _series(what: str, sizes: Sequence[int], painting: Callable[[int], Callable[[], object]]) -> Series:
    return Series(what, tuple(sizes), tuple(timed(painting(size), 5, 1).median for size in sizes))


def _painting(family: int = 25, notches: int = 64, states: int = 4, samples: int = 1000) -> Callable[[], object]:
    """Return the painting of three rulers of an invented loop: equal lags in a row, and a dead time."""
    sheet = _sheet(states, samples)
    tracks = [
        Track(name, (sheet.controller.value(name) or 1.0) * np.geomspace(0.1, 10.0, notches))
        for name in ("kp", "ki", "kd")
    ]
    return lambda: paint_rulers(sheet, tracks, family, fine=False)


def _sheet(states: int, samples: int) -> Sheet:
    lags = "".join(f"(lag s + {1.0 + 0.1 * k:g})" for k in range(states))
    gain = float(np.prod([1.0 + 0.1 * k for k in range(states)]))
    parameters = (
        PlantParameter("gain", gain, spread=Spread(0.8 * gain, 1.2 * gain)),
        PlantParameter("lag", 10.0 / states, spread=Spread(8.0 / states, 12.0 / states)),
        PlantParameter("delay", 1.0, spread=Spread(0.7, 1.3)),
    )
    step = 100.0 / 1000
    return Sheet(
        loop=Loop("Invented lags", manipulated=Manipulated(low=-20.0, high=20.0)),
        plant=ExpressionPlant(f"gain exp(-delay s) / ({lags})", parameters),
        controller=Controller(sample_time=step, gain_1=0.8, gain_2=0.1, gain_3=0.5, filter_time=0.5, windup_time=5.0),
        trial=Trial(reference=5.0, disturbance=1.0, duration=samples * step),
        limits=(("overshoot", 30.0), ("settling_time", 90.0), ("max_sensitivity", 3.0)),
    )


def _draw(series: Sequence[Series], path: Path) -> None:
    """Draw cost over size, both doubled from their first, beside a line of linear growth."""
    from matplotlib.figure import Figure

    figure = Figure(figsize=(7.0, 5.0))
    axes = figure.add_subplot()
    for one in series:
        axes.plot(np.array(one.sizes) / one.sizes[0], np.array(one.costs) / one.costs[0], marker="o", label=one.what)
    ends = [1.0, max(one.sizes[-1] / one.sizes[0] for one in series)]
    axes.plot(ends, ends, linestyle="--", color="grey", label="linear")
    axes.set(xscale="log", yscale="log", xlabel="size over the smallest", ylabel="cost over that of the smallest")
    axes.legend()
    figure.savefig(path)
