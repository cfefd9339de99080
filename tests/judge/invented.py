"""Invented family results for the tests of judging."""

from collections.abc import Mapping
from typing import Any

import numpy as np

from tuner.judge.assessment import MemberResult
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.measures import MEASURES
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.traces import Trace, Traces

LOOP = Loop(
    "Kiln zone",
    "min",
    Signal("Temperature", "degC", 0.0, 900.0, 640.0),
    Manipulated("Gas valve", "%", 0.0, 100.0, 40.0),
)


def sheet(limits: Mapping[str, float] | None = None, **trial: float) -> Sheet:
    """Return a sheet with limits; reference 10 degC, disturbance 5 %, 120 min unless said."""
    numbers: dict[str, Any] = {"duration": 120.0, "reference": 10.0, "disturbance": 5.0} | trial
    return Sheet(
        LOOP,
        ExpressionPlant("1/(s + 1)"),
        Controller(),
        Trial(**numbers),
        limits=tuple((limits or {}).items()),
    )


def trace(step: float = 10.0) -> Trace:
    """Return a first-order rise to `step` with time constant 10."""
    t = np.linspace(0.0, 120.0, 1201)
    y = step * (1.0 - np.exp(-t / 10.0))
    return Trace(t, np.full_like(t, step), y, np.zeros_like(t), np.arange(0, 1201, 10), np.zeros(121, np.bool_), True)


def member(
    name: str = "nominal", *, stable: bool = True, poles: tuple[complex, ...] = (-0.1,), **measures: float | None
) -> MemberResult:
    """Return a member whose measures are 1 unless said."""
    values = {measure.name: 1.0 for measure in MEASURES} | measures
    reasons = {name: "the loop is unstable" for name, value in values.items() if value is None}
    return MemberResult(
        name=name,
        stable=stable,
        measures=values,
        poles=np.array(poles, np.complex128),
        traces=Traces(trace(), trace(0.0)),
        reasons=reasons,
        final_reference=10.0,
        final_disturbance=0.0,
    )
