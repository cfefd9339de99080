"""What is in doubt goes the road of the assessment."""

from dataclasses import replace

import pytest

from tuner.assess import assess
from tuner.errors import LoopError
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.footing.exact import exactly
from tuner.footing.ground import ground_of
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial
from tuner.places import sample_plants


@pytest.mark.parametrize(("factor", "found"), [(1.0, FIRM), (0.5, SOFT), (5.0, LOST)])
def test_the_class_of_one_tuning(factor: float, found: int) -> None:
    """With all plants it is the verdict."""
    sheet = read(sample_plants() / "heater.toml")
    tuning = sheet.controller.with_value("kp", factor * sheet.controller.gain_1)
    assert exactly(sheet, ground_of(sheet, 5), tuning, range(5)) == found
    verdict = assess(replace(sheet, controller=tuning), 5).verdict
    assert {"met": FIRM, "missed": SOFT, "unstable": LOST}[verdict] == found


def test_a_loop_that_the_assessment_refuses_is_unknown() -> None:
    """Effort and measurement then depend on each other in the same instant, with no answer."""
    refused = Sheet(Loop("refused"), ExpressionPlant("(1 - s)/(s + 1)"), Controller(gain_1=2.0), Trial(20.0))
    with pytest.raises(LoopError, match="in the same instant"):
        assess(refused, 1)
    assert exactly(refused, ground_of(refused, 1), refused.controller, [0]) == UNKNOWN
