"""The files opened last."""

from pathlib import Path

from tests.session.sheets import TEXT
from tuner import places
from tuner.session.document import Document
from tuner.session.recent import LENGTH, forget_all, recent_files, remember


def _files(folder: Path, count: int) -> list[Path]:
    files = [folder / f"sheet{index}.toml" for index in range(count)]
    for file in files:
        file.write_text(TEXT, encoding="utf-8")
    return files


def test_newest_first_and_bounded(tmp_path: Path) -> None:
    """The last ones opened come first, each once, no more than are kept."""
    files = _files(tmp_path, LENGTH + 3)
    for file in (*files, files[5]):
        remember(file)
    expected = [files[5], *reversed([file for file in files if file != files[5]])]
    assert list(recent_files()) == expected[:LENGTH]


def test_missing_files_are_dropped(tmp_path: Path) -> None:
    """A file that is gone is not offered."""
    one, other = _files(tmp_path, 2)
    remember(one)
    remember(other)
    other.unlink()
    assert recent_files() == (one,)


def test_a_broken_list_is_an_empty_one() -> None:
    """Nonsense in the list offers nothing and stops nobody."""
    places.settings().mkdir()
    (places.settings() / "recent.json").write_text('{"a": ', encoding="utf-8")
    assert recent_files() == ()
    (places.settings() / "recent.json").write_text("[1, null]", encoding="utf-8")
    assert recent_files() == ()


def test_a_list_that_cannot_be_written_is_let_be(tmp_path: Path) -> None:
    """A file where the folder should be stops nobody from opening a sheet."""
    places.settings().write_text("in the way", encoding="utf-8")
    (file,) = _files(tmp_path, 1)
    assert remember(file) == (file,)
    assert recent_files() == ()


def test_opening_and_saving_are_remembered(file: Path, tmp_path: Path) -> None:
    """A sheet opened, and the file it is saved as, head the list."""
    document = Document.from_file(file)
    document.save_as(tmp_path / "other.toml")
    assert recent_files() == (tmp_path / "other.toml", file)
    forget_all()
    assert recent_files() == ()
