"""Where stability ends in continuous loops: Routh limits, ultimate gains with dead time, hidden modes.

Limits are found by bisection on the verdict of the closed-loop poles and compared to closed forms or to numbers
computed independently; attributions of worked examples are from memory: "computed; attribution from memory".
"""

from collections.abc import Callable
from math import atan, e, exp, pi, sqrt
from typing import NamedTuple

import numpy as np
import pytest

from tests.published.loops import limit, poles_of
from tuner.model.controller import Controller
from tuner.simulate.poles import Poles


def stable_with(formula: str) -> Callable[[float], bool]:
    """Return whether a loop is stable under proportional control, as a function of the gain."""
    return lambda gain: poles_of(formula, Controller(gain_1=gain)).stable


def ultimate(formula: str) -> tuple[float, Poles]:
    """Return the largest stable proportional gain and the poles there."""
    gain = limit(stable_with(formula), 0.01, 3000.0)
    return gain, poles_of(formula, Controller(gain_1=gain))


class Routh(NamedTuple):
    """A loop K*G, its limits of K, and the frequency at the upper one."""

    formula: str
    inside: float
    outside: float
    limit: float
    frequency: float | None
    source: str


ROUTH = (
    Routh("1/(s(s+1)(s+2))", 1.0, 100.0, 6.0, sqrt(2.0), "classic"),
    Routh("3/((s+1)(0.5s+1)(s+3))", 1.0, 100.0, 10.0, sqrt(11.0), "Coughanowr, Process Systems Analysis, Example 14.3"),
    Routh("1/(s(s^2+s+1)(s+2))", 1.0, 100.0, 14.0 / 9.0, None, "Ogata, Modern Control Engineering, ch. 5; from memory"),
    Routh("1/(s(s+7)(s+11))", 1.0, 1e4, 1386.0, sqrt(77.0), "Nise, Control Systems Engineering, Ex. 6.9; from memory"),
    Routh("(s+1)/(s(s-1)(s+6))", 10.0, 1.0, 7.5, None, "Franklin, Powell and Emami-Naeini, Routh example; from memory"),
    Routh("1/(s(s+1)(s+5))", 1.0, 100.0, 30.0, sqrt(5.0), "Ogata, Modern Control Engineering, Example 8-1"),
    Routh("1/(s+1)^3", 1.0, 100.0, 8.0, sqrt(3.0), "classic"),
    Routh("1/(s+1)^4", 1.0, 100.0, 4.0, 1.0, "classic: the secant of pi/4 to the fourth power"),
    Routh("(1-s)/(s+1)", 0.5, 3.0, 1.0, None, "classic"),
)  # fmt: skip


@pytest.mark.parametrize("row", ROUTH, ids=lambda row: row.formula)
def test_routh_limits(row: Routh) -> None:
    """The gain at which stability ends is that of Routh's criterion, and the poles there lie at the known frequency."""
    gain = limit(stable_with(row.formula), row.inside, row.outside)
    assert gain == pytest.approx(row.limit, rel=2e-8)
    if row.frequency is not None:
        assert abs(poles_of(row.formula, Controller(gain_1=row.limit)).values[0].imag) == pytest.approx(row.frequency)


def test_the_third_root_at_the_limit() -> None:
    """At K = 10 the roots are +-j 3.3166248 and -6 (Coughanowr, Process Systems Analysis, Example 14.3)."""
    found = poles_of("3/((s+1)(0.5s+1)(s+3))", Controller(gain_1=10.0))
    assert np.allclose(found.values, (3.3166248j, -3.3166248j, -6.0), rtol=0.0, atol=3e-8)
    assert (found.stable, found.count_unstable) == (False, 2)


@pytest.mark.parametrize(("ki", "kp"), [(0.5, -11.0 / 6.0), (3.0, -1.0), (9.0, 1.0), (30.0, 8.0)])
def test_proportional_limit_beside_an_integral(ki: float, kp: float) -> None:
    """(K + KI/s)/((s+1)(s+2)) is stable for K > KI/3 - 2 (Franklin, Powell and Emami-Naeini; from memory)."""
    plant = "1/((s+1)(s+2))"
    found = limit(lambda gain: poles_of(plant, Controller(gain_1=gain, gain_2=ki)).stable, kp + 5.0, kp - 0.5)
    assert found == pytest.approx(kp, abs=1e-7)
    assert not poles_of(plant, Controller(gain_1=kp + 5.0, gain_2=-1e-6)).stable


