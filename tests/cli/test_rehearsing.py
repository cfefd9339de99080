"""A loop rehearsed on the command line: what is said, what is written, what is refused."""

import io
import json
import sys
from pathlib import Path

import pytest

from tests.cli.written import BAD, MET, UNSTABLE, put
from tuner.cli.main import main
from tuner.files.records import read
from tuner.rehearse import recording
from tuner.rehearse.wording import CAUTION

Captured = pytest.CaptureFixture[str]

SHOW = """
demonstration = 1
title = "Bath, too eager"
sheet = "bath.toml"
[[action]]
at = 2
reference = 45
say = "Warmer."
[[action]]
at = 10
plant = { }
[[action]]
at = 20
set = { kp = 1 }
"""


def test_a_sheet_by_itself_takes_its_steps(tmp_path: Path, capsys: Captured) -> None:
    """Reference first, disturbance half way, each said with its time; the caution once, at the end."""
    assert main(["rehearse", *put(tmp_path, bath=MET)]) == 0
    lines = capsys.readouterr().out.splitlines()
    assert lines[:4] == [
        "Bath, rehearsed for 80.5 s.",
        "         0 s  reference 45 degC",
        "        40 s  disturbance +3 %",
        "The loop was stable all the time.",
    ]
    assert lines[4].startswith("The output went from 40 degC (at 0 s) to ")
    assert lines[5].startswith("The effort went from ")
    assert lines[6:] == [CAUTION]


def test_a_demonstration_is_played_and_recorded(tmp_path: Path, capsys: Captured) -> None:
    """Its actions are said with its sentences, and stand in the record at their samples."""
    put(tmp_path, bath=MET)
    (tmp_path / "show.toml").write_text(SHOW, encoding="utf-8")
    assert main(["rehearse", str(tmp_path / "show.toml"), "--to", str(tmp_path / "r.csv")]) == 0
    said = capsys.readouterr().out
    assert (
        "         2 s  reference 45 degC  Warmer.\n        10 s  nominal plant\n        20 s  controller: kp 1\n"
        in said
    )
    assert f"The record is in {tmp_path / 'r.csv'}.\n{CAUTION}\n" in said
    record = read(tmp_path / "r.csv")
    assert record.time.tolist() == [0.5 * index for index in range(41)]
    assert {place: words for place, words in enumerate(record.events) if words} == {
        4: "reference 45 degC",
        20: "nominal plant",
        40: "controller: kp 1",
    }
    assert record.reference is not None
    assert record.reference[3:5].tolist() == [40.0, 45.0]


def test_an_unstable_loop_ends_with_status_1(tmp_path: Path, capsys: Captured) -> None:
    """For another program: growth measured and predicted as numbers, one JSON object."""
    assert main(["rehearse", *put(tmp_path, wild=UNSTABLE), "--for", "30", "--json"]) == 1
    found = json.loads(capsys.readouterr().out)
    (spell,) = found["unstable"]
    assert (spell["from"], spell["to"], found["stable"]) == (0.0, None, False)
    assert spell["growth"]["predicted"] > 1.0
    assert found["time"] == 30.5
    assert found["caution"] == CAUTION
    assert found["record"] is None


def test_a_sheet_may_come_through_a_pipe(capsys: Captured, monkeypatch: pytest.MonkeyPatch) -> None:
    """`-` is standard input."""
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(MET.encode())))
    assert main(["rehearse", "-", "--for", "1"]) == 0
    assert capsys.readouterr().out.startswith("Bath, rehearsed for 1.5 s.\n")


def test_what_is_refused(tmp_path: Path, capsys: Captured, monkeypatch: pytest.MonkeyPatch) -> None:
    """Faults of the sheet, a time that is none, a record that cannot be written, and more samples than are kept."""
    good, bad = put(tmp_path, good=MET, bad=BAD)
    assert main(["rehearse", bad]) == 2
    assert capsys.readouterr().err.splitlines()[0].startswith(f"{bad}: controller.kq: expected a key of [controller]")
    assert main(["rehearse", good, "--for", "-3"]) == 2
    assert "expected a time above 0, found '-3'" in capsys.readouterr().err
    record = str(tmp_path / "no" / "r.csv")
    assert main(["rehearse", good, "--for", "1", "--to", record]) == 2
    assert capsys.readouterr().err == f"{record}: expected a file that can be written, found no such file\n"
    monkeypatch.setattr(recording, "MOST_SAMPLES", 100)
    assert main(["rehearse", good, "--for", "100"]) == 2
    assert capsys.readouterr().err == f"{good}: expected at most 100 samples of 0.5 s, found 201 in 100 s\n"


def test_a_record_is_not_written_over_unless_told(tmp_path: Path, capsys: Captured) -> None:
    """What stands in a file of that name stays, with one sentence; `--overwrite` replaces it."""
    (sheet,) = put(tmp_path, bath=MET)
    record = tmp_path / "r.csv"
    record.write_text("precious", encoding="utf-8")
    words = ["rehearse", sheet, "--for", "1", "--to", str(record)]
    assert main(words) == 2
    assert capsys.readouterr().err == f"{sheet}: expected no file named {record}, found one; --overwrite replaces it\n"
    assert record.read_text(encoding="utf-8") == "precious"
    assert main([*words, "--overwrite"]) == 0
    assert record.read_text(encoding="utf-8").startswith("time [s],")
