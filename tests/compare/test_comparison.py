"""Three structures compared: against algebra, and what is said of stability."""

import numpy as np
import pytest

from tests.compare.loops import mash, without_gains
from tuner.compare.comparison import NO_GAIN_DOES, NOTHING_COMES_BACK, Comparison, compare_structures
from tuner.footing.classes import Overtaken
from tuner.judge.assessment import Assessment
from tuner.model.controller import Feedforward
from tuner.model.sheet import Sheet

STATIC = '[controller.feedforward]\nkind = "static"\ngain = 0.5\n'


def compared(sheet: Sheet) -> dict[str, Comparison]:
    """Return the comparisons of a sheet by the kind of structure."""
    return {one.structure.kind: one for one in compare_structures(sheet)}


def judged(comparison: Comparison) -> Assessment:
    """Return the assessment, which must be there."""
    assert comparison.assessment is not None
    return comparison.assessment


@pytest.mark.parametrize("more", ["", STATIC], ids=["inverse", "static"])
@pytest.mark.parametrize("spread", ['"20 %"', "[1.5, 3.2]"])
def test_a_drifted_gain_is_a_static_error(more: str, spread: str) -> None:
    """Feedforward alone, by the final value theorem: y/r = G(0)/G0(0), so an error of 1 - G(0)/G0(0) for each plant."""
    forward = judged(compared(mash(spread=spread, more=more))["feedforward"])
    assert forward.family_size > 2
    for member in forward.members[1:]:
        gain = float(member.name.removeprefix("gain "))
        assert member.measures["steady_state_error"] == pytest.approx(100.0 * (1.0 - gain / 2.0), abs=0.05)
    assert forward.nominal.measures["steady_state_error"] == pytest.approx(0.0, abs=1e-9)


def test_the_inverse_of_the_exact_model_leaves_its_lags_and_the_dead_time() -> None:
    """Continuous, without limits: y = r exp(-0.5 s)/(0.8 s + 1)^2, so 1 - (1 + x) exp(-x) with x = (t - 0.5)/0.8."""
    forward = judged(compared(mash(sample_time=0.0))["feedforward"])
    trace = forward.nominal.traces.reference
    x = np.maximum(trace.t - 0.5, 0.0) / 0.8
    assert trace.y / 5.0 == pytest.approx(1.0 - (1.0 + x) * np.exp(-x), abs=1e-3)


def test_an_unmeasured_disturbance_stays_whole() -> None:
    """Feedforward alone leaves G(0) d, feedback with an integral nothing, whatever the plant."""
    found = compared(mash())
    alone, both = (
        {figure.name: figure for figure in found[kind].figures}["final_deviation"] for kind in ("feedforward", "both")
    )
    assert alone.worst == pytest.approx(2.4 * 3.0)
    assert both.worst == 0.0


def test_a_measured_disturbance_is_cancelled_on_the_exact_model() -> None:
    """-Gd/Gp with Gd slower than Gp: nothing is left nominally, the drift is (1 - G(0)/G0(0)) Gd(0) d."""
    path = '[controller.disturbance_feedforward]\nexpression = "3 exp(-0.5 s)/((5 s + 1)(s + 1)(2 s + 1))"\n'
    found = compared(mash(more=path))
    alone, back = (
        {figure.name: figure for figure in found[kind].figures}["final_deviation"]
        for kind in ("feedforward", "feedback")
    )
    assert alone.nominal == pytest.approx(0.0, abs=1e-9)
    assert alone.worst == pytest.approx(0.2 * 3.0 * 3.0)
    assert back.worst == 0.0
    peaks = [judged(found[kind]).nominal.measures["disturbance_peak"] for kind in ("feedback", "both")]
    assert peaks[0] is not None
    assert peaks[1] is not None
    assert peaks[1] < 0.1 * peaks[0]


def test_both_share_the_stability_of_feedback_alone() -> None:
    """Feedforward moves no pole: the poles and the margins are the same."""
    found = compared(mash())
    back, both = judged(found["feedback"]), judged(found["both"])
    assert back.nominal.poles == pytest.approx(both.nominal.poles)
    assert back.worst["gain_margin"] == both.worst["gain_margin"]
    assert found["feedback"].stability == found["both"].stability


def test_what_is_said_of_stability() -> None:
    """Feedforward cannot destabilise; feedback can, by so many times the loop gain at its worst plant."""
    found = compared(mash())
    assert (found["feedforward"].can_destabilise, found["feedforward"].stability) == (False, NOTHING_COMES_BACK)
    assert found["feedback"].can_destabilise
    margin = judged(found["feedback"]).worst["gain_margin"].value
    assert found["feedback"].stability == f"Yes: {margin:.3g} times the loop gain at gain +20 % would."


def test_feedback_that_no_gain_can_unsettle() -> None:
    """A first-order plant under continuous control has no edge."""
    assert compared(mash("gain/(5 s + 1)", sample_time=0.0))["feedback"].stability == NO_GAIN_DOES


def test_feedback_that_does() -> None:
    """An unstable loop around a stable plant is said with how it runs away."""
    said = compared(mash("gain exp(-3 s)/(5 s + 1)"))["feedback"].stability
    assert said.startswith("It does. Unstable: grows e-fold every ")


@pytest.mark.parametrize(
    ("plant", "said"),
    [
        ("0.1 gain/(s (0.2 s + 1))", "The plant integrates; feedback holds it, up to "),
        ("gain/(5 s - 1)", "The plant is unstable by itself; feedback holds it, up to "),
        ("gain exp(-3 s)/(5 s - 1)", "The loop is unstable. Unstable: grows e-fold every "),
    ],
)
def test_a_plant_that_feedback_holds(plant: str, said: str) -> None:
    """Feedback is then what makes the plant rest, or does not."""
    assert compared(mash(plant))["feedback"].stability.startswith(said)


def test_refusals_are_columns_of_their_own() -> None:
    """Without gains feedback alone has no numbers, and its remark says why."""
    back = compared(without_gains())["feedback"]
    assert (back.assessment, back.figures) == (None, ())
    assert back.remarks == ("There is no feedback to compare with: all gains of the controller are 0.",)
    assert back.name == "feedback alone"


def test_a_structure_that_cannot_be_computed_says_why() -> None:
    """An improper feedforward of the disturbance is the reason, and feedback alone is compared all the same."""
    found = compared(mash(more='[controller.disturbance_feedforward]\nexpression = "1/(s + 1)"\n'))
    assert (
        found["feedforward"]
        .remarks[0]
        .startswith("It cannot be compared: the disturbance feedforward would be improper: ")
    )
    assert found["feedback"].assessment is not None


def test_what_is_not_wanted_any_more_ends_early() -> None:
    """Asked before each structure."""
    answers = iter([False, True])
    with pytest.raises(Overtaken):
        compare_structures(mash(), stop=lambda: next(answers))


def test_the_family_size_is_that_of_an_assessment() -> None:
    """As many plants as are asked for."""
    assert {judged(one).family_size for one in compare_structures(mash(), 4)} == {4}


def test_the_chosen_feedforward_is_the_same_in_both_structures() -> None:
    """Feedforward alone and both have it."""
    found = compared(mash())
    for kind in ("feedforward", "both"):
        sheet = found[kind].structure.sheet
        assert sheet is not None
        assert sheet.controller.feedforward == Feedforward("inverse", filter_time=0.8)
