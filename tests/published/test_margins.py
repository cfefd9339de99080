"""Margins and sensitivity peaks against published loops and tuning tables.

Unless a source says otherwise, numbers were computed independently (refined root finding, mpmath at 20 to 30 digits)
and the attribution is from memory: "computed; attribution from memory". Each is compared to the digits printed.
"""

from math import asin, degrees, floor, inf, isinf, log10, pi, sqrt
from typing import NamedTuple

import pytest

from tests.published.loops import loop, margins_of, poles_of
from tuner.model.controller import Controller
from tuner.simulate.margins import Margins

MEMORY = "computed; attribution from memory"


def digits(value: float, count: int = 6) -> object:
    """Return a value to compare with, good to `count` printed digits: half a unit in the last."""
    if not value or isinf(value):
        return value
    return pytest.approx(value, rel=0.0, abs=0.51 * 10.0 ** (floor(log10(abs(value))) + 1 - count))


def ideal(gain: float, ti: float = 0.0, td: float = 0.0) -> Controller:
    """Return a continuous controller of the standard form without filter."""
    return Controller(form="standard", gain_1=gain, gain_2=ti, gain_3=td)


def series(gain: float, ti: float, td: float = 0.0, filter_time: float = 0.0) -> Controller:
    """Return a continuous controller of the series form, its derivative behind a filter."""
    return Controller(form="series", gain_1=gain, gain_2=ti, gain_3=td, filter_time=filter_time)


class Loop(NamedTuple):
    """A loop gain and its margins; None where the table gives none."""

    formula: str
    gain_margin: float
    gain_margin_at: float | None
    phase_margin: float
    phase_margin_at: float
    delay_margin: float
    sensitivity: float
    sensitivity_at: float | None
    complementary: float
    source: str


LOOPS = (
    Loop("1/(s(s+1)(s+2))", 6, 1.41421, 53.4108, 0.44575, 2.09130, 1.56838, 0.7263, 1.11293, MEMORY),
    Loop("2/(s+1)^3", 4, 1.73205, 67.5981, 0.76642, 1.53937, 5 / 3, 1.22474, 1, MEMORY),
    Loop("3/(s+1)^3", 2.66667, 1.73205, 41.6903, 1.03927, 0.70014, 2.2, 1.3229, 1.57980,
         f"Astrom and Murray, Feedback Systems (style of); {MEMORY}"),
    Loop("10/(s(s+1)(s+5))", 3, 2.23607, 25.3898, 1.22706, 0.36114, 2.71558, None, 2.32379,
         f"Ogata, Modern Control Engineering; {MEMORY}"),
    Loop("6/((s^2+2s+2)(s+2))", 3.33333, 2.44949, 67.6827, 1.25284, 0.94289, 1.79405, None, 1.09477, MEMORY),
    Loop("0.38(s^2+0.1s+0.55)/(s(s+1)(s^2+0.06s+0.5))", inf, None, 69.7722, 0.40578, 3.00099, 3.69101, None, 3.00505,
         f"Astrom and Murray, Feedback Systems: good margins that hide a poor peak; {MEMORY}"),
)  # fmt: skip


@pytest.mark.parametrize("row", LOOPS, ids=lambda row: row.formula)
def test_margins_of_textbook_loops(row: Loop) -> None:
    """All margins and peaks, and where they are, agree with the table to its digits."""
    found = margins_of(row.formula)
    assert found.gain_margin == digits(row.gain_margin)
    assert found.phase_margin == digits(row.phase_margin)
    assert found.phase_margin_at == digits(row.phase_margin_at, 5)
    assert found.delay_margin == digits(row.delay_margin, 5)
    assert found.max_sensitivity == digits(row.sensitivity)
    assert found.max_complementary == digits(row.complementary)
    if row.gain_margin_at is None:
        assert found.gain_margin_at is None
    else:
        assert found.gain_margin_at == digits(row.gain_margin_at)
    if row.sensitivity_at is not None:
        assert found.max_sensitivity_at == pytest.approx(row.sensitivity_at, abs=6e-5)


def test_an_unstable_textbook_loop() -> None:
    """100/(s(s+1)(s+5)) is unstable: ten times the gain of the row above, whose margin is three (Ogata)."""
    assert poles_of("100/(s(s+1)(s+5))").count_unstable == 2
    assert margins_of("10/(s(s+1)(s+5))").gain_margin / 10.0 == digits(0.3)


