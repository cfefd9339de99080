"""The keys of a sheet as its dataclasses hold them: one number or word by its dotted path, read and replaced."""

from dataclasses import replace
from math import pi
from typing import Any

from tuner.errors import LoopError
from tuner.model.beginnings import first_time
from tuner.model.controller import DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.measures import Measure
from tuner.model.parameters import Parameter
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in

_HELD_AS = {"controller.measurement_filter.time": "controller.measurement_filter"}
"""Keys that the dataclasses hold under another path."""


def value_at(sheet: Sheet, path: str) -> Any:  # noqa: ANN401 # numbers, words and flags alike
    """Return what a sheet holds at a dotted path; None below a block that is absent."""
    held: Any = sheet
    for name in _HELD_AS.get(path, path).split("."):
        held = None if held is None else getattr(held, name)
    return held


def with_value_at(sheet: Sheet, path: str, value: object) -> Sheet:
    """Return a sheet with one key changed; the block that holds it must be there."""
    changed: Sheet = _replaced(sheet, _HELD_AS.get(path, path).split("."), value)
    return changed


def with_notch(sheet: Sheet, notch: Notch | None) -> Sheet:
    """Return a sheet with a notch, or without one."""
    return replace(sheet, controller=replace(sheet.controller, notch=notch))


def first_notch(sheet: Sheet) -> Notch:
    """Return a notch to begin with: a hundred of its periods fill the trial, at most a tenth of Nyquist."""
    start = 200.0 * pi / sheet.trial.duration
    sample_time = sheet.controller.sample_time
    limit = 0.1 * pi / sample_time if sample_time else start
    return Notch(float(f"{min(start, limit):.2g}"))


def with_lead_lag(sheet: Sheet, lead_lag: LeadLag | None) -> Sheet:
    """Return a sheet with a lead-lag, or without one."""
    return replace(sheet, controller=replace(sheet.controller, lead_lag=lead_lag))


def first_lead_lag(sheet: Sheet) -> LeadLag:
    """Return a lead to begin with: a fiftieth of the trial, ahead of a lag of a tenth of that."""
    lead = first_time(sheet)
    return LeadLag(lead, float(f"{lead / 10.0:.2g}"))


def with_reference_filter(sheet: Sheet, reference_filter: ReferenceFilter | None) -> Sheet:
    """Return a sheet with a filter between reference and law, or without one."""
    return replace(sheet, controller=replace(sheet.controller, reference_filter=reference_filter))


def first_reference_filter(sheet: Sheet) -> ReferenceFilter:
    """Return a reference filter to begin with: one lag of a fiftieth of the trial."""
    return ReferenceFilter(first_time(sheet))


def with_measurement_filter(sheet: Sheet, time: float) -> Sheet:
    """Return a sheet with a measurement filter of a time; 0 for none."""
    return replace(sheet, controller=replace(sheet.controller, measurement_filter=time))


def first_measurement_filter(sheet: Sheet) -> float:
    """Return the time of a measurement filter to begin with: a two-hundredth of the trial."""
    return float(f"{sheet.trial.duration / 200.0:.2g}")


def with_feedforward(sheet: Sheet, kind: str) -> Sheet:
    """Return a sheet with feedforward of a kind, its number to begin with, or none for any other word."""
    begun = {
        "static": lambda: Feedforward("static", gain=_first_gain(sheet)),
        "inverse": lambda: Feedforward("inverse", filter_time=first_time(sheet)),
    }
    feedforward = begun[kind]() if kind in begun else None
    return replace(sheet, controller=replace(sheet.controller, feedforward=feedforward))


def _first_gain(sheet: Sheet) -> float:
    """Return the effort that a unit of reference takes in the end, 1/G(0) of the nominal plant; 0 without such one."""
    from tuner.compare.choosing import static_gain

    try:
        return float(f"{static_gain(sheet):.4g}")
    except LoopError:
        return 0.0


def with_disturbance_feedforward(sheet: Sheet, formula: str) -> Sheet:
    """Return a sheet with a measured disturbance's path to the output, none for an empty formula."""
    present = sheet.controller.disturbance_feedforward
    path = replace(present, expression=formula) if present else DisturbanceFeedforward(formula)
    wanted = path if formula.strip() else None
    return replace(sheet, controller=replace(sheet.controller, disturbance_feedforward=wanted))


def with_limit(sheet: Sheet, measure: str, limit: float) -> Sheet:
    """Return a sheet with a limit on a measure: in its place when there was one, else the last."""
    limits = dict(sheet.limits) | {measure: limit}
    return replace(sheet, limits=tuple(limits.items()))


def without_limit(sheet: Sheet, measure: str) -> Sheet:
    """Return a sheet without a limit on a measure."""
    return replace(sheet, limits=tuple((name, limit) for name, limit in sheet.limits if name != measure))


def unit_of(parameter: Parameter | Measure, sheet: Sheet) -> str:
    """Return the unit of a parameter or a measure in the units of a sheet's loop."""
    return unit_in(parameter.unit, sheet.loop)


def _replaced(held: Any, names: list[str], value: object) -> Any:  # noqa: ANN401 # blocks of every kind
    name, *below = names
    return replace(held, **{name: _replaced(getattr(held, name), below, value) if below else value})
