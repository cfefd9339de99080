"""The five forms of a plant as linear systems, and every way in which a formula can have no such system."""

import cmath
import math

import mpmath
import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PhysicsPlant, StateSpacePlant, ZeroPolePlant
from tuner.simulate.linear import Linear
from tuner.simulate.realise import realise, realise_expression
from tuner.simulate.traces import ComplexArray

S: ComplexArray = np.asarray(0.13 + 1j * np.logspace(-2, 2, 9), dtype=complex)


def _formula(text: str, **values: float) -> Linear:
    return realise(ExpressionPlant(text), values)


@pytest.mark.parametrize(
    ("text", "values", "same"),
    [
        ("gain exp(-delay s)/((lag s + 1)(tail s + 1))", {"gain": 0.9, "delay": 4, "lag": 32, "tail": 6},
         lambda s: 0.9 * cmath.exp(-4 * s) / ((32 * s + 1) * (6 * s + 1))),
        ("1/(s(s+1)) + 2/(s+3)", {}, lambda s: 1 / (s * (s + 1)) + 2 / (s + 3)),
        ("w^2/(s^2 + 2 z w s + w^2)", {"w": 3.0, "z": 0.1}, lambda s: 9 / (s**2 + 0.6 * s + 9)),
        ("(1 - s)/(s+1)^3", {}, lambda s: (1 - s) / (s + 1) ** 3),
        ("k (exp(-s)/(s+1) - exp(-s)/(s+2))", {"k": 5}, lambda s: 5 * cmath.exp(-s) * (1 / (s + 1) - 1 / (s + 2))),
        ("exp(-a s + 1)/(s + sqrt(4))", {"a": 0.5}, lambda s: cmath.exp(-0.5 * s + 1) / (s + 2)),
        ("1/(s^5 + 3 s^4 + 7 s^3 + 5 s^2 + 2 s + 1)", {}, lambda s: 1 / np.polyval([1, 3, 7, 5, 2, 1], s)),
        ("(s+1)^(-2)", {}, lambda s: (s + 1) ** -2),
    ],
)  # fmt: skip
def test_a_formula_is_its_own_value(text: str, values: dict[str, float], same: object) -> None:
    """The system responds at every point as the formula computes."""
    expected = [same(complex(s)) for s in S]  # type: ignore[operator]  # a function of s
    assert _formula(text, **values).response(S) == pytest.approx(expected, rel=1e-11)


def test_powers_keep_exact_poles() -> None:
    """(s + 1)^8 has eight poles at -1 exactly."""
    assert (_formula("1/(s+1)^8").poles == -1.0).all()


def test_nothing_cancels() -> None:
    """A factor above and below stays as a hidden mode."""
    system = _formula("(s - 1)/((s - 1)(s + 2))")
    assert 1.0 in system.poles
    assert 1.0 in system.zeros


def test_equal_denominators_are_not_doubled() -> None:
    """A sum over one denominator has its poles once."""
    assert len(_formula("2/(s - 1) + 3/(s - 1)").poles) == 1


def test_sums_of_very_different_lags_keep_both_roots() -> None:
    """(1e-6 s + 1)(1e6 s + 1) + 1 has its roots at -1e6 and -2e-6, both to twelve digits."""
    poles = np.sort(_formula("1/((1e-6 s + 1)(1e6 s + 1) + 1)").poles.real)
    assert poles == pytest.approx([-1e6, -2e-6], rel=1e-11)
    cubic = np.sort(_formula("1/((1e-6 s + 1)(s + 1)(1e6 s + 1) + 1)").poles.real)
    with mpmath.workdps(40):
        middle = mpmath.mpf(10) ** 6 + 1 + mpmath.mpf(10) ** -6
        exact = [float(mpmath.findroot(lambda s: s**3 + middle * (s**2 + s) + 2, guess)) for guess in cubic]
    assert cubic == pytest.approx(exact, rel=1e-11)
    assert len(set(exact)) == 3


def test_exact_cancellation_of_coefficients() -> None:
    """A leading or trailing coefficient that vanishes lowers the degree, or leaves a pole at the origin exactly."""
    assert _formula("1/((s + 1)(s + 2) - 2)").poles == pytest.approx([0.0, -3.0])
    assert 0.0 in _formula("1/((s + 1)(s + 2) - 2)").poles
    assert _formula("(s + 1)/(s + 2) - 1").zeros.size == 0
    assert 0.0 in _formula("1/((s + 0.1)(s + 0.2) - 0.02)").poles


def test_a_lag_of_zero_is_no_lag() -> None:
    """A factor (lag s + 1) with lag 0 is one."""
    assert _formula("2/((lag s + 1)(s + 1))", lag=0.0).order == 1


def test_a_pure_gain_is_a_plant() -> None:
    """A plant may be a number."""
    assert (_formula("2 k", k=1.5).d, _formula("2 k", k=1.5).order) == (3.0, 0)


