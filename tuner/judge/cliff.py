"""Why a loop is unstable: how it runs away, and which single gain, changed least, brings it back."""

from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass
from math import exp, inf, log

from tuner.judge.assessment import Instability
from tuner.judge.wording import number, quantity
from tuner.model.controller import Controller
from tuner.model.parameters import Parameter, rulers
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in

FARTHEST = 1000.0
"""A gain is looked for within this factor, up and down."""

LADDER = (1.03, 1.1, 1.25, 1.5, 2.0, 3.0, 5.0, 10.0, 25.0, 70.0, 250.0, FARTHEST)
"""Factors at which stability is looked at; between the last unstable and the first stable one the edge is bisected."""

BISECTIONS = 14

STANDING = 1e-9
"""A growth below this share of the frequency, or of 1 / duration, is none: the loop is on the very edge."""

_MATTERS = {"kp", "ki", "kd", "kc", "ti", "td", "filter_time"}
"""Rulers that move poles; weights and the wind-up time do not."""

IsStable = Callable[[Controller], bool]


@dataclass(frozen=True, slots=True)
class Edge:
    """A value of one gain on the edge of stability, and by which factor the gain must change to get there.

    `factor` is 0 when only leaving the gain out helps; `value` is then 0.
    """

    gain: Parameter
    value: float
    factor: float

    @property
    def distance(self) -> float:
        """How far away it is: abs(log(factor))."""
        return abs(log(self.factor)) if self.factor else inf


@dataclass(frozen=True, slots=True)
class Runaway:
    """The rightmost pole of the plant that runs away fastest.

    Parameters
    ----------
    plant : str
        In words.
    growth, frequency : float
        Real and imaginary part, per time unit.
    reason : str
        Why the loop is unstable, where no pole says it.
    """

    plant: str
    growth: float
    frequency: float
    reason: str = ""


def instability(sheet: Sheet, runaway: Runaway, is_stable: IsStable) -> Instability:
    """Say how a loop runs away and what brings it back.

    Parameters
    ----------
    runaway : Runaway
        Of the plant that runs away fastest.
    is_stable : callable
        Whether that plant's loop is stable with another controller, exactly.
    """
    edge = nearest_edge(sheet.controller, is_stable)
    standing = runaway.growth <= STANDING * max(runaway.frequency, 1.0 / sheet.trial.duration)
    growth = max(runaway.growth, 0.0)
    return Instability(
        plant=runaway.plant,
        growth=growth,
        doubling_time=inf if standing else log(2.0) / growth,
        frequency=runaway.frequency,
        gain=edge.gain.name if edge else "",
        edge=edge.value if edge else None,
        sentence=f"Unstable: {_motion(sheet, runaway, standing=standing)}; {_way_back(sheet, edge)}.",
    )


def nearest_edge(controller: Controller, is_stable: IsStable) -> Edge | None:
    """Return the edge of stability that is the smallest change of one gain away; None when there is none in reach."""
    gains = [one for one in rulers(controller.form) if one.name in _MATTERS and controller.value(one.name)]
    for low, high in zip((1.0, *LADDER[:-1]), LADDER, strict=True):
        best: Edge | None = None
        for gain, sign in _reached(controller, gains, high, is_stable):
            # Worth a bisection only if it is stable nearer than the best edge so far.
            nearer = log(high) if best is None else best.distance
            if best is None or is_stable(_changed(controller, gain, sign * nearer)):
                best = _bisected(controller, gain, sign * log(low), sign * nearer, is_stable)
        if best is not None:
            return best
    return next(_left_out(controller, gains, is_stable), None)


def _reached(
    controller: Controller, gains: Iterable[Parameter], factor: float, is_stable: IsStable
) -> Iterator[tuple[Parameter, float]]:
    """Yield each gain, and the direction, in which a change by `factor` makes the loop stable."""
    for gain in gains:
        for sign in (1.0, -1.0):
            if is_stable(_changed(controller, gain, sign * log(factor))):
                yield gain, sign


def _bisected(controller: Controller, gain: Parameter, unstable: float, stable: float, is_stable: IsStable) -> Edge:
    """Return the edge between two changes of a gain, given as logarithms of its factor."""
    for _ in range(BISECTIONS):
        middle = 0.5 * (unstable + stable)
        if is_stable(_changed(controller, gain, middle)):
            stable = middle
        else:
            unstable = middle
    factor = exp(0.5 * (unstable + stable))
    return Edge(gain, (controller.value(gain.name) or 0.0) * factor, factor)


def _changed(controller: Controller, gain: Parameter, change: float) -> Controller:
    return controller.with_value(gain.name, (controller.value(gain.name) or 0.0) * exp(change))


def _left_out(controller: Controller, gains: Sequence[Parameter], is_stable: IsStable) -> Iterator[Edge]:
    for gain in gains:
        if is_stable(controller.with_value(gain.name, 0.0)):
            yield Edge(gain, 0.0, 0.0)


def _motion(sheet: Sheet, runaway: Runaway, *, standing: bool) -> str:
    unit = sheet.loop.time_unit
    plant = "at the nominal plant" if runaway.plant == "nominal" else f"with {runaway.plant}"
    rate = f" at {quantity(runaway.frequency, f'rad/{unit}')}" if runaway.frequency else ""
    if standing and runaway.reason:
        return f"{runaway.reason} {plant}"
    if standing:
        return f"{'swings on' if rate else 'drifts off'} without end{rate} {plant}"
    growth = quantity(1.0 / runaway.growth, unit)
    double = quantity(log(2.0) / runaway.growth, unit)
    return f"grows e-fold every {growth}{rate} (doubles every {double}) {plant}"


def _way_back(sheet: Sheet, edge: Edge | None) -> str:
    controller = sheet.controller
    if not controller.feedback:
        return "the feedback is off, so no gain holds the plant"
    if edge is None:
        return f"no single gain, changed up to {FARTHEST:g}-fold, brings it back"
    name, value = edge.gain.name, controller.value(edge.gain.name) or 0.0
    unit = unit_in(edge.gain.unit, sheet.loop)
    if edge.factor == 0.0:
        return f"it holds only without {name}, which is {quantity(value, unit)}"
    side = "beyond" if edge.factor < 1.0 else "short of"
    return f"{name} {quantity(value, unit)} is {side} its edge at {number(edge.value)}"
