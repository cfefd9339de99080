"""Unsaved work kept for after a crash."""

import subprocess
import sys
import textwrap
from pathlib import Path

import pytest

from tests.session.sheets import TEXT, wash_bath
from tuner import places
from tuner.session.autosave import Autosave, drop, left_behind
from tuner.session.document import Document

ROOT = Path(__file__).parents[2]


def _crash(file: Path, cache: Path) -> None:
    """Run a process that changes a sheet, keeps it, and dies without a word."""
    program = f"""
        import os
        from pathlib import Path
        from tuner import places
        places.cache = lambda: Path({str(cache)!r})
        places.settings = lambda: Path({str(cache)!r})
        from tuner.session.autosave import Autosave
        from tuner.session.document import Document
        document = Document.from_file(Path({str(file)!r}))
        document.keep("before")
        document.change_value("kp", 4.5)
        assert Autosave(document).keep()
        os._exit(1)
    """
    run = subprocess.run([sys.executable, "-c", textwrap.dedent(program)], cwd=ROOT, check=False, capture_output=True)
    assert run.returncode == 1, run.stderr


def test_work_of_a_crashed_run_comes_back(file: Path) -> None:
    """After a crash the work is found, with its file and kept tunings, and is unsaved until it is saved."""
    _crash(file, places.cache())
    (found,) = left_behind()
    document = Document(wash_bath())
    found.restore_into(document)
    assert document.sheet.controller.gain_1 == 4.5
    assert [(one.name, one.label, one.controller.gain_1) for one in document.kept] == [("A", "before", 3.0)]
    assert (document.path, document.dirty, document.opened) == (file, True, wash_bath())
    document.save()
    assert file.read_text(encoding="utf-8") == TEXT.replace("kp = 3.0", "kp = 4.5")
    drop(found.store)
    assert left_behind() == ()


def test_work_in_use_is_not_offered() -> None:
    """What a running window keeps is its own; once dropped it is gone."""
    document = Document(wash_bath())
    document.change_value("kp", 4.5)
    autosave = Autosave(document)
    assert autosave.keep()
    assert left_behind() == ()
    autosave.discard()
    assert list((places.cache() / "unsaved").iterdir()) == []


def test_nothing_unsaved_keeps_nothing() -> None:
    """A clean document has no store, and becoming clean drops it."""
    document = Document(wash_bath())
    autosave = Autosave(document)
    assert not autosave.keep()
    document.change_value("kp", 4.5)
    assert autosave.keep()
    document.undo()
    assert not autosave.keep()
    assert list((places.cache() / "unsaved").iterdir()) == []


def test_a_store_that_cannot_be_read_is_passed_over() -> None:
    """Half a file from a full disk is no work, and no reason to stop."""
    folder = places.cache() / "unsaved"
    folder.mkdir(parents=True)
    (folder / "broken.json").write_text('{"path": null, "text": "sheet = 1"', encoding="utf-8")
    assert left_behind() == ()


def test_a_cache_that_cannot_be_written_says_so(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    """Without a place to store nothing is kept, and the work goes on."""
    (tmp_path / "blocked").write_text("a file", encoding="utf-8")
    monkeypatch.setattr(places, "cache", lambda: tmp_path / "blocked")
    document = Document(wash_bath())
    document.change_value("kp", 4.5)
    assert not Autosave(document).keep()
