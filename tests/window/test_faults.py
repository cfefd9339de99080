"""What nothing caught is said in a sentence and logged, and Ctrl-C still ends the program."""

import sys
from pathlib import Path

import pytest

from tuner.window.faults import keep_log, sentence_on, tell_faults


@pytest.fixture(autouse=True)
def _own_hook(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "excepthook", sys.excepthook)


def _raise(kind: type[BaseException]) -> None:
    with pytest.raises(kind) as caught:
        raise kind("by nothing")
    sys.excepthook(kind, caught.value, caught.tb)


def test_a_fault_is_said_and_logged(own_home: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The sentence goes to the window and to the terminal, the trace to the log."""
    said: list[str] = []
    log = keep_log()
    tell_faults(said.append)
    _raise(ZeroDivisionError)
    assert said == ["A fault of the program, ZeroDivisionError: by nothing. Your sheet is still open; save it."]
    assert said[0] in capsys.readouterr().err
    assert "Traceback" in log.read_text(encoding="utf-8")
    assert own_home in log.parents


def test_an_interrupt_is_no_fault(capsys: pytest.CaptureFixture[str]) -> None:
    """Ctrl-C goes the usual way."""
    said: list[str] = []
    tell_faults(said.append)
    _raise(KeyboardInterrupt)
    assert said == []
    assert "KeyboardInterrupt" in capsys.readouterr().err


def test_the_sentence_names_the_fault() -> None:
    """Kind and words of the fault, and what to do."""
    assert "ValueError: x" in sentence_on(ValueError("x"))
