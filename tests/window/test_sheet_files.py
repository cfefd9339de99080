"""Opening and saving lose nothing: a bad file changes nothing, and what is unsaved is asked about."""

from pathlib import Path

import pytest

from tests.window import made_up
from tests.window.windows import Answers
from tuner.session.document import Document
from tuner.session.recent import recent_files
from tuner.window.sheet_files import SheetFiles, recent, samples, suggested_name

GOOD = """
sheet = 1
# typed by hand
[loop]
title = "Ink drier"
[plant]
expression = "gain / (20 s + 1)"
[plant.parameters]
gain = { value = 0.9, spread = "15 %" }
[controller]
sample_time = 0.5
kp = 2.0
[trial]
duration = 240
"""
BAD = GOOD.replace("kp = 2.0", 'kpp = 2.0\nki = "much"')


@pytest.fixture
def good(tmp_path: Path) -> Path:
    """Return a file that can be used."""
    path = tmp_path / "drier.toml"
    path.write_text(GOOD, encoding="utf-8")
    return path


def _files(**answers: object) -> tuple[Document, SheetFiles, Answers]:
    document, asking = Document(made_up.sheet()), Answers(**answers)
    return document, SheetFiles(document, asking), asking


def test_a_good_file_is_opened_and_remembered(good: Path) -> None:
    """It is shown, and heads the list of recent files."""
    document, files, asking = _files(open=good)
    files.open()
    assert document.path == good
    assert document.sheet.controller.gain_1 == 2.0
    assert asking.told == []
    assert recent() == list(recent_files()) == [good.resolve()]


def test_a_bad_file_tells_all_its_faults_and_changes_nothing(tmp_path: Path) -> None:
    """Every fault is a sentence; the open sheet stays."""
    path = tmp_path / "bad.toml"
    path.write_text(BAD, encoding="utf-8")
    document, files, asking = _files()
    before = document.sheet
    files.open_path(path)
    ((title, opening, sentences),) = asking.told
    assert title == "bad.toml cannot be used"
    assert opening == "bad.toml has 2 faults. The sheet that was open stays open."
    assert any("controller.kpp" in sentence for sentence in sentences)
    assert any("controller.ki" in sentence for sentence in sentences)
    assert document.sheet == before


@pytest.mark.parametrize("name", ["missing.toml", ".", "binary.toml"])
def test_what_is_no_sheet_at_all_is_said(tmp_path: Path, name: str) -> None:
    """A file that is not there, a folder, and bytes that are no text each get a sentence."""
    (tmp_path / "binary.toml").write_bytes(b"\xff\xfe\x00")
    document, files, asking = _files()
    before = document.sheet
    files.open_path(tmp_path / name)
    assert len(asking.told) == 1
    assert document.sheet == before


def test_a_save_keeps_the_comments(good: Path) -> None:
    """What a person typed into the file is still there after a change and a save."""
    document, files, _ = _files()
    files.open_path(good)
    document.change_value("kp", 3.0)
    assert files.save()
    text = good.read_text(encoding="utf-8")
    assert "# typed by hand" in text
    assert "kp = 3.0" in text
    assert not document.dirty


def test_a_new_sheet_asks_for_its_file(tmp_path: Path) -> None:
    """Without a file, saving asks for one, and suggests a name made of the title."""
    path = tmp_path / "new.toml"
    document, files, asking = _files(save=path)
    assert files.save()
    assert document.path == path
    assert asking.suggested.name == "ink_drier.toml"
    assert Document.from_file(path).sheet == document.sheet


def test_a_save_may_be_given_up(tmp_path: Path) -> None:
    """No file chosen, nothing saved; a folder that is not there is said."""
    document, files, _ = _files(save=None)
    assert not files.save()
    assert document.path is None
    document, files, asking = _files(save=tmp_path / "no" / "folder.toml")
    assert not files.save()
    assert asking.told[0][0] == "Not saved"


def test_a_file_changed_meanwhile_is_asked_about(good: Path) -> None:
    """Somebody else's change is overwritten only when that is agreed to."""
    document, files, asking = _files()
    files.open_path(good)
    good.write_text(GOOD.replace("240", "480"), encoding="utf-8")
    document.change_value("kp", 3.0)
    assert not files.save()
    assert "480" in good.read_text(encoding="utf-8")
    asking.answers["Save over it"] = True
    assert files.save()
    assert "kp = 3.0" in good.read_text(encoding="utf-8")


@pytest.mark.parametrize(("answer", "left"), [("discard", True), ("cancel", False), ("save", True)])
def test_unsaved_changes_are_asked_about(good: Path, tmp_path: Path, answer: str, left: bool) -> None:
    """Saved or given up, another file may be opened; on cancel the present one stays."""
    document, files, asking = _files(unsaved=answer, save=tmp_path / "mine.toml")
    document.change_value("kp", 3.0)
    files.open_path(good)
    assert asking.asked[0] == "unsaved"
    assert (document.path == good) is left
    assert (tmp_path / "mine.toml").exists() is (answer == "save")


def test_samples_open_as_new_sheets() -> None:
    """Each sample has its title, and saving one asks for a file, so that it stays as it is."""
    listed = samples()
    assert len(listed) >= 12
    assert all(title and title != path.stem for title, path in listed)
    document, files, asking = _files(save=None)
    files.open_sample(dict(listed)["Product heater outlet"])
    assert asking.told == []
    assert document.path is None
    assert document.sheet.loop.title == "Product heater outlet"
    assert not files.save()


def test_names_of_files_are_made_of_words() -> None:
    """Spaces and signs become underscores; nothing left gives a name all the same."""
    assert suggested_name("Ink drier, left / 2", ".toml") == "ink_drier_left_2.toml"
    assert suggested_name("!", ".png") == "sheet.png"
