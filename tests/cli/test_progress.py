"""The bar on stderr: only where a person watches, only when it lasts."""

import io
import sys

import pytest

from tuner.cli import progress
from tuner.cli.progress import watched, working


class Terminal(io.StringIO):
    """Standard error of a person."""

    def isatty(self) -> bool:
        """Say so."""
        return True


def test_nothing_is_drawn_where_nobody_watches(capsys: pytest.CaptureFixture[str]) -> None:
    """A pipe gets the items and no bar."""
    assert list(watched([1, 2, 3], "judging")) == [1, 2, 3]
    assert capsys.readouterr().err == ""


def test_short_work_needs_no_bar(monkeypatch: pytest.MonkeyPatch) -> None:
    """Less than a second: nothing is drawn on a terminal either."""
    terminal = Terminal()
    monkeypatch.setattr(sys, "stderr", terminal)

    assert list(watched([1, 2, 3], "judging")) == [1, 2, 3]
    assert terminal.getvalue() == ""


def test_long_work_shows_how_far_it_is(monkeypatch: pytest.MonkeyPatch) -> None:
    """Every item comes once, in order, also when the bar starts on the way."""
    terminal = Terminal()
    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr(progress, "PATIENCE", -1.0)

    assert list(watched([1, 2, 3], "judging")) == [1, 2, 3]
    assert "judging" in terminal.getvalue()


def test_results_go_to_stdout_while_the_bar_is_shown(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The bar takes nothing that another program reads."""
    monkeypatch.setattr(sys, "stderr", Terminal())
    monkeypatch.setattr(progress, "PATIENCE", -1.0)

    for item in watched([1, 2], "judging"):
        sys.stdout.write(f"{item}\n")

    assert capsys.readouterr().out == "1\n2\n"


def test_results_on_the_terminal_need_no_bar(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where the results themselves appear one after the other, a bar would only be in their way."""
    terminal = Terminal()
    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr(sys, "stdout", Terminal())
    monkeypatch.setattr(progress, "PATIENCE", -1.0)

    assert list(watched([1, 2, 3], "judging")) == [1, 2, 3]
    assert terminal.getvalue() == ""


def test_one_long_piece_of_work(monkeypatch: pytest.MonkeyPatch) -> None:
    """A terminal shows what goes on, a pipe nothing."""
    terminal = Terminal()
    with working("proving"):
        pass
    monkeypatch.setattr(sys, "stderr", terminal)
    with working("proving"):
        pass

    assert "proving" in terminal.getvalue()


def test_silent_work_has_its_bar_beside_a_terminal(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where nothing is printed meanwhile, the bar shows although the output is a terminal too."""
    terminal = Terminal()
    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr(sys, "stdout", Terminal())
    monkeypatch.setattr(progress, "PATIENCE", -1.0)

    assert list(watched([1, 2, 3], "judging")) == [1, 2, 3]
    assert terminal.getvalue() == ""
    assert list(watched([1, 2, 3], "rehearsing", silent=True)) == [1, 2, 3]
    assert "rehearsing" in terminal.getvalue()
