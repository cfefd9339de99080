"""The filters beside the law as the delivered files have them: one function for each, its sections in a row."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Protocol

from tuner.deliver.specification import Specification
from tuner.law import feedforward, translate
from tuner.law.expressions import bare
from tuner.law.translate import Statement
from tuner.simulate.feeding import Digital


@dataclass(frozen=True, slots=True)
class Stage:
    """One filter.

    Parameters
    ----------
    name : str
        Of its function; its memories begin with it.
    sentence : str
        What it makes of what.
    given : str
        What it is given: "reference" or "disturbance".
    digital : Digital
    """

    name: str
    sentence: str
    given: str
    digital: Digital

    @property
    def memories(self) -> tuple[str, ...]:
        """Names of what its sections keep from sample to sample, two for each."""
        count = len(self.digital.sections)
        return tuple(f"{self.name}_{place}_{half}" for place in range(1, count + 1) for half in (1, 2))


class Dialect(Protocol):
    """How a language writes the parts of a stage."""

    def number(self, value: float, /) -> str:
        """Return a number."""
        ...

    def memory(self, name: str, /) -> str:
        """Return something kept from sample to sample."""
        ...

    def note(self, text: str, /) -> str:
        """Return a comment."""
        ...

    def block(self, nodes: Sequence[Statement], names: Mapping[str, str], /) -> Iterator[str]:
        """Yield the lines of statements."""
        ...

    def assigned(self, name: str, value: str, /) -> str:
        """Return an assignment."""
        ...


def stages(specification: Specification) -> tuple[Stage, ...]:
    """Return the filters that a controller has, in the order in which they are taken."""
    feeds = specification.feeds
    known = (
        ("forward", "Effort of the feedforward from the reference, as a deviation", "reference", feeds.reference),
        ("against", "Effort of the feedforward from the disturbance, as a deviation", "disturbance", feeds.disturbance),
        ("asked_for", "Filtered reference, as a deviation", "reference", feeds.asked),
    )
    return tuple(Stage(name, told, given, one) for name, told, given, one in known if one is not None)


def start(stage: Stage, dialect: Dialect, given: str) -> str:
    """Return the expression that a stage begins with: the gain times the distance from rest."""
    (result,) = _scaled().results
    names = {"value": given, "resting": f"resting_{_OF[stage.given]}", "gain": dialect.number(stage.digital.gain)}
    return bare(result, names)


def body(stage: Stage, dialect: Dialect) -> Iterator[str]:
    """Yield the lines that take `value` through every section; the result is in `value`."""
    routine = _section()
    for place, constants in enumerate(stage.digital.sections, 1):
        names = dict(zip(feedforward.SECTION, map(dialect.number, constants), strict=True))
        names |= {f"memory_{half}": dialect.memory(f"{stage.name}_{place}_{half}") for half in (1, 2)}
        yield dialect.note(f"Section {place} of {len(stage.digital.sections)}")
        yield from dialect.block(routine.body, names)
        yield dialect.assigned("value", "out")


_OF = {"reference": "measurement", "disturbance": "disturbance"}
"""Whose resting value each input is measured from."""


@cache
def _scaled() -> translate.Routine:
    return translate.read(feedforward.scaled)


@cache
def _section() -> translate.Routine:
    return translate.read(feedforward.section, feedforward.SECTION)
