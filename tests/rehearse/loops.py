"""Loops to rehearse, of our own invention."""

from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter, spread_percent
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

LAW = Controller(sample_time=0.5, gain_1=3.0, gain_2=0.08, gain_3=6.0, filter_time=0.6, b=0.7, windup_time=12.0)


def oven(law: Controller = LAW, *, limited: bool = True, noise: float = 0.05) -> Sheet:
    """Return a drying oven: a lag with dead time, a valve that saturates and is slow, a sensor that lags."""
    low, high, rate = (0.0, 100.0, 8.0) if limited else (None, None, None)
    return Sheet(
        loop=Loop(
            "Drying oven",
            controlled=Signal("Air temperature", "degC", None, None, 72.0),
            manipulated=Manipulated("Gas valve", "%", low, high, 40.0, rate=rate),
        ),
        plant=ExpressionPlant(
            "gain exp(-delay s)/((lag s + 1)(6 s + 1))",
            (
                PlantParameter("gain", 0.9, spread=spread_percent(0.9, 15.0)),
                PlantParameter("delay", 4.2, spread=spread_percent(4.2, 30.0)),
                PlantParameter("lag", 32.0),
            ),
        ),
        controller=law,
        trial=Trial(240.0, reference=5.0, disturbance=10.0),
        actuator=Actuator(0.8),
        sensor=Sensor(1.5, noise=noise),
    )


RICH = Controller(
    sample_time=0.5, gain_1=2.0, gain_2=0.05, gain_3=4.0, filter_time=0.6, b=0.8, c=0.1, windup_time=15.0,
    delay_samples=1, feedforward=Feedforward("inverse", filter_time=3.0), reference_filter=ReferenceFilter(2.0, 2),
    disturbance_feedforward=DisturbanceFeedforward("0.5 exp(-9 s)/(20 s + 1)", filter_time=2.0, resting=3.0),
    measurement_filter=0.4, lead_lag=LeadLag(1.0, 0.4), notch=Notch(2.0, 0.2, 0.9),
)  # fmt: skip
"""Every block there is."""
