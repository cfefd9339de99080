"""controller.json: every number with its unit, and enough of them to make the constants anew."""

import json
from dataclasses import replace
from math import inf
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings

from tests.deliver.samples import BARE, FULL, OPEN, assessment, controllers, recording, specification, written
from tuner.deliver.reference import Flags
from tuner.deliver.specification import CAUTIONS, digest, specify
from tuner.deliver.targets import json_file
from tuner.errors import DeliveryError
from tuner.judge.assessment import LimitResult
from tuner.law.pid import PARAMETERS
from tuner.model.plant import Spread
from tuner.model.sheet import Actuator, Sheet


def content(sheet: Sheet = FULL) -> dict[str, Any]:
    """Return what controller.json says."""
    found: dict[str, Any] = json.loads(json_file.write(specification(sheet))["controller.json"])
    return found


def test_parameters_carry_unit_and_sentence() -> None:
    """Each number of the sheet that the controller depends on is there, in the units of the loop."""
    said = content()["parameters"]
    assert said["controller.ki"] == {"value": 0.3, "unit": "%/(degC s)", "sentence": "Integral gain."}
    assert said["controller.notch.frequency"]["unit"] == "rad/s"
    assert said["controller.measurement_filter.time"]["value"] == 0.8
    assert "controller.kc" not in said
    assert "controller.notch.frequency" not in content(BARE)["parameters"]


def test_the_drift_of_a_lag_is_told_as_a_range() -> None:
    """With its unit, and only where there is one."""
    drifting = replace(FULL, actuator=Actuator(0.8, Spread(0.6, 1.0, 25.0)))
    assert content(drifting)["parameters"]["actuator.spread"]["value"] == [0.6, 1.0]
    assert content(drifting)["parameters"]["actuator.spread"]["unit"] == "s"
    assert "sensor.spread" not in content(drifting)["parameters"]


def test_gains_stand_as_given_and_in_the_parallel_form() -> None:
    """A standard form is kept, and multiplied out beside it."""
    standard = replace(FULL, controller=replace(FULL.controller, form="standard", gain_1=2.0, gain_2=4.0, gain_3=0.5))
    said = content(standard)
    assert said["gains"] == {"kc": 2.0, "ti": 4.0, "td": 0.5}
    assert said["parallel_gains"] == {"kp": 2.0, "ki": 0.5, "kd": 1.0}


def test_file_says_where_it_comes_from() -> None:
    """Title, signals, sample time, version, digest, cautions; a date only when one was passed in."""
    said = content()
    assert said["title"] == "Drying oven, zone 2"
    assert said["controlled"] == {"name": "Zone temperature", "unit": "degC", "low": 0, "high": 150, "resting": 72}
    assert said["manipulated"]["rate"] == 8.0
    assert (said["sample_time"], said["time_unit"]) == (0.5, "s")
    assert said["sheet_sha256"] == digest(FULL)
    assert said["cautions"] == list(CAUTIONS)
    assert said["date"] == ""
    assert (
        json.loads(json_file.write(specify(FULL, assessment(), "2031-05-04"))["controller.json"])["date"]
        == "2031-05-04"
    )


def test_limits_are_told_with_unit_and_bound() -> None:
    """Infinity is the text inf, and a lower bound says that it is one."""
    judged = assessment("met", LimitResult("gain_margin", 2.0, inf, "gain 1.1", met=True))
    said = json.loads(json_file.write(specify(FULL, judged, ""))["controller.json"])
    assert said["verdict"] == "met"
    assert said["limits"] == [
        {
            "measure": "gain_margin",
            "limit": 2.0,
            "value": "inf",
            "plant": "gain 1.1",
            "met": True,
            "unit": "",
            "bound": "at least",
        }
    ]


def test_self_test_rows_are_the_ones_of_the_other_files() -> None:
    """Two hundred samples with their answers, flags as words."""
    rows, expected = content()["selftest"], specification().rows
    assert len(rows) == 200
    for row, known in zip(rows, expected, strict=True):
        assert row["effort"] == known.outcome.effort
        assert row["limited"] == bool(known.outcome.flags & Flags.LIMITED)
        assert row["manual"] == bool(known.outcome.flags & Flags.MANUAL)


@pytest.mark.parametrize("sheet", [FULL, BARE, OPEN], ids=["full", "bare", "open"])
def test_file_is_proved_by_making_its_constants_anew(tmp_path: Path, sheet: Sheet) -> None:
    """Read back, the gains and times make the very constants, which run as the law does."""
    written("json", tmp_path, specification(sheet))
    (proof,) = json_file.prove(tmp_path, tmp_path, specification(sheet), recording(sheet, 2000))
    assert (proof.steps, proof.worst_difference, proof.proved) == (2000, 0.0, True)


@given(sheet=controllers())
@settings(max_examples=40, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_every_combination_makes_its_constants_anew(tmp_path: Path, sheet: Sheet) -> None:
    """The file holds all that the constants come from, whatever the controller has, to the last bit."""
    written("json", tmp_path, specification(sheet))
    assert json_file.prove(tmp_path, tmp_path, specification(sheet), recording(FULL, 0))[0].proved
    said = json.loads((tmp_path / "controller.json").read_text(encoding="utf-8"))["constants"]
    assert tuple(said) == PARAMETERS


def test_a_wrong_gain_is_noticed(tmp_path: Path) -> None:
    """A file whose gains do not make its constants is refused."""
    file = written("json", tmp_path, specification()) / "controller.json"
    said = json.loads(file.read_text(encoding="utf-8"))
    said["parallel_gains"]["ki"] = 0.31
    file.write_text(json.dumps(said), encoding="utf-8")
    with pytest.raises(DeliveryError, match=r"controller\.json: its constants are not those of its gains"):
        json_file.prove(tmp_path, tmp_path, specification(), recording(FULL, 100))
