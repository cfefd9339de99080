"""The five ways to say what a plant is, side by side: what was typed in one is kept while another is shown."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Literal

from tuner.errors import TrimwrightError
from tuner.model.physics import PHYSICS
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    StateSpacePlant,
    ZeroPolePlant,
)

PlantForm = Literal["formula", "coefficients", "zeros and poles", "state space", "physics"]

PLANT_FORMS: tuple[PlantForm, ...] = ("formula", "coefficients", "zeros and poles", "state space", "physics")

_OF_TYPE: dict[type, PlantForm] = {
    ExpressionPlant: "formula",
    CoefficientPlant: "coefficients",
    ZeroPolePlant: "zeros and poles",
    StateSpacePlant: "state space",
    PhysicsPlant: "physics",
}


def form_of(plant: Plant) -> PlantForm:
    """Return the form in which a plant is given."""
    return _OF_TYPE[type(plant)]


@dataclass(frozen=True, slots=True)
class PlantForms:
    """What was last typed in each form.

    Parameters
    ----------
    typed : tuple of Plant
        What was last typed in each form, at most one of each; what was converted is not among them.
    seen : tuple of Plant
        What each form has shown since a plant was last changed by hand, at most one of each.
    spare : tuple of PlantParameter
        Parameters that the formula used once and does not now, with the numbers that were typed for them.
    """

    typed: tuple[Plant, ...] = ()
    seen: tuple[Plant, ...] = ()
    spare: tuple[PlantParameter, ...] = ()

    def edited(self, plant: Plant) -> "PlantForms":
        """Return the forms after the plant was changed by hand."""
        others = tuple(other for other in self.typed if type(other) is not type(plant))
        return replace(self, typed=(*others, plant), seen=(plant,))

    def switched(self, after: Plant) -> "PlantForms":
        """Return the forms after another form was chosen, which shows this plant."""
        return replace(self, seen=self.seen if after in self.seen else (*self.seen, after))

    def remembered(self, form: PlantForm) -> Plant | None:
        """Return what was last typed in a form, None if nothing was."""
        return next((plant for plant in self.typed if form_of(plant) == form), None)

    def shown_before(self, form: PlantForm) -> Plant | None:
        """Return the plant as another form showed it, if nothing was changed by hand since; else None."""
        return next((plant for plant in self.seen if form_of(plant) == form), None)


@dataclass(frozen=True, slots=True)
class Switch:
    """What came of showing a plant in another form: the plant, and a remark when it is not the same one."""

    plant: Plant
    remark: str = ""


def switch(plant: Plant, forms: PlantForms, form: PlantForm, convert: Callable[[Plant, PlantForm], Plant]) -> Switch:
    """Return a plant in another form: as it was typed there, else converted, else what was typed there before.

    Parameters
    ----------
    convert : callable
        Gives a plant in a form, or raises a `TrimwrightError` when it has none there.
    """
    before = forms.shown_before(form)
    if before is not None:
        return Switch(before)
    try:
        return Switch(convert(plant, form))
    except TrimwrightError as refusal:
        remembered = forms.remembered(form)
        return Switch(remembered or start(form), _remark(refusal, remembered))


def start(form: PlantForm) -> Plant:
    """Return a first plant in a form, to be overwritten: a first-order lag, or the first physical model."""
    model = next(iter(PHYSICS.values()))
    quantities = tuple(PlantParameter(one.name, one.default, one.unit) for one in model.parameters)
    plants: dict[PlantForm, Plant] = {
        "formula": ExpressionPlant("gain / (lag s + 1)", (PlantParameter("gain", 1.0), PlantParameter("lag", 1.0))),
        "coefficients": CoefficientPlant((1.0,), (1.0, 1.0)),
        "zeros and poles": ZeroPolePlant((), (-1.0 + 0.0j,), 1.0),
        "state space": StateSpacePlant(((-1.0,),), (1.0,), (1.0,)),
        "physics": PhysicsPlant(model.name, quantities),
    }
    return plants[form]


def _remark(refusal: TrimwrightError, remembered: Plant | None) -> str:
    source = "as it was last typed here" if remembered else "a first plant to be overwritten"
    return f"Not converted ({refusal}); this is {source}."