class SecondOrder(NamedTuple):
    """Frequency measures of wn^2/(s(s + 2 zeta wn)), wn = 1."""

    zeta: float
    phase_margin: float
    resonance: float
    crossover: float


SECOND_ORDER = (
    SecondOrder(0.2, 22.6023, 2.55155, 0.960830),
    SecondOrder(0.3, 33.2725, 1.74714, 0.914369),
    SecondOrder(0.4, 43.1176, 1.36386, 0.854373),
    SecondOrder(0.5, 51.8273, 1.15470, 0.786151),
    SecondOrder(0.6, 59.1873, 1.04167, 0.715705),
    SecondOrder(0.7, 65.1564, 1.00020, 0.648184),
    SecondOrder(sqrt(0.5), 65.5302, 1.0, 0.643594),
    SecondOrder(0.8, 69.8600, 1.0, 0.586784),
)
"""Computed: PM = atan(2 zeta/sqrt(sqrt(1 + 4 zeta^4) - 2 zeta^2)), Mr = 1/(2 zeta sqrt(1 - zeta^2)), all texts."""


@pytest.mark.parametrize("row", SECOND_ORDER, ids=lambda row: f"zeta {row.zeta:.3g}")
def test_the_second_order_loop(row: SecondOrder) -> None:
    """Phase margin, crossover and resonance peak follow the closed forms of every textbook."""
    found = margins_of(f"1/(s(s + {2.0 * row.zeta!r}))")
    assert found.phase_margin == digits(row.phase_margin)
    assert found.phase_margin_at == digits(row.crossover)
    assert found.max_complementary == digits(row.resonance)
    assert isinf(found.gain_margin)


class Tuned(NamedTuple):
    """A rule's gains for 2 exp(-2s)/(10s+1) and what comes of them."""

    rule: str
    controller: Controller
    gain_margin: float
    phase_margin: float | None
    sensitivity: float
    complementary: float | None = None


ULTIMATE = "Ziegler and Nichols, Trans. ASME 64, 1942"
TUNED = (
    Tuned(f"step P: {ULTIMATE}", ideal(2.5), 1.7005, 45.399, 2.6517, 1.8004),
    Tuned(f"step PI: {ULTIMATE}", ideal(2.25, 2.0 / 0.3), 1.6557, 31.244, 2.9482, 2.2033),
    Tuned(f"step PID: {ULTIMATE}", ideal(3.0, 4.0, 1.0), 1.4330, 41.018, 3.3390, 2.3533),
    Tuned(f"ultimate P: {ULTIMATE}", ideal(2.125606247), 2.0, 56.257, 2.1619, 1.3222),
    Tuned(f"ultimate PI: {ULTIMATE}", ideal(1.913046, 6.201269), 1.9216, 36.224, 2.4272, 1.7370),
    Tuned(f"ultimate PID: {ULTIMATE}", ideal(2.550727, 3.720761, 0.930190), 1.7553, 39.838, 2.3541, 1.5084),
    Tuned("P: Cohen and Coon, Trans. ASME 75, 1953", ideal(8 / 3), 1.5942, 40.775, 2.9437, 2.0884),
    Tuned("PI: Cohen and Coon, 1953", ideal(2.291667, 4.707692), 1.4988, 21.994, 3.7592, 3.0751),
    Tuned("PID: Cohen and Coon, 1953", ideal(3.458333, 4.547945, 0.701754), 1.3764, 28.299, 3.8781, 2.9743),
    Tuned("setpoint 0 % P: Chien, Hrones and Reswick, 1952", ideal(0.75), 5.6683, None, 1.2543),
    Tuned("setpoint 0 % PI: Chien, Hrones and Reswick, 1952", ideal(0.875, 12.0), 4.5579, 75.148, 1.3551),
    Tuned("setpoint 0 % PID: Chien, Hrones and Reswick, 1952", ideal(1.5, 10.0, 1.0), 2.7222, 72.977, 1.5897),
    Tuned("setpoint 20 % P: Chien, Hrones and Reswick, 1952", ideal(1.75), 2.4293, 68.166, 1.8169),
    Tuned("setpoint 20 % PI: Chien, Hrones and Reswick, 1952", ideal(1.5, 10.0), 2.6180, 55.623, 1.7734),
    Tuned("setpoint 20 % PID: Chien, Hrones and Reswick, 1952", ideal(2.375, 14.0, 0.94), 1.7574, 63.052, 2.3467),
    Tuned("load 0 % PI: Chien, Hrones and Reswick, 1952", ideal(1.5, 8.0), 2.5531, 50.610, 1.8279),
    Tuned("load 0 % PID: Chien, Hrones and Reswick, 1952", ideal(2.375, 4.8, 0.84), 1.9229, 45.559, 2.1260),
    Tuned("load 20 % PI: Chien, Hrones and Reswick, 1952", ideal(1.75, 4.6), 1.9484, 30.693, 2.5387),
    Tuned("load 20 % PID: Chien, Hrones and Reswick, 1952", ideal(3.0, 4.0, 0.84), 1.5402, 35.978, 2.9265),
    Tuned("PI: Tyreus and Luyben, I&EC Res. 31, 1992", ideal(1.328504, 16.37135), 3.0600, 68.819, 1.5909),
    Tuned("PID: Tyreus and Luyben, later texts", ideal(1.932369, 16.37135, 1.181194), 1.8873, 76.490, 2.1352),
    Tuned("SIMC PI: Skogestad, J. Process Control 13, 2003", ideal(1.25, 10.0), pi, 61.3521, 1.59049, 1.0),
    Tuned("lambda PI, 5: Dahlin 1968", ideal(0.714286, 10.0), 5.4978, 73.630, 1.2902, 1.0),
    Tuned("IMC improved PI: Rivera, Morari and Skogestad, 1986", ideal(1.1, 11.0), 3.6007, 67.191, 1.4847, 1.0),
    Tuned("IMC PID: Rivera, Morari and Skogestad, 1986", ideal(0.916667, 11.0, 0.909091), 4.6546, 80.225, 1.2808, 1.0),
    Tuned("AMIGO PI: Astrom and Hagglund, J. Process Control 14, 2004", ideal(0.602778, 7.765217), 6.3279, 67.515,
          1.2638, 1.0083),
    Tuned("AMIGO PID: Astrom and Hagglund, 2004", ideal(1.225, 5.866667, 0.943396), 3.5154, 59.132, 1.4061, 1.1354),
)  # fmt: skip
"""The rules are the sources'; the margins were computed independently."""


