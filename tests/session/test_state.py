"""What each kind of change makes of the state that undo brings back."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.session.sheets import wash_bath
from tuner.errors import FormulaError, LoopError
from tuner.files.sheet import parse, render
from tuner.model.controller import DisturbanceFeedforward, Notch
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PhysicsPlant, Plant, PlantParameter, ZeroPolePlant
from tuner.session.plant_forms import PLANT_FORMS, PlantForm, start
from tuner.session.state import (
    State,
    first_state,
    typed_before,
    with_disturbance_path,
    with_formula,
    with_parameter,
    with_plant,
    with_plant_form,
    with_sheet,
    with_typed_plant,
)

BATH = first_state(wash_bath())
RISE = PlantParameter("rise", 0.3)


def shown(state: State, *forms: PlantForm) -> State:
    """Return a state with its plant looked at in one form after another."""
    for form in forms:
        state = with_plant_form(state, form).state
    return state


def names(state: State) -> list[str]:
    """Return the names of the plant's parameters."""
    return [parameter.name for parameter in state.sheet.plant.parameters]


def spare(state: State) -> list[str]:
    """Return the names that the formula used once."""
    return [parameter.name for parameter in state.forms.spare]


def with_path_as_found(state: State, text: str) -> State:
    """Return a state whose controller as found compensates a measured disturbance."""
    controller = state.sheet.controller
    found = replace(controller, disturbance_feedforward=DisturbanceFeedforward(text), as_found=None)
    return with_sheet(state, replace(state.sheet, controller=replace(controller, as_found=found)))


def test_a_sheet_just_opened_has_its_plant_typed() -> None:
    """The plant of the file counts as typed; nothing else was, and nothing is spare."""
    assert BATH.forms.remembered("formula") == BATH.sheet.plant
    assert [BATH.forms.remembered(form) for form in PLANT_FORMS[1:]] == [None] * 4
    assert (BATH.kept, BATH.forms.spare, typed_before(BATH)) == ((), (), None)


def test_another_sheet_is_shown_as_it_is() -> None:
    """The controller as found stays whole, whatever becomes of the present one."""
    found = replace(wash_bath().controller, action="direct", delay_samples=2, notch=Notch(0.5), as_found=None)
    controller = replace(wash_bath().controller, as_found=found)
    sheet = replace(wash_bath(), controller=replace(controller, gain_1=9.0, measurement_filter=2.0))
    assert with_sheet(BATH, sheet).sheet == sheet


def test_a_change_beside_the_plant_leaves_its_forms() -> None:
    """Only another plant counts as typed."""
    looked = shown(BATH, "coefficients")
    changed = replace(looked.sheet, trial=replace(looked.sheet.trial, duration=90.0))
    assert with_sheet(looked, changed).forms == looked.forms
    typed = with_sheet(looked, replace(changed, plant=CoefficientPlant((3.0,), (1.0, 1.0))))
    assert typed.forms.remembered("coefficients") == CoefficientPlant((3.0,), (1.0, 1.0))


def test_a_plant_that_cannot_be_made_is_refused() -> None:
    """What is no plant raises, so that the last one stays."""
    with pytest.raises(LoopError):
        with_plant(BATH, ExpressionPlant("s^2"))


def test_a_formula_brings_its_parameters() -> None:
    """New names get the value 1, old ones keep their numbers, those left over are spare and come back."""
    other = with_formula(BATH, "gain / ((lag s + 1)(tail s + 1))")
    values = [(parameter.name, parameter.value) for parameter in other.sheet.plant.parameters]
    assert values == [("gain", 0.8), ("lag", 50.0), ("tail", 1.0)]
    assert spare(other) == ["delay"]
    back = with_formula(other, "gain exp(-delay s) / (lag s + 1)")
    assert back.sheet.plant == wash_bath().plant
    assert spare(back) == []


@pytest.mark.parametrize(("text", "error"), [("gain / (lag s + ", FormulaError), ("lag s^2 + 1", LoopError)])
def test_a_formula_that_makes_no_plant_is_refused(text: str, error: type[Exception]) -> None:
    """One that cannot be read, and one that is improper, raise what is wrong with them."""
    with pytest.raises(error):
        with_formula(BATH, text)


def test_a_formula_after_numbers_begins_with_new_parameters() -> None:
    """Coefficients have no names that a formula could take over."""
    formula = with_formula(with_plant(BATH, CoefficientPlant((1.0,), (1.0, 1.0))), "k / (s + a)")
    assert formula.sheet.plant == ExpressionPlant("k / (s + a)", (PlantParameter("k", 1.0), PlantParameter("a", 1.0)))


