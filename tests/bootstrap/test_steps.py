"""The steps say what they do, log what commands write, and give the reason of a failure."""

import sys
from pathlib import Path

import pytest

from tuner.bootstrap.steps import Steps


def _python(text: str) -> list[str]:
    return [sys.executable, "-c", text]


def test_a_step_is_one_line_and_its_output_is_in_the_log(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The line has the seconds so far; what the command writes, errors too, is in the log after the command."""
    steps = Steps(tmp_path / "log")
    outcome = steps.run("doing a thing", _python("import sys; print('out'); print('err', file=sys.stderr)"))
    assert (outcome.status, outcome.reason) == (0, "")
    assert capsys.readouterr().err == "[   0 s] Doing a thing ...\n"
    log = (tmp_path / "log").read_text()
    assert log.startswith("\n$ ")
    assert {"out", "err"} <= set(log.splitlines())


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        (
            "E: Could not get lock /var/lib/dpkg",
            "another program is installing packages; wait for it and run the same command again.",
        ),
        ("Temporary failure resolving", "the package server cannot be reached; is this machine online?"),
        ("CERTIFICATE_VERIFY_FAILED", "the certificate of the package server is not trusted on this machine."),
        ("OSError: No space left on device", "the disk is full."),
        ("hint\nERROR: one\nERROR: two\nhint", "ERROR: two"),
        ("first\nlast", "last"),
        ("", "it said nothing."),
    ],
)
def test_a_failure_has_a_reason(tmp_path: Path, text: str, reason: str) -> None:
    """The usual causes are told in a sentence, others by the last line that says error, else by the last line."""
    outcome = Steps(tmp_path / "log").run("failing", _python(f"print({text!r}); raise SystemExit(3)"))
    assert (outcome.status, outcome.reason) == (3, reason)


def test_the_reason_is_that_of_the_last_command(tmp_path: Path) -> None:
    """What an earlier command has left in the log does not explain a later one."""
    steps = Steps(tmp_path / "log")
    steps.run("first", _python("print('No space left'); raise SystemExit(1)"))
    assert steps.run("second", _python("print('another fault'); raise SystemExit(1)")).reason == "another fault"
