"""`deliver`: the folder, what is told, and refusals. What the files hold is tested in tests/deliver."""

import json
from pathlib import Path

import pytest

from tests.cli.written import BAD, MET, MISSED, put
from tuner.cli.main import main

Captured = pytest.CaptureFixture[str]


def test_a_delivery(tmp_path: Path, capsys: Captured) -> None:
    """The files are where they were asked for, their proof and the cautions are told."""
    (path,) = put(tmp_path, a=MET)
    folder = tmp_path / "out"

    assert main(["deliver", path, "--to", str(folder)]) == 0

    told = capsys.readouterr().out
    assert told.startswith(f"Delivered to {folder}:\n  controller.json\n")
    assert "controller.py: proved, " in told
    assert told.endswith("start with the loop watched and the hand on manual.\n")
    assert (folder / "controller.py").is_file()
    assert (folder / "proof.json").is_file()


def test_a_delivery_for_another_program(tmp_path: Path, capsys: Captured) -> None:
    """One JSON object with folder, verdict, files and proof."""
    (path,) = put(tmp_path, a=MET)

    assert main(["deliver", path, "--to", str(tmp_path / "out"), "--json"]) == 0

    found = json.loads(capsys.readouterr().out)
    assert list(found) == ["folder", "verdict", "files", "proof"]
    assert found["verdict"] == "met"
    assert all(Path(file).is_file() for file in found["files"])
    assert found["proof"] == json.loads((tmp_path / "out" / "proof.json").read_text())


def test_a_missed_limit_refuses_delivery_unless_accepted(tmp_path: Path, capsys: Captured) -> None:
    """Status 1, one sentence and no folder; with --accept-unmet it is handed over, and that is success."""
    (path,) = put(tmp_path, a=MISSED)
    folder = tmp_path / "out"

    assert main(["deliver", path, "--to", str(folder)]) == 1
    said = capsys.readouterr().err
    assert said.startswith(f"{path}: the acceptance sheet is not met: ")
    assert len(said.splitlines()) == 1
    assert not folder.exists()

    assert main(["deliver", path, "--to", str(folder), "--accept-unmet"]) == 0
    assert (folder / "controller.py").is_file()


def test_nothing_is_overwritten_unless_asked(tmp_path: Path, capsys: Captured) -> None:
    """A second delivery into the same folder is refused with status 2, and done with --overwrite."""
    (path,) = put(tmp_path, a=MET)
    words = ["deliver", path, "--to", str(tmp_path / "out")]
    main(words)
    capsys.readouterr()

    assert main(words) == 2
    assert len(capsys.readouterr().err.splitlines()) == 1
    assert main([*words, "--overwrite"]) == 0


def test_a_bad_sheet_is_not_delivered(tmp_path: Path, capsys: Captured) -> None:
    """Every fault is told and nothing is written."""
    (path,) = put(tmp_path, a=BAD)

    assert main(["deliver", path, "--to", str(tmp_path / "out")]) == 2
    assert len(capsys.readouterr().err.splitlines()) == 2
    assert not (tmp_path / "out").exists()
