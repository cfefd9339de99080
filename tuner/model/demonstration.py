"""A demonstration: what is done to a loop, and when, so that others see for themselves what it does then."""

from dataclasses import dataclass
from typing import Literal


@dataclass(frozen=True, slots=True)
class SetController:
    """Other numbers of the controller, each by its key, dotted in a block."""

    values: tuple[tuple[str, float], ...]


@dataclass(frozen=True, slots=True)
class SetReference:
    """The reference goes to a value, engineering units, within the time `over`; 0 for a step."""

    to: float
    over: float = 0.0


@dataclass(frozen=True, slots=True)
class SetDisturbance:
    """A disturbance of this size acts from now on, as a deviation of the effort; 0 ends it."""

    size: float


@dataclass(frozen=True, slots=True)
class SetNoise:
    """The noise of the sensor is turned on or off."""

    on: bool


@dataclass(frozen=True, slots=True)
class SetPlant:
    """The plant drifts: values of some of its parameters by name; none of them for the nominal plant."""

    values: tuple[tuple[str, float], ...]


@dataclass(frozen=True, slots=True)
class SetMode:
    """The effort is set by hand from now on, or by the law."""

    mode: Literal["manual", "automatic"]


@dataclass(frozen=True, slots=True)
class SetEffort:
    """The effort is taken in hand and set, engineering units."""

    effort: float


@dataclass(frozen=True, slots=True)
class Stop:
    """The loop is brought to manual at the resting effort, the disturbance ends."""


Deed = SetController | SetReference | SetDisturbance | SetNoise | SetPlant | SetMode | SetEffort | Stop


@dataclass(frozen=True, slots=True)
class Action:
    """What is done at a time, in time units since the start, and what is said of it; either may be missing."""

    at: float
    deed: Deed | None = None
    say: str = ""


@dataclass(frozen=True, slots=True)
class Demonstration:
    """Actions on the loop of a sheet, in the order of their times.

    Parameters
    ----------
    title : str
        What it is called.
    sheet : str
        Path of the tuning sheet, relative to the demonstration's file.
    speed : float
        Factor of real time at which it is to be watched.
    """

    title: str
    sheet: str
    actions: tuple[Action, ...]
    speed: float = 1.0

    @property
    def duration(self) -> float:
        """Time of the last action, time units."""
        return self.actions[-1].at if self.actions else 0.0