@pytest.mark.parametrize("row", TUNED, ids=lambda row: row.rule)
def test_margins_of_tuning_rules(row: Tuned) -> None:
    """Each rule's margins on 2 exp(-2s)/(10s+1) agree with the table to its digits; the derivative is unfiltered."""
    found = margins_of("2 exp(-2 s)/(10 s + 1)", row.controller)
    assert found.gain_margin == digits(row.gain_margin, 5)
    assert found.max_sensitivity == digits(row.sensitivity, 5)
    if row.phase_margin is not None:
        assert found.phase_margin == digits(row.phase_margin, 5)
    if row.complementary is not None:
        assert found.max_complementary == digits(row.complementary, 5)


def fopdt_of_simc(dead_time: float) -> Margins:
    """Return the margins of SIMC settings on a first-order plant: L = exp(-th s)/(2 th s) whatever its gain and lag."""
    plant = f"3 exp(-{dead_time!r} s)/(7 s + 1)"
    return margins_of(plant, ideal(7.0 / (3.0 * 2.0 * dead_time), 7.0))


@pytest.mark.parametrize("dead_time", [0.25, 1.0, 4.0])
def test_analytic_margins_of_simc(dead_time: float) -> None:
    """SIMC on a first-order plant with dead time: pi, 90 degrees less half a radian (Skogestad 2003, table 1)."""
    found = fopdt_of_simc(dead_time)
    assert found.gain_margin == pytest.approx(pi, rel=1e-12)
    assert found.phase_margin == pytest.approx(90.0 - degrees(0.5), rel=1e-12)
    assert found.phase_margin_at == pytest.approx(0.5 / dead_time, rel=1e-12)
    assert found.delay_margin == pytest.approx((pi - 1.0) * dead_time, rel=1e-12)
    assert found.max_sensitivity == digits(1.59049)
    assert found.max_sensitivity_at * dead_time == digits(1.1442, 5)
    assert found.max_complementary == pytest.approx(1.0, rel=1e-12)


