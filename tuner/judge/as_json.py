"""An assessment as the plain object that other programs read: strict JSON, infinity as a string."""

from collections.abc import Mapping
from math import isfinite, isnan
from typing import Any

from tuner.judge.assessment import Assessment
from tuner.simulate.traces import Array, ComplexArray, Trace

Json = dict[str, Any]


def as_json(assessment: Assessment, *, traces: bool = False) -> Json:
    """Return an assessment as dictionaries, lists, numbers and texts.

    Parameters
    ----------
    traces : bool
        Whether to add the two runs of the nominal plant: t, r, y, u, deviations from the resting point.
    """
    nominal = assessment.nominal
    found: Json = {
        "title": assessment.title,
        "verdict": assessment.verdict,
        "family_size": assessment.family_size,
        "nominal": {"stable": nominal.stable, **_numbers(nominal.measures)},
        "worst": {name: {"value": number(w.value), "plant": w.plant} for name, w in assessment.worst.items()},
        "limits": [
            {
                "measure": limit.measure,
                "limit": number(limit.limit),
                "value": number(limit.value),
                "plant": limit.plant,
                "met": limit.met,
            }
            for limit in assessment.limits
        ],
        "poles": _pairs(nominal.poles),
        "notes": list(assessment.notes),
    }
    if assessment.instability is not None:
        found["instability"] = _instability(assessment)
    if traces:
        runs = nominal.traces
        found["traces"] = {"reference": _trace(runs.reference), "disturbance": _trace(runs.disturbance)}
    return found


def _instability(assessment: Assessment) -> Json:
    runaway = assessment.instability
    if runaway is None:
        return {}
    return {
        "plant": runaway.plant,
        "growth": number(runaway.growth),
        "doubling_time": number(runaway.doubling_time),
        "frequency": number(runaway.frequency),
        "gain": runaway.gain,
        "edge": number(runaway.edge),
        "sentence": runaway.sentence,
    }


def number(value: float | None) -> float | str | None:
    """Return a number as JSON can say it: infinity as "inf" or "-inf", what is none as null."""
    if value is None or isnan(value):
        return None
    if isfinite(value):
        return float(value)
    return "inf" if value > 0.0 else "-inf"


def _numbers(values: Mapping[str, float | None]) -> Json:
    return {name: number(value) for name, value in values.items()}


def _pairs(poles: ComplexArray) -> list[list[float]]:
    """Return poles as [real, imaginary], each of a conjugate pair listed, rightmost first."""
    order = sorted(poles.tolist(), key=lambda pole: (-pole.real, abs(pole.imag), -pole.imag))
    return [[pole.real + 0.0, pole.imag + 0.0] for pole in order]


def _trace(trace: Trace) -> Json:
    return {"t": _list(trace.t), "r": _list(trace.r), "y": _list(trace.y), "u": _list(trace.u)}


def _list(values: Array) -> list[float | str | None]:
    plain: list[float | str | None] = values.tolist()
    return plain if all(isfinite(value) for value in values.tolist()) else [number(value) for value in values.tolist()]
