"""Feedforward filters: inverses that are stable and causal, and their sampled step responses."""

import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, ReferenceFilter
from tuner.simulate.feedforward import (
    disturbance_feedforward,
    inverse,
    lags_of_reference,
    left_out,
    reference_feedforward,
)
from tuner.simulate.linear import constant
from tuner.simulate.realise import realise_expression
from tuner.simulate.traces import ComplexArray

S: ComplexArray = np.asarray(0.1 + 1j * np.logspace(-2, 2, 7), dtype=complex)

DYNAMIC, STATIC = DisturbanceFeedforward("s"), DisturbanceFeedforward("s", kind="static")
"""The formula is not looked at here."""


def test_none_and_static() -> None:
    """Without feedforward there is no filter; static feedforward is its gain."""
    assert reference_feedforward(Controller(), constant(2.0)) is None
    static = reference_feedforward(Controller(feedforward=Feedforward("static", gain=0.7)), constant(2.0))
    assert static is not None
    assert static.d == 0.7


def test_the_inverse_undoes_what_it_can() -> None:
    """Inverse times process is the filter alone when the process has neither dead time nor right-hand zeros."""
    process = realise_expression("2 (s + 3)/((s + 1)(4 s + 1)(s^2 + s + 1))", {})
    found = inverse(process, 0.2)
    assert found.response(S) * process.response(S) == pytest.approx(1.0 / (0.2 * S + 1.0) ** 3, rel=1e-11)


def test_dead_time_and_right_hand_zeros_are_left_out() -> None:
    """They remain behind the inverse, with a static gain of one."""
    process = realise_expression("3 (1 - 2 s) exp(-5 s)/((s + 1)(s + 2))", {})
    found = inverse(process, 0.5)
    left = (1.0 - 2.0 * S) * np.exp(-5.0 * S) / (0.5 * S + 1.0) ** 2
    assert found.response(S) * process.response(S) == pytest.approx(left, rel=1e-11)
    assert found.dead_time == 0.0
    assert (found.poles.real < 0.0).all()


def test_a_pair_of_zeros_on_the_axis_is_left_out() -> None:
    """An undamped pair of zeros is replaced by its static gain, since its inverse would ring for ever."""
    process = realise_expression("(s^2 + 4)/(s + 1)^3", {})
    assert inverse(process, 1.0).static_gain() * process.static_gain() == pytest.approx(1.0)
    assert (inverse(process, 1.0).poles.real < 0.0).all()


def test_an_integrating_plant_has_an_inverse() -> None:
    """To hold the level of an integrator no effort is needed: the inverse has no static gain."""
    assert inverse(realise_expression("2/s", {}), 0.3).static_gain() == 0.0


def test_the_handbook_disturbance_compensator() -> None:
    """Ideal feedforward -Gd/Gp (common practice): -0.75 (10 s + 1) exp(-s)/(5 s + 1) for these two paths."""
    path, process = (realise_expression(f, {}) for f in ("1.5 exp(-3 s)/(5 s + 1)", "2 exp(-2 s)/(10 s + 1)"))
    found = disturbance_feedforward(DYNAMIC, path, process)
    assert found.response(S) == pytest.approx(-0.75 * (10 * S + 1) * np.exp(-S) / (5 * S + 1), rel=1e-12)


def test_factors_that_path_and_process_share_cancel() -> None:
    """Two paths into one integrating vessel: the compensator is a gain, not an integrator on a differentiator."""
    path, process = (realise_expression(f, {}) for f in ("3/(s (s + 1))", "2/(s (s + 1))"))
    found = disturbance_feedforward(DYNAMIC, path, process)
    assert found.order == 0
    assert found.d == pytest.approx(-1.5)


def test_a_slower_process_compensates_late() -> None:
    """A process with more dead time than the path is compensated at once, which is too late."""
    path, process = (realise_expression(f, {}) for f in ("exp(-s)/(s + 1)", "exp(-4 s)/(s + 1)"))
    assert disturbance_feedforward(DYNAMIC, path, process).dead_time == 0.0


def test_an_improper_ratio_takes_lags() -> None:
    """A disturbance that comes through fewer lags than the effort: the causal part is the ratio behind equal lags."""
    path, process = (realise_expression(f, {}) for f in ("3/(2 s + 1)", "4 exp(-s)/((s + 1)(5 s + 1)^2)"))
    found = disturbance_feedforward(DisturbanceFeedforward("s", filter_time=0.3), path, process)
    ratio = -3.0 / 4.0 * (S + 1.0) * (5.0 * S + 1.0) ** 2 / (2.0 * S + 1.0)
    assert found.response(S) == pytest.approx(ratio / (0.3 * S + 1.0) ** 2, rel=1e-11)


