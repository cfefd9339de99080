"""The cascade of sections: its order, its pairing, and its scale."""

import numpy as np
import pytest

from tuner.simulate.sections import cascade, reference_frequency


def test_sections_are_block_triangular_and_fast_first() -> None:
    """Nothing above the blocks on the diagonal; the fastest section is nearest to the input."""
    space = cascade(np.array([-1.0 + 0j]), np.array([-0.1, -50.0, -2 + 3j, -2 - 3j]), 4.0)
    assert np.allclose(np.triu(space.a, 2), 0.0)
    assert space.a[0, 0] == -50.0
    assert space.a[-1, -1] == -0.1
    assert space.b[0] == 50.0


def test_a_pair_of_zeros_joins_two_real_poles() -> None:
    """Complex zeros over real poles share one section, and the static gain is right."""
    space = cascade(np.array([1j, -1j]), np.array([-2.0 + 0j, -3.0, -4.0]), 24.0)
    assert space.d - space.c @ np.linalg.solve(space.a, space.b) == pytest.approx(1.0)


@pytest.mark.parametrize("speed", [1e-6, 1.0, 1e6])
def test_states_are_of_the_size_of_the_input(speed: float) -> None:
    """At a constant input every state settles at it, whatever the time scale."""
    poles = np.array([-speed + 0j, -3.0 * speed, speed * (-0.5 + 2j), speed * (-0.5 - 2j)])
    space = cascade(np.zeros(0, dtype=complex), poles, speed**4)
    steady = -np.linalg.solve(space.a, space.b)
    assert steady[np.abs(steady) > 1e-9] == pytest.approx(1.0)
    assert np.abs(space.a).max() <= 6.0 * speed


def test_a_direct_term_is_exactly_the_gain() -> None:
    """With as many zeros as poles the direct term has no rounding; with fewer it is zero."""
    assert cascade(np.array([-0.3 + 0j]), np.array([-0.7 + 0j]), 0.1).d == 0.1
    assert cascade(np.zeros(0, dtype=complex), np.array([-0.7 + 0j]), 0.1).d == 0.0


def test_reference_frequency() -> None:
    """The geometric mean of what is not at the origin; one when all is."""
    assert reference_frequency(np.array([-4.0 + 0j]), np.array([0j, -9.0])) == pytest.approx(6.0)
    assert reference_frequency(np.zeros(0, dtype=complex), np.array([0j])) == 1.0
