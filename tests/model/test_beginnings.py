"""Numbers that blocks begin with."""

from dataclasses import replace

from tests.session.sheets import wash_bath
from tuner.model.beginnings import first_time


def test_a_fiftieth_of_the_trial() -> None:
    """Rounded to two figures."""
    sheet = wash_bath()
    assert first_time(replace(sheet, trial=replace(sheet.trial, duration=240.0))) == 4.8
    assert first_time(replace(sheet, trial=replace(sheet.trial, duration=1234.0))) == 25.0
