"""The test command counts what its checks report, and fails whenever one of them does."""

import sys

import pytest

from tests import runner
from tests.runner import Counts, Result, counts_of


@pytest.mark.parametrize(
    ("output", "status", "expected"),
    [
        ("...\n3 passed in 0.10s", 0, Counts(3, 0, 0)),
        ("FAILED a\n1 failed, 2 passed, 4 skipped, 9 warnings in 0.10s", 1, Counts(2, 1, 4)),
        ("ERROR a\n2 passed, 1 error in 0.10s", 1, Counts(2, 1, 0)),
        ("1 failed, 2 errors in 0.10s", 1, Counts(0, 3, 0)),
        ("2 passed, 1 xfailed, 1 deselected in 0.10s", 0, Counts(2, 0, 1)),
        ("\x1b[32m\x1b[1m7 passed\x1b[0m\x1b[32m in 0.1s\x1b[0m", 0, Counts(7, 0, 0)),
        ("no tests ran in 0.01s", 5, Counts(0, 0, 0)),
        ("12 deselected in 0.01s", 5, Counts(0, 0, 0)),
        ("....\nFatal Python error: Aborted", -6, Counts(0, 1, 0)),
        ("3 passed in 0.10s", 3, Counts(3, 1, 0)),
        ("", 2, Counts(0, 1, 0)),
    ],
)
def test_counts_come_from_the_last_line_of_pytest(output: str, status: int, expected: Counts) -> None:
    """Passed, failed, errors and skipped are added up; an abort is a failure although pytest says no number."""
    assert counts_of(output, status) == expected


@pytest.mark.parametrize(
    ("counts", "line", "status"),
    [
        ([Counts(1), Counts(5)], "6 passed, 0 failed", 0),
        ([Counts(1), Counts(5, 2, 3)], "6 passed, 2 failed, 3 skipped", 1),
        ([Counts(), Counts(0, 0, 4)], "0 passed, 0 failed, 4 skipped", 1),
        ([], "0 passed, 0 failed", 1),
    ],
)
def test_the_last_line_holds_the_totals(
    counts: list[Counts], line: str, status: int, capsys: pytest.CaptureFixture[str]
) -> None:
    """The output closes with the plain totals, and a run in which no test passed has failed."""
    assert runner._close([Result("a check", found, 0.1) for found in counts]) == status
    assert capsys.readouterr().out.splitlines()[-1] == line


def test_paths_choose_the_half_of_the_tests(monkeypatch: pytest.MonkeyPatch) -> None:
    """A path inside the real-window tests needs the display alone, one beside them none, one above them both."""
    monkeypatch.setattr(runner, "_without_display", lambda _: Result("without", Counts(1), 0))
    monkeypatch.setattr(runner, "_with_display", lambda _: Result("with", Counts(1), 0))

    def chosen(*arguments: str) -> list[str]:
        return [result.title for result in runner._tests([runner._absolute(argument) for argument in arguments])]

    inside, beside = str(runner.REAL_WINDOW / "test_a.py::test_b"), str(runner.ROOT / "tests" / "model")
    assert chosen(inside) == ["with"]
    assert chosen(beside) == ["without"]
    assert chosen(inside, beside) == ["without", "with"]
    assert chosen(str(runner.ROOT / "tests")) == ["without", "with"]
    assert chosen() == chosen("-x") == ["without", "with"]


def test_a_failing_check_does_not_stop_the_next(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Each check counts as one, with its output shown, whatever the one before found."""
    monkeypatch.setattr(runner, "LIMIT", 60.0)
    python = sys.executable
    bad = runner._check("bad", [python, "-c", "print('a fault'); raise SystemExit(1)"])
    good = runner._check("good", [python, "-c", "print('fine')"])
    assert (bad.counts, good.counts) == (Counts(0, 1), Counts(1, 0))
    assert "a fault\n" in capsys.readouterr().out


def test_a_check_that_hangs_is_ended(monkeypatch: pytest.MonkeyPatch) -> None:
    """A check past its limit of time is killed and counts as failed."""
    monkeypatch.setattr(runner, "LIMIT", 0.3)
    stuck = runner._check("stuck", [sys.executable, "-c", "import time; time.sleep(60)"])
    assert stuck.counts == Counts(0, 1)
    assert stuck.seconds < 30
