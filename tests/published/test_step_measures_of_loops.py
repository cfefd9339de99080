"""Step measures of whole loops, from sheet to assessment, against handbook values.

The exact values were computed independently (closed forms with mpmath; dead time by the method of steps with two
unrelated integrators that agreed to all digits given). Curves of continuous controllers are promised to 1e-3 of the
step, so percentages of the step are compared within 0.1 and times and areas within 2e-3 of themselves; margins are
exact and are compared to their printed digits.
"""

import pytest

from tuner.assess import assess
from tuner.files.sheet import parse
from tuner.judge.assessment import Assessment

HEIGHT = 0.1
TIME = 2e-3
EXACT = 1e-5


def judged(expression: str, gains: str, trial: str, manipulated: str = "") -> Assessment:
    """Assess a loop with a continuous controller around a plant formula."""
    return assess(
        parse(
            f"""
            sheet = 1
            [loop]
            title = "Published loop"
            {manipulated}
            [plant]
            expression = "{expression}"
            [controller]
            sample_time = 0
            {gains}
            [trial]
            {trial}
            """
        )
    )


def value(found: Assessment, measure: str) -> float:
    """Return a measure of the nominal plant that must exist."""
    number = found.nominal.measures[measure]
    assert number is not None
    return number


@pytest.mark.parametrize(
    ("zeta", "overshoot", "peak_time", "rise_time", "settling_time", "phase_margin", "resonance"),
    [
        (0.2, 52.6621, 3.20638, 1.20343, 19.6019, 22.6023, 2.55155),
        (0.4, 25.3827, 3.42776, 1.46349, 8.40932, 43.1176, 1.36386),
        (0.5, 16.3034, 3.62760, 1.63757, 8.07635, 51.8273, 1.15470),
        (0.6, 9.47802, 3.92699, 1.85405, 5.94299, 59.1873, 1.04167),
        (0.7, 4.59879, 4.39911, 2.12620, 5.97879, 65.1564, 1.00020),
        (0.8, 1.51646, 5.23599, 2.46749, 3.75584, 69.8600, 1.0),
    ],
)
def test_the_second_order_loop(  # noqa: PLR0913, PLR0917 - the columns of the table
    zeta: float,
    overshoot: float,
    peak_time: float,
    rise_time: float,
    settling_time: float,
    phase_margin: float,
    resonance: float,
) -> None:
    """L = 1/(s (s + 2 zeta)): step table of Ogata, chapter 5, and Nise, chapter 4; margin and resonance of any text."""
    found = judged(f"1/(s(s + {2.0 * zeta}))", "kp = 1", "duration = 40")

    assert value(found, "overshoot") == pytest.approx(overshoot, abs=HEIGHT)
    assert value(found, "peak_time") == pytest.approx(peak_time, rel=TIME)
    assert value(found, "rise_time") == pytest.approx(rise_time, rel=TIME)
    assert value(found, "settling_time") == pytest.approx(settling_time, rel=TIME)
    assert value(found, "phase_margin") == pytest.approx(phase_margin, rel=EXACT)
    assert value(found, "max_complementary") == pytest.approx(resonance, rel=EXACT)
    assert value(found, "damping") == pytest.approx(zeta, rel=1e-9)
    assert value(found, "steady_state_error") == 0.0


@pytest.mark.parametrize(
    ("expression", "overshoot", "peak_time", "rise_time", "settling_time"),
    [
        ("25/(s(s + 6))", 9.47802, 0.785398, 0.370810, 1.18860),
        ("100/(s(s + 15))", 2.837544, 0.474964, 0.228754, 0.574261),
    ],
)
def test_worked_examples(
    expression: str, overshoot: float, peak_time: float, rise_time: float, settling_time: float
) -> None:
    """Ogata, Modern Control Engineering, Example 5-1 (.785, .095), and Nise, Example 4.5 (.475, 2.838, .23)."""
    # Both from memory. Settling times are true last exits, not the envelope's 4/sigma that both books print.
    found = judged(expression, "kp = 1", "duration = 6")

    assert value(found, "overshoot") == pytest.approx(overshoot, abs=HEIGHT)
    assert value(found, "peak_time") == pytest.approx(peak_time, rel=TIME)
    assert value(found, "rise_time") == pytest.approx(rise_time, rel=TIME)
    assert value(found, "settling_time") == pytest.approx(settling_time, rel=TIME)


def test_five_percent_settling() -> None:
    """The same Example 5-1 with a band of 5 %: true settling 1.04581 (the book's 3/sigma is 1)."""
    found = judged("25/(s(s + 6))", "kp = 1", "duration = 6\nsettling_band = 5")

    assert value(found, "settling_time") == pytest.approx(1.04581, rel=TIME)


def test_least_absolute_error() -> None:
    """The IAE of a second-order step is least, 1.605144, at zeta = 0.66238 (Graham and Lathrop, 1953, for the idea)."""
    areas = [
        value(judged(f"1/(s(s + {2.0 * zeta}))", "kp = 1", "duration = 40"), "iae_reference")
        for zeta in (0.6, 0.66238, 0.72)
    ]

    assert areas[1] == pytest.approx(1.605144, rel=TIME)
    assert areas[1] < min(areas[0], areas[2])


