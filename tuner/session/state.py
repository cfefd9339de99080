"""What undo brings back, and what each kind of change makes of it."""

from dataclasses import dataclass, field, replace

from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward
from tuner.model.plant import ExpressionPlant, PhysicsPlant, Plant, PlantParameter
from tuner.model.sheet import Sheet
from tuner.session.plant_forms import PlantForm, PlantForms, form_of, switch
from tuner.session.tunings import KeptTuning


@dataclass(frozen=True, slots=True)
class Feedforwards:
    """The feedforwards of a controller, to be switched on again."""

    reference: Feedforward | None
    disturbance: DisturbanceFeedforward | None


@dataclass(frozen=True, slots=True)
class State:
    """The sheet, the kept tunings, the forms in which the plant was typed, and feedforwards that are switched off."""

    sheet: Sheet
    kept: tuple[KeptTuning, ...] = ()
    forms: PlantForms = field(default_factory=PlantForms)
    aside: Feedforwards | None = None


@dataclass(frozen=True, slots=True)
class Switched:
    """A state with its plant in another form, and a remark when it is not the same plant there."""

    state: State
    remark: str


def first_state(sheet: Sheet, kept: tuple[KeptTuning, ...] = ()) -> State:
    """Return the state of a sheet just opened."""
    return State(sheet, kept, PlantForms((sheet.plant,), (sheet.plant,)))


def with_sheet(state: State, sheet: Sheet) -> State:
    """Return the state with another sheet."""
    forms = state.forms if sheet.plant == state.sheet.plant else state.forms.edited(sheet.plant)
    return replace(state, sheet=sheet, forms=forms)


def with_feedforward_switched(state: State) -> State:
    """Return the state with the feedforwards taken out and set aside, or with those that were there brought back.

    Where none was ever there, nothing changes.
    """
    law, aside = state.sheet.controller, state.aside
    forward, against = law.feedforward, law.disturbance_feedforward
    if _acts(law):
        silent = replace(against, kind="none") if against else None
        off = replace(law, feedforward=None, disturbance_feedforward=silent)
        return replace(with_sheet(state, replace(state.sheet, controller=off)), aside=Feedforwards(forward, against))
    if aside is None:
        return state
    back = aside.disturbance if against is not None else None
    if back is not None and against is not None:
        back = replace(against, kind=back.kind, filter_time=back.filter_time)
    on = replace(law, feedforward=aside.reference, disturbance_feedforward=back)
    return replace(with_sheet(state, replace(state.sheet, controller=on)), aside=None)


def has_feedforward(state: State) -> bool:
    """Return whether there is feedforward that acts, or one that is switched off."""
    return state.aside is not None or _acts(state.sheet.controller)


def _acts(law: Controller) -> bool:
    against = law.disturbance_feedforward
    return law.feedforward is not None or (against is not None and against.acts)


def with_plant(state: State, plant: Plant) -> State:
    """Return the state with another plant.

    Raises
    ------
    TrimwrightError
        When the plant cannot be made.
    """
    from tuner.session.plants import made

    made(plant)
    return with_sheet(state, replace(state.sheet, plant=plant))


def with_formula(state: State, text: str) -> State:
    """Return the state with the plant written as another formula; its parameters follow the names in it.

    Raises
    ------
    TrimwrightError
        When the formula cannot be read, or is no plant.
    """
    from tuner.session.plants import names_in, with_names

    used = (*names_in(text), *_names_of_paths(state.sheet.controller))
    known = state.sheet.plant.parameters if isinstance(state.sheet.plant, ExpressionPlant) else ()
    plant, spare = with_names(ExpressionPlant(text, known), state.forms.spare, used)
    changed = with_plant(state, plant)
    return replace(changed, forms=replace(changed.forms, spare=spare))


def with_disturbance_path(state: State, text: str) -> State:
    """Return the state with another path of the measured disturbance; it shares the parameters of the plant's formula.

    Raises
    ------
    FormulaError
        When the formula cannot be read.
    """
    from tuner.session.fields import with_disturbance_feedforward
    from tuner.session.plants import names_in, with_names

    sheet, plant = with_disturbance_feedforward(state.sheet, text), state.sheet.plant
    used = _names_of_paths(sheet.controller)
    if not isinstance(plant, ExpressionPlant):
        return with_sheet(state, sheet)
    plant, spare = with_names(plant, state.forms.spare, (*names_in(plant.expression), *used))
    changed = with_sheet(state, replace(sheet, plant=plant))
    return replace(changed, forms=replace(changed.forms, spare=spare))


def _names_of_paths(controller: Controller) -> tuple[str, ...]:
    """Return the names in the paths of a measured disturbance, now and as found."""
    from tuner.session.plants import names_in

    paths = [one.disturbance_feedforward for one in (controller, controller.as_found) if one is not None]
    return tuple(name for path in paths if path is not None for name in names_in(path.expression))


def with_typed_plant(state: State) -> State:
    """Return the state with the plant as it was last typed in its present form; the same when it is, or none was."""
    typed = typed_before(state)
    return state if typed is None else with_sheet(state, replace(state.sheet, plant=typed))


def typed_before(state: State) -> Plant | None:
    """Return the plant last typed in the present form when it is another than the present one; else None."""
    typed = state.forms.remembered(form_of(state.sheet.plant))
    return None if typed == state.sheet.plant else typed


def with_parameter(state: State, parameter: PlantParameter) -> State:
    """Return the state with a named number of the plant changed, or one that its formula does not use now.

    Raises
    ------
    TrimwrightError
        When the plant cannot be made.
    """
    plant = state.sheet.plant
    if isinstance(plant, ExpressionPlant | PhysicsPlant) and parameter.name in [one.name for one in plant.parameters]:
        changed = tuple(parameter if other.name == parameter.name else other for other in plant.parameters)
        return with_plant(state, replace(plant, parameters=changed))
    spare = tuple(parameter if other.name == parameter.name else other for other in state.forms.spare)
    return replace(state, forms=replace(state.forms, spare=spare))


def with_plant_form(state: State, form: PlantForm) -> Switched:
    """Return the state with the plant in another form."""
    from tuner.session.plants import converted

    switched = switch(state.sheet.plant, state.forms, form, converted)
    after = switched.plant
    changed = replace(state, sheet=replace(state.sheet, plant=after), forms=state.forms.switched(after))
    return Switched(changed, switched.remark)
