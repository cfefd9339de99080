"""Files written whole or not at all."""

from pathlib import Path

import pytest

from tuner.session.storage import write_whole


def test_a_file_is_replaced_whole(tmp_path: Path) -> None:
    """The folder is made, the new text replaces the old, and nothing else is left in the folder."""
    file = tmp_path / "new" / "list.json"
    assert write_whole(file, "one")
    assert write_whole(file, "two °")
    assert file.read_text(encoding="utf-8") == "two °"
    assert list(file.parent.iterdir()) == [file]


def test_a_failed_write_leaves_the_old_text(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """When the replacing fails the old file stays, the part written goes, and the answer is no."""
    file = tmp_path / "list.json"
    write_whole(file, "one")

    def full(*_args: object) -> None:
        raise OSError

    monkeypatch.setattr(Path, "replace", full)
    assert not write_whole(file, "two")
    assert file.read_text(encoding="utf-8") == "one"
    assert list(tmp_path.iterdir()) == [file]
