"""Families of invented results, judged."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.judge.invented import member, sheet
from tuner.judge.assessment import WorstCase
from tuner.judge.verdict import judge, meets, worst_case
from tuner.model.measures import BY_NAME, MEASURES, Measure

INF = float("inf")


def test_a_family_within_its_limits_is_met() -> None:
    """Values on a limit keep it."""
    found = judge(sheet({"overshoot": 1.0, "gain_margin": 1.0}), [member(), member("gain 2")])

    assert found.verdict == "met"
    assert [limit.met for limit in found.limits] == [True, True]


def test_the_worst_plant_is_named() -> None:
    """An upper bound takes the largest value, a lower one the smallest, each with its plant."""
    family = [member(), member("gain 2", overshoot=9.0), member("gain 0.5", gain_margin=0.5)]

    found = judge(sheet({"overshoot": 8.0, "gain_margin": 0.4}), family)

    assert found.verdict == "missed"
    assert found.worst["overshoot"].plant == "gain 2"
    assert (found.limits[0].value, found.limits[0].plant, found.limits[0].met) == (9.0, "gain 2", False)
    assert (found.limits[1].value, found.limits[1].plant, found.limits[1].met) == (0.5, "gain 0.5", True)


def test_one_unstable_plant_makes_the_verdict_unstable() -> None:
    """Even when every limit is kept."""
    found = judge(sheet({"damping": 0.1}), [member(), member("delay 9", stable=False)])

    assert found.verdict == "unstable"


def test_an_error_is_bounded_by_its_size() -> None:
    """The worst steady-state error is the one farthest from zero, told with its sign."""
    family = [member(steady_state_error=1.0), member("gain 2", steady_state_error=-3.0)]

    found = judge(sheet({"steady_state_error": 2.0}), family)

    assert (found.limits[0].value, found.limits[0].met) == (-3.0, False)


def test_infinite_margins_are_the_best() -> None:
    """An infinite margin loses against any number and keeps any limit."""
    worst = worst_case(BY_NAME["gain_margin"], [member(gain_margin=INF), member("gain 2", gain_margin=40.0)])

    assert (worst.value, worst.plant) == (40.0, "gain 2")
    assert meets(BY_NAME["gain_margin"], WorstCase(INF, "nominal"), 3.0)


def test_a_missing_measure_is_worse_than_any() -> None:
    """A plant that never settles is the worst one, and its limit is missed."""
    family = [member(), member("gain 2", settling_time=None), member("gain 3", settling_time=1e9)]

    found = judge(sheet({"settling_time": 1e12}), family)

    assert (found.limits[0].value, found.limits[0].plant, found.limits[0].met) == (None, "gain 2", False)


def test_an_unstable_plant_is_worse_than_one_that_never_settles() -> None:
    """Where several have no value, the unstable one is named."""
    family = [member(settling_time=None), member("gain 2", stable=False, settling_time=None)]

    assert worst_case(BY_NAME["settling_time"], family).plant == "gain 2"


def test_no_peak_at_all_is_the_best() -> None:
    """No overshoot keeps every limit of the peak time; where others peak, theirs is the worst."""
    peak = BY_NAME["peak_time"]
    flat = replace(member(peak_time=None), reasons={"peak_time": "there is no overshoot"})

    assert meets(peak, worst_case(peak, [flat]), 1.0)
    assert worst_case(peak, [flat, member("gain 2", peak_time=3.0)]).plant == "gain 2"


def test_a_peak_time_that_an_unstable_loop_lacks_is_missed() -> None:
    """Only the absence of overshoot means that there is none; an unstable loop has no peak time either."""
    flat = replace(member(peak_time=None), reasons={"peak_time": "there is no overshoot"})
    lost = member("delay 9", stable=False, peak_time=None)

    found = judge(sheet({"peak_time": 5.0}), [flat, lost])

    assert (found.limits[0].value, found.limits[0].plant, found.limits[0].met) == (None, "delay 9", False)


def test_a_reference_outside_the_range_is_noted() -> None:
    """The trial may leave the range of the signal, but the reader is told."""
    found = judge(sheet({"overshoot": 8.0}, reference=300.0), [member()])

    assert found.notes == (
        "The reference step ends at 940 degC, outside the range of the controlled signal (0 degC to 900 degC).",
    )


def test_notes_say_once_why_a_measure_is_missing() -> None:
    """Measures with one reason share a sentence; the plants are counted, or named when there is one."""
    lost = member("delay 9", stable=False, rise_time=None, settling_time=None)
    late = replace(member("gain 2", rise_time=None), reasons={"rise_time": "it is late"})

    notes = judge(sheet({"overshoot": 8.0}), [member(), lost, late]).notes

    assert notes == (
        "No rise time, settling time: the loop is unstable for delay 9.",
        "No rise time: it is late for gain 2.",
    )


def test_notes_count_plants_and_leave_out_the_whole_family() -> None:
    """Two of three plants are counted; a reason that holds for all needs no plants."""
    family = [member(peak_time=None), member("gain 2", peak_time=None), member("gain 3")]

    assert judge(sheet({"overshoot": 8}), family).notes == (
        "No peak time: the loop is unstable for 2 of 3 plants, the nominal plant among them.",
    )
    assert judge(sheet({"overshoot": 8}), family[:2]).notes == ("No peak time: the loop is unstable.",)


def test_measures_that_are_all_missing_are_named_as_a_group() -> None:
    """An unstable loop is one short sentence, not a list of nineteen measures."""
    nothing = {measure.name: None for measure in MEASURES if measure.name != "damping"}
    lost = member("nominal", stable=False)
    lost = replace(lost, measures={**lost.measures, **nothing}, reasons=dict.fromkeys(nothing, "the loop is unstable"))

    assert judge(sheet({"damping": 0.1}), [lost]).notes == (
        "No measures of the reference trial, measures of the disturbance trial, margins: the loop is unstable.",
    )


def test_a_sheet_without_limits_says_so() -> None:
    """Without limits a stable family is met, and a note tells that nothing else was judged."""
    found = judge(sheet(), [member()])

    assert found.verdict == "met"
    assert found.notes == ("The sheet gives no limits; only stability is judged.",)


@given(st.lists(st.floats(-50.0, 50.0) | st.none() | st.just(INF), min_size=1, max_size=8), st.floats(-60.0, 60.0))
@pytest.mark.parametrize("measure", MEASURES, ids=lambda measure: measure.name)
def test_the_worst_plant_decides(measure: Measure, values: list[float | None], limit: float) -> None:
    """The worst case keeps a limit exactly when every plant of the family does."""
    ordinary = member()
    family = [replace(ordinary, measures={**ordinary.measures, measure.name: value}) for value in values]

    decided = meets(measure, worst_case(measure, family), limit)

    assert decided == all(meets(measure, WorstCase(value, "nominal"), limit) for value in values)
