"""What can go wrong, in sentences: where, what was expected, what was found, and the nearest valid name."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from difflib import get_close_matches


class TrimwrightError(Exception):
    """The base of everything that Trimwright refuses; its text is a sentence for the person at the desk."""


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing wrong with what a person wrote.

    Parameters
    ----------
    key : str
        Where it stands, as a dotted path: ``controller.kp``. Empty when it concerns the whole.
    expected, found : str
        What would have been right, and what was there, in words.
    nearest : str
        The nearest valid name, when a name was unknown and one is near.
    position : int or None
        For a formula: index of the character where it goes wrong.
    """

    key: str
    expected: str
    found: str
    nearest: str = ""
    position: int | None = None

    def __str__(self) -> str:
        """Say the fault in one sentence."""
        hint = f"; the nearest valid name is {self.nearest}" if self.nearest else ""
        character = "" if self.position is None else f", character {self.position + 1}"
        place = f"{self.key}{character}: " if self.key else ""
        return f"{place}expected {self.expected}, found {self.found}{hint}"


class SheetError(TrimwrightError):
    """A sheet, a demonstration or a record that cannot be used; holds every fault found in it, not just the first."""

    def __init__(self, faults: Sequence[Fault], file: str = "") -> None:
        self.faults = tuple(faults)
        self.file = file
        super().__init__("\n".join(self.sentences()))

    def sentences(self) -> list[str]:
        """Return one sentence for each fault, with the file before it when there is one."""
        place = f"{self.file}: " if self.file else ""
        return [f"{place}{fault}" for fault in self.faults]


class FormulaError(TrimwrightError):
    """A plant formula that cannot be read; `position` is the index of the character where it goes wrong."""

    def __init__(self, text: str, position: int, expected: str, found: str) -> None:
        self.text = text
        self.position = position
        self.expected = expected
        self.found = found
        super().__init__(f"expected {expected} at character {position + 1}, found {found}")


class LoopError(TrimwrightError):
    """A loop that is well written but cannot be computed, with the reason."""


class DeliveryError(TrimwrightError):
    """A delivery that is refused, with the reason."""


def nearest(name: str, valid: Iterable[str]) -> str:
    """Return the valid name nearest to a misspelt one, or an empty string when none is near."""
    return next(iter(get_close_matches(name, list(valid), n=1, cutoff=0.5)), "")
