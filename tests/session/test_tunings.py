"""Names, words and marks of tunings."""

from dataclasses import replace

from tests.session.sheets import wash_bath
from tuner.model.controller import Controller
from tuner.session.tunings import KeptTuning, beside, free_name, in_form_or_none, in_words, marks


def test_names_go_on_after_z() -> None:
    """The first free letter is taken, then letters with a number."""
    kept = [KeptTuning(chr(65 + index), "", Controller()) for index in range(26)]
    assert free_name(kept) == "A2"
    assert free_name(kept[:3] + kept[4:]) == "D"


def test_words_are_those_of_the_form() -> None:
    """The gains are named as in the sheet."""
    assert in_words(Controller(form="series", gain_1=2.0, gain_2=12.5, gain_3=0.25)) == "kc 2, ti 12.5, td 0.25"


def test_a_tuning_without_the_form_has_no_mark() -> None:
    """A tuning that has no series form leaves its marks off the rulers of that form."""
    present = wash_bath().controller.in_form("series")
    lively = replace(wash_bath().controller, gain_3=500.0)
    assert in_form_or_none(lively, "series") is None
    assert [mark.kind for mark in marks("ti", present, lively, ())] == ["as_found"]


def test_what_is_shown_beside_the_present_tuning() -> None:
    """As found before those kept, unless nothing has been changed since, or it is not known."""
    found = Controller(gain_1=1.0)
    kept = (KeptTuning("A", "kp 2", Controller(gain_1=2.0)),)
    assert [one.name for one in beside(Controller(gain_1=3.0, as_found=found), kept)] == ["as found", "A"]
    assert beside(Controller(gain_1=3.0, as_found=found), ())[0].controller == found
    assert beside(replace(found, as_found=found), kept) == kept
    assert beside(found, kept) == kept
