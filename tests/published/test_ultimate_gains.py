"""Edges of stability on a ruler against ultimate gains that are published, or known in closed form.

The same tables as for the poles, whose numbers are given with their sources there; here they come out of a scan over
frequency, without a pole of the loop at the limit.
"""

from math import cos, exp, pi
from typing import NamedTuple

import control
import numpy as np
import pytest
from scipy.optimize import brentq

from tests.published.test_stability_limits import ROUTH, ULTIMATE, Routh, Ultimate
from tuner.footing.classes import FIRM, LOST, Track
from tuner.footing.rulers import paint_rulers
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial


class Edges(NamedTuple):
    """Where a track becomes lost or is no longer, rising, and the class above each."""

    places: list[float]
    above: list[int]


def edges(expression: str, controller: Controller, name: str, low: float, high: float) -> Edges:
    """Return the edges of a track without limits: nothing but stability counts."""
    found = Sheet(Loop("published"), ExpressionPlant(expression), controller, Trial(20.0))
    (painted,) = paint_rulers(found, [Track(name, np.geomspace(low, high, 17))], 1)
    return Edges([edge.value for edge in painted.edges], [edge.above for edge in painted.edges])


def ultimate(expression: str, step: float = 0.0, samples: int = 0, high: float = 1e4) -> float:
    """Return the least proportional gain that is lost."""
    controller = Controller(sample_time=step, gain_1=0.01, delay_samples=samples)
    found = edges(expression, controller, "kp", 1e-3, high)
    return found.places[found.above.index(LOST)]


@pytest.mark.parametrize("row", [row for row in ROUTH if row.formula != "(1-s)/(s+1)"], ids=lambda row: row.formula)
def test_routh_limits(row: Routh) -> None:
    """The only edge is the limit of Routh's criterion, from firm to lost or back (worked examples named there)."""
    found = edges(row.formula, Controller(gain_1=row.inside), "kp", row.limit / 40.0, row.limit * 60.0)
    assert found.places == pytest.approx([row.limit], rel=1e-9)
    assert found.above == [LOST if row.outside > row.inside else FIRM]


def test_a_plant_that_answers_at_once() -> None:
    """(1 - s)/(s + 1) ends at 1 (classic); its gain never falls, so that each value is asked: within 0.5 %."""
    found = edges("(1 - s)exp(-0.001 s)/(s + 1)", Controller(gain_1=0.5), "kp", 0.1, 10.0)
    assert found.places == pytest.approx([1.0], rel=0.005)


@pytest.mark.parametrize("order", [3, 4, 5, 8])
def test_equal_lags(order: int) -> None:
    """1/(s + 1)^n: (1/cos(pi/n))^n, as Ziegler and Nichols' test finds it (Trans. ASME 64, 1942; from memory)."""
    assert ultimate(f"1/(s + 1)^{order}") == pytest.approx((1.0 / cos(pi / order)) ** order, rel=1e-9)


@pytest.mark.parametrize("row", ULTIMATE, ids=lambda row: row.formula)
def test_dead_time(row: Ultimate) -> None:
    """The table of ultimate gains with dead time, to all digits given; it leads to the first edge of many."""
    assert ultimate(row.formula, high=100.0) == pytest.approx(row.gain, rel=2e-8)


@pytest.mark.parametrize("dead_time", [0.1, 1.0, 25.0])
def test_integral_control_of_a_dead_time(dead_time: float) -> None:
    """I-only control of exp(-L s) ends at ki = pi/(2 L) (classic)."""
    found = edges(f"exp(-{dead_time} s)", Controller(gain_2=0.1 / dead_time), "ki", 0.01 / dead_time, 10.0 / dead_time)
    assert found.places[0] == pytest.approx(0.5 * pi / dead_time, rel=1e-9)
    assert found.above[0] == LOST


def test_an_unstable_plant_has_a_least_gain() -> None:
    """exp(-L s)/(s - 1) needs a gain above 1, and none will do with L above 1 (classic)."""
    found = edges("exp(-0.5 s)/(s - 1)", Controller(gain_1=1.1), "kp", 0.1, 50.0)
    assert found.places[0] == pytest.approx(1.0, rel=1e-9)
    assert found.above[:2] == [FIRM, LOST]
    assert edges("exp(-1.01 s)/(s - 1)", Controller(gain_1=1.1), "kp", 0.1, 50.0).places == []