@pytest.mark.parametrize("lags", [(1.0, 1.0, 1.0), (1.0, 0.5, 1.0 / 3.0), (10.0, 1.0, 0.1), (5.0, 4.0, 0.02)])
def test_three_lags(lags: tuple[float, float, float]) -> None:
    """Ku = (T1+T2+T3)(1/T1+1/T2+1/T3) - 1 at wu^2 = (T1+T2+T3)/(T1 T2 T3), for any three lags (classic)."""
    formula = "1/(" + "".join(f"({lag!r} s + 1)" for lag in lags) + ")"
    gain, found = ultimate(formula)
    assert gain == pytest.approx(sum(lags) * sum(1.0 / lag for lag in lags) - 1.0, rel=1e-7)
    assert found.values[0].imag == pytest.approx(sqrt(sum(lags) / (lags[0] * lags[1] * lags[2])), rel=1e-6)


class Ultimate(NamedTuple):
    """A plant with dead time, its ultimate gain and frequency: computed to the digits given."""

    formula: str
    gain: float
    frequency: float


ULTIMATE = (
    Ultimate("exp(-s)/(s+1)", 2.26182633, 2.02875784),
    Ultimate("exp(-0.5s)/(s+1)", 3.80688286, 3.67319441),
    Ultimate("exp(-0.2s)/(s+1)", 8.50242499, 8.44341345),
    Ultimate("exp(-0.1s)/(s+1)", 16.3505539, 16.3199453),
    Ultimate("exp(-2s)/(s+1)", 1.51980256, 1.14446486),
    Ultimate("2exp(-2s)/(10s+1)", 4.251212494, 0.844341345),
    Ultimate("exp(-s)/(s+1)^2", 2.70705298, 1.30654237),
    Ultimate("exp(-s)/s", pi / 2.0, pi / 2.0),
    Ultimate("2exp(-0.5s)/s", pi / 2.0, pi),
    Ultimate("0.1exp(-30s)/s", pi / 6.0, pi / 60.0),
)


@pytest.mark.parametrize("row", ULTIMATE, ids=lambda row: row.formula)
def test_ultimate_gains_with_dead_time(row: Ultimate) -> None:
    """The ultimate gain and the frequency of the poles there agree with the exact condition, to all digits given."""
    gain, found = ultimate(row.formula)
    assert gain == pytest.approx(row.gain, rel=2e-8)
    assert found.values[0].imag == pytest.approx(row.frequency, rel=2e-8)


@pytest.mark.parametrize(("gain", "ratio"), [(2.0, 0.02), (0.5, 0.7), (7.0, 5.0), (1.0, 100.0)])
def test_the_exact_condition_of_first_order_plants(gain: float, ratio: float) -> None:
    """Both wu L + atan(wu T) = pi and Ku = sqrt(1 + (wu T)^2)/K hold for any dead time over lag (classic)."""
    ku, found = ultimate(f"{gain!r} exp(-{ratio!r} s)/(s + 1)")
    w = found.values[0].imag
    assert w * ratio + atan(w) == pytest.approx(pi, rel=1e-7)
    assert ku == pytest.approx(sqrt(1.0 + w * w) / gain, rel=1e-7)


def test_a_pure_dead_time() -> None:
    """Proportional control of a pure dead time ends at gain 1, and the loop says why (classic)."""
    assert limit(stable_with("exp(-3s)"), 0.1, 2.0) == pytest.approx(1.0, rel=1e-8)
    assert "infinite frequency" in poles_of("exp(-3s)", Controller(gain_1=1.0)).reason


@pytest.mark.parametrize("dead_time", [0.1, 1.0, 25.0])
def test_integral_control_of_a_dead_time(dead_time: float) -> None:
    """I-only control of exp(-L s) ends at ki = pi/(2 L) (classic)."""
    formula = f"exp(-{dead_time!r} s)"
    found = limit(lambda ki: poles_of(formula, Controller(gain_2=ki)).stable, 0.1 / dead_time, 10.0 / dead_time)
    assert found == pytest.approx(0.5 * pi / dead_time, rel=1e-8)


def test_the_double_real_pole() -> None:
    """K exp(-L s)/s has a double pole at -1/L when K kp L = 1/e: two real poles below it, a pair above (classic)."""
    below, above = (poles_of("exp(-2s)/s", Controller(gain_1=factor / (2.0 * e))) for factor in (0.999, 1.001))
    assert np.all(below.values[:2].imag == 0.0)
    assert np.all(above.values[:2].imag != 0.0)
    at = poles_of("exp(-2s)/s", Controller(gain_1=0.5 / e))
    assert at.values[:2] == pytest.approx(np.full(2, -0.5), abs=1e-7)


