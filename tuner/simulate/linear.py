"""A linear single-input single-output system with dead time: its zeros and poles, and a state space of them."""

import math
from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from tuner.errors import LoopError
from tuner.simulate.sections import cascade, reference_frequency
from tuner.simulate.traces import Array, ComplexArray

_CONJUGATE_TOLERANCE = 1e-9
_ROUNDING = float(np.finfo(float).eps)


@dataclass(frozen=True, slots=True, eq=False)
class Linear:
    """A proper rational system behind a dead time: gain * prod(s - z) / prod(s - p) * exp(-dead_time s).

    Common factors of numerator and denominator are kept, so that a hidden mode stays visible.

    Parameters
    ----------
    zeros, poles : ndarray of complex, shapes (m,) and (n,), m <= n
        In rad per time unit, each complex one beside its exact conjugate.
    gain : float
        Factor of the quotient of monic polynomials; not the static gain.
    a, b, c, d : ndarray, shapes (n, n), (n,), (n,), and float
        A state space of the rational part, x' = a x + b u, y = c x + d u.
    dead_time : float
        Time units, zero or more.
    """

    zeros: ComplexArray
    poles: ComplexArray
    gain: float
    a: Array
    b: Array
    c: Array
    d: float
    dead_time: float

    @property
    def order(self) -> int:
        """Number of states."""
        return len(self.poles)

    def response(self, s: ArrayLike) -> ComplexArray:
        """Return the value at any complex `s`, dead time included: complex, shape of `s`; infinite at a pole.

        Where `s` is a pole and a zero at once the factors are left out in pairs. Every factor is scaled, so that no
        product overflows on the way although its end is moderate.
        """
        at: ComplexArray = np.asarray(s, dtype=complex)
        value, surplus = _rational(self, at)
        value = np.where(surplus > 0, 0.0, np.where(surplus < 0, complex(math.inf), value))
        with np.errstate(over="ignore", invalid="ignore"):
            return value * np.exp(-self.dead_time * at) if self.dead_time else value

    def static_gain(self) -> float:
        """Return the limit at s -> 0 along positive s: 0 with a zero there, infinite with an integrator, sign kept."""
        value, surplus = _rational(self, np.zeros(1, dtype=complex))
        limit = float(value[0].real)
        if surplus[0] > 0 or limit == 0.0:
            return 0.0
        return math.copysign(math.inf, limit) if surplus[0] < 0 else limit


def from_zeros_poles(zeros: Iterable[complex], poles: Iterable[complex], gain: float, dead_time: float = 0.0) -> Linear:
    """Make a system from zeros and poles, with a cascade of first- and second-order sections as its state space.

    Raises
    ------
    LoopError
        When there are more zeros than poles, a conjugate is missing, a number is not finite, or the dead time negative.
    """
    ordered_zeros = with_conjugates(zeros, "zero")
    ordered_poles = with_conjugates(poles, "pole")
    if not math.isfinite(gain):
        raise LoopError(f"the gain must be a finite number, found {gain:g}")
    if len(ordered_zeros) > len(ordered_poles):
        raise LoopError(
            f"the numerator has degree {len(ordered_zeros)}, above the denominator's {len(ordered_poles)}: "
            "such a plant would react before it is acted upon"
        )
    a, b, c, d = cascade(ordered_zeros, ordered_poles, gain)
    return Linear(ordered_zeros, ordered_poles, float(gain), a, b, c, d, checked_dead_time(dead_time))


def from_state_space(a: Array, b: Array, c: Array, d: float = 0.0, dead_time: float = 0.0) -> Linear:
    """Make a system from x' = a x + b u, y = c x + d u, which are kept as they are.

    Poles are eigenvalues, hidden ones included. Zeros are those of the system matrix, found by deflating the
    infinite ones with orthogonal transformations (after Emami-Naeini and Van Dooren, Automatica 18, 1982; from memory).

    Raises
    ------
    LoopError
        When the shapes do not fit or a number is not finite.
    """
    a, b, c, d = _checked_state_space(a, b, c, d)
    balanced, scale = _balanced(a)
    zeros, gain = _zeros_and_gain(balanced, b / scale, c * scale, d)
    poles = _eigenvalues(balanced)
    return Linear(zeros, poles, gain, a, b, c, d, checked_dead_time(dead_time))


def constant(gain: float) -> Linear:
    """Return a pure gain."""
    return from_zeros_poles((), (), gain)


def lag(time: float) -> Linear:
    """Return the first-order lag 1/(time s + 1); unity when `time` is 0.

    Raises
    ------
    LoopError
        When `time` is negative or not finite.
    """
    if not (0.0 <= time < math.inf):
        raise LoopError(f"a lag must be zero or a positive time, found {time:g}")
    return from_zeros_poles((), (-1.0 / time,), 1.0 / time) if time else constant(1.0)


def with_conjugates(roots: Iterable[complex], kind: str) -> ComplexArray:
    """Return roots with every complex one beside its exact conjugate, reals first and exactly real.

    Raises
    ------
    LoopError
        When a root is not finite or has no conjugate.
    """
    given = [complex(root) for root in roots]
    for root in given:
        if not (math.isfinite(root.real) and math.isfinite(root.imag)):
            raise LoopError(f"every {kind} must be a finite number, found {root:g}")
    reals = [complex(root.real) for root in given if root.imag == 0.0]
    above = [root for root in given if root.imag > 0.0]
    below = [root for root in given if root.imag < 0.0]
    pairs = [pair for root in above for pair in _pair(root, below, kind)]
    if below:
        raise LoopError(f"the {kind} {below[0]:g} lacks its conjugate {below[0].conjugate():g}")
    return np.array(reals + pairs, dtype=complex)


