"""What was typed in one form of the plant, kept while another is shown."""

import pytest

from tuner.errors import LoopError
from tuner.model.plant import CoefficientPlant, ExpressionPlant, Plant, ZeroPolePlant
from tuner.session.plant_forms import PLANT_FORMS, PlantForm, PlantForms, form_of, start, switch

FORMULA = ExpressionPlant("1 / (s + 1)")
NUMBERS = CoefficientPlant((1.0,), (1.0, 1.0))
TYPED = PlantForms((FORMULA,), (FORMULA,))


def _refuse(_plant: Plant, _form: PlantForm) -> Plant:
    raise LoopError("no way")


@pytest.mark.parametrize("form", PLANT_FORMS)
def test_every_form_has_a_first_plant(form: PlantForm) -> None:
    """The first plant of a form is one of that form."""
    assert form_of(start(form)) == form


def test_what_was_converted_is_not_typed() -> None:
    """A converted plant is alike, and what was typed in its form is still the older one."""
    forms = TYPED.edited(NUMBERS).switched(ZeroPolePlant((), (-1 + 0j,), 1.0))
    assert forms.remembered("zeros and poles") is None
    assert forms.shown_before("coefficients") == NUMBERS
    assert forms.remembered("formula") == FORMULA
    assert forms.shown_before("formula") is None


def test_a_look_at_a_form_without_conversion_forgets_nothing() -> None:
    """After a form that could not show the plant, all forms seen before it come back as they were."""
    forms = TYPED.switched(NUMBERS).switched(start("physics"))
    assert forms.shown_before("formula") == FORMULA
    assert forms.shown_before("coefficients") == NUMBERS
    assert forms.edited(start("physics")).shown_before("formula") is None


def test_a_refused_conversion_shows_what_was_typed_there_last() -> None:
    """Rather what was typed in the form before than a first plant, and the remark says which."""
    forms = TYPED.edited(NUMBERS)
    switched = switch(NUMBERS, forms, "formula", _refuse)
    assert switched.plant == FORMULA
    assert switched.remark == "Not converted (no way); this is as it was last typed here."
    assert switch(NUMBERS, PlantForms(), "formula", _refuse).plant == start("formula")
