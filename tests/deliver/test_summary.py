"""What the head of every file says."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, assessment, specification
from tuner.deliver.specification import CAUTIONS, digest, specify
from tuner.deliver.summary import banner, head, plain, printable, unmet
from tuner.judge.assessment import Instability, LimitResult
from tuner.model.controller import Form


def test_head_says_what_the_controller_is() -> None:
    """Title, origin, signals with units, sample time, gains, blocks, verdict and cautions, each in a line."""
    judged = assessment("met", LimitResult("overshoot", 8.0, 4.123456, "gain 1.035, delay 6", met=True))
    assert head(specify(FULL, judged, "2031-05-04")) == [
        "Loop: Drying oven, zone 2",
        "Delivered by Trimwright 0.1.0 on 2031-05-04",
        f"Tuning sheet: SHA-256 {digest(FULL)}",
        "",
        "Measurement and reference: Zone temperature, from 0.0 to 150.0 degC, at rest 72.0 degC",
        "Effort: Steam valve, from 0.0 to 100.0 %, at rest 40.0 %, at most 8.0 %/s",
        "Sample time: 0.5 s; step must run exactly that often",
        "Gains, parallel form: kp 3.0 %/degC, ki 0.3 %/(degC s), kd 2.0 % s/degC",
        "Further: filter_time 0.6 s, b 0.7, c 0.2, windup_time 12.0 s, action reverse",
        "Measurement filter: 0.8 s",
        "Lead-lag: lead 0.6 s, lag 0.2 s",
        "Notch: 2.0 rad/s, depth 0.2, width 0.9",
        "Static feedforward: 0.4 times the reference's distance from rest",
        "",
        "Verdict: met, for the nominal plant alone",
        "overshoot 4.123 %, at most 8 % asked, met; worst plant: gain 1.035, delay 6",
        "",
        *(f"Caution: {caution}" for caution in CAUTIONS),
    ]


@pytest.mark.parametrize(
    ("form", "given", "parallel"),
    [
        ("standard", "kc 2.0, ti 4.0 s, td 0.5 s", "kp 2.0, ki 0.5, kd 1.0"),
        ("series", "kc 2.0, ti 4.0 s, td 0.5 s", "kp 2.25, ki 0.5, kd 1.0"),
    ],
)
def test_gains_stand_as_given_and_in_the_parallel_form(form: Form, given: str, parallel: str) -> None:
    """Whoever loads them finds the form of the target and the form that the law runs."""
    controller = replace(BARE.controller, form=form, gain_1=2.0, gain_2=4.0, gain_3=0.5)
    lines = head(specification(replace(BARE, controller=controller)))
    assert f"Gains, {form} form: {given}" in lines
    assert f"The same, parallel form: {parallel}" in lines


def test_computing_delay_is_left_to_the_target() -> None:
    """The delay that the design reckons with is not built into the files a second time."""
    late = replace(BARE, controller=replace(BARE.controller, delay_samples=2))
    told = "Reckoned with 2 samples of computing delay, which are the target's own"
    assert told in head(specification(late))


def test_absent_ends_and_times_are_said_to_be_absent() -> None:
    """A signal without range and a controller without wind-up time."""
    lines = head(specification(BARE))
    assert "Effort: unnamed, any value, at rest 0.0" in lines
    assert "Further: filter_time 0.0 s, b 1.0, c 0.0, windup_time none, action reverse" in lines


def test_filters_and_feedforwards_are_told() -> None:
    """What is inverted, what is measured and where it rests, and how the reference is smoothed."""
    lines = head(specification(DYNAMIC))
    assert "Reference filter: 3 lags of 1.5 s" in lines
    assert "Inverse feedforward of the nominal plant, filter time 1.0 s" in lines
    told = "Dynamic feedforward of Feed, at rest 4.0 kg/s; its path to the output: 0.4 exp(-5.2 s)/(7 s + 1)"
    assert told in lines


def test_a_disturbance_that_nothing_acts_against_is_not_told() -> None:
    """A path given only to judge by is no part of the controller: no filter, no word, no fault of its input."""
    against = DYNAMIC.controller.disturbance_feedforward
    assert against is not None
    unopposed = replace(DYNAMIC.controller, disturbance_feedforward=replace(against, kind="none"))
    made = specification(replace(DYNAMIC, controller=unopposed))
    assert made.feeds.disturbance is None
    assert not any("feedforward of Feed" in line for line in head(made))
    assert {row.sample.disturbance for row in made.rows} == {0.0}


def test_feedback_that_is_off_is_told() -> None:
    """The reader learns that nothing carries the effort over."""
    told = "Feedback is off: the effort is the feedforward alone; going to automatic is not bumpless"
    assert told in head(specification(OPEN))
    assert told not in head(specification(FULL))


def test_a_met_sheet_has_no_banner() -> None:
    """There is nothing to warn of."""
    assert banner(specification(FULL)) == []


def test_banner_names_every_limit_that_is_missed_and_the_instability() -> None:
    """A measure that does not exist is said not to exist."""
    runaway = Instability("gain 2", 0.1, 6.93, 1.0, "kp", 2.0, "With gain 2 it doubles every 6.93 s.")
    judged = assessment(
        "unstable",
        LimitResult("overshoot", 8.0, None, "gain 2", met=False),
        LimitResult("phase_margin", 45.0, 60.0, "gain 2", met=True),
        LimitResult("gain_margin", 2.0, None, "gain 2", met=False),
        stable=False,
        instability=runaway,
    )
    assert unmet(FULL, judged) == [
        "unstable: With gain 2 it doubles every 6.93 s",
        "missed: overshoot does not exist, at most 8 % asked, not met; worst plant: gain 2",
        "missed: gain margin does not exist, at least 2 asked, not met; worst plant: gain 2",
    ]


def test_an_instability_that_says_so_itself_is_not_announced_twice() -> None:
    """The sentence of the assessment is kept as it is."""
    runaway = Instability("gain 2", 0.1, 6.93, 1.0, "kp", 2.0, "Unstable: doubles every 6.93 s.")
    judged = assessment("unstable", stable=False, instability=runaway)
    assert unmet(FULL, judged) == ["Unstable: doubles every 6.93 s"]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("a */ b /* c", "a * / b / * c"),
        ("/*/ **/", "/ * / ** /"),
        ("what??/", "what? ?/"),
        ("20 °C µm Öl", "20 deg C um Ol"),
        ("back\\slash", "back/slash"),
        ("a *\\ b \\* c \\\\ d", "a * / b / * c / / d"),
        ("two\nlines\u2028three", "two lines three"),
        ("\N{FIRE}", "?"),
    ],
)
def test_plain_text_cannot_end_a_comment(text: str, expected: str) -> None:
    """ASCII, one line, no comment signs, no trigraphs, no line joins."""
    assert plain(text) == expected


@given(st.text("*/\\? \N{FULLWIDTH REVERSE SOLIDUS}\N{FULLWIDTH ASTERISK}\N{DOUBLE QUESTION MARK}\n", max_size=8))
def test_no_text_at_all_ends_a_comment(text: str) -> None:
    """Whatever signs meet, also those that are respelt."""
    assert not any(sign in plain(text) for sign in ("*/", "/*", "//", "??", "\\", "\n"))


def test_printable_text_keeps_its_letters() -> None:
    """Only what does not print is replaced."""
    assert printable("Öl 20 °C\n\u202e\x00x") == "Öl 20 °C   x"