@pytest.mark.parametrize(("ki", "kp"), [(9.0, 1.0), (30.0, 8.0)])
def test_proportional_limit_beside_an_integral(ki: float, kp: float) -> None:
    """(K + KI/s)/((s+1)(s+2)) needs K > KI/3 - 2 (Franklin, Powell and Emami-Naeini; from memory)."""
    found = edges("1/((s+1)(s+2))", Controller(gain_1=2.0 * kp, gain_2=ki), "kp", 0.05 * kp, 100.0 * kp)
    assert found.places == pytest.approx([kp], rel=1e-9)
    assert found.above == [FIRM]


@pytest.mark.parametrize("form", ["parallel", "standard"])
def test_integral_limit_beside_a_proportional_gain(form: str) -> None:
    """s^4 + 3 s^3 + 2 s^2 + kp s + ki is stable for kp (6 - kp) > 9 ki (Routh): with kp = 3, ki < 1 and ti > 3."""
    gains = {"parallel": ("ki", 0.5, LOST, 1.0), "standard": ("ti", 6.0, FIRM, 3.0)}
    name, second, above, limit = gains[form]
    controller = Controller(form=form, gain_1=3.0, gain_2=second)  # type: ignore[arg-type] # a form
    found = edges("1/(s(s+1)(s+2))", controller, name, 0.1, 100.0)
    assert found.places == pytest.approx([limit], rel=1e-9)
    assert found.above == [above]


@pytest.mark.parametrize(("ratio", "gain"), [(0.1, 20.0166639), (0.5, 4.08298817), (1.0, 2.16395341)])
def test_a_sampled_lag(ratio: float, gain: float) -> None:
    """Ku = coth(h/2T), with a pole at z = -1 (Jury)."""
    assert ultimate("1/(s+1)", ratio) == pytest.approx(gain, rel=1e-7)


@pytest.mark.parametrize(("ratio", "gain"), [(0.1, 10.5083319), (0.5, 1.0 / (1.0 - exp(-0.5)))])
def test_a_sampled_lag_with_a_sample_of_delay(ratio: float, gain: float) -> None:
    """Ku = 1/(1 - a), in the plant or in computing: a complex pair (Jury)."""
    assert ultimate("1/(s+1)", ratio, samples=1) == pytest.approx(gain, rel=1e-7)
    assert ultimate(f"exp(-{ratio} s)/(s+1)", ratio) == pytest.approx(gain, rel=1e-7)


@pytest.mark.parametrize(("step", "gain"), [(1.0, 2.39221119), (0.5, 4.36199387), (0.1, 20.3389256)])
def test_a_sampled_servo(step: float, gain: float) -> None:
    """1/(s(s+1)) ends at (1 - a)/b2 (Ogata, Discrete-Time Control Systems: K < 2.3922 at T = 1; Dorf and Bishop)."""
    assert ultimate("1/(s(s+1))", step) == pytest.approx(gain, rel=3e-8)


@pytest.mark.parametrize(("dead_time", "gain"), [(0.0, 2.0), (0.25, 4.0), (0.5, 2.0), (0.4, 2.5), (0.1, 2.5)])
def test_a_little_delay_raises_the_limit(dead_time: float, gain: float) -> None:
    """exp(-t s)/s sampled every second ends at min(1/t, 2/(1 - 2t)): a small delay raises the limit (Jury)."""
    assert ultimate(f"exp(-{dead_time} s)/s", 1.0) == pytest.approx(gain, rel=1e-6)


def test_a_sampled_lag_against_python_control() -> None:
    """The gain at which the sampled response, by an independent library, is -1 over it."""
    s = control.tf("s")
    sampled = control.sample_system(1.0 / ((s + 1.0) * (0.5 * s + 1.0) * (0.2 * s + 1.0)), 0.1, method="zoh")
    crossing = brentq(lambda w: sampled(np.exp(0.1j * w)).imag, 2.0, 10.0)
    expected = -1.0 / sampled(np.exp(0.1j * crossing)).real
    assert ultimate("1/((s + 1)(0.5 s + 1)(0.2 s + 1))", 0.1) == pytest.approx(expected, rel=1e-9)
