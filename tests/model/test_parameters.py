"""The table of parameters holds together."""

from dataclasses import fields

import pytest

from tuner.model.controller import Controller, Feedforward, Notch
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.parameters import (
    AS_FOUND_KEYS,
    BLOCKS,
    GAIN_KEYS,
    PARAMETERS,
    Kind,
    Parameter,
    find,
    in_section,
    rulers,
)
from tuner.model.sheet import Actuator, Sensor, Trial
from tuner.model.units import unit_in

BLOCK_OF = {
    "loop": Loop("A"),
    "loop.controlled": Signal(),
    "loop.manipulated": Manipulated(),
    "actuator": Actuator(),
    "sensor": Sensor(),
    "controller.feedforward": Feedforward("static"),
    "controller.notch": Notch(1.0),
    "trial": Trial(1.0),
}


def test_paths_are_unique() -> None:
    """No key is declared twice, and each is found by its path."""
    paths = [parameter.path for parameter in PARAMETERS]
    assert len(paths) == len(set(paths))
    assert all(find(parameter.path) is parameter for parameter in PARAMETERS)
    with pytest.raises(KeyError):
        find("controller.nothing")


@pytest.mark.parametrize("parameter", PARAMETERS, ids=lambda parameter: parameter.path)
def test_a_parameter_is_whole(parameter: Parameter) -> None:
    """It has a sentence, a unit that can be filled in, words when it is a choice, and a default within its range."""
    assert parameter.sentence.endswith(".")
    assert "{" not in unit_in(parameter.unit, Loop("x"))
    assert bool(parameter.choices) == (parameter.kind is Kind.CHOICE)
    if isinstance(parameter.default, str):
        assert parameter.default in (parameter.choices or ("",))
    elif parameter.default is not None and parameter.minimum is not None:
        assert parameter.minimum <= parameter.default <= (parameter.maximum or float("inf"))
    assert not (parameter.required and parameter.default is not None)


@pytest.mark.parametrize(("section", "block"), BLOCK_OF.items())
def test_the_model_has_the_defaults_of_the_table(section: str, block: object) -> None:
    """Each section's keys are the fields of its block, and what a block has by itself is what the table says."""
    keys = {parameter.name: parameter for parameter in in_section(section)}
    own = {field.name for field in fields(block)} - {"controlled", "manipulated"}  # type: ignore[arg-type] # a dataclass
    assert set(keys) == own
    for name, parameter in keys.items():
        if not parameter.required and parameter.name != "gain":
            assert getattr(block, name) == parameter.default


def test_the_controller_has_the_defaults_of_the_table() -> None:
    """A bare controller is what a sheet without its keys makes."""
    every_gain = {name for names in GAIN_KEYS.values() for name in names}
    for form, gains in GAIN_KEYS.items():
        controller = Controller(form=form)  # type: ignore[arg-type] # the three forms
        left_out = every_gain - set(gains) | {"form", "sample_time"}
        for parameter in in_section("controller"):
            if parameter.name not in left_out:
                assert controller.value(parameter.name) == parameter.default


@pytest.mark.parametrize("form", GAIN_KEYS)
def test_rulers_are_those_of_the_form(form: str) -> None:
    """A form's rulers begin with its gains and hold none of another form's."""
    names = [parameter.name for parameter in rulers(form)]
    assert names == [*GAIN_KEYS[form], "filter_time", "b", "c", "windup_time"]


def test_as_found_repeats_the_controller() -> None:
    """Every key of the controller and every block around the law may differ as found."""
    assert set(AS_FOUND_KEYS) == {parameter.name for parameter in in_section("controller")}
    sections = {
        parameter.section.removeprefix("controller.") for parameter in PARAMETERS if "controller." in parameter.section
    }
    assert sections == set(BLOCKS)
