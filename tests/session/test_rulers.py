"""Which numbers have a ruler."""

from dataclasses import replace

from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.session.rulers import rulers_of

LAW = ["kp", "ki", "kd", "filter_time", "b", "c", "windup_time"]


def keys(controller: Controller) -> list[str]:
    """Return the keys of the rulers of a controller."""
    return [one.key for one in rulers_of(controller)]


def test_a_controller_without_blocks_has_those_of_its_law() -> None:
    """In the present form of the gains."""
    assert keys(Controller()) == LAW
    assert keys(Controller("series"))[:3] == ["kc", "ti", "td"]


def test_every_block_that_is_there_brings_its_own() -> None:
    """After those of the law, in the order of the signal."""
    rich = Controller(
        measurement_filter=0.5, lead_lag=LeadLag(1.0, 0.2), notch=Notch(2.0), reference_filter=ReferenceFilter(1.0)
    )
    assert keys(rich)[len(LAW) :] == [
        "reference_filter.time",
        "measurement_filter.time",
        "lead_lag.lead",
        "lead_lag.lag",
        "notch.frequency",
        "notch.depth",
        "notch.width",
    ]


def test_each_kind_of_feedforward_has_its_own_number() -> None:
    """Static its gain, inverse its filter time; a dynamic one of a disturbance the time of lags that may be absent."""
    static = Controller(feedforward=Feedforward("static", gain=0.0))
    assert keys(static)[len(LAW) :] == ["feedforward.gain"]
    assert keys(replace(static, feedforward=Feedforward("inverse", filter_time=1.0)))[len(LAW) :] == [
        "feedforward.filter_time"
    ]
    dynamic = Controller(disturbance_feedforward=DisturbanceFeedforward("1/(s + 1)"))
    assert keys(dynamic)[len(LAW) :] == ["disturbance_feedforward.filter_time"]
    fixed = Controller(disturbance_feedforward=DisturbanceFeedforward("1/(s + 1)", kind="static"))
    assert keys(fixed) == LAW
