"""A sheet as plain tables: what each key says, and what its absence would say."""

from dataclasses import fields, replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.files.told import HEATER
from tuner.files.plain import Inherited, Leaf, Tree, Value, tree
from tuner.files.sheet import parse
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.parameters import BLOCKS
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    Spread,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)

TANK = PhysicsPlant("tank level, pumped outflow", (PlantParameter("area", 1.5, "m^2"),))
SHEET = replace(parse(HEATER), plant=ExpressionPlant("1/s"))


def table(of: Tree, *names: str) -> Tree:
    """Return a table within a tree."""
    for name in names:
        inner = of[name]
        assert isinstance(inner, dict)
        of = inner
    return of


def controller(found: Controller) -> Tree:
    """Return the tables of a controller."""
    return table(tree(replace(SHEET, controller=found)), "controller")


def plant(found: Plant) -> dict[str, Value]:
    """Return the values of a plant's own table."""
    return {name: leaf.value for name, leaf in _of_plant(found).items() if isinstance(leaf, Leaf)}


def _of_plant(found: Plant) -> Tree:
    return table(tree(replace(SHEET, plant=found)), "plant")


def spread_of(parameter: PlantParameter) -> Value:
    """Return how the spread of a parameter is written."""
    leaf = table(_of_plant(ExpressionPlant("1/s", (parameter,))), "parameters", parameter.name)["spread"]
    assert isinstance(leaf, Leaf)
    return leaf.value


def test_the_tables_stand_in_the_order_of_the_format() -> None:
    """The version comes first, then the loop, its blocks from plant to controller, the trial and the limits."""
    whole = tree(SHEET)
    assert list(whole) == ["sheet", "loop", "plant", "actuator", "sensor", "controller", "trial", "limits"]
    assert whole["limits"] == {name: Leaf(bound) for name, bound in SHEET.limits}


def test_every_number_of_the_controller_is_written() -> None:
    """No field of the controller is forgotten: each has its key, its table, or its three gains."""
    blocks = Controller(
        feedforward=Feedforward("static", 1.0),
        reference_filter=ReferenceFilter(1.0),
        disturbance_feedforward=DisturbanceFeedforward("1/s"),
        lead_lag=LeadLag(1.0, 1.0),
        notch=Notch(1.0),
        measurement_filter=1.0,
        as_found=Controller(),
    )
    gains = {"gain_1": "kp", "gain_2": "ki", "gain_3": "kd"}
    assert set(controller(blocks)) == {gains.get(field.name, field.name) for field in fields(Controller)}


def test_gains_have_the_names_of_their_form() -> None:
    """Only the gains of the present form are written, and those are shown even where they are 0."""
    found = controller(Controller("series", gain_1=2.0, gain_2=3.0))
    assert [found[key] for key in ("kc", "ti", "td")] == [Leaf(value, 0.0, shown=True) for value in (2.0, 3.0, 0.0)]
    assert found.keys().isdisjoint({"kp", "ki", "kd"})


def test_blocks_that_are_absent_have_no_table() -> None:
    """A controller without blocks has none of their tables."""
    assert controller(Controller()).keys().isdisjoint({*BLOCKS, "as_found"})


def test_as_found_implies_what_the_controller_has() -> None:
    """A key that the as-found table leaves out is the controller's; a number that was not there reads "none"."""
    found = Controller(gain_1=1.0, windup_time=None, b=0.5)
    written = table(controller(Controller(gain_1=2.0, windup_time=4.0, b=0.5, as_found=found)), "as_found")
    assert written["kp"] == Leaf(1.0, 2.0, shown=True)
    assert written["windup_time"] == Leaf("none", 4.0)
    assert written["b"] == Leaf(0.5, 0.5)


