"""Where a sheet comes from and goes to: what is kept, what is refused, what counts as saved."""

from dataclasses import replace
from pathlib import Path

import pytest

from tests.session.sheets import TEXT, wash_bath
from tuner.errors import SheetError, TrimwrightError
from tuner.files.sheet import read
from tuner.model.sheet import Sheet
from tuner.session.recent import recent_files
from tuner.session.sheet_file import FileChangedError, SheetFile, read_file, unsaved_file


def brisk() -> Sheet:
    """Return the wash bath with another gain."""
    return replace(wash_bath(), controller=replace(wash_bath().controller, gain_1=4.5))


def test_a_file_just_read_is_saved(file: Path) -> None:
    """The sheet is what was opened and what is in the file, the text is whole, and it heads the recent files."""
    assert read_file(file) == SheetFile(wash_bath(), wash_bath(), file, TEXT)
    assert recent_files() == (file.resolve(),)


def test_a_file_with_faults_is_not_recent(file: Path) -> None:
    """Every fault is told with the name of the file, which does not come into the list."""
    file.write_text("sheet = 1\n[loop]\ntitel = 1\n", encoding="utf-8")
    with pytest.raises(SheetError) as refusal:
        read_file(file)
    assert len(refusal.value.faults) > 1
    assert all(sentence.startswith(f"{file}: ") for sentence in refusal.value.sentences())
    assert recent_files() == ()


def test_writing_keeps_the_comments_and_what_was_opened(file: Path) -> None:
    """The new number is in the text, the aim of a reset is still the sheet as it was read first."""
    written = read_file(file).written(brisk(), file)
    text = TEXT.replace("kp = 3.0      # by hand", "kp = 4.5      # by hand")
    assert written == SheetFile(wash_bath(), brisk(), file, text)
    assert file.read_text(encoding="utf-8") == text


def test_another_file_takes_the_comments_along(file: Path, tmp_path: Path) -> None:
    """The old file stays as it was, the new one is the sheet's from now on and the first of the recent ones."""
    other = tmp_path / "other.toml"
    written = read_file(file).written(brisk(), other)
    assert (written.path, written.own_path()) == (other, other)
    assert "# by hand" in written.text
    assert file.read_text(encoding="utf-8") == TEXT
    assert recent_files() == (other.resolve(), file.resolve())


def test_a_file_that_cannot_be_written_is_not_recent(file: Path, tmp_path: Path) -> None:
    """The refusal is the writer's own, and the list of recent files is as it was."""
    with pytest.raises(SheetError, match="expected a file that can be written, found a folder"):
        read_file(file).written(brisk(), tmp_path)
    assert recent_files() == (file.resolve(),)


def test_saving_over_what_somebody_else_wrote_is_refused(file: Path) -> None:
    """The sentence names the file and both ways out."""
    opened = read_file(file)
    file.write_text(TEXT + "# mine", encoding="utf-8")
    with pytest.raises(FileChangedError) as refusal:
        opened.own_path()
    assert str(refusal.value) == (
        f"{file} was changed by somebody else since it was read: save under another name, or open it again"
    )


def test_a_file_that_is_gone_is_written_again(file: Path) -> None:
    """Nothing of anybody's is lost by writing a file that was removed."""
    opened = read_file(file)
    file.unlink()
    assert opened.written(brisk(), opened.own_path()).saved == brisk()
    assert read(file) == brisk()


def test_a_file_saved_twice_is_its_own(file: Path) -> None:
    """What was written last is what the file is compared with."""
    once = read_file(file).written(brisk(), file)
    assert once.written(wash_bath(), once.own_path()).text == TEXT


def test_a_sheet_without_file_asks_for_one() -> None:
    """Saving what has no file is refused with the way out."""
    with pytest.raises(TrimwrightError, match=r"^this sheet has no file yet: choose one to save it as$"):
        SheetFile(wash_bath(), wash_bath(), None, "").own_path()


def test_unsaved_work_aims_at_its_file(file: Path) -> None:
    """Work found unsaved is not saved; its resets aim at the text of its file."""
    assert unsaved_file(brisk(), file, TEXT) == SheetFile(wash_bath(), None, file, TEXT)


@pytest.mark.parametrize("text", ["", "not a sheet"])
def test_unsaved_work_without_a_sheet_in_its_text_aims_at_itself(text: str) -> None:
    """Where the text says no sheet, the work itself is what was opened."""
    assert unsaved_file(brisk(), None, text) == SheetFile(brisk(), None, None, text)