@pytest.mark.parametrize("dead_time", [0.2, 0.5, 0.9])
def test_an_unstable_plant_with_dead_time(dead_time: float) -> None:
    """exp(-L s)/(T s - 1) needs kp > 1, and L < T (classic)."""
    formula = f"exp(-{dead_time!r} s)/(s - 1)"
    assert limit(stable_with(formula), 1.02, 0.5) == pytest.approx(1.0, rel=1e-8)


def test_too_much_dead_time_for_an_unstable_plant() -> None:
    """With L >= T no proportional gain makes exp(-L s)/(T s - 1) stable (classic)."""
    gains = (0.5, 0.99, 1.01, 1.1, 1.5, 3.0, 20.0)
    assert not any(stable_with("exp(-1.01 s)/(s - 1)")(gain) for gain in gains)


UNSTABLE_TOGETHER = (
    ("1/(s+1)^3", 10.0, 8.0),
    ("exp(-s)/(s+1)", 2.5, 2.26182633),
    ("(1-s)/(s+1)", 1.5, 1.0),
)


@pytest.mark.parametrize(("formula", "gain", "limit_gain"), UNSTABLE_TOGETHER)
def test_stable_parts_make_an_unstable_loop(formula: str, gain: float, limit_gain: float) -> None:
    """A stable plant under a stable controller is unstable beyond a gain (algebra)."""
    assert not stable_with(formula)(gain)
    assert limit(stable_with(formula), 0.5 * limit_gain, gain) == pytest.approx(limit_gain, rel=2e-8)


def test_poles_beyond_the_limit() -> None:
    """1/(s+1)^3 under a gain of 10 has poles at .0772 +- 1.8658j and -3.1544 (algebra)."""
    found = poles_of("1/(s+1)^3", Controller(gain_1=10.0)).values
    assert np.allclose(found, (0.0772 + 1.8658j, 0.0772 - 1.8658j, -3.1544), atol=6e-5)
    root = 10.0 ** (1.0 / 3.0)
    assert found[0] == pytest.approx(-1.0 + root * np.exp(1j * pi / 3.0), rel=1e-13)


@pytest.mark.parametrize("formula", ["(s-1)/((s+1)(s-1))", "(s-1)exp(-0.3s)/((s+1)(s-1))"])
@pytest.mark.parametrize("sample_time", [0.0, 0.1])
def test_hidden_instability(formula: str, sample_time: float) -> None:
    """(s-1)/(s+1) times 1/(s-1) gives T = 1/(s+2), yet the loop is unstable inside (algebra)."""
    found = poles_of(formula, Controller(gain_1=1.0, sample_time=sample_time))
    assert not found.stable
    assert found.values[0] == pytest.approx(1.0, rel=1e-9)


OGATA_POLES = (-0.373728 + 1.621316j, -0.373728 - 1.621316j, -1.119835, -4.13271)


def test_poles_of_the_ultimate_cycle_example() -> None:
    """Kp 18, Ti 1.405, Td .35124 on 1/(s(s+1)(s+5)): Ogata, Modern Control Engineering, Example 8-1; computed."""
    tuned = Controller(form="standard", gain_1=18.0, gain_2=2.809926 / 2.0, gain_3=2.809926 / 8.0)
    assert np.allclose(poles_of("1/(s(s+1)(s+5))", tuned).values, OGATA_POLES, rtol=0.0, atol=6e-6)


@pytest.mark.parametrize(("overshoot", "zeta"), [(0.05, 0.6901067), (0.1, 0.5911550), (0.16, 0.5038681),
                                                 (0.2, 0.4559498), (0.25, 0.4037128), (0.3, 0.3578571)])  # fmt: skip
def test_damping_of_second_order_poles(overshoot: float, zeta: float) -> None:
    """Poles of wn^2/(s(s + 2 zeta wn)) in a loop have the damping that gives the overshoot (all texts; computed)."""
    pole = poles_of(f"9/(s(s + {6.0 * zeta!r}))").values[0]
    assert exp(pi * pole.real / abs(pole.imag)) == pytest.approx(overshoot, rel=1e-6)
    assert (abs(pole), -pole.real / abs(pole)) == (pytest.approx(3.0), pytest.approx(zeta))