def test_the_disturbance_path_shares_the_parameters() -> None:
    """A name used by the path alone is a parameter of the plant, and spare once the path is gone."""
    state = with_parameter(with_disturbance_path(BATH, "rise / (lag s + 1)"), RISE)
    assert names(state) == ["gain", "delay", "lag", "rise"]
    other = with_formula(state, "gain / (lag s + 1)")
    assert names(other) == ["gain", "lag", "rise"]
    without = with_disturbance_path(other, "")
    assert without.sheet.controller.disturbance_feedforward is None
    assert RISE in without.forms.spare


def test_a_path_that_cannot_be_read_is_refused() -> None:
    """The formula of the path raises where it goes wrong, whatever form the plant has."""
    for state in (BATH, shown(BATH, "coefficients")):
        with pytest.raises(FormulaError):
            with_disturbance_path(state, "rise / (")


def test_the_path_as_found_keeps_its_parameters() -> None:
    """Neither another formula nor another path takes the numbers that the path as found is written with."""
    state = with_parameter(with_disturbance_path(BATH, "rise / (lag s + 1)"), RISE)
    noted = with_path_as_found(state, "rise / (lag s + 1)")
    changed = with_disturbance_path(with_formula(noted, "gain / s"), "")
    assert names(changed) == ["gain", "rise", "lag"]
    assert RISE in changed.sheet.plant.parameters
    assert parse(render(changed.sheet)) == changed.sheet


@given(
    st.lists(st.sampled_from(["gain / s", "gain / (lag s + 1)", "exp(-delay s) / s", "1 / (tail s + 1)"]), max_size=6)
)
def test_no_number_is_lost_between_formulas(texts: list[str]) -> None:
    """Whatever formulas come between, each one back brings its parameters with the numbers typed for them."""
    state = BATH
    for text in texts:
        state = with_formula(state, text)
    assert with_formula(state, "gain exp(-delay s) / (lag s + 1)").sheet.plant == wash_bath().plant


def test_a_parameter_is_changed_where_it_is() -> None:
    """One in use changes the plant, a spare one waits with its new number, an unknown one changes nothing."""
    lag = PlantParameter("lag", 60.0, "s")
    assert lag in with_parameter(BATH, lag).sheet.plant.parameters
    other = with_formula(BATH, "gain / s")
    changed = with_parameter(other, lag)
    assert changed.sheet == other.sheet
    assert lag in changed.forms.spare
    assert with_parameter(BATH, PlantParameter("tail", 3.0)) == BATH


def test_the_formula_as_typed_comes_back() -> None:
    """A look at every other form and back brings the formula with its names and spreads."""
    assert shown(BATH, *PLANT_FORMS, "coefficients", "formula").sheet.plant == wash_bath().plant


@pytest.mark.parametrize(
    ("form", "plant"),
    [
        ("coefficients", CoefficientPlant((0.016,), (1.0, 0.02), 4.0)),
        ("zeros and poles", ZeroPolePlant((), (-0.02 + 0j,), 0.016, 4.0)),
    ],
)
def test_forms_are_converted(form: PlantForm, plant: Plant) -> None:
    """The nominal plant of the formula in other forms, without a remark."""
    switched = with_plant_form(BATH, form)
    assert (switched.state.sheet.plant, switched.remark) == (plant, "")


def test_a_form_without_conversion_says_so() -> None:
    """No numbers make a physical model: a first one is shown, with a remark, and the formula is not forgotten."""
    switched = with_plant_form(BATH, "physics")
    assert switched.state.sheet.plant == start("physics")
    assert switched.remark == (
        "Not converted (a physical model is chosen by name, not found from numbers); "
        "this is a first plant to be overwritten."
    )
    assert shown(switched.state, "formula").sheet.plant == wash_bath().plant


def test_a_physical_model_becomes_its_formula() -> None:
    """The formula of a physical model has its quantities with their numbers."""
    physics = shown(BATH, "physics")
    first, *others = physics.sheet.plant.parameters
    changed = with_parameter(physics, replace(first, value=0.07))
    assert isinstance(changed.sheet.plant, PhysicsPlant)
    assert shown(changed, "formula").sheet.plant.parameters == (replace(first, value=0.07), *others)


def test_what_was_typed_before_comes_back() -> None:
    """Numbers changed by hand make another formula, and the one typed before is still there to be brought back."""
    typed = with_plant(shown(BATH, "coefficients"), CoefficientPlant((2.0,), (1.0, 3.0, 2.0)))
    formula = shown(typed, "formula")
    assert formula.sheet.plant == ExpressionPlant("2 / (s^2 + 3 s + 2)")
    assert typed_before(formula) == wash_bath().plant
    back = with_typed_plant(formula)
    assert back.sheet.plant == wash_bath().plant
    assert typed_before(back) is None
    assert with_typed_plant(back) == back
