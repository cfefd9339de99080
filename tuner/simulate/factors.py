"""The loop gain as factors: zeros, poles, gain and delay, for a continuous loop in s and a sampled one in z - 1."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from math import pi

import numpy as np
from numpy.typing import NDArray

from tuner.simulate.traces import Array, ComplexArray

Index = NDArray[np.intp]


@dataclass(frozen=True, slots=True, eq=False)
class Factors:
    """A loop gain L = gain * prod(x - zeros) / prod(x - poles) * exp(-delay s).

    Parameters
    ----------
    zeros, poles : ndarray of complex
        In x: x = s for a continuous loop, x = z - 1 for a sampled one, where digits near z = 1 are kept.
    gain : float
        Factor of the quotient of monic polynomials. 0 for a loop that is open.
    delay : float
        Time units; whole samples for a sampled loop.
    step : float
        Time between samples; 0 for a continuous loop.
    """

    zeros: ComplexArray
    poles: ComplexArray
    gain: float
    delay: float
    step: float

    def then(self, other: "Factors") -> "Factors":
        """Return the two one after the other; nothing cancels."""
        return Factors(
            np.concatenate((self.zeros, other.zeros)),
            np.concatenate((self.poles, other.poles)),
            self.gain * other.gain,
            self.delay + other.delay,
            self.step,
        )


@dataclass(frozen=True, eq=False)
class Stack:
    """Loop gains of one shape, one in each row, evaluated together; see `Factors`.

    Everything in x is divided by `unit`, so that no product of factors overflows while its end is moderate.

    Parameters
    ----------
    roots : ndarray of complex, shape (rows, zeros + poles)
        Zeros first, in units of `unit`.
    zero_count : int
        How many of them are zeros.
    gain, delay : ndarray, shape (rows,)
    step : float
    unit : float
    """

    roots: ComplexArray
    zero_count: int
    gain: Array
    delay: Array
    step: float
    unit: float

    @property
    def rows(self) -> int:
        """Number of loops."""
        return len(self.gain)

    @property
    def excess(self) -> int:
        """Poles less zeros."""
        return int(self.roots.shape[1]) - 2 * self.zero_count

    @cached_property
    def sign(self) -> Array:
        """+1 for each zero and -1 for each pole."""
        return np.where(np.arange(self.roots.shape[1]) < self.zero_count, 1.0, -1.0)

    @cached_property
    def modes(self) -> ComplexArray:
        """Zeros and poles in s, shape of `roots`; infinite where z = 0."""
        return to_s(self.roots * self.unit, self.step)

    def take(self, rows: Sequence[int] | Index) -> "Stack":
        """Return some of the rows."""
        return Stack(self.roots[rows], self.zero_count, self.gain[rows], self.delay[rows], self.step, self.unit)

    def response(self, w: Array) -> ComplexArray:
        """Return L at frequencies of shape (rows, n), or (n,) for all rows; shape (rows, n)."""
        w = np.broadcast_to(w, (self.rows, np.shape(w)[-1]))
        with np.errstate(all="ignore"):
            difference = self._x(w)[..., None] - self.roots[:, None, :]
            rational = difference[..., : self.zero_count].prod(-1) / difference[..., self.zero_count :].prod(-1)
            value: ComplexArray = rational * self.gain[:, None] * np.exp(-1j * self.delay[:, None] * w)
        return value

    def _x(self, w: Array) -> ComplexArray:
        s: ComplexArray = np.asarray(1j * w, dtype=complex)
        return to_x(s, self.step) / self.unit


def stack(factors: Sequence[Factors]) -> Stack:
    """Put loop gains of one shape together.

    Parameters
    ----------
    factors : sequence of Factors
        With the same numbers of zeros and of poles, and the same step.
    """
    zeros = np.array([one.zeros for one in factors])
    poles = np.array([one.poles for one in factors])
    roots = np.concatenate((zeros, poles), axis=1)
    step = factors[0].step
    unit = _unit(roots[0])
    gain = np.array([one.gain for one in factors]) * unit ** (zeros.shape[1] - poles.shape[1])
    return Stack(
        (roots / unit).astype(complex), zeros.shape[1], gain, np.array([one.delay for one in factors]), step, unit
    )


def to_s(x: ComplexArray, step: float) -> ComplexArray:
    """Map x to s: s = ln(1 + x)/step for a sampled loop, x itself for a continuous one."""
    if not step:
        return x
    # The real part of numpy's own complex log1p loses the digits near zero.
    with np.errstate(divide="ignore", over="ignore"):
        growth = 0.5 * np.log1p(np.maximum(2.0 * x.real + x.real * x.real + x.imag * x.imag, -1.0))
    s = np.empty(x.shape, dtype=complex)
    s.real, s.imag = growth / step, np.arctan2(x.imag, 1.0 + x.real) / step
    return s


def to_x(s: ComplexArray, step: float) -> ComplexArray:
    """Map s to x, the inverse of `to_s`."""
    return np.expm1(s * step).astype(complex) if step else s.astype(complex)


def folded(frequency: Array, step: float) -> Array:
    """Return frequencies of a sampled system folded to within the Nyquist frequency either side of zero."""
    period = 2.0 * pi / step
    within: Array = frequency - period * np.round(frequency / period)
    return within


def _unit(roots: ComplexArray) -> float:
    sizes = np.abs(roots)
    sizes = sizes[(sizes > 0.0) & (sizes < 1e12)]
    return float(np.exp(np.log(sizes).mean())) if len(sizes) else 1.0
