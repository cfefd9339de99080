"""The tuning sheets that come with the program: a person's first examples, so each must be right in every way."""

import json
import subprocess
import sys
from functools import cache
from pathlib import Path

import pytest

from tuner.assess import assess
from tuner.deliver.delivery import deliver
from tuner.files.sheet import parse, render
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet
from tuner.places import sample_plants

CLIFF = "chiller"
"""The one sample that shows a cliff instead of a finished tuning."""

LONGEST_STORY = 120
FILES = sorted(sample_plants().glob("*.toml"))
every_sample = pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)


@cache
def sheet_of(file: Path) -> Sheet:
    """Return the sheet of a sample."""
    return parse(file.read_text(encoding="utf-8"), file.name)


@cache
def assessment_of(file: Path) -> Assessment:
    """Return what comes of a sample over its family."""
    return assess(sheet_of(file))


def test_there_are_thirteen() -> None:
    """Thirteen loops, each with a title of its own."""
    assert len(FILES) == 13
    assert len({sheet_of(file).loop.title for file in FILES}) == 13


def test_they_differ_in_what_they_teach() -> None:
    """Among them are slow and fast loops, integrating and unstable plants, every way to give gains, and every block."""
    sheets = [sheet_of(file) for file in FILES]
    controllers = [sheet.controller for sheet in sheets]
    assert {controller.form for controller in controllers} == {"parallel", "standard", "series"}
    assert any(controller.action == "direct" for controller in controllers)
    for block in ("notch", "measurement_filter", "reference_filter", "feedforward", "disturbance_feedforward"):
        assert any(getattr(controller, block) for controller in controllers)
    assert any(sheet.sensor.resolution for sheet in sheets)
    assert any(sheet.loop.manipulated.rate for sheet in sheets)
    assert len({type(sheet.plant) for sheet in sheets}) >= 2
    assert any(controller.as_found for controller in controllers)
    assert {sheet.loop.time_unit for sheet in sheets} == {"s", "min"}
    durations = [sheet.trial.duration / sheet.controller.sample_time for sheet in sheets]
    assert max(durations) <= 20_000


@every_sample
def test_a_sample_tells_its_story(file: Path) -> None:
    """The story is one sentence on one line, which says what is special about this loop; both signals have units."""
    loop = sheet_of(file).loop
    assert 20 < len(loop.story) <= LONGEST_STORY
    assert loop.story.endswith(".")
    assert "\n" not in loop.story
    assert loop.controlled.name
    assert loop.controlled.unit
    assert loop.manipulated.name
    assert loop.manipulated.unit


@every_sample
def test_a_sample_has_what_a_job_needs(file: Path) -> None:
    """A plant that drifts, a sampled controller, an effort with limits, both steps, and limits to keep."""
    sheet = sheet_of(file)
    effort = sheet.loop.manipulated
    assert any(parameter.spread is not None for parameter in sheet.plant.parameters)
    assert sheet.controller.sample_time > 0.0
    assert effort.low is not None
    assert effort.high is not None
    assert sheet.trial.reference
    assert sheet.trial.disturbance
    assert len(sheet.limits) >= 3


@every_sample
def test_a_sample_is_met(file: Path) -> None:
    """Every limit is met by a family of 25, but for the cliff: stable nominally, and lost for some plant."""
    found = assessment_of(file)
    assert found.family_size == 25
    assert found.nominal.stable
    if file.stem == CLIFF:
        assert found.verdict == "unstable"
        assert found.instability is not None
    else:
        assert [limit.measure for limit in found.limits if not limit.met] == []
        assert found.verdict == "met"


@every_sample
def test_a_sample_is_written_back_unchanged(file: Path) -> None:
    """What is read and written again is the same text, comments and spelling of numbers included."""
    text = file.read_text(encoding="utf-8")
    assert render(sheet_of(file), text) == text


@every_sample
def test_a_sample_made_anew_says_the_same(file: Path) -> None:
    """Written without its text, a sample is still the same sheet."""
    assert parse(render(sheet_of(file))) == sheet_of(file)


@every_sample
def test_a_sample_delivers(file: Path, tmp_path: Path) -> None:
    """Every delivered file is proved without a difference, and the controller passes its own self-test."""
    accept = file.stem == CLIFF
    made = deliver(sheet_of(file), assessment_of(file), tmp_path, languages=("json", "python"), accept_unmet=accept)
    assert all(proof.proved and proof.worst_difference == 0.0 for proof in made.proof)
    assert [entry["proved"] for entry in json.loads((tmp_path / "proof.json").read_text())] == [True, True]
    tested = subprocess.run(
        [sys.executable, "-I", "-S", tmp_path / "controller.py"], capture_output=True, text=True, check=False
    )
    assert tested.returncode == 0
    assert tested.stdout.endswith("bad=0\n")
