"""Sheets of our invention for the tests of the trial."""

from dataclasses import replace

from tuner.model.controller import Controller
from tuner.model.family import Member
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

NOMINAL = (Member("nominal", {}),)


def sheet(expression: str, controller: Controller, trial: Trial, manipulated: Manipulated | None = None) -> Sheet:
    """Return a sheet of a plant without parameters, actuator and sensor without lags."""
    loop = Loop("invented", controlled=Signal(), manipulated=manipulated or Manipulated())
    return Sheet(loop, ExpressionPlant(expression), controller, trial)


def heater() -> Sheet:
    """Return a sampled loop in which everything acts: limits, rate, dead time, lags, resolution, filters."""
    parameters = (
        PlantParameter("gain", 0.9, spread=Spread(0.8, 1.0)),
        PlantParameter("delay", 4.0, spread=Spread(3.0, 6.0)),
        PlantParameter("lag", 32.0),
    )
    plain = sheet(
        "gain exp(-delay s)/((lag s + 1)(6 s + 1))",
        Controller(
            sample_time=0.5, gain_1=3.0, gain_2=0.08, gain_3=6.0, filter_time=0.6, windup_time=12.0,
            measurement_filter=0.4, delay_samples=1,
        ),
        Trial(duration=120.0, reference=5.0, disturbance=10.0),
        Manipulated(low=0.0, high=52.0, resting=40.0, rate=8.0),
    )  # fmt: skip
    return replace(
        plain,
        loop=replace(plain.loop, controlled=Signal(resting=72.0)),
        plant=ExpressionPlant(plain.plant.expression, parameters),  # type: ignore[union-attr]  # a formula
        actuator=Actuator(0.8),
        sensor=Sensor(lag=1.5, resolution=0.1),
    )
