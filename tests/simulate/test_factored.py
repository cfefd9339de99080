"""Transfer functions as factors: roots of polynomials, and sums that share what they can."""

import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.simulate.factored import VARIABLE, Factored, quotient, roots, total


def test_sums_share_zeros_and_poles() -> None:
    """3 z/(p q) + 5 z/p = z (5 q + 3)/(p q): the shared zero stays exact, each pole comes once."""
    first = Factored(3.0, (-7.1,), (-1.3, -2.0))
    found = total([first, Factored(5.0, (-7.1,), (-1.3,))])
    assert found.gain == 5.0
    assert -7.1 in found.zeros
    assert sorted(root.real for root in found.zeros) == pytest.approx([-7.1, -2.6])
    assert sorted(root.real for root in found.poles) == [-2.0, -1.3]


def test_a_sum_of_nothing_is_zero() -> None:
    """Terms of no gain vanish, with their poles."""
    assert total([Factored(0.0, (), (1.0,))]) == Factored(0.0)


def test_dead_times_that_rounding_parted_are_the_same() -> None:
    """0.1 + 0.2 and 0.3 are one dead time; 1 and 2 are not."""
    assert total([Factored(1.0, dead_time=0.1 + 0.2), Factored(1.0, dead_time=0.3)]).gain == 2.0
    with pytest.raises(LoopError, match="different dead times, 1 and 2"):
        total([Factored(1.0, dead_time=1.0), Factored(1.0, dead_time=2.0)])


def test_powers_and_inverses() -> None:
    """A power repeats factors, an inverse exchanges them."""
    cubed = VARIABLE.times(Factored(2.0, (), (-1.0,), 0.5)).power(-3)
    assert cubed == Factored(0.125, (-1.0,) * 3, (0j,) * 3, -1.5)


@pytest.mark.parametrize(
    "exact",
    [
        [-1.0, -1.0],
        [-1e-8, -1e8],
        [-0.3 + 2j, -0.3 - 2j],
        [0.0, 0.0, -2.0],
        [-1.0, -2.0, -3.0, -4.0, -5.0],
        [-1e-5, -0.1, -10.0, -1e6],
        [5.0, -0.01 + 1j, -0.01 - 1j, -300.0],
    ],
)
def test_roots_are_found_again(exact: list[complex]) -> None:
    """Roots of expanded polynomials come back to ten digits of their own size."""
    found = roots(np.real(np.poly(exact)) * 3.0)
    assert len(found) == len(exact)
    for root in exact:
        assert min(abs(other - root) for other in found) <= 1e-10 * abs(root)


def test_a_quotient_of_polynomials() -> None:
    """Leading zeros are no degree."""
    assert quotient((0.0, 2.0), (4.0, 8.0)) == Factored(0.5, (), (-2.0,))
    assert quotient((0.0,), (1.0, 1.0)) == Factored(0.0)