@pytest.mark.parametrize("dead_time", [0.25, 1.0, 4.0])
def test_simc_on_an_integrator_with_dead_time(dead_time: float) -> None:
    """SIMC on an integrator with dead time, tI = 8 theta (Skogestad 2003, table 1)."""
    found = margins_of(f"2 exp(-{dead_time!r} s)/s", ideal(0.25 / dead_time, 8.0 * dead_time))
    assert found.gain_margin == digits(2.96340)
    assert found.phase_margin == digits(46.8643)
    assert found.phase_margin_at is not None
    assert found.phase_margin_at * dead_time == digits(0.51454, 5)
    assert found.delay_margin / dead_time == digits(1.58964)
    assert found.max_sensitivity == digits(1.70352)
    assert found.max_complementary == digits(1.29942)


class Case(NamedTuple):
    """One of the E-cases: plant, series settings, peak without and with the derivative filter 0.01 tD."""

    name: str
    plant: str
    gain: float
    ti: float
    td: float
    sensitivity: float
    filtered: float | None = None


E1, E2 = "1/((s+1)(0.2s+1))", "(1-0.3s)(0.08s+1)/((2s+1)(s+1)(0.4s+1)(0.2s+1)(0.05s+1)^3)"
E3, E4 = "2(15s+1)/((20s+1)(s+1)(0.1s+1)^2)", "1/(s+1)^4"
E5, E6 = "1/((s+1)(0.2s+1)(0.04s+1)(0.008s+1))", "(0.17s+1)^2/(s(s+1)^2(0.028s+1))"
E7, E8, E9 = "(1-2s)/(s+1)^3", "1/(s(s+1)^2)", "exp(-s)/(s+1)^2"
E10, E11 = "exp(-s)/((20s+1)(2s+1))", "(1-s)exp(-s)/((6s+1)(2s+1)^2)"
E12, E13 = "(6s+1)(3s+1)exp(-0.3s)/((10s+1)(8s+1)(s+1))", "(2s+1)exp(-s)/((10s+1)(0.5s+1))"
CASES = (
    Case("E1", E1, 5.5, 0.8, 0.0, 1.56018),
    Case("E2", E2, 1.25 / 1.47, 2.5, 0.0, 1.66158),
    Case("E2", E2, 1.0 / 0.77, 2.0, 1.2, 1.72404, 1.74044),
    Case("E3", E3, 7.0 / 3.0, 1.05, 0.0, 1.55030),
    Case("E3", E3, 20.0 / 3.0, 0.4, 0.15, 1.49790, 1.52410),
    Case("E4", E4, 0.3, 1.5, 0.0, 1.46298),
    Case("E4", E4, 0.5, 1.5, 1.0, 1.43184, 1.43668),
    Case("E5", E5, 0.55 / 0.148, 1.1, 0.0, 1.59257),
    Case("E5", E5, 0.5 / 0.028, 0.224, 0.22, 1.82736, 1.93429),
    Case("E6", E6, 0.5 / 1.69, 13.52, 0.0, 1.47492),
    Case("E6", E6, 0.5 / 0.358, 2.864, 1.33, 1.22839, 1.24935),
    Case("E7", E7, 0.75 / 3.5, 1.5, 0.0, 1.66042),
    Case("E7", E7, 0.3, 1.5, 1.0, 1.85149, 1.85666),
    Case("E8", E8, 1.0 / 3.0, 12.0, 0.0, 1.77082),
    Case("E8", E8, 1.0, 4.0, 1.5, 1.60283, 1.63448),
    Case("E9", E9, 0.5, 1.5, 0.0, 1.61402),
    Case("E9", E9, 0.5, 1.0, 1.0, 1.59049, 1.59880),
    Case("E10", E10, 5.25, 16.0, 0.0, 1.71557),
    Case("E10", E10, 10.0, 8.0, 2.0, 1.65124, 1.67095),
    Case("E11", E11, 0.7, 7.0, 0.0, 1.62637),
    Case("E11", E11, 1.0, 6.0, 3.0, 1.65658, 1.66601),
    Case("E12", E12, 1.0 / 0.135, 1.0, 0.0, 1.65707),
    Case("E13", E13, 2.88, 4.5, 0.0, 1.73744),
    Case("E14", "(1-s)/s", 0.5, 8.0, 0.0, 2.0),
    Case("E15", "(1-s)/(s+1)", 0.5, 1.0, 0.0, 2.0),
)
"""Skogestad, J. Process Control 13, 2003: cases and settings from memory, peaks computed."""


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case.name} {'PID' if case.td else 'PI'}")
def test_sensitivity_of_the_e_cases(case: Case) -> None:
    """The sensitivity peak of each case agrees to its digits, for the ideal derivative and for the filtered one."""
    assert margins_of(case.plant, series(case.gain, case.ti, case.td)).max_sensitivity == digits(case.sensitivity)
    if case.filtered is not None:
        assert peak_with_series_filter(case) == digits(case.filtered)


