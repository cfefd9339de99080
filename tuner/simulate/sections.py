"""A state space from zeros and poles: a cascade of first- and second-order sections, each scaled to about one."""

import math
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tuner.simulate.traces import Array, ComplexArray


class StateSpace(NamedTuple):
    """x' = a x + b u, y = c x + d u; shapes (n, n), (n,), (n,), and a float."""

    a: Array
    b: Array
    c: Array
    d: float


@dataclass(slots=True)
class Section:
    """One or two poles, with as many zeros at most."""

    poles: list[complex]
    zeros: list[complex]

    @property
    def room(self) -> int:
        """How many zeros it can still take."""
        return len(self.poles) - len(self.zeros)


def cascade(zeros: ComplexArray, poles: ComplexArray, gain: float) -> StateSpace:
    """Return the state space of gain * prod(s - z) / prod(s - p): block lower triangular, fast sections first.

    Parameters
    ----------
    zeros, poles : ndarray of complex
        Conjugates beside each other, no more zeros than poles.
    gain : float
        Factor of the quotient of monic polynomials.
    """
    reference = reference_frequency(zeros, poles)
    order = len(poles)
    a, b = np.zeros((order, order)), np.zeros(order)
    through, row = 1.0, np.zeros(order)  # the signal after the sections so far: row x + through u
    scale, place = gain, 0
    for section in paired(zeros, poles):
        part, section_gain = _realised(section, reference)
        here = slice(place, place + len(part.b))
        a[here] += np.outer(part.b, row)
        a[here, here] += part.a
        b[here] = part.b * through
        row, through = part.d * row, part.d * through
        row[here] = part.c
        scale, place = scale / section_gain, here.stop
    direct = gain if len(zeros) == order else 0.0
    return StateSpace(a, b, row * scale, float(direct))


def reference_frequency(zeros: ComplexArray, poles: ComplexArray) -> float:
    """Return the geometric mean of the zeros and poles away from the origin, 1 when there are none."""
    sizes = np.abs(np.concatenate((zeros, poles)))
    sizes = sizes[sizes > 0.0]
    return math.exp(float(np.mean(np.log(sizes)))) if len(sizes) else 1.0


def paired(zeros: ComplexArray, poles: ComplexArray) -> list[Section]:
    """Gather the poles in sections, fast first, and give every zero to the nearest section that has room."""
    sections = [Section([pole], []) for pole in poles if pole.imag == 0.0]
    sections += [Section([pole, pole.conjugate()], []) for pole in poles if pole.imag > 0.0]
    for zero in (z for z in zeros if z.imag > 0.0):
        roomy = [section for section in sections if section.room == 2]
        chosen = _nearest(zero, roomy) if roomy else _merged(zero, sections)
        chosen.zeros += [zero, zero.conjugate()]
    for zero in (z for z in zeros if z.imag == 0.0):
        _nearest(zero, [section for section in sections if section.room]).zeros.append(zero)
    return sorted(sections, key=lambda section: -abs(section.poles[0]))


def _nearest(zero: complex, sections: list[Section]) -> Section:
    return min(sections, key=lambda section: abs(section.poles[0] - zero))


def _merged(zero: complex, sections: list[Section]) -> Section:
    """Make one section of the two real poles without zeros that are nearest to a pair of zeros."""
    free = [section for section in sections if len(section.poles) == 1 and section.room]
    first, second = sorted(free, key=lambda section: abs(section.poles[0] - zero))[:2]
    first.poles += second.poles
    sections[:] = [section for section in sections if section is not second]
    return first


def _realised(section: Section, reference: float) -> tuple[StateSpace, float]:
    """Return a state space of g * prod(s - z) / prod(s - p), and its g: states and output stay about as the input."""
    speeds = [abs(pole) or reference for pole in section.poles]
    gain = math.prod(speeds)
    for zero, speed in zip(section.zeros, speeds, strict=False):  # as many speeds as zeros are used
        gain /= max(abs(zero), speed)
    numerator = np.zeros(len(section.poles) + 1)
    numerator[len(section.poles) - len(section.zeros) :] = gain * np.real(np.poly(section.zeros))
    if len(speeds) == 1:
        return _first_order(section.poles[0].real, speeds[0], numerator), gain
    return _second_order(section.poles, speeds, numerator), gain


def _first_order(pole: float, speed: float, numerator: Array) -> StateSpace:
    direct, rest = numerator
    return StateSpace(np.array([[pole]]), np.array([speed]), np.array([(rest + direct * pole) / speed]), float(direct))


def _second_order(poles: list[complex], speeds: list[float], numerator: Array) -> StateSpace:
    first, second = poles
    if first.imag:
        return _oscillator(first.real, abs(first), numerator)
    one, two = first.real, second.real
    direct, slope, rest = numerator
    slope += direct * (one + two)
    rest += slope * two - direct * one * two
    return StateSpace(
        np.array([[one, 0.0], [speeds[1], two]]),
        np.array([speeds[0], 0.0]),
        np.array([slope / speeds[0], rest / (speeds[0] * speeds[1])]),
        float(direct),
    )


def _oscillator(decay: float, speed: float, numerator: Array) -> StateSpace:
    """Return the section of a complex pair: the first state is the low-pass part, the second its slope over speed."""
    direct, slope, rest = numerator
    return StateSpace(
        np.array([[0.0, speed], [-speed, 2.0 * decay]]),
        np.array([0.0, speed]),
        np.array([rest / speed**2 - direct, (slope + 2.0 * decay * direct) / speed]),
        float(direct),
    )