def test_static_is_the_ratio_of_the_static_gains() -> None:
    """Whatever the lags and dead times: -Gd(0)/Gp(0); of two integrators, that of their gains."""
    path, process = (realise_expression(f, {}) for f in ("1.5 exp(-3 s)/(5 s + 1)", "2 exp(-2 s)/(10 s + 1)^3"))
    found = disturbance_feedforward(STATIC, path, process)
    assert (found.order, found.dead_time) == (0, 0.0)
    assert found.d == pytest.approx(-0.75)
    both = [realise_expression(f, {}) for f in ("3/(s (s + 1))", "2/(s (4 s + 1))")]
    assert disturbance_feedforward(STATIC, *both).d == pytest.approx(-1.5)


def test_the_reference_filter_is_equal_lags() -> None:
    """1/(time s + 1)^order."""
    assert lags_of_reference(ReferenceFilter(0.4, 3)).response(S) == pytest.approx(1.0 / (0.4 * S + 1.0) ** 3)


@pytest.mark.parametrize(
    ("law", "sentences"),
    [
        (Controller(), ()),
        (Controller(feedforward=Feedforward("static", gain=1.0), disturbance_feedforward=STATIC), ()),
        (
            Controller(feedforward=Feedforward("inverse", filter_time=1.0)),
            (
                "The inverse of the plant leaves out a dead time of 5 and the zero at +0.5 in the right half plane, "
                "whose effect on the output stays.",
            ),
        ),
        (
            Controller(disturbance_feedforward=DYNAMIC),
            (
                "The feedforward of the disturbance leaves out a dead time of 3 and the zero at +0.5 in the right "
                "half plane, whose effect on the output stays.",
            ),
        ),
    ],
)
def test_what_is_left_out_is_said(law: Controller, sentences: tuple[str, ...]) -> None:
    """Dead time and zeros in the right half plane, each where it is not undone."""
    process = realise_expression("3 (1 - 2 s) exp(-5 s)/((s + 1)(s + 2))", {})
    assert left_out(law, process, realise_expression("exp(-2 s)/(s + 1)", {})) == sentences


def test_a_pair_of_zeros_left_out_is_counted() -> None:
    """More than one zero is told by its number."""
    process = realise_expression("(s^2 + 4)/(s + 1)^3", {})
    (sentence,) = left_out(Controller(feedforward=Feedforward("inverse", filter_time=1.0)), process, None)
    assert sentence == (
        "The inverse of the plant leaves out 2 zeros that are not in the left half plane, "
        "whose effect on the output stays."
    )


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (
            lambda: inverse(realise_expression("1/(s+1)^2", {}), 0.0),
            "the inverse of the plant needs 2 lags to be proper: expected filter_time above 0 in "
            "controller.feedforward, found 0",
        ),
        (
            lambda: inverse(realise_expression("1/(s+1)", {}), 0.0),
            "the inverse of the plant needs a lag to be proper: expected filter_time above 0 in "
            "controller.feedforward, found 0",
        ),
        (
            lambda: inverse(realise_expression("s/(s+1)^2", {}), 1.0),
            "a plant with a zero at the origin has no inverse: no steady effort holds its output",
        ),
        (
            lambda: disturbance_feedforward(DYNAMIC, constant(1.0), realise_expression("1/(s+1)^2", {})),
            "the disturbance feedforward would be improper: its numerator has degree 2, above the denominator's 0; "
            "the disturbance reaches the output with fewer lags than the effort does: expected filter_time in "
            "controller.disturbance_feedforward for 2 lags, found none",
        ),
        (
            lambda: disturbance_feedforward(STATIC, realise_expression("1/s", {}), realise_expression("1/(s+1)", {})),
            "a static disturbance feedforward needs a finite ratio of static gains: the path of the disturbance "
            "integrates and the plant does not",
        ),
        (
            lambda: disturbance_feedforward(
                DYNAMIC, realise_expression("1/(s-1)^2", {}), realise_expression("1/(s+1)", {})
            ),
            "the disturbance feedforward would be unstable: the path of the disturbance is unstable",
        ),
    ],
)
def test_sentences(call: object, sentence: str) -> None:
    """What cannot be is refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        call()  # type: ignore[operator]  # a call without arguments
    assert str(caught.value) == sentence


def test_a_disturbance_that_nothing_acts_against() -> None:
    """Its feedforward is nothing, whatever the plant: not even one without an inverse is refused."""
    path, process = realise_expression("3/(5 s + 1)", {}), realise_expression("s/(s + 1)^2", {})
    unopposed = DisturbanceFeedforward("s", kind="none")
    assert not unopposed.acts
    assert disturbance_feedforward(unopposed, path, process).static_gain() == 0.0
