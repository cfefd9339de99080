"""Transfer functions as products of factors: nothing is expanded but sums, and nothing cancels."""

import math
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from tuner.errors import LoopError
from tuner.simulate.linear import product, with_conjugates
from tuner.simulate.traces import Array

_CANCELLED = 1e-14
"""A coefficient that is this much smaller than the parts it is the sum of is zero."""

_SAME_DEAD_TIME = 1e-12


@dataclass(frozen=True, slots=True)
class Factored:
    """gain * prod(s - z) / prod(s - p) * exp(-dead_time s); a dead time below zero is a prediction."""

    gain: float
    zeros: tuple[complex, ...] = ()
    poles: tuple[complex, ...] = ()
    dead_time: float = 0.0

    @property
    def is_constant(self) -> bool:
        """Whether s is not in it."""
        return self.gain == 0.0 or not (self.zeros or self.poles or self.dead_time)

    def times(self, other: "Factored") -> "Factored":
        """Return the product."""
        gain = self.gain * other.gain
        if gain == 0.0:
            return Factored(0.0)
        return Factored(gain, self.zeros + other.zeros, self.poles + other.poles, self.dead_time + other.dead_time)

    def inverse(self) -> "Factored":
        """Return one over it; the gain must not be zero."""
        return Factored(1.0 / self.gain, self.poles, self.zeros, -self.dead_time)

    def power(self, exponent: int) -> "Factored":
        """Return a whole power."""
        base = self if exponent >= 0 else self.inverse()
        count = abs(exponent)
        return Factored(base.gain**count, base.zeros * count, base.poles * count, base.dead_time * count)


VARIABLE = Factored(1.0, (0j,))
"""The variable s."""


def total(terms: Sequence[Factored]) -> Factored:
    """Return the sum over the least common denominator, zeros that all terms share kept as factors.

    Raises
    ------
    LoopError
        When terms have different dead times.
    """
    terms = [term for term in terms if term.gain]
    if not terms:
        return Factored(0.0)
    dead_time = _common_dead_time(terms)
    if not any(term.poles or len(term.zeros) > 1 for term in terms):
        return _first_degree(terms, dead_time)
    poles = _union([Counter(term.poles) for term in terms])
    shared = _intersection([Counter(term.zeros) for term in terms])
    numerators = [list((Counter(term.zeros) - shared + (poles - Counter(term.poles))).elements()) for term in terms]
    gain, zeros = _sum_of_products([term.gain for term in terms], numerators)
    if gain == 0.0:
        return Factored(0.0)
    return Factored(gain, (*shared.elements(), *zeros), tuple(poles.elements()), dead_time)


def quotient(numerator: Sequence[float], denominator: Sequence[float]) -> Factored:
    """Return a quotient of polynomials, coefficients from the highest power; the denominator must not be zero."""
    over, under = np.trim_zeros(np.array(numerator, float), "f"), np.trim_zeros(np.array(denominator, float), "f")
    if not len(over):
        return Factored(0.0)
    return Factored(float(over[0] / under[0]), tuple(roots(over)), tuple(roots(under)))


def roots(coefficients: Array) -> list[complex]:
    """Return the roots of a real polynomial, highest power first and not zero; conjugates are exact.

    Roots at the origin are exact, those of degrees one and two as good as their coefficients; the others are
    eigenvalues of the companion matrix in a scaled variable, each then improved by Newton's method.
    """
    inner = np.trim_zeros(coefficients, "b")
    origin = [0j] * (len(coefficients) - len(inner))
    if len(inner) == 1:
        return origin
    if len(inner) == 2:
        return [*origin, complex(-inner[1] / inner[0])]
    return origin + (_quadratic_roots(*map(float, inner)) if len(inner) == 3 else _companion_roots(inner))


def _common_dead_time(terms: Sequence[Factored]) -> float:
    first = terms[0].dead_time
    for term in terms:
        if abs(term.dead_time - first) > _SAME_DEAD_TIME * max(abs(first), abs(term.dead_time)):
            raise LoopError(
                f"parts with different dead times, {first:g} and {term.dead_time:g}, cannot be added: "
                "a plant has one dead time, as a factor of the whole"
            )
    return first


