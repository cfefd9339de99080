"""What the plots draw over their curves: limits as bands, levels and instants, and the words beside a missed one.

All numbers are deviations from the resting point in engineering units, and times in the sheet's time unit, as in
the traces; labels carry absolute values where a person knows them so (the ends of the actuator's range).
"""

from collections.abc import Iterator
from dataclasses import dataclass
from math import acos, degrees, isnan, log
from typing import Literal

from tuner.judge.assessment import Assessment, LimitResult, MemberResult
from tuner.judge.wording import quantity, relation
from tuner.measure.curve import first_reach
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet

Plot = Literal["reference", "disturbance", "effort", "poles", "frequency"]

PLOT_OF: dict[str, Plot] = {
    "overshoot": "reference",
    "peak_time": "reference",
    "rise_time": "reference",
    "settling_time": "reference",
    "steady_state_error": "reference",
    "undershoot": "reference",
    "iae_reference": "reference",
    "iae_disturbance": "disturbance",
    "disturbance_peak": "disturbance",
    "disturbance_recovery": "disturbance",
    "peak_effort": "effort",
    "effort_travel": "effort",
    "saturated_share": "effort",
    "gain_margin": "frequency",
    "phase_margin": "frequency",
    "delay_margin": "frequency",
    "max_sensitivity": "frequency",
    "max_complementary": "frequency",
    "bandwidth": "frequency",
    "damping": "poles",
}
"""The plot that shows each measure."""


@dataclass(frozen=True, slots=True)
class Band:
    """A horizontal band in which the curve must stay from `start` to `end`.

    Parameters
    ----------
    plot, measure, label : str
        Where it is drawn, the limit it comes from, and a few words with the unit.
    start, end : float
        Time, time unit.
    low, high : float
        Ends of the band, deviation.
    """

    plot: Plot
    measure: str
    label: str
    start: float
    end: float
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class Level:
    """A horizontal line that the curve must not pass.

    Parameters
    ----------
    plot, measure, label : str
        As in `Band`; `measure` is '' for the reference itself and for the ends of the actuator's range.
    value : float
        Deviation.
    keep : str
        The side on which the curve must stay: 'below', 'above', or '' when the line is only a mark.
    """

    plot: Plot
    measure: str
    label: str
    value: float
    keep: Literal["below", "above", ""]


@dataclass(frozen=True, slots=True)
class Instant:
    """A vertical stroke at a time by which something must have happened, from `low` to `high`."""

    plot: Plot
    measure: str
    label: str
    at: float
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class Wedge:
    """The region of the pole map that a damping limit leaves: within `angle` degrees of the negative real axis."""

    measure: str
    label: str
    damping: float
    angle: float


@dataclass(frozen=True, slots=True)
class Boundary:
    """The vertical line of the pole map left of which a pole decays into the settling band in time.

    A guide, exact for a first-order loop: exp(real t) has fallen to the band at the limit of the settling time.
    """

    measure: str
    label: str
    real: float


@dataclass(frozen=True, slots=True)
class Callout:
    """The words beside a plot for one missed limit."""

    plot: Plot
    measure: str
    sentence: str


@dataclass(frozen=True, slots=True)
class Overlay:
    """Everything that is drawn over the curves; `wedge` and `boundary` belong to the pole map."""

    bands: tuple[Band, ...] = ()
    levels: tuple[Level, ...] = ()
    instants: tuple[Instant, ...] = ()
    wedge: Wedge | None = None
    boundary: Boundary | None = None
    callouts: tuple[Callout, ...] = ()


def overlay(sheet: Sheet, assessment: Assessment) -> Overlay:
    """Return what to draw over the plots of an assessment; percentages refer to the nominal plant's final value."""
    limits = dict(sheet.limits)
    nominal = assessment.nominal
    return Overlay(
        bands=tuple(_bands(sheet, limits, nominal)),
        levels=tuple(_levels(sheet, limits, nominal)),
        instants=tuple(_instants(sheet, limits, nominal)),
        wedge=_wedge(limits.get("damping")),
        boundary=_boundary(sheet, limits.get("settling_time")),
        callouts=callouts(sheet, assessment),
    )


def callouts(sheet: Sheet, assessment: Assessment) -> tuple[Callout, ...]:
    """Return one sentence for each missed limit, in the order of the sheet, with the plot that shows it."""
    members = {member.name: member for member in assessment.members}
    return tuple(
        Callout(PLOT_OF[result.measure], result.measure, missed(sheet, result, members[result.plant]))
        for result in assessment.limits
        if not result.met
    )


def missed(sheet: Sheet, result: LimitResult, member: MemberResult) -> str:
    """Say a limit's result in words: "settling time 96 s > 90 s at gain +15 %, delay +50 %".

    Parameters
    ----------
    member : MemberResult
        The plant of the result; it knows how far it has drifted, and why measures of it do not exist.
    """
    plant = at_plant(member.drift or member.name)
    said = f"{relation(result.measure, result.value, result.limit, sheet.loop)}{plant}"
    why = member.reasons.get(result.measure, "")
    return f"{said}: {why}" if result.value is None and why else said


