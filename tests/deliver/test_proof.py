"""Evidence, and how it fails."""

import sys
from math import inf, nan
from pathlib import Path

import pytest

from tests.deliver.samples import BARE, recording
from tuner.deliver import proof
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import call, compared, not_run, run
from tuner.deliver.reference import Outcome
from tuner.errors import DeliveryError


def answers(*efforts: float, flags: int = 0) -> tuple[Outcome, ...]:
    """Return answers with the same flags."""
    return tuple(Outcome(effort, flags) for effort in efforts)


def test_equal_answers_are_a_proof() -> None:
    """Every effort and every flag the same: difference zero."""
    proved = compared("file", "how", Recording((), answers(1.0, 2.0)), answers(1.0, 2.0))
    assert proved.entry() == {"file": "file", "how": "how", "steps": 2, "worst_difference": 0.0, "proved": True}


@pytest.mark.parametrize(
    ("found", "worst"),
    [
        (answers(1.0, 2.25), "0.25"),
        (answers(1.0, nan), "inf"),
        (answers(inf, 2.0), "inf"),
        (answers(1.0, 2.0, flags=1), "inf"),
    ],
)
def test_a_single_difference_is_a_refusal(found: tuple[Outcome, ...], worst: str) -> None:
    """A different effort, a different flag or no number at all."""
    with pytest.raises(DeliveryError) as caught:
        compared("controller.x", "how", Recording((), answers(1.0, 2.0)), found)
    assert str(caught.value) == (
        f"controller.x: does not answer as the simulation does; worst difference of the effort {worst}"
    )


def test_missing_answers_are_a_refusal() -> None:
    """A program that stops early proves nothing."""
    with pytest.raises(DeliveryError, match="expected 2 answers in the proof, found 1"):
        compared("controller.x", "how", Recording((), answers(1.0, 2.0)), answers(1.0))


def test_what_was_not_run_is_not_proved() -> None:
    """The entry carries the reason, and no number."""
    assert not_run("controller.x", "it rained").entry() == {
        "file": "controller.x",
        "how": "not run here, because it rained",
        "steps": 0,
        "worst_difference": None,
        "proved": False,
        "reason": "it rained",
    }


def test_a_program_that_fails_is_a_refusal(tmp_path: Path) -> None:
    """Its last words are in the sentence."""
    program = tmp_path / "broken.py"
    program.write_text("raise SystemExit('spoilt')", encoding="utf-8")
    with pytest.raises(DeliveryError, match=r"broken\.py: its test failed: spoilt"):
        run([sys.executable, program], recording(BARE, 10), tmp_path)


def test_a_program_that_never_ends_is_a_refusal(monkeypatch: pytest.MonkeyPatch) -> None:
    """Nobody waits for ever."""
    monkeypatch.setattr(proof, "_PATIENCE", 0.2)
    with pytest.raises(DeliveryError, match=r"did not end within 0\.2 s"):
        call([sys.executable, "-c", "while True: pass"])


def test_a_program_that_is_not_there_is_a_refusal(tmp_path: Path) -> None:
    """What the system says becomes a sentence."""
    with pytest.raises(DeliveryError, match="cannot be run: No such file or directory"):
        call([tmp_path / "none"])
