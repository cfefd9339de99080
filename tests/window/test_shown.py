"""An answer can be shown from any plant of the family."""

from dataclasses import replace

from tests.window.plots.answers import answer


def test_as_seen_puts_the_plant_first() -> None:
    """The verdict and the limits stay; without a plant that is looked at nothing changes."""
    shown = answer(2.0)
    assert shown.as_seen() is shown
    plant = shown.assessment.members[2].name
    seen = replace(shown, looked_at=plant, seen=shown.assessment.seen_from(plant)).as_seen()
    assert seen.assessment.nominal.name == plant
    assert seen.assessment.limits == shown.assessment.limits
    assert {member.name for member in seen.assessment.members} == {m.name for m in shown.assessment.members}


def test_a_plant_that_is_gone_is_not_looked_at() -> None:
    """The nominal one stays first."""
    shown = answer(2.0)
    assert shown.assessment.seen_from("nobody") is shown.assessment
