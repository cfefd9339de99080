"""Files and folders that a command line names."""

from pathlib import Path

import pytest

from tuner.cli.sheets import Missing, Source, sources
from tuner.errors import SheetError


def test_a_folder_stands_for_its_sheets(tmp_path: Path) -> None:
    """Sheets of a folder come sorted; other files and folders in it are left alone."""
    for name in ("b.toml", "a.toml", "notes.txt"):
        (tmp_path / name).write_text("")
    (tmp_path / "c.toml").mkdir()

    found = sources(["x.toml", str(tmp_path)])

    assert found == [Source("x.toml"), Source(str(tmp_path / "a.toml")), Source(str(tmp_path / "b.toml"))]


def test_a_name_that_cannot_be_one_is_left_to_its_reading() -> None:
    """A name too long for any file is no folder; reading it says why."""
    name = "a" * 300

    assert sources([name]) == [Source(name)]
    with pytest.raises(SheetError, match=r": expected a file that can be read, found file name too long$"):
        Source(name).read()


def test_a_folder_without_sheets_is_a_fault(tmp_path: Path) -> None:
    """An empty folder is said, and does not pass as nothing to do."""
    assert sources([str(tmp_path)]) == [Missing(str(tmp_path))]
    with pytest.raises(SheetError, match=r": expected a folder with tuning sheets \(\*\.toml\), found none in it$"):
        Missing(str(tmp_path)).read()