def checked_dead_time(dead_time: float) -> float:
    """Return the dead time.

    Raises
    ------
    LoopError
        When it is negative or not finite.
    """
    if not (0.0 <= dead_time < math.inf):
        raise LoopError(f"the dead time must be zero or a positive time, found {dead_time:g}")
    return float(dead_time)


def _pair(root: complex, below: list[complex], kind: str) -> tuple[complex, complex]:
    mirror = root.conjugate()
    partner = min(below, key=lambda other: abs(other - mirror), default=None)
    if partner is None or abs(partner - mirror) > _CONJUGATE_TOLERANCE * abs(root):
        raise LoopError(f"the {kind} {root:g} lacks its conjugate {mirror:g}")
    below.remove(partner)
    return root, mirror


def _rational(system: Linear, s: ComplexArray) -> tuple[ComplexArray, Array]:
    """Return the rational part without the factors that vanish, and how many more zeros than poles vanished."""
    reference = reference_frequency(system.zeros, system.poles)
    zeros = system.zeros[np.argsort(np.abs(system.zeros))]
    poles = system.poles[np.argsort(np.abs(system.poles))]
    value: ComplexArray = np.ones(s.shape, dtype=complex)
    surplus: Array = np.zeros(s.shape)
    scales = []
    with np.errstate(over="ignore", under="ignore", invalid="ignore"):
        for index, pole in enumerate(poles):
            scale = abs(pole) or reference
            factor = (s - pole) / scale
            surplus -= factor == 0.0
            value = value / np.where(factor == 0.0, 1.0, factor)
            scales.append(1.0 / scale)
            if index < len(zeros):
                scale = abs(zeros[index]) or reference
                factor = (s - zeros[index]) / scale
                surplus += factor == 0.0
                value = value * np.where(factor == 0.0, 1.0, factor)
                scales.append(scale)
        return value * product((system.gain, *scales)), surplus


def product(factors: Iterable[float]) -> float:
    """Return a product that neither over- nor underflows on the way; infinite only if the end is."""
    mantissa, exponent = 1.0, 0
    for factor in factors:
        part, shift = math.frexp(factor)
        mantissa, more = math.frexp(mantissa * part)
        exponent += shift + more
    return math.ldexp(mantissa, exponent) if exponent <= 1024 else math.copysign(math.inf, mantissa)


def _checked_state_space(a: Array, b: Array, c: Array, d: float) -> tuple[Array, Array, Array, float]:
    b, c = np.array(b, dtype=float).reshape(-1), np.array(c, dtype=float).reshape(-1)
    order = len(b)
    a = np.array(a, dtype=float)
    a = a.reshape(0, 0) if a.size == 0 else a
    if a.shape != (order, order) or c.shape != (order,):
        raise LoopError(
            f"a state space needs a square a with as many rows as b and c have numbers, "
            f"found a of shape {a.shape}, b with {order} and c with {len(c)}"
        )
    if not (np.isfinite(a).all() and np.isfinite(b).all() and np.isfinite(c).all() and math.isfinite(d)):
        raise LoopError("a state space needs finite numbers in a, b, c and d")
    return a, b, c, float(d)


def _balanced(a: Array) -> tuple[Array, Array]:
    """Return a diagonal similarity of `a` with rows and columns of like size, and the scale of each state."""
    if a.size == 0:
        return a, np.ones(0)
    from scipy.linalg import matrix_balance

    balanced, (scale, _) = matrix_balance(a, permute=False, separate=True)
    return np.asarray(balanced, dtype=float), np.asarray(scale, dtype=float)


def _eigenvalues(a: Array) -> ComplexArray:
    """Return eigenvalues with conjugates beside each other; those that are zero but for rounding are zero."""
    if a.size == 0:
        return np.zeros(0, dtype=complex)
    values = np.linalg.eigvals(a).astype(complex)
    tiny = 10.0 * len(a) * _ROUNDING * float(np.linalg.norm(a, 1))
    return with_conjugates(np.where(np.abs(values) <= tiny, 0.0, values), "pole")


def _zeros_and_gain(a: Array, b: Array, c: Array, d: float) -> tuple[ComplexArray, float]:
    """Return the finite zeros, and the first Markov parameter that is not zero; gain 0 when there is none.

    While there is no direct term, holding the output at zero ties one state to the rest: it is turned into the last
    by a reflection and becomes the output of a system that is smaller by one, with the same finite zeros.
    """
    gain = 1.0
    while d == 0.0:
        size = float(np.linalg.norm(c)) if len(c) else 0.0
        if size == 0.0:
            return np.zeros(0, dtype=complex), 0.0
        reflection = _reflection(c, size)
        a, b = reflection @ a @ reflection, reflection @ b
        gain *= size
        a, b, c, d = a[:-1, :-1], b[:-1], a[-1, :-1], _cleaned(float(b[-1]), float(np.linalg.norm(b)))
    return _eigenvalues(a - np.outer(b, c) / d), gain * d


def _reflection(c: Array, size: float) -> Array:
    """Return the symmetric orthogonal matrix that turns `c` into (0, ..., 0, size)."""
    direction = c / size
    direction[-1] -= 1.0
    square = float(direction @ direction)
    identity = np.eye(len(c))
    return identity if square == 0.0 else identity - np.outer(direction, direction) * (2.0 / square)


def _cleaned(value: float, scale: float) -> float:
    return 0.0 if abs(value) <= 1e-14 * scale else value
