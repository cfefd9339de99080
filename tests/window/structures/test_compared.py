"""What the worker of the page of structures answers."""

import pytest

from tests.compare.loops import mash
from tests.window.structures.loops import compare, compared
from tuner.footing.classes import Overtaken
from tuner.judge.overlay import overlay
from tuner.window.in_sight import Question, Request
from tuner.window.structures.compared import comparing_by


def test_comparisons_with_what_all_of_them_share() -> None:
    """The reference is drawn, no limit of any tuning is."""
    found = compared()
    assert [one.structure.kind for one, _ in found.judged] == ["feedforward", "feedback", "both"]
    assert [level.measure for level in found.overlay.levels] == [""]
    assert found.overlay.bands == ()


def test_those_without_curves_are_left_out_of_the_plots() -> None:
    """A plant that has no feedforward is compared with feedback alone."""
    found = compared("gain s/(s + 1)^2")
    assert len(found.comparisons) == 3
    assert [one.structure.kind for one, _ in found.judged] == ["feedback"]


def test_a_newer_request_ends_the_work() -> None:
    """As the worker expects it."""
    with pytest.raises(Overtaken):
        comparing_by(compare, overlay)(Request(1, Question(mash())), lambda: True)
