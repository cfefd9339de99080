"""Make the plant of a sheet from its table, in whichever of the five forms it is given."""

from collections import Counter
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any, Final

from tuner.errors import Fault, nearest
from tuner.files import words
from tuner.files.drifts import read_drifts
from tuner.files.named_parameters import formula_names, physical_parameters, plant_parameters, told_names
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PhysicsPlant, Plant, StateSpacePlant, ZeroPolePlant

Table = dict[str, Any]


@dataclass(frozen=True, slots=True)
class PlantForm:
    """One way to give a plant.

    Parameters
    ----------
    telling : tuple of str
        Keys that belong to this form alone, and so tell it.
    needed, optional : tuple of str
        Keys that it must and may have.
    """

    telling: tuple[str, ...]
    needed: tuple[str, ...]
    optional: tuple[str, ...] = ()

    @property
    def title(self) -> str:
        """The keys that make the form, in words."""
        return " + ".join(self.telling)


EXPRESSION: Final = PlantForm(("expression",), ("expression",), ("parameters",))
COEFFICIENTS: Final = PlantForm(("numerator", "denominator"), ("numerator", "denominator"), ("dead_time", "spread"))
ZEROS_POLES: Final = PlantForm(("zeros", "poles", "gain"), ("poles", "gain"), ("zeros", "dead_time", "spread"))
STATE_SPACE: Final = PlantForm(("a", "b", "c", "d"), ("a", "b", "c"), ("d", "dead_time", "spread"))
PHYSICS: Final = PlantForm(("physics",), ("physics",), ("parameters",))
FORMS: Final = (EXPRESSION, COEFFICIENTS, ZEROS_POLES, STATE_SPACE, PHYSICS)


@dataclass(frozen=True, slots=True)
class PlantText:
    """The table of the plant as written, the same without faulty values, and the names that other formulas use."""

    written: Table
    sound: Table
    names_elsewhere: dict[str, int]


def form_of(table: Table) -> PlantForm | None:
    """Return the one form whose keys a table has; None when there is not exactly one."""
    forms = [form for form in FORMS if any(key in table for key in form.telling)]
    return forms[0] if len(forms) == 1 else None


def check_form(written: Table) -> list[Fault]:
    """Tell of a plant given in no form, in several, in half a form, or with keys that its form does not have."""
    form = form_of(written)
    if form is None:
        every = " | ".join(form.title for form in FORMS)
        told = [key for form in FORMS for key in form.telling if key in written]
        return [Fault("plant", f"exactly one of {every}", " and ".join(told) or "none of them")]
    missing = [Fault(f"plant.{key}", f"this key beside {form.title}", "nothing") for key in form.needed]
    known = {*form.needed, *form.optional}
    extra = [
        _extra(key, form)
        for key in written
        if key in ("dead_time", "parameters", "spread") and key not in known and written[key] != {}
    ]
    return [fault for fault in missing if fault.key.removeprefix("plant.") not in written] + extra


def _extra(key: str, form: PlantForm) -> Fault:
    if key == "dead_time" and form is EXPRESSION:
        return Fault("plant.dead_time", "the dead time in the formula, as exp(-delay s)", "a key of its own")
    return Fault(f"plant.{key}", f"only keys that go with {form.title}", "one of another form")


def read_plant(text: PlantText, faults: list[Fault]) -> Plant | None:
    """Return the plant of a sheet, adding to the faults what is wrong with it; None when it cannot be made."""
    found = check_form(text.written)
    faults += found
    form = form_of(text.written)
    if form is None or not all(key in text.sound for key in form.needed):
        return None
    return _READERS[form](text, faults)


def _expression(text: PlantText, faults: list[Fault]) -> Plant:
    expression: str = text.sound["expression"]
    named = text.written.get("parameters", {})
    used = formula_names(expression, "plant.expression", faults)
    if used is not None and isinstance(named, dict):
        faults += told_names(used, text.names_elsewhere, named)
    return ExpressionPlant(expression, plant_parameters(text.sound.get("parameters", {}), faults))


