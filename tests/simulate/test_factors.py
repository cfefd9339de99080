"""Loop gains as factors, in s and in z - 1."""

import numpy as np
import pytest

from tuner.simulate.factors import Factors, folded, stack, to_s, to_x


def factors(
    *zeros: complex, poles: tuple[complex, ...], gain: float = 1.0, delay: float = 0.0, step: float = 0.0
) -> Factors:
    """Return factors from lists."""
    return Factors(np.array(zeros, dtype=complex), np.array(poles, dtype=complex), gain, delay, step)


def test_one_after_the_other() -> None:
    """Roots are joined, gains multiplied, delays added, and nothing cancels."""
    joined = factors(-1.0, poles=(-2.0,), gain=2.0, delay=1.0).then(factors(poles=(-1.0,), gain=3.0, delay=0.5))
    assert joined.zeros.tolist() == [-1.0]
    assert joined.poles.tolist() == [-2.0, -1.0]
    assert (joined.gain, joined.delay) == (6.0, 1.5)


def test_the_map_to_s_and_back() -> None:
    """ln(1 + x)/step and exp(s step) - 1 are inverses within the Nyquist frequency, also very near z = 1."""
    s = np.array([-1e-9 + 1e-9j, -3.0 + 2.0j, -1e-12, 1e-7 + 3.0j, -0.2 + np.pi / 0.5 * 1j * 0.999])
    assert to_s(to_x(s, 0.5), 0.5) == pytest.approx(s, rel=1e-12)


def test_the_real_part_near_the_circle_keeps_its_digits() -> None:
    """A slow pole sampled fast has the same s again: no digits go on the way through z."""
    slow = np.array([-1e-3 + 2e-3j])
    assert to_s(to_x(slow, 1e-6), 1e-6).real == pytest.approx(slow.real, rel=1e-9)


def test_a_root_at_z_zero_lies_infinitely_far_left() -> None:
    """The point z = 0 has no place in s."""
    assert to_s(np.array([-1.0 + 0j]), 0.1).real.tolist() == [-np.inf]


def test_frequencies_fold_at_nyquist() -> None:
    """What a sampled system cannot tell apart is one frequency."""
    assert folded(np.array([0.0, 3.0, 4.0, -4.0, 2.0 * np.pi]), 1.0) == pytest.approx(
        [0.0, 3.0, 4.0 - 2.0 * np.pi, 2.0 * np.pi - 4.0, 0.0], abs=1e-15
    )


@pytest.mark.parametrize("step", [0.0, 0.3])
def test_the_response_of_a_stack(step: float) -> None:
    """Every row is the plain product of its factors, whatever the unit inside."""
    rows = [
        factors(-3.0, poles=(-0.2 + 0.4j, -0.2 - 0.4j), gain=g, delay=2 * step or 0.7, step=step) for g in (2.0, -5.0)
    ]
    w = np.array([0.1, 1.0, 5.0])
    x = np.exp(1j * w * step) - 1.0 if step else 1j * w
    plain = (x + 3.0) / ((x + 0.2) ** 2 + 0.16) * np.exp(-1j * w * rows[0].delay)
    assert stack(rows).response(w) == pytest.approx(np.array([2.0 * plain, -5.0 * plain]), rel=1e-13)
    assert stack(rows).take([1]).response(w)[0] == pytest.approx(-5.0 * plain, rel=1e-13)


def test_many_fast_factors_do_not_overflow() -> None:
    """Forty poles near 1e9 and their gain make a moderate response."""
    fast = factors(poles=(-1e9,) * 30, gain=1e270)
    assert stack([fast]).response(np.array([1.0]))[0] == pytest.approx([1.0], rel=1e-7)
