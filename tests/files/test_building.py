"""The model of a sheet, made from tables that are known to be right."""

from dataclasses import replace
from typing import Any

import pytest

from tests.files.told import HEATER as TEXT
from tuner.files.building import build
from tuner.files.sheet import parse
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, Notch
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Actuator, Sensor, Trial

PLANT = ExpressionPlant("1/s")


def tables(**controller: object) -> dict[str, Any]:
    """Return the tables of the shortest sheet, with more keys in the controller."""
    return {"loop": {"title": "A"}, "controller": {"sample_time": 0} | controller, "trial": {"duration": 9}}


def built(**controller: object) -> Controller:
    """Return the controller that these keys make."""
    return build(tables(**controller), PLANT).controller


def as_found(**keys: object) -> Controller:
    """Return the controller as found, beside one with two blocks, windup protection and gains of 2, 1 and 0.5."""
    now: dict[str, object] = {"kp": 2, "ki": 1, "kd": 0.5, "windup_time": 3, "notch": {"frequency": 4}}
    found = built(**now, measurement_filter={"time": 0.5}, as_found=keys).as_found
    assert found is not None
    return found


def test_absent_keys_have_their_defaults() -> None:
    """The shortest sheet is one of a bare loop in seconds."""
    sheet = build(tables(), PLANT)
    assert sheet.loop == Loop("A", "s", Signal(), Manipulated())
    assert (sheet.controller, sheet.trial) == (Controller(), Trial(9.0, 1.0, 0.0, 2.0))
    assert (sheet.actuator, sheet.sensor, sheet.limits) == (Actuator(), Sensor(), ())


def test_whole_numbers_become_what_the_model_computes_with() -> None:
    """A number is a float however it is written, a count an integer, a flag and a word stay what they are."""
    controller = built(kp=3, delay_samples=2.0, feedback=False, action="direct")
    values = [controller.gain_1, controller.delay_samples, controller.feedback, controller.action]
    assert [(value, type(value)) for value in values] == [(3.0, float), (2, int), (False, bool), ("direct", str)]


@pytest.mark.parametrize(
    ("form", "keys"),
    [("parallel", ("kp", "ki", "kd")), ("standard", ("kc", "ti", "td")), ("series", ("kc", "ti", "td"))],
)
def test_the_gains_of_each_form_have_their_places(form: str, keys: tuple[str, str, str]) -> None:
    """The three keys of a form are its first, second and third gain; one left out is 0."""
    controller = built(form=form, **dict(zip(keys, (1, 2, 3), strict=True)))
    assert (controller.form, controller.gain_1, controller.gain_2, controller.gain_3) == (form, 1.0, 2.0, 3.0)
    assert built(form=form, **{keys[1]: 2}) == Controller(form, 0.0, 0.0, 2.0, 0.0)  # type: ignore[arg-type] # a form


def test_blocks_are_those_that_are_there() -> None:
    """Each block is made with its own defaults, one without a table is absent."""
    blocks = {"feedforward": {"kind": "static", "gain": 2}, "disturbance_feedforward": {"expression": "1/(s + 1)"}}
    assert built(**blocks, notch={"frequency": 3}, measurement_filter={"time": 1}) == Controller(
        feedforward=Feedforward("static", 2.0),
        disturbance_feedforward=DisturbanceFeedforward("1/(s + 1)"),
        measurement_filter=1.0,
        notch=Notch(3.0, 0.1, 1.0),
    )
    assert built() == Controller()


def test_limits_keep_their_order() -> None:
    """Limits come as they are written, each bound a float."""
    sheet = build(tables() | {"limits": {"settling_time": 9, "overshoot": 8}}, PLANT)
    assert sheet.limits == (("settling_time", 9.0), ("overshoot", 8.0))


def test_as_found_takes_over_what_it_leaves_out() -> None:
    """Gains and blocks not named are the controller's; "none" takes one away; another form starts from no gains."""
    lines = "[controller.as_found]\nkp = 1\nwindup_time = 'none'\n#"
    controller = parse(TEXT.replace("[controller.as_found] ", lines)).controller
    assert controller.as_found == replace(controller, gain_1=1.0, windup_time=None, as_found=None)
    other = parse(
        TEXT.replace("[controller.as_found] ", "[controller.as_found]\nform = 'series'\nkc = 2\n#")
    ).controller
    assert other.as_found == replace(other, form="series", gain_1=2.0, gain_2=0.0, gain_3=0.0, as_found=None)


def test_as_found_says_what_was_not_there() -> None:
    """With "none" a number or a block that the controller has now was not there."""
    found = as_found(windup_time="none", notch="none", measurement_filter="none", kp=9)
    assert (found.windup_time, found.notch, found.measurement_filter) == (None, None, 0.0)
    assert (found.gain_1, found.gain_2, found.gain_3) == (9.0, 1.0, 0.5)


def test_as_found_may_have_other_blocks() -> None:
    """A block of the as-found table takes the place of the controller's, with its own defaults."""
    found = as_found(notch={"frequency": 7}, feedforward={"kind": "static", "gain": 1})
    assert (found.notch, found.measurement_filter) == (Notch(7.0), 0.5)
    assert found.feedforward == Feedforward("static", 1.0)


def test_gains_of_another_form_are_not_taken_over() -> None:
    """A controller found in another form starts from no gains; the same form named again keeps them."""
    assert as_found(form="series", kc=4).gain_2 == 0.0
    assert as_found(form="parallel", kp=4).gain_2 == 1.0