def test_an_ultimate_cycle_tuning() -> None:
    """Ogata, 5th edition, Example 8-1: about 62 % overshoot of the Ziegler-Nichols setting without a filter, c = 1."""
    found = judged("1/(s(s + 1)(s + 5))", "kp = 18\nki = 12.8113879\nkd = 6.32232\nc = 1", "duration = 40")

    assert value(found, "overshoot") == pytest.approx(61.8247, abs=HEIGHT)
    assert value(found, "peak_time") == pytest.approx(1.6677, rel=TIME)
    assert value(found, "settling_time") == pytest.approx(10.0345, rel=TIME)
    assert value(found, "phase_margin") == pytest.approx(22.069, rel=5e-5)
    assert found.nominal.measures["peak_effort"] is None
    assert found.nominal.reasons["peak_effort"] == "an unfiltered derivative of a reference step is infinite"


def test_a_plant_with_dead_time() -> None:
    """SIMC PI on exp(-s)/(s + 1): GM 3.14, PM 61.4, DM 2.14, Ms 1.59 (Skogestad, 2003, table 1); the runs computed."""
    found = judged("exp(-s)/(s + 1)", "kp = 0.5\nki = 0.5", "duration = 60\ndisturbance = 1")

    assert value(found, "gain_margin") == pytest.approx(3.14159265, rel=1e-8)
    assert value(found, "phase_margin") == pytest.approx(61.3521102, rel=1e-8)
    assert value(found, "delay_margin") == pytest.approx(2.14159265, rel=1e-8)
    assert value(found, "max_sensitivity") == pytest.approx(1.59049, rel=EXACT)
    assert value(found, "overshoot") == pytest.approx(4.05196, abs=HEIGHT)
    assert value(found, "peak_time") == pytest.approx(4.74008, rel=TIME)
    assert value(found, "rise_time") == pytest.approx(1.90546, rel=TIME)
    assert value(found, "settling_time") == pytest.approx(6.05645, rel=TIME)
    assert value(found, "iae_reference") == pytest.approx(2.16869, rel=TIME)
    assert value(found, "iae_disturbance") == pytest.approx(2.03500, rel=TIME)
    assert value(found, "disturbance_peak") == pytest.approx(0.72428, abs=1e-3)


def test_an_integrating_plant_with_dead_time() -> None:
    """SIMC PI on exp(-s)/s, ti = 8: GM 2.96, Ms 1.70 (Skogestad, 2003, table 1); the IAE of a load step is 1/ki."""
    found = judged("exp(-s)/s", "kp = 0.5\nki = 0.0625", "duration = 200\ndisturbance = 1")

    assert value(found, "gain_margin") == pytest.approx(2.96340, rel=EXACT)
    assert value(found, "max_sensitivity") == pytest.approx(1.70352, rel=EXACT)
    assert value(found, "overshoot") == pytest.approx(27.7423, abs=HEIGHT)
    assert value(found, "iae_reference") == pytest.approx(3.92227, rel=TIME)
    assert value(found, "iae_disturbance") == pytest.approx(16.0, rel=1e-3)
    assert value(found, "disturbance_peak") == pytest.approx(1.96113, rel=1e-3)


@pytest.mark.parametrize(
    ("windup", "overshoot", "peak_time", "iae", "settling_time"),
    [
        ("", 90.018, 19.0554, 22.1497, 62.343),
        ("windup_time = 1", 5.463, 11.2092, 5.13895, 12.754),
        ("windup_time = 0.5", 3.497, 11.3138, 5.09046, 12.476),
    ],
)
def test_an_integrator_held_by_a_limit(
    windup: str, overshoot: float, peak_time: float, iae: float, settling_time: float
) -> None:
    """1/s, PI 1 and 1, abs(u) <= 0.1: computed in closed form; back-calculation after Astrom and Hagglund, 1995."""
    limits = "manipulated = { low = -0.1, high = 0.1 }"
    found = judged("1/s", f"kp = 1\nki = 1\n{windup}", "duration = 120", limits)

    assert value(found, "overshoot") == pytest.approx(overshoot, abs=HEIGHT)
    assert value(found, "peak_time") == pytest.approx(peak_time, rel=TIME)
    assert value(found, "iae_reference") == pytest.approx(iae, rel=TIME)
    assert value(found, "settling_time") == pytest.approx(settling_time, rel=TIME)
    assert value(found, "peak_effort") == pytest.approx(0.1)
    assert value(found, "saturated_share") > 0.05


@pytest.mark.parametrize(
    ("expression", "gains", "edge"),
    [
        ("1/(s(s + 1)(s + 2))", "kp = 9", 6.0),
        ("1/(s(s + 7)(s + 11))", "kp = 2000", 1386.0),
        ("1/(s + 1)^3", "kp = 9.4", 8.0),
        ("exp(-s)/(s + 1)", "kp = 2.5", 2.26182633),
    ],
)
def test_the_edge_of_stability(expression: str, gains: str, edge: float) -> None:
    """Ultimate gains of the classic loops (the second: Nise, Example 6.9), found as the way back from instability."""
    found = judged(expression, gains, "duration = 20")

    assert found.verdict == "unstable"
    assert found.instability is not None
    assert found.instability.gain == "kp"
    assert found.instability.edge == pytest.approx(edge, rel=1e-4)
