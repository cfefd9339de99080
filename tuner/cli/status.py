"""Exit status, and how a refusal is told."""

import sys
from typing import TYPE_CHECKING

from tuner.errors import SheetError

if TYPE_CHECKING:
    from tuner.judge.assessment import Assessment

MET, NOT_MET, UNUSABLE = 0, 1, 2
"""All limits met; one missed or the loop unstable; the input cannot be used. Of several the largest counts."""

STOPPED = 130
"""Ctrl-C, as shells count it."""

PIPE_CLOSED = 141
"""Whoever read the output stopped reading, as shells count it."""


def of(assessment: "Assessment") -> int:
    """Return the exit status of a verdict."""
    return MET if assessment.verdict == "met" else NOT_MET


def refuse(error: Exception, file: str = "") -> int:
    """Tell on stderr why the input cannot be used, a sentence for each fault, and return the status of that."""
    sys.stdout.flush()
    sys.stderr.write("".join(f"{sentence}\n" for sentence in sentences(error, file)))
    sys.stderr.flush()
    return UNUSABLE


def sentences(error: Exception, file: str = "") -> list[str]:
    """Return what is wrong, each sentence with the file before it."""
    if isinstance(error, SheetError):
        place = error.file or file
        return [f"{place}: {fault}" if place else str(fault) for fault in error.faults]
    said = " ".join(str(error).split()) or type(error).__name__
    return [f"{file}: {said}" if file else said]
