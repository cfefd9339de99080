"""Evidence that a delivered file answers as the simulation does, bit for bit, and where it could not be gathered."""

import subprocess
from array import array
from collections.abc import Sequence
from dataclasses import dataclass
from math import inf, isfinite
from pathlib import Path

from tuner.deliver.excitation import Recording
from tuner.deliver.reference import Outcome
from tuner.errors import DeliveryError

ON_WHAT = "on both runs of the trial as simulated and on a long kicked run of the same loop"
"""What files are run on, for `Proof.how`."""

_PATIENCE = 120.0  # seconds that a run or a compilation may take


@dataclass(frozen=True, slots=True)
class Proof:
    """What was done to prove one file.

    Parameters
    ----------
    file, how : str
        Name of the file; what was run, in words.
    steps : int
        Samples compared.
    worst_difference : float or None
        Largest absolute difference of the effort, engineering units; None when nothing was run.
    proved : bool
        True when every effort and every flag was the same.
    reason : str
        Why it was not run.
    """

    file: str
    how: str
    steps: int
    worst_difference: float | None
    proved: bool
    reason: str = ""

    def entry(self) -> dict[str, object]:
        """Return the entry of proof.json."""
        told: dict[str, object] = {
            "file": self.file,
            "how": self.how,
            "steps": self.steps,
            "worst_difference": self.worst_difference,
            "proved": self.proved,
        }
        return told | ({"reason": self.reason} if self.reason else {})


def not_run(file: str, reason: str) -> Proof:
    """Return the honest entry for a file that could not be run here."""
    return Proof(file, f"not run here, because {reason}", 0, None, False, reason)


def compared(file: str, how: str, recording: Recording, found: Sequence[Outcome]) -> Proof:
    """Compare answers with the recorded ones.

    Raises
    ------
    DeliveryError
        When a single answer differs: such a file must not leave the house.
    """
    if len(found) != len(recording.outcomes):
        raise DeliveryError(f"{file}: expected {len(recording.outcomes)} answers in the proof, found {len(found)}")
    worst = max((_difference(a, b) for a, b in zip(recording.outcomes, found, strict=True)), default=0.0)
    if worst != 0.0:
        raise DeliveryError(f"{file}: does not answer as the simulation does; worst difference of the effort {worst:g}")
    return Proof(file, how, len(found), worst, True)


def run(command: Sequence[str | Path], recording: Recording, folder: Path) -> tuple[Outcome, ...]:
    """Run a program that reads samples from one file and writes answers to another.

    Raises
    ------
    DeliveryError
        When it fails, its own test included.
    """
    given, answers = folder / "given.bin", folder / "answers.bin"
    given.write_bytes(recording.inputs())
    finished = call([*command, given, answers])
    if finished.returncode != 0 or not answers.is_file():
        said = (finished.stderr or finished.stdout).strip()[-400:]
        raise DeliveryError(f"{Path(command[-1]).name}: its test failed{': ' if said else ''}{said}")
    numbers = array("d")
    numbers.frombytes(answers.read_bytes())
    return tuple(Outcome(effort, int(flags)) for effort, flags in zip(numbers[::2], numbers[1::2], strict=True))


def call(command: Sequence[str | Path]) -> subprocess.CompletedProcess[str]:
    """Run a program of ours or a compiler, and wait for it.

    Raises
    ------
    DeliveryError
        When it cannot be started, or does not come to an end.
    """
    words = [str(word) for word in command]
    try:
        return subprocess.run(words, capture_output=True, text=True, errors="replace", timeout=_PATIENCE, check=False)
    except subprocess.TimeoutExpired as error:
        raise DeliveryError(f"{words[0]}: did not end within {_PATIENCE:g} s") from error
    except OSError as error:
        raise DeliveryError(f"{words[0]}: cannot be run: {error.strerror}") from error


def _difference(expected: Outcome, found: Outcome) -> float:
    """Return the difference of two efforts; infinite when a flag differs or the effort is no number."""
    difference = abs(expected.effort - found.effort)
    return difference if isfinite(difference) and expected.flags == found.flags else inf