def test_gains_as_found_in_another_form_imply_nothing() -> None:
    """Gains of a form that the controller has not are compared with 0, which their absence means."""
    now = Controller("parallel", gain_1=2.0, gain_2=1.0, as_found=Controller("standard", gain_1=2.0))
    written = table(controller(now), "as_found")
    assert written["form"] == Leaf("standard", "parallel", shown=True)
    assert [written[key] for key in ("kc", "ti")] == [Leaf(2.0, 0.0, shown=True), Leaf(0.0, 0.0, shown=True)]


def test_blocks_as_found_are_inherited_absent_or_their_own() -> None:
    """A block that is the controller's need not be written, one that was not there reads "none", another stands."""
    found = Controller(measurement_filter=2.0, feedforward=Feedforward("static", 1.0))
    now = replace(found, notch=Notch(3.0), feedforward=Feedforward("static", 5.0), as_found=found)
    written = table(controller(now), "as_found")
    assert written["measurement_filter"] == Inherited({"time": Leaf(2.0)})
    assert written["notch"] == Leaf("none")
    assert table(written, "feedforward")["gain"] == Leaf(1.0)
    assert "disturbance_feedforward" not in written


@pytest.mark.parametrize(
    ("found", "values"),
    [
        (ExpressionPlant("1/s"), {"expression": "1/s"}),
        (
            CoefficientPlant((1.0,), (1.0, 2.0), 3.0),
            {"numerator": [1.0], "denominator": [1.0, 2.0], "dead_time": 3.0},
        ),
        (
            ZeroPolePlant((), (-1 + 2j, -1 - 2j, 0j), 4.0),
            {"zeros": [], "poles": [[-1.0, 2.0], [-1.0, -2.0], 0.0], "gain": 4.0, "dead_time": 0.0},
        ),
        (
            StateSpacePlant(((1.0,),), (2.0,), (3.0,), 4.0, 5.0),
            {"a": [[1.0]], "b": [2.0], "c": [3.0], "d": 4.0, "dead_time": 5.0},
        ),
        (TANK, {"physics": "tank level, pumped outflow"}),
    ],
)
def test_each_form_of_plant_has_its_keys(found: Plant, values: dict[str, Value]) -> None:
    """Real roots are plain numbers, complex ones pairs; a formula holds its dead time itself."""
    assert plant(found) == values


def test_physical_parameters_imply_their_defaults() -> None:
    """Value and unit of a quantity are implied by the model; the value is shown all the same."""
    quantity = table(_of_plant(TANK), "parameters", "area")
    assert quantity == {
        "value": Leaf(1.5, 1.5, shown=True),
        "unit": Leaf("m^2", "m^2"),
        "spread": Leaf(None),
    }


@pytest.mark.parametrize(
    ("percent", "written"),
    [(15.0, "15 %"), (12.5, "12.5 %"), (0.0, "0 %"), (1e-5, "0.00001 %"), (2.5e-7, "0.00000025 %"), (100.0, "100 %")],
)
def test_a_spread_in_percent_is_written_plainly(percent: float, written: str) -> None:
    """No point where none is needed, and never a power of ten, which no spread may have."""
    assert spread_of(PlantParameter("k", 2.0, "", spread_percent(2.0, percent))) == written


@given(st.floats(0.0, 100.0))
def test_a_spread_in_percent_keeps_its_number(percent: float) -> None:
    """What is written is the same percentage when it is read."""
    written = spread_of(PlantParameter("k", 2.0, "", spread_percent(2.0, percent)))
    assert float(str(written).removesuffix(" %")) == percent


def test_a_percentage_that_does_not_hold_is_not_written() -> None:
    """Ends that are not those of the percentage are written as ends; no spread writes nothing."""
    assert spread_of(PlantParameter("k", 3.0, "", spread_percent(2.0, 10.0))) == [1.8, 2.2]
    assert spread_of(PlantParameter("k", 3.0, "", Spread(1.0, 4.0))) == [1.0, 4.0]
    assert spread_of(PlantParameter("k", 3.0)) is None
