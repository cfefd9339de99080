"""What the worker of the page of tunings answers."""

import pytest

from tests.compare.loops import mash
from tests.window.tunings.loops import AS_FOUND, compare
from tuner.compare.tuning_table import Tuning
from tuner.footing.classes import Overtaken
from tuner.window.in_sight import Question, Request
from tuner.window.tunings.compared import ComparedTunings, comparing_by


def test_the_tunings_of_a_question() -> None:
    """Those of the sheet and those kept."""
    sheet = mash(more=AS_FOUND)
    kept = (Tuning("A", "kp 2", sheet.controller),)
    found = comparing_by(compare)(Request(1, Question(sheet, kept)), lambda: False).found
    assert isinstance(found, ComparedTunings)
    assert [column.name for column in found.table.columns] == ["as found", "as left", "A"]
    assert found.sheet == sheet


def test_a_newer_request_ends_the_work() -> None:
    """As the worker expects it."""
    with pytest.raises(Overtaken):
        comparing_by(compare)(Request(1, Question(mash())), lambda: True)