def _first_degree(terms: Sequence[Factored], dead_time: float) -> Factored:
    """Add terms k and k (s - z): most sums are of this kind, as in (lag s + 1)."""
    slope = _cleaned_sum([term.gain for term in terms if term.zeros])
    level = _cleaned_sum([-term.gain * term.zeros[0].real if term.zeros else term.gain for term in terms])
    if slope == 0.0:
        return Factored(level, dead_time=dead_time) if level else Factored(0.0)
    return Factored(slope, (complex(-level / slope) if level else 0j,), (), dead_time)


def _cleaned_sum(parts: Sequence[float]) -> float:
    result = sum(parts)
    return 0.0 if abs(result) <= _CANCELLED * sum(map(abs, parts)) else result


def _union(counts: Sequence[Counter[complex]]) -> Counter[complex]:
    result: Counter[complex] = Counter()
    for count in counts:
        result |= count
    return result


def _intersection(counts: Sequence[Counter[complex]]) -> Counter[complex]:
    result = counts[0]
    for count in counts[1:]:
        result &= count
    return result


def _sum_of_products(gains: Sequence[float], factors: Sequence[Sequence[complex]]) -> tuple[float, list[complex]]:
    """Return gain and roots of a sum of products of (s - root), expanded in a variable of about the roots' size."""
    sizes = [abs(root) for group in factors for root in group if root]
    scale = math.exp(math.fsum(map(math.log, sizes)) / len(sizes)) if sizes else 1.0
    degree = max(map(len, factors))
    parts = np.zeros((len(gains), degree + 1))
    for row, gain, group in zip(parts, gains, factors, strict=True):
        size = product((gain, *[scale] * len(group)))
        row[degree - len(group) :] = size * _expanded([root / scale for root in group])
    coefficients = parts.sum(axis=0)
    coefficients[np.abs(coefficients) <= _CANCELLED * np.abs(parts).sum(axis=0)] = 0.0
    coefficients = np.trim_zeros(coefficients, "f")
    if not len(coefficients):
        return 0.0, []
    gain = product((float(coefficients[0]), *[1.0 / scale] * (len(coefficients) - 1)))
    return gain, [root * scale for root in roots(coefficients)]


def _expanded(factors: Sequence[complex]) -> Array:
    """Multiply out a product of (s - root), complex roots in exact pairs, in real numbers."""
    result = np.ones(1)
    for root in factors:
        if root.imag == 0.0:
            result = np.convolve(result, (1.0, -root.real))
        elif root.imag > 0.0:
            result = np.convolve(result, (1.0, -2.0 * root.real, abs(root) ** 2))
    return result


def _quadratic_roots(a: float, b: float, c: float) -> list[complex]:
    """Return the roots of a s^2 + b s + c without cancellation; a double root is double where rounding leaves it so."""
    half, square = -0.5 * b / a, c / a
    inside = half * half - square
    if abs(inside) <= 4.0 * float(np.finfo(float).eps) * max(half * half, abs(square)):
        return [complex(half)] * 2
    if inside < 0.0:
        return [complex(half, math.sqrt(-inside)), complex(half, -math.sqrt(-inside))]
    large = half + math.copysign(math.sqrt(inside), half)
    return [complex(large), complex(square / large)]


def _companion_roots(coefficients: Array) -> list[complex]:
    degree = len(coefficients) - 1
    scale = math.exp((math.log(abs(coefficients[-1])) - math.log(abs(coefficients[0]))) / degree)
    scaled = coefficients * scale ** np.arange(degree, -1.0, -1.0)
    scaled /= np.max(np.abs(scaled))
    found = with_conjugates(np.roots(scaled), "root")
    improved = [_improved(scaled, root) for root in found if root.imag >= 0.0]
    return [scale * each for root in improved for each in ([root, root.conjugate()] if root.imag else [root])]


def _improved(coefficients: Array, root: complex) -> complex:
    """Return a root after a few steps of Newton's method, each taken only while it lowers the remainder."""
    slope = np.polyder(coefficients)
    left = abs(np.polyval(coefficients, root))
    for _ in range(4):
        rise = np.polyval(slope, root)
        if not left or not rise:
            return root
        better = complex(root - np.polyval(coefficients, root) / rise)
        after = abs(np.polyval(coefficients, better))
        if not after < left:
            return root
        root, left = better, after
    return root
