"""The three structures of a loop, what each needs, and where one of them is refused or pointless."""

import pytest

from tests.compare.loops import mash, without_gains
from tuner.compare.structures import (
    INTEGRATES,
    MEASURED_DISTURBANCE,
    MODEL,
    NO_FEEDBACK,
    NOTHING_MEASURED,
    RUNS_AWAY,
    SENSOR,
    plant_alone,
    structures,
)
from tuner.model.controller import Feedforward

MEASURED = '[controller.disturbance_feedforward]\nexpression = "1/(8 s + 1)^3"\n'


def test_the_same_loop_three_ways() -> None:
    """One has no feedback, one no feedforward, one both; everything else is the sheet's."""
    sheet = mash(more='[controller.feedforward]\nkind = "static"\ngain = 0.5\n')
    forward, back, both = structures(sheet)
    assert [one.name for one in (forward, back, both)] == ["feedforward alone", "feedback alone", "both"]
    assert forward.sheet is not None
    assert not forward.sheet.controller.feedback
    assert forward.sheet.controller.feedforward == Feedforward("static", gain=0.5)
    assert back.sheet is not None
    assert back.sheet.controller.feedback
    assert back.sheet.controller.feedforward is None
    assert both.sheet == sheet


def test_what_each_needs() -> None:
    """Feedforward a model, feedback a sensor, both of them both; a measured disturbance where one is acted against."""
    assert [one.needs for one in structures(mash())] == [(MODEL,), (SENSOR,), (SENSOR, MODEL)]
    assert [one.needs for one in structures(mash(more=MEASURED))] == [
        (MODEL, MEASURED_DISTURBANCE),
        (SENSOR,),
        (SENSOR, MODEL, MEASURED_DISTURBANCE),
    ]


def test_feedback_alone_meets_the_same_disturbance() -> None:
    """A measured disturbance keeps its path to the output, and no effort acts against it."""
    _, back, _ = structures(mash(more=MEASURED))
    assert back.sheet is not None
    path = back.sheet.controller.disturbance_feedforward
    assert path is not None
    assert path.expression == "1/(8 s + 1)^3"
    assert not path.acts


def test_a_disturbance_that_is_not_measured_is_left_as_it_is() -> None:
    """Feedforward alone says so, unless it has a measured one."""
    assert NOTHING_MEASURED in structures(mash())[0].remarks
    assert len(structures(mash())[2].remarks) == 1
    named = structures(mash(more=MEASURED + 'name = "Malt feed"\nkind = "static"\n'))
    assert NOTHING_MEASURED not in named[0].remarks
    assert named[0].remarks[1] == named[2].remarks[1] == "Against Malt feed acts a static feedforward."
    assert structures(mash(more=MEASURED))[0].remarks[1] == (
        "Against the measured disturbance acts a dynamic feedforward."
    )


@pytest.mark.parametrize(
    ("plant", "alone", "caution"),
    [
        ("gain/(5 s + 1)", "stable", None),
        ("gain exp(-s)/(s (s + 1))", "integrating", INTEGRATES),
        ("gain/(s - 0.01)", "unstable", RUNS_AWAY),
        ("gain/(s^2 + 4)", "unstable", RUNS_AWAY),
        ("gain/(s (s - 0.001))", "unstable", RUNS_AWAY),
    ],
)
def test_a_plant_that_does_not_rest_by_itself(plant: str, alone: str, caution: str | None) -> None:
    """An integrating or unstable plant makes feedforward alone pointless: said, and compared all the same."""
    sheet = mash(plant)
    forward = structures(sheet)[0]
    assert plant_alone(sheet) == forward.alone == alone
    assert forward.sheet is not None
    assert [remark for remark in forward.remarks if remark in (INTEGRATES, RUNS_AWAY)] == ([caution] if caution else [])


def test_the_worst_plant_of_the_family_counts() -> None:
    """A pole that crosses the origin within the spread makes the plant unstable by itself."""
    assert plant_alone(mash("2/(s + 1 - 0.45 gain)", spread='"10 %"')) == "stable"
    assert plant_alone(mash("2/(s + 1 - 0.45 gain)", spread='"30 %"')) == "unstable"


def test_without_feedforward_only_feedback_is_left() -> None:
    """A plant with a zero at the origin: the two others are refused with the reason."""
    forward, back, both = structures(mash("gain s/(s + 1)^2"))
    assert forward.sheet is None
    assert both.sheet is None
    assert back.sheet is not None
    assert forward.refusal == both.refusal
    assert forward.refusal.startswith("There is no feedforward to compare with: ")


def test_without_gains_only_feedforward_is_left() -> None:
    """A controller of zeros is no feedback."""
    forward, back, both = structures(without_gains())
    assert forward.sheet is not None
    assert (back.refusal, both.refusal) == (NO_FEEDBACK, NO_FEEDBACK)