def at_plant(plant: str) -> str:
    """Say where: " at gain 1.04, delay 6", or for the nominal plant " at the nominal plant"."""
    return " at the nominal plant" if plant == "nominal" else f" at {plant}"


def _bands(sheet: Sheet, limits: dict[str, float], nominal: MemberResult) -> Iterator[Band]:
    trial, unit = sheet.trial, sheet.loop.time_unit
    share = trial.settling_band / 100.0
    band = f"±{quantity(trial.settling_band, '%')}"
    if (at := limits.get("settling_time")) is not None and (final := nominal.final_reference) is not None:
        yield _band("reference", "settling_time", f"{band} from {quantity(at, unit)}", at, trial.duration, final, share)
    if (most := limits.get("steady_state_error")) is not None and trial.reference:
        label = f"error {quantity(most, '%')}"
        start = 0.9 * trial.duration
        yield _band("reference", "steady_state_error", label, start, trial.duration, trial.reference, most / 100.0)
    peak, final = nominal.measures.get("disturbance_peak"), nominal.final_disturbance
    at = limits.get("disturbance_recovery")
    if at is not None and peak is not None and final is not None:
        label = f"{band} of the peak from {quantity(at, unit)}"
        reach = share * peak
        yield Band("disturbance", "disturbance_recovery", label, at, trial.duration, final - reach, final + reach)


def _band(plot: Plot, measure: str, label: str, start: float, end: float, centre: float, share: float) -> Band:  # noqa: PLR0913, PLR0917 - the fields of a band
    reach = share * abs(centre)
    return Band(plot, measure, label, start, max(start, end), centre - reach, centre + reach)


def _levels(sheet: Sheet, limits: dict[str, float], nominal: MemberResult) -> Iterator[Level]:
    yield from _reference_levels(sheet, limits, nominal)
    yield from _both_sides("disturbance", "disturbance_peak", limits, sheet.loop.controlled.unit)
    yield from _range_levels(sheet)
    yield from _both_sides("effort", "peak_effort", limits, sheet.loop.manipulated.unit)


def _reference_levels(sheet: Sheet, limits: dict[str, float], nominal: MemberResult) -> Iterator[Level]:
    step, unit = sheet.trial.reference, sheet.loop.controlled.unit
    if step:
        yield Level("reference", "", f"reference {quantity(step, unit)}", step, "")
    final = nominal.final_reference
    if not final:
        return
    up: Literal["below", "above"] = "below" if final > 0.0 else "above"
    down: Literal["below", "above"] = "above" if final > 0.0 else "below"
    if (most := limits.get("overshoot")) is not None:
        yield Level("reference", "overshoot", f"overshoot {quantity(most, '%')}", final * (1.0 + most / 100.0), up)
    if (most := limits.get("undershoot")) is not None:
        yield Level("reference", "undershoot", f"undershoot {quantity(most, '%')}", -final * most / 100.0, down)


def _both_sides(plot: Plot, measure: str, limits: dict[str, float], unit: str) -> Iterator[Level]:
    if (most := limits.get(measure)) is not None:
        label = f"{BY_NAME[measure].label} {quantity(most, unit)}"
        yield Level(plot, measure, label, most, "below")
        yield Level(plot, measure, label, -most, "above")


def _range_levels(sheet: Sheet) -> Iterator[Level]:
    signal = sheet.loop.manipulated
    if signal.high is not None:
        label = f"limit {quantity(signal.high, signal.unit)}"
        yield Level("effort", "", label, signal.high - signal.resting, "below")
    if signal.low is not None:
        label = f"limit {quantity(signal.low, signal.unit)}"
        yield Level("effort", "", label, signal.low - signal.resting, "above")


def _instants(sheet: Sheet, limits: dict[str, float], nominal: MemberResult) -> Iterator[Instant]:
    final, unit = nominal.final_reference, sheet.loop.time_unit
    if not final:
        return
    if (most := limits.get("rise_time")) is not None:
        trace = nominal.traces.reference
        start = float(first_reach(trace.t, trace.y[None, :] / final, (0.1,))[0, 0])
        if not isnan(start):
            label = f"90 % by {quantity(start + most, unit)}"
            yield Instant("reference", "rise_time", label, start + most, 0.1 * final, 0.9 * final)
    if (most := limits.get("peak_time")) is not None:
        label = f"peak by {quantity(most, unit)}"
        ceiling = final * (1.0 + limits.get("overshoot", 10.0) / 100.0)
        yield Instant("reference", "peak_time", label, most, final, ceiling)


def _wedge(damping: float | None) -> Wedge | None:
    if damping is None or not 0.0 <= damping <= 1.0:
        return None
    return Wedge("damping", f"damping {quantity(damping, '')}", damping, degrees(acos(damping)))


def _boundary(sheet: Sheet, settling_time: float | None) -> Boundary | None:
    if not settling_time:
        return None
    real = -log(100.0 / sheet.trial.settling_band) / settling_time
    label = f"±{quantity(sheet.trial.settling_band, '%')} in {quantity(settling_time, sheet.loop.time_unit)}"
    return Boundary("settling_time", label, real)
