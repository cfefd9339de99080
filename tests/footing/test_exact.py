"""What is in doubt goes the road of the assessment."""

from dataclasses import replace

import pytest

from tuner.assess import assess
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.footing.exact import exactly
from tuner.footing.ground import ground_of
from tuner.places import sample_plants


@pytest.mark.parametrize(("factor", "found"), [(1.0, FIRM), (0.5, SOFT), (5.0, LOST)])
def test_the_class_of_one_tuning(factor: float, found: int) -> None:
    """With all plants it is the verdict."""
    sheet = read(sample_plants() / "heater.toml")
    tuning = sheet.controller.with_value("kp", factor * sheet.controller.gain_1)
    assert exactly(sheet, ground_of(sheet, 5), tuning, range(5)) == found
    verdict = assess(replace(sheet, controller=tuning), 5).verdict
    assert {"met": FIRM, "missed": SOFT, "unstable": LOST}[verdict] == found
