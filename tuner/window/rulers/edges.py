"""Where the footing changes along a ruler: the nearest edges, the places beside them, and all of it in words."""

from collections.abc import Iterator
from itertools import pairwise

import numpy as np

from tuner.footing.classes import WORDS, Edge, PaintedTrack
from tuner.judge.wording import number
from tuner.session.ruler_range import RulerRange

BESIDE = 0.01
"""How far from an edge a key lands, as a share of the value, or of a linear scale: edges are known to half of it."""

_DIGITS = 3
_TOLD = 2
"""So many edges are told on each side of a value."""


def class_of(track: PaintedTrack, value: float | None) -> int:
    """Return the class at one value; None is that of the off notch."""
    return int(track.class_at(np.array([value or 0.0]))[0])


def around(track: PaintedTrack, value: float | None) -> tuple[Edge | None, Edge | None]:
    """Return the nearest edges below and above a value."""
    at = value or 0.0
    below = [edge for edge in track.edges if edge.value <= at]
    above = [edge for edge in track.edges if edge.value > at]
    return below[-1] if below else None, above[0] if above else None


def stop_beyond(track: PaintedTrack, span: RulerRange, value: float | None, direction: int) -> float | None:
    """Return the next place beside an edge, up or down: first the near side of the edge, then the far side.

    The value itself where there is no edge any more.
    """
    at = value or 0.0
    ahead = [stop for stop in _stops(track, span) if (stop - at) * direction > 1e-9 * abs(at)]
    if not ahead:
        return value
    stop = min(ahead) if direction > 0 else max(ahead)
    return span.off if span.has_off and stop < span.low else stop


def in_words(track: PaintedTrack, span: RulerRange, value: float | None) -> str:
    """Say the class at a value and how far it reaches: "firm; soft from 4.2, lost from 7.9; soft below 1.1"."""
    at = value or 0.0
    up = [f"{WORDS[edge.above]} from {edge_number(edge)}" for edge in track.edges if edge.value > at]
    down = [_below(edge, span) for edge in reversed(track.edges) if edge.value <= at]
    parts = [", ".join(side[:_TOLD]) for side in (up, down) if side]
    word = WORDS[class_of(track, value)]
    return "; ".join((word, *parts)) if parts else f"{word} along the whole ruler"


def edge_number(edge: Edge) -> str:
    """Return the place of an edge in three digits, which is as well as it is known."""
    return number(edge.value, _DIGITS)


def _below(edge: Edge, span: RulerRange) -> str:
    where = "when off" if span.has_off and edge.value < span.low else f"below {edge_number(edge)}"
    return f"{WORDS[edge.below]} {where}"


def _stops(track: PaintedTrack, span: RulerRange) -> Iterator[float]:
    """Yield the places on both sides of every edge; those of two close edges meet in the middle between them."""
    places = [edge.value for edge in track.edges]
    bounds = [-np.inf, *places, np.inf]
    middles = [0.5 * (low + high) for low, high in pairwise(bounds)]
    for place, before, behind in zip(places, middles[:-1], middles[1:], strict=True):
        reach = BESIDE * (place if span.logarithmic else span.high - span.low)
        yield _on_scale(span, max(_rounded(place - reach), before))
        yield _on_scale(span, min(_rounded(place + reach), behind), up=True)


def _on_scale(span: RulerRange, stop: float, *, up: bool = False) -> float:
    """Return a stop on the scale; one under its low end is off where there is an off notch, else the end."""
    if stop < span.low:
        return 0.0 if span.has_off and not up else span.low
    return min(stop, span.high)


def _rounded(value: float) -> float:
    return float(f"{value:.3e}")
