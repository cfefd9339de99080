"""Folders that files cannot go to, and moves that fail half way."""

import tempfile
from errno import EACCES
from pathlib import Path

import pytest

from tuner.deliver.folder import filling, refuse_folder
from tuner.errors import DeliveryError


def content(folder: Path) -> dict[str, str]:
    """Return the text of each file."""
    return {file.name: file.read_text(encoding="utf-8") for file in folder.iterdir()}


def fill(folder: Path, *names: str) -> None:
    """Write new files through the door."""
    with filling(folder) as new:
        for name in names:
            (new / name).write_text("new", encoding="utf-8")


def test_files_appear_together(tmp_path: Path) -> None:
    """While they are written nothing shows in the folder; at the end all do, and nothing else stays."""
    with filling(tmp_path / "deep" / "to") as new:
        (new / "a").write_text("new", encoding="utf-8")
        assert not (tmp_path / "deep" / "to").exists()
    assert content(tmp_path / "deep" / "to") == {"a": "new"}
    assert [path.name for path in (tmp_path / "deep").iterdir()] == ["to"]


def test_a_file_in_the_place_of_the_folder_is_refused(tmp_path: Path) -> None:
    """The sentence says what was found."""
    place = tmp_path / "to"
    place.write_text("mine", encoding="utf-8")
    with pytest.raises(DeliveryError) as caught:
        refuse_folder(place, ["a"], [], overwrite=True)
    assert str(caught.value) == f"{place}: expected a folder, found a file"


def test_a_file_in_the_way_to_the_folder_is_refused(tmp_path: Path) -> None:
    """A parent that is a file cannot hold a folder."""
    (tmp_path / "file").write_text("mine", encoding="utf-8")
    with pytest.raises(DeliveryError) as caught:
        fill(tmp_path / "file" / "to", "a")
    assert str(caught.value) == f"{tmp_path / 'file' / 'to'}: cannot be written to: File exists"


def test_a_name_too_long_is_refused(tmp_path: Path) -> None:
    """What the disk says becomes a sentence."""
    with pytest.raises(DeliveryError, match="File name too long"):
        refuse_folder(tmp_path / ("x" * 5000), ["a"], [], overwrite=False)


def test_a_null_character_is_refused() -> None:
    """No disk has such a name."""
    with pytest.raises(DeliveryError) as caught:
        refuse_folder(Path("a\0b"), ["a"], [], overwrite=False)
    assert str(caught.value) == r"'a\x00b': expected the name of a folder, found a null character in it"


def test_a_folder_that_cannot_be_written_to_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Permission denied, in a sentence, and the folders that were made are taken back; holds for root as well."""

    def denied(**_: object) -> str:
        raise PermissionError(EACCES, "Permission denied")

    monkeypatch.setattr(tempfile, "mkdtemp", denied)
    with pytest.raises(DeliveryError) as caught:
        fill(tmp_path / "deep" / "to", "a")
    assert str(caught.value) == f"{tmp_path / 'deep' / 'to'}: cannot be written to: Permission denied"
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("fails_at", [1, 2, 3, 4, 5])
def test_a_move_that_fails_is_undone(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, fails_at: int) -> None:
    """Wherever the disk fails while files are moved, the folder is as it was."""
    folder = tmp_path / "to"
    folder.mkdir()
    for name in ("a", "b"):
        (folder / name).write_text("old", encoding="utf-8")
    moves, real = [0], Path.replace

    def failing(self: Path, target: Path) -> Path:
        moves[0] += 1
        if moves[0] == fails_at:
            raise OSError(28, "No space left on device")
        return real(self, target)

    monkeypatch.setattr(Path, "replace", failing)
    with pytest.raises(DeliveryError) as caught:
        fill(folder, "a", "b", "c")
    assert str(caught.value) == f"{folder}: cannot be written to: No space left on device"
    assert content(folder) == {"a": "old", "b": "old"}
    assert [path.name for path in tmp_path.iterdir()] == ["to"]


def test_an_interruption_leaves_nothing(tmp_path: Path) -> None:
    """Ctrl-C in the middle takes back even the folders that were made."""

    def interrupted() -> None:
        with filling(tmp_path / "deep" / "to") as new:
            (new / "a").write_text("new", encoding="utf-8")
            raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        interrupted()
    assert list(tmp_path.iterdir()) == []