def peak_with_series_filter(case: Case) -> float:
    """Return the peak with (tD s + 1)/(0.01 tD s + 1) written into the plant in place of the derivative."""
    lead = f"({case.td!r}s+1)/({0.01 * case.td!r}s+1)"
    return margins_of(f"({case.plant})*{lead}", series(case.gain, case.ti)).max_sensitivity


def test_limits_at_infinite_frequency() -> None:
    """E14 and E15: |L| tends to one half, so gain margin and peak are 2, reached as w grows without end."""
    for plant, ti in (("(1-s)/s", 8.0), ("(1-s)/(s+1)", 1.0)):
        found = margins_of(plant, series(0.5, ti))
        assert (found.gain_margin, found.gain_margin_at) == (2.0, inf)
        assert (found.max_sensitivity, found.max_sensitivity_at) == (2.0, inf)
    assert margins_of("(1-s)/(s+1)", series(0.5, 1.0)).phase_margin == pytest.approx(60.0, rel=1e-12)


BOUNDS = ((1.2, 6.0, 49.2486), (1.4, 3.5, 41.8497), (1.6, 2.66667, 36.4199), (2.0, 2.0, 28.9550))
"""GM >= Ms/(Ms-1), PM >= 2 asin(1/(2 Ms)): Astrom and Hagglund; Skogestad and Postlethwaite (geometry, from memory)."""


@pytest.mark.parametrize(("peak", "gain", "phase"), BOUNDS)
def test_bounds_on_margins_from_the_peak(peak: float, gain: float, phase: float) -> None:
    """A pure integral on a pure dead time tuned to a peak keeps the margins that the peak promises."""
    assert (peak / (peak - 1.0), degrees(2.0 * asin(0.5 / peak))) == (digits(gain), digits(phase))
    found = margins_of("exp(-s)", Controller(gain_2=INTEGRAL[peak]))
    assert found.max_sensitivity == digits(peak)
    assert found.gain_margin >= peak / (peak - 1.0) - 1e-9
    assert found.phase_margin >= phase


INTEGRAL = {1.2: 0.205473, 1.4: 0.372672, 1.59: 0.499705, 1.6: 0.505684, 2.0: 0.701170}
"""Integral gain times dead time for each sensitivity peak, I-only control of a pure dead time: computed."""


@pytest.mark.parametrize(("peak", "gain"), INTEGRAL.items())
def test_integral_control_of_a_dead_time(peak: float, gain: float) -> None:
    """I-only control of exp(-L s) reaches each peak at the tabled gain, whatever the dead time."""
    for dead_time in (0.1, 1.0, 30.0):
        controller = Controller(gain_2=gain / dead_time)
        assert margins_of(f"exp(-{dead_time!r} s)", controller).max_sensitivity == digits(peak, 5)


COMPLEMENTARY_BOUNDS = ((1.3, 1.76923, 45.2397), (2.0, 1.5, 28.9550))


@pytest.mark.parametrize(("peak", "gain", "phase"), COMPLEMENTARY_BOUNDS)
def test_bounds_from_the_complementary_peak(peak: float, gain: float, phase: float) -> None:
    """GM >= 1 + 1/Mt, PM >= 2 asin(1/(2 Mt)) hold for every tabled loop (Skogestad and Postlethwaite; from memory)."""
    assert (1.0 + 1.0 / peak, degrees(2.0 * asin(0.5 / peak))) == (digits(gain), digits(phase))
    for row in LOOPS:
        found = margins_of(row.formula)
        assert found.gain_margin >= 1.0 + 1.0 / found.max_complementary - 1e-9
        assert found.phase_margin >= degrees(2.0 * asin(0.5 / found.max_complementary)) - 1e-9
        assert found.gain_margin >= found.max_sensitivity / (found.max_sensitivity - 1.0) - 1e-9


