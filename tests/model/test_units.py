"""Units of a loop, written as people write them."""

import pytest

from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.units import unit_in


@pytest.mark.parametrize(
    ("template", "y", "u", "expected"),
    [
        ("{u}/{y}", "degC", "%", "%/degC"),
        ("{u}/{y}", "", "", ""),
        ("{u}/{y}", "mm", "", "1/mm"),
        ("{u}/{y}", "m3/h", "%", "%/(m3/h)"),
        ("{u}/({y} {t})", "degC", "%", "%/(degC s)"),
        ("{u}/({y} {t})", "", "%", "%/s"),
        ("{u}/({y} {t})", "", "", "1/s"),
        ("{u}/({y} {t})", "m3/h", "N m", "N m/((m3/h) s)"),
        ("{u} {t}/{y}", "degC", "%", "% s/degC"),
        ("{u} {t}/{y}", "", "", "s"),
        ("{y} {t}", "mg/l", "", "(mg/l) s"),
        ("rad/{t}", "", "", "rad/s"),
        ("{u}/{y}", "°C", "m/s", "m/s/°C"),
        ("{y}", "", "", ""),
        ("%", "", "", "%"),
    ],
)
def test_units_of_a_loop(template: str, y: str, u: str, expected: str) -> None:
    """A signal without a unit leaves no one behind, and a quotient below another stands in brackets."""
    loop = Loop("x", "s", Signal(unit=y), Manipulated(unit=u))

    assert unit_in(template, loop) == expected
