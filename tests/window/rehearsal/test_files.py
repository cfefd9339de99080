"""Demonstrations into the page, records out of it."""

from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from tests.window.rehearsal.conftest import Hours
from tests.window.windows import Answers
from tuner.files.records import read
from tuner.model.demonstration import SetReference
from tuner.places import demonstrations
from tuner.window.rehearsal.files import RehearsalFiles
from tuner.window.rehearsal.page import RehearsalPage


def test_a_demonstration_is_opened_and_played(page: RehearsalPage) -> None:
    """The dialog begins where the demonstrations of the program lie; the chosen one runs at once, at its speed."""
    asking = Answers(demonstration=demonstrations() / "heater_too_eager.toml")
    RehearsalFiles(page, asking)
    page.bar.play.click()
    assert asking.start == demonstrations()
    assert page.runner.running
    assert page.runner.pacer.speed == 10.0
    assert page.told.text().startswith("Product heater: gains too eager, step by step, on heater.toml.")


def test_faults_of_a_demonstration_are_told(page: RehearsalPage, tmp_path: Path) -> None:
    """All of them; what runs goes on."""
    bad = tmp_path / "bad.toml"
    bad.write_text('demonstration = 1\ntitle = 3\nsheet = "none.toml"\naction = []\n', encoding="utf-8")
    asking = Answers(demonstration=bad)
    RehearsalFiles(page, asking)
    before = page.runner.rehearsal
    page.bar.play.click()
    ((title, opening, sentences),) = asking.told
    assert (title, opening) == ("No demonstration", "bad.toml cannot be played.")
    assert sentences[0] == "title: expected a text, found 3"
    assert len(sentences) == 3
    assert page.runner.rehearsal is before


def test_nothing_chosen_changes_nothing(page: RehearsalPage) -> None:
    """A dialog that is left changes nothing."""
    asking = Answers()
    RehearsalFiles(page, asking).play()
    RehearsalFiles(page, asking).save()
    assert asking.asked == ["demonstration"]


def test_a_record_is_saved_while_the_loop_goes_on(
    page: RehearsalPage, hours: Hours, qtbot: QtBot, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Every sample and event of it; the name of the loop is suggested; what is saved is said."""
    monkeypatch.chdir(tmp_path)
    asking = Answers(record=tmp_path / "drier.csv")
    RehearsalFiles(page, asking)
    page.bar.record.click()
    page.runner.act(SetReference(75.0))
    page.runner.tick()
    hours.pass_by(5.0)
    page.bar.save.click()
    assert not page.bar.save.isEnabled()
    qtbot.waitUntil(lambda: page.told.text() == "The record is in drier.csv.")
    assert asking.suggested.suffix == ".csv"
    record = read(tmp_path / "drier.csv")
    assert len(record) == 10
    assert record.events[0] == "reference 75 degC"
    assert page.bar.save.isEnabled()


def test_a_record_that_cannot_be_written_is_told(
    page: RehearsalPage, hours: Hours, qtbot: QtBot, tmp_path: Path
) -> None:
    """It stays, to be saved elsewhere."""
    asking = Answers(record=tmp_path / "no" / "drier.csv")
    RehearsalFiles(page, asking)
    page.bar.record.click()
    page.runner.tick()
    hours.pass_by(5.0)
    page.bar.save.click()
    qtbot.waitUntil(lambda: bool(asking.told))
    assert asking.told[0][0] == "No record"
    assert page.told.text() == "The record was not saved."
    assert page.bar.save.isEnabled()


def test_an_unsaved_record_is_not_let_go_without_a_question(
    page: RehearsalPage, hours: Hours, qtbot: QtBot, tmp_path: Path
) -> None:
    """Neither for another record nor for the end of the program; once it is saved nobody asks."""
    asking = Answers(record=tmp_path / "drier.csv")
    RehearsalFiles(page, asking)
    assert page.guard()
    page.bar.record.click()
    page.runner.tick()
    hours.pass_by(5.0)
    recorder = page.runner.recorder
    page.bar.record.click()
    assert not page.guard()
    assert asking.asked == ["Let it go"]
    page.bar.record.click()
    assert page.runner.recorder is recorder
    assert not page.runner.recording
    page.bar.save.click()
    qtbot.waitUntil(lambda: page.told.text() == "The record is in drier.csv.")
    assert page.guard()
    page.bar.record.click()
    assert page.runner.recorder is not recorder