class Optimal(NamedTuple):
    """A PI controller that maximises ki under a sensitivity peak M, for each of three M."""

    plant: str
    gains: tuple[tuple[float, float], tuple[float, float], tuple[float, float]]


OPTIMAL = (
    Optimal("1/(s+1)^3", ((0.63297, 0.325317), (0.86202, 0.460876), (1.22196, 0.685190))),
    Optimal("1/(s+1)^4", ((0.43261, 0.191968), (0.57190, 0.264698), (0.77506, 0.377879))),
    Optimal(E5, ((1.92614, 2.585432), (2.74192, 4.077929), (4.13262, 6.991506))),
    Optimal("exp(-15s)/(s+1)^3", ((0.16401, 0.026624), (0.20804, 0.035461), (0.26567, 0.048205))),
    Optimal("1/(s(s+1)^2)", ((1 / 6, 0.011905), (3 / 13, 0.021635), (1 / 3, 0.041667))),
    Optimal("(1-2s)/(s+1)^3", ((0.17873, 0.100631), (0.22822, 0.134660), (0.29428, 0.184296))),
    Optimal("9/((s+1)(s^2+2s+9))", ((0.31254, 0.838806), (0.38670, 1.125051), (0.48219, 1.540954))),
    Optimal("exp(-s)/(s+1)", ((0.36027, 0.373036), (0.46365, 0.508894), (0.60395, 0.714271))),
    Optimal("exp(-s)/s", ((0.28212, 0.041834), (0.36870, 0.072647), (0.48850, 0.130655))),
    Optimal("exp(-s)", ((0.15795, 0.472408), (0.20017, 0.628753), (0.25527, 0.853869))),
)
"""Astrom, Panagopoulos and Hagglund, Automatica 34, 1998: the problem; optimal gains computed, to 5 or 6 digits."""


@pytest.mark.parametrize("row", OPTIMAL, ids=lambda row: row.plant)
def test_peaks_of_constrained_optima(row: Optimal) -> None:
    """The optimal gains for a peak of 1.4, 1.6 and 2.0 have that peak."""
    for peak, (kp, ki) in zip((1.4, 1.6, 2.0), row.gains, strict=True):
        found = margins_of(row.plant, Controller(gain_1=kp, gain_2=ki))
        assert found.max_sensitivity == pytest.approx(peak, rel=4e-5)


OGATA = (
    (ideal(18.0, 2.809926 / 2.0, 2.809926 / 8.0), 22.069, 1.73303, 2.61584, 2.76029),
    (ideal(39.42, 3.077, 0.7692), 44.132, None, 1.61351, None),
)
"""Ogata, Modern Control Engineering, 5th edition, Example 8-1: settings; margins computed."""


@pytest.mark.parametrize(("controller", "phase", "at", "sensitivity", "complementary"), OGATA)
def test_ultimate_cycle_example(
    controller: Controller, phase: float, at: float | None, sensitivity: float, complementary: float | None
) -> None:
    """The tuned loop of 1/(s(s+1)(s+5)) and its retuning have the computed margins."""
    found = margins_of("1/(s(s+1)(s+5))", controller)
    assert (found.phase_margin, found.max_sensitivity) == (digits(phase, 5), digits(sensitivity, 6))
    if at is not None:
        assert found.phase_margin_at == digits(at, 6)
    if complementary is not None:
        assert found.max_complementary == digits(complementary, 6)


def test_a_pure_integrator_around_dead_time_in_closed_form() -> None:
    """L = k exp(-s)/s: gain margin pi/(2k), phase margin 90 degrees less k radians, delay margin their quotient."""
    for k in (0.1, 0.5, 1.0, 1.5):
        found = margins_of("exp(-s)/s", Controller(gain_1=k))
        assert found.gain_margin == pytest.approx(0.5 * pi / k, rel=1e-12)
        assert found.phase_margin == pytest.approx(90.0 - degrees(k), rel=1e-12)
        assert found.delay_margin == pytest.approx((0.5 * pi - k) / k, rel=1e-12)


def test_direct_action_on_a_falling_plant() -> None:
    """A plant whose output falls with the effort, under direct action, has the margins of its mirror image."""
    mirrored = margins_of("-2/(s+1)^3", Controller(gain_1=1.0, action="direct"))
    assert mirrored == margins_of("2/(s+1)^3")
    assert loop("-2/(s+1)^3", Controller(gain_1=1.0, action="direct")).factors.gain > 0.0
