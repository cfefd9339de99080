"""Tunings: kept ones to compare with, and the words and marks that tell one from another."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from string import ascii_uppercase
from typing import Literal

from tuner.errors import LoopError
from tuner.model.controller import Controller, Form
from tuner.model.parameters import GAIN_KEYS

AS_FOUND = "as found"
"""The name of the tuning met on site, where those kept have letters."""

MarkKind = Literal["reset", "as_found", "kept"]


@dataclass(frozen=True, slots=True)
class KeptTuning:
    """A tuning set aside to compare with: a short name for the plots, a label in words, the controller."""

    name: str
    label: str
    controller: Controller


@dataclass(frozen=True, slots=True)
class Mark:
    """A value worth finding again on a ruler; None is the off notch of a value that may be absent."""

    kind: MarkKind
    label: str
    value: float | None


def free_name(kept: Iterable[KeptTuning]) -> str:
    """Return the first name not in use: A to Z, then A2, B2 ..."""
    taken = {tuning.name for tuning in kept}
    names = (f"{letter}{turn or ''}" for turn in (0, *range(2, 10_000)) for letter in ascii_uppercase)
    return next(name for name in names if name not in taken)


def in_words(controller: Controller) -> str:
    """Return the gains in words: "kp 3, ki 0.08, kd 6"."""
    keys = GAIN_KEYS[controller.form]
    return ", ".join(f"{key} {controller.value(key):.4g}" for key in keys)


def in_form_or_none(controller: Controller | None, form: Form) -> Controller | None:
    """Return a controller in another form, None when it has none there."""
    if controller is None:
        return None
    try:
        return controller.in_form(form)
    except LoopError:
        return None


def with_as_found(controller: Controller, found: Controller | None) -> Controller:
    """Return a controller with the whole one met on site beside it, which itself has none beside it."""
    return replace(controller, as_found=None if found is None else replace(found, as_found=None))


def beside(present: Controller, kept: Iterable[KeptTuning]) -> tuple[KeptTuning, ...]:
    """Return what is shown beside the present tuning: as found, unless it is that very one, then those kept."""
    found = present.as_found
    if found is None or found == with_as_found(present, None):
        return tuple(kept)
    return (KeptTuning(AS_FOUND, "the controller met on site", found), *kept)


def marks(name: str, present: Controller, opened: Controller, kept: Iterable[KeptTuning]) -> tuple[Mark, ...]:
    """Return the values of one number in the tunings worth finding again, in the present form of the gains."""
    sources: list[tuple[MarkKind, str, Controller | None]] = [
        ("reset", "as opened", opened),
        ("as_found", AS_FOUND, present.as_found),
        *(("kept", tuning.name, tuning.controller) for tuning in kept),
    ]
    there = [(kind, label, in_form_or_none(source, present.form)) for kind, label, source in sources]
    return tuple(
        Mark(kind, label, source.value(name)) for kind, label, source in there if source and has_number(source, name)
    )


def has_number(controller: Controller, name: str) -> bool:
    """Return whether a controller has the block that a number belongs to."""
    block, dot, _ = name.partition(".")
    return not dot or bool(getattr(controller, block))
