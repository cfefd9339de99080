"""What a program that called ours learns from its exit status, and a person from stderr."""

import os
import subprocess
import sys

import pytest

from tests.judge.invented import member, sheet
from tuner.cli import status
from tuner.errors import Fault, FormulaError, LoopError, SheetError
from tuner.judge.verdict import judge

FAULTS = (Fault("trial.duration", "a number", "nothing"), Fault("", "a sheet", "none"))


def test_the_worse_status_is_the_larger() -> None:
    """Of several sheets the largest status counts, so unusable outweighs missed, which outweighs met."""
    assert sorted((status.UNUSABLE, status.MET, status.NOT_MET)) == [0, 1, 2]


@pytest.mark.parametrize(
    ("limits", "stable", "expected"),
    [({}, True, 0), ({"overshoot": 8.0}, True, 0), ({"overshoot": 0.5}, True, 1), ({}, False, 1)],
)
def test_the_status_of_a_verdict(limits: dict[str, float], stable: bool, expected: int) -> None:
    """Met, or without limits and stable, is success; missed and unstable are not."""
    assert status.of(judge(sheet(limits), [member(stable=stable)])) == expected


@pytest.mark.parametrize(
    ("error", "file", "said"),
    [
        (
            SheetError(FAULTS),
            "kiln.toml",
            ["kiln.toml: trial.duration: expected a number, found nothing", "kiln.toml: expected a sheet, found none"],
        ),
        (
            SheetError(FAULTS[1:], "standard input"),
            "-",
            ["standard input: expected a sheet, found none"],
        ),
        (SheetError(FAULTS[:1]), "", ["trial.duration: expected a number, found nothing"]),
        (LoopError("no pole\n  to speak of"), "kiln.toml", ["kiln.toml: no pole to speak of"]),
        (LoopError("no pole"), "", ["no pole"]),
        (FormulaError("s +", 3, "a name", "nothing"), "", ["expected a name at character 4, found nothing"]),
        (LoopError(), "kiln.toml", ["kiln.toml: LoopError"]),
    ],
)
def test_each_fault_is_a_sentence_with_its_file(error: Exception, file: str, said: list[str]) -> None:
    """The file stands once before each sentence; a reason of several lines becomes one, none at all is not silent."""
    assert status.sentences(error, file) == said


def test_a_refusal_is_told_on_stderr(capsys: pytest.CaptureFixture[str]) -> None:
    """The sentences stand on stderr alone, one a line, and the status says unusable."""
    assert status.refuse(SheetError(FAULTS), "kiln.toml") == 2
    told = capsys.readouterr()
    assert told.out == ""
    assert told.err.splitlines() == status.sentences(SheetError(FAULTS), "kiln.toml")


def test_a_refusal_comes_after_what_was_printed() -> None:
    """Where both streams end in one file, what was printed before stands before."""
    program = "import sys; from tuner.cli import status; sys.stdout.write('before\\n'); status.refuse(Exception('no'))"
    buffered = {name: value for name, value in os.environ.items() if name != "PYTHONUNBUFFERED"}
    done = subprocess.run(
        [sys.executable, "-c", program],
        env=buffered,
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        text=True,
        check=True,
    )
    assert done.stdout == "before\nno\n"
