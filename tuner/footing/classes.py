"""What is asked of the footing of a loop along a gain, and what is answered."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.errors import TrimwrightError
from tuner.model.controller import Controller
from tuner.model.parameters import find

Array = NDArray[np.float64]
Classes = NDArray[np.int8]

FIRM, SOFT, LOST, UNKNOWN = 0, 1, 2, 3
"""All limits met by the whole family; stable for the whole family, a limit missed; unstable for some plant."""

WORDS = ("firm", "soft", "lost", "unknown")


class Overtaken(TrimwrightError):  # noqa: N818 - nothing went wrong
    """A newer question has come; the answer to this one is not wanted any more."""


def never() -> bool:
    """Say that no newer question has come."""
    return False


@dataclass(frozen=True, slots=True, eq=False)
class Track:
    """One gain along its values, everything else held.

    Parameters
    ----------
    name : str
        Key of the sheet, as `Controller.with_value` takes it.
    values : ndarray, shape (n,)
        Rising, in the parameter's unit; may begin with 0 where that means off.
    """

    name: str
    values: Array


@dataclass(frozen=True, slots=True)
class Edge:
    """Where the class changes along a track: the value, within 0.5 %, and the classes below and above it."""

    value: float
    below: int
    above: int


@dataclass(frozen=True, slots=True, eq=False)
class PaintedTrack:
    """A track with the class at each of its values, and its edges, rising."""

    name: str
    values: Array
    classes: Classes
    edges: tuple[Edge, ...]

    def class_at(self, values: Array) -> Classes:
        """Return the class at any values, by the edges; that of the nearest end beyond the track.

        Parameters
        ----------
        values : ndarray, shape (k,)
        """
        if not self.edges:
            return np.full(len(values), self.classes[0] if len(self.classes) else UNKNOWN, dtype=np.int8)
        places = np.array([edge.value for edge in self.edges])
        between = np.array([self.edges[0].below, *(edge.above for edge in self.edges)], dtype=np.int8)
        found: Classes = between[np.searchsorted(places, values, side="right")]
        return found


def tuned(controller: Controller, name: str, value: float) -> Controller:
    """Return a controller with one number changed; 0 leaves out a number that is never 0, such as the wind-up time."""
    left_out = value == 0.0 and find(f"controller.{name}").above_minimum
    return controller.with_value(name, None if left_out else value)


def is_of_block(name: str) -> bool:
    """Tell whether a number of the controller is one of a block beside the law, such as "notch.depth"."""
    return "." in name


def painted(track: Track, classes: Classes, edges: Sequence[Edge]) -> PaintedTrack:
    """Return a track with its classes and edges, these in rising order."""
    return PaintedTrack(track.name, track.values, classes, tuple(sorted(edges, key=lambda edge: edge.value)))