def _physics(text: PlantText, faults: list[Fault]) -> Plant:
    from tuner.model.physics import PHYSICS as MODELS

    name: str = text.sound["physics"]
    if name not in MODELS:
        known = ", ".join(f'"{model}"' for model in MODELS)
        faults.append(Fault("plant.physics", f"one of {known}", words.quoted(name), nearest(name, MODELS)))
        return PhysicsPlant(name)
    given = plant_parameters(text.sound.get("parameters", {}), faults)
    return PhysicsPlant(name, physical_parameters(MODELS[name], given, faults))


def _coefficients(text: PlantText, faults: list[Fault]) -> Plant:
    table = text.sound
    numerator, denominator = (_leading_dropped(table[key]) for key in ("numerator", "denominator"))
    for key, kept in (("numerator", numerator), ("denominator", denominator)):
        if not kept:
            faults.append(Fault(f"plant.{key}", "at least one number other than 0", "zeros alone"))
    if denominator and len(numerator) > len(denominator):
        most = f"at most {len(denominator)} coefficients, as many as the denominator has"
        faults.append(Fault("plant.numerator", most, f"{len(numerator)}: the plant would be improper"))
    plant = CoefficientPlant(_numbers(table["numerator"]), _numbers(table["denominator"]), _dead_time(table))
    return replace(plant, parameters=read_drifts(plant, table.get("spread", {}), faults))


def _leading_dropped(coefficients: list[float]) -> list[float]:
    """Return the coefficients from the first that is not zero on."""
    first = next((index for index, value in enumerate(coefficients) if value != 0), len(coefficients))
    return coefficients[first:]


def _zeros_poles(text: PlantText, faults: list[Fault]) -> Plant:
    table = text.sound
    zeros, poles = (_roots(table.get(key, []), f"plant.{key}", faults) for key in ("zeros", "poles"))
    if len(zeros) > len(poles):
        most = f"at most {len(poles)} zeros, as many as there are poles"
        faults.append(Fault("plant.zeros", most, f"{len(zeros)}: the plant would be improper"))
    if table["gain"] == 0:
        faults.append(Fault("plant.gain", "a number other than 0", "0"))
    plant = ZeroPolePlant(zeros, poles, float(table["gain"]), _dead_time(table))
    return replace(plant, parameters=read_drifts(plant, table.get("spread", {}), faults))


def _roots(written: list[Any], key: str, faults: list[Fault]) -> tuple[complex, ...]:
    roots = tuple(complex(*root) if isinstance(root, list) else complex(root) for root in written)
    alone = Counter(roots) - Counter(root.conjugate() for root in roots)
    for root in alone:
        real, above, below = (words.number(part) for part in (root.real, root.imag, -root.imag))
        expected = f"its conjugate [{real}, {below}] beside [{real}, {above}]"
        faults.append(Fault(key, expected, "none"))
    return roots


def _state_space(text: PlantText, faults: list[Fault]) -> Plant:
    table = text.sound
    a, b, c = table["a"], table["b"], table["c"]
    order = len(a)
    for index, row in enumerate(a):
        if len(row) != order:
            faults.append(Fault("plant.a", f"a square array, {order} by {order}", f"{len(row)} in row {index + 1}"))
    for key, vector in (("b", b), ("c", c)):
        if len(vector) != order:
            numbers = f"{order} number{'s' if order > 1 else ''}, one for each row of a"
            faults.append(Fault(f"plant.{key}", numbers, f"{len(vector)}"))
    rows = tuple(_numbers(row) for row in a)
    plant = StateSpacePlant(rows, _numbers(b), _numbers(c), float(table.get("d", 0.0)), _dead_time(table))
    return replace(plant, parameters=read_drifts(plant, table.get("spread", {}), faults))


def _numbers(values: list[float]) -> tuple[float, ...]:
    return tuple(float(value) for value in values)


def _dead_time(table: Table) -> float:
    return float(table.get("dead_time", 0.0))


_READERS: Final[dict[PlantForm, Callable[[PlantText, list[Fault]], Plant]]] = {
    EXPRESSION: _expression,
    COEFFICIENTS: _coefficients,
    ZEROS_POLES: _zeros_poles,
    STATE_SPACE: _state_space,
    PHYSICS: _physics,
}