def test_the_other_forms() -> None:
    """Coefficients, zeros and poles, and a state space of 2 (s + 3)/((s + 1)(s + 2)) exp(-0.5 s) are one plant."""
    expected = _formula("2 (s + 3)/((s + 1)(s + 2)) exp(-0.5 s)").response(S)
    plants = (
        CoefficientPlant((0.0, 2.0, 6.0), (1.0, 3.0, 2.0), 0.5),
        ZeroPolePlant((-3.0,), (-1.0, -2.0), 2.0, 0.5),
        StateSpacePlant(((0.0, 1.0), (-2.0, -3.0)), (0.0, 1.0), (6.0, 2.0), 0.0, 0.5),
    )
    for plant in plants:
        assert realise(plant, {}).response(S) == pytest.approx(expected, rel=1e-11)


def test_a_physical_model_takes_given_values_and_defaults() -> None:
    """What is not given has its default."""
    assert realise(PhysicsPlant("tank level, pumped outflow"), {"area": 4.0}).gain == 0.25
    assert realise(PhysicsPlant("tank level, pumped outflow"), {}).gain == pytest.approx(1.0 / 1.5)


def test_a_plant_is_realised_once() -> None:
    """The same plant with the same values is the same system, not a new one."""
    assert _formula("1/(s+4)") is _formula("1/(s+4)")


@pytest.mark.parametrize(
    ("text", "values", "sentence"),
    [
        ("s^2/(s+1)", {}, "the plant formula is improper: its numerator has degree 2, above the denominator's 1; "
         "no plant reacts to slopes alone, so a lag is missing"),
        ("exp(2 s)/(s+1)", {}, "the plant formula predicts by 2: a dead time is exp(-time s), with a minus"),
        ("exp(-s)/(s+1) + exp(-2 s)", {}, "the plant formula: parts with different dead times, 1 and 2, cannot be "
         "added: a plant has one dead time, as a factor of the whole"),
        ("0/(s+1)", {}, "the plant is zero: its output does not follow the effort"),
        ("1/(s+1) - 1/(s+1)", {}, "the plant is zero: its output does not follow the effort"),
        ("1/(k (s + 1))", {"k": 0.0}, "the plant formula: division by zero at character 4"),
        ("(s+1)^-0.5", {}, "the plant formula: s to the power -0.5 at character 6: only whole powers are used"),
        ("1/(s+1)^k", {"k": 1.5}, "the plant formula: s to the power 1.5 at character 8: only whole powers are used"),
        ("2^s", {}, "the plant formula: s stands in an exponent at character 2; only exp(-time s) may hold it"),
        ("exp(-s^2)/(s+1)", {}, "the plant formula: exp(...) at character 1 must hold a multiple of s, as in "
         "exp(-time s), or a number"),
        ("sqrt(s)/(s+1)", {}, "the plant formula: sqrt(...) at character 1 holds s; only numbers "
         "have a square root here"),
        ("sqrt(k)/(s+1)", {"k": -1.0}, "the plant formula: sqrt(...) at character 1 of the negative number -1"),
        ("k^0.5/(s+1)", {"k": -1.0}, "the plant formula: -1 to the power 0.5 at character 2 is not a real number"),
        ("k^-1/(s+1)", {"k": 0.0}, "the plant formula: division by zero at character 2"),
        ("exp(k)/(s+1)", {"k": 1e4}, "the plant formula: a number becomes too large to compute with at character 5"),
        ("gian/(s+1)", {"gain": 1.0}, "the plant formula: gian at character 1 has no value; the nearest "
         "parameter is gain"),
        ("k/(s+1)", {"k": math.nan}, "the plant formula: k at character 1 must be a finite number, found nan"),
        ("1/(s+1)^99", {}, "the plant formula has 99 poles; at most 60 are computed with"),
        ("1/(s+1)^9999", {}, "the plant formula: the power 9999 at character 8 is too high"),
    ],
)  # fmt: skip
def test_sentences_about_a_formula(text: str, values: dict[str, float], sentence: str) -> None:
    """Each fault of a formula is said in one sentence, with its place."""
    with pytest.raises(LoopError) as caught:
        _formula(text, **values)
    assert str(caught.value) == sentence


@pytest.mark.parametrize(
    ("plant", "sentence"),
    [
        (CoefficientPlant((1.0,), (0.0, 0.0)), "the denominator of the plant is zero"),
        (CoefficientPlant((math.inf,), (1.0, 1.0)), "the coefficients of a plant must be finite numbers"),
        (CoefficientPlant((0.0,), (1.0, 1.0)), "the plant is zero: its output does not follow the effort"),
        (PhysicsPlant("tank levle"), "there is no physical model named 'tank levle'; the nearest is tank level"),
        (ZeroPolePlant((), (1j,), 1.0), "the pole 0+1j lacks its conjugate 0-1j"),
        (ZeroPolePlant((), (-1.0,), 1.0, math.nan), "the dead time must be zero or a positive time, found nan"),
    ],
)
def test_sentences_about_other_forms(plant: CoefficientPlant, sentence: str) -> None:
    """Each fault of another form is said in one sentence."""
    with pytest.raises(LoopError) as caught:
        realise(plant, {})
    assert str(caught.value) == sentence


def test_another_formula_is_called_by_its_name() -> None:
    """The sentence names the formula that is meant."""
    with pytest.raises(LoopError, match=r"^the path of the disturbance is improper"):
        realise_expression("s", {}, "the path of the disturbance")
