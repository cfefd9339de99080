"""The page asks for the curves of the plants of an assessment."""

from dataclasses import replace

import pytest

from tests.window.frequency.looked_at import sample, with_feedback
from tuner.assess import assess
from tuner.window.frequency.question import curves_of, curves_of_one


def test_rows_are_the_plants_in_their_order() -> None:
    """The one that is looked at comes first."""
    sheet = sample()
    assessment = assess(sheet)
    seen = assessment.seen_from(assessment.members[7].name)
    found = curves_of(sheet, seen)
    assert found.plants == tuple(member.name for member in seen.members)
    plain = curves_of(sheet, assessment)
    at = float(found.w[300])
    index = int(abs(plain.w - at).argmin())
    assert found.gain[0, 300] == pytest.approx(plain.gain[7, index], rel=0.05)


def test_peaks_on_the_curves_are_those_of_the_assessment() -> None:
    """For every plant of the family, not only for the first."""
    sheet = sample()
    assessment = assess(sheet)
    found = curves_of(sheet, assessment)
    for row, member in zip(found.sensitivity, assessment.members, strict=True):
        assert row.max() == pytest.approx(member.measures["max_sensitivity"], rel=1e-9)


def test_an_open_loop_shows_what_closing_it_would_make() -> None:
    """The same curves as with the feedback on."""
    on, off = sample(), with_feedback(sample(), on=False)
    closed, opened = curves_of(on, assess(on)), curves_of(off, assess(off))
    assert opened.gain.shape[0] == closed.gain.shape[0]
    index = int(abs(opened.w - closed.w[200]).argmin())
    assert opened.gain[3, index] == pytest.approx(closed.gain[3, 200], rel=0.05)


def test_without_gains_there_are_no_curves() -> None:
    """A loop gain of zero has neither size in dB nor phase."""
    sheet = sample()
    idle = replace(sheet, controller=replace(sheet.controller, gain_1=0.0, gain_2=0.0, gain_3=0.0))
    assert curves_of(idle, assess(idle)).w.size == 0


def test_one_plant_by_itself() -> None:
    """The response of a tuning to compare with is that of its own plant, on a grid of its own."""
    sheet = sample()
    assessment = assess(sheet)
    member = assessment.members[7]
    found, whole = curves_of_one(sheet, member), curves_of(sheet, assessment.seen_from(member.name))
    assert found.plants == (member.name,)
    assert found.sensitivity.max() == pytest.approx(whole.sensitivity[0].max(), rel=1e-9)
