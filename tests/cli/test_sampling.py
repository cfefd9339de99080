"""Listing and copying the sheets that come with the program."""

from pathlib import Path

import pytest

from tuner.cli.main import main
from tuner.cli.sampling import built_in
from tuner.places import demonstrations, sample_plants

Captured = pytest.CaptureFixture[str]


def test_the_list_names_every_sheet(capsys: Captured) -> None:
    """Each sheet with its path, title and story."""
    assert main(["samples"]) == 0

    said = capsys.readouterr().out
    assert all(f"{path}\n" in said for path in sample_plants().glob("*.toml"))
    assert "    Product heater outlet. Steam warms" in said
    assert f"{demonstrations() / 'web_drifted.toml'}\n    Demonstration. Winder web: more integral action" in said


def test_copies_are_the_same_files(tmp_path: Path, capsys: Captured) -> None:
    """Every sample is copied as it is, into a folder that is made, and its place is printed."""
    assert main(["samples", "--to", str(tmp_path / "new" / "deep")]) == 0

    copied = tmp_path / "new" / "deep" / "heater.toml"
    assert copied.read_bytes() == built_in().read_bytes()
    show = Path("demonstrations", "web_drifted.toml")
    assert (tmp_path / "new" / "deep" / show).read_bytes() == (sample_plants() / show).read_bytes()
    assert f"{copied}\n" in capsys.readouterr().out


def test_nothing_is_overwritten_unless_asked(tmp_path: Path, capsys: Captured) -> None:
    """A file of the same name is kept, and nothing else is copied either; --overwrite replaces it."""
    own = tmp_path / "heater.toml"
    own.write_text("mine")

    assert main(["samples", "--to", str(tmp_path)]) == 2
    assert capsys.readouterr().err == (
        f"{tmp_path}: expected no file named heater.toml, found one; --overwrite replaces it\n"
    )
    assert [path.name for path in tmp_path.iterdir()] == ["heater.toml"]
    assert own.read_text() == "mine"

    assert main(["samples", "--to", str(tmp_path), "--overwrite"]) == 0
    assert own.read_bytes() == built_in().read_bytes()


def test_a_folder_that_cannot_be_made_is_refused(tmp_path: Path, capsys: Captured) -> None:
    """A file in the way is one sentence and status 2."""
    (tmp_path / "file").write_text("")

    assert main(["samples", "--to", str(tmp_path / "file" / "x")]) == 2
    assert capsys.readouterr().err == f"{tmp_path}/file/x: expected a folder to write to, found: Not a directory\n"
