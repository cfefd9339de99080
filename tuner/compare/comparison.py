"""The three structures of a loop, assessed with the same family and said in numbers and in words."""

from collections.abc import Callable
from dataclasses import dataclass
from math import inf

from tuner.assess import assess
from tuner.compare.figures import Figure, figures_of
from tuner.compare.structures import Structure, structures
from tuner.errors import LoopError
from tuner.footing.classes import Overtaken, never
from tuner.judge.assessment import Assessment, WorstCase
from tuner.judge.overlay import at_plant
from tuner.judge.wording import number
from tuner.model.sheet import Sheet

NOTHING_COMES_BACK = "No: nothing that it does depends on the output."
NO_GAIN_DOES = "Yes, as any feedback; here no loop gain does, however large."


@dataclass(frozen=True, slots=True, eq=False)
class Comparison:
    """One structure, judged.

    Parameters
    ----------
    structure : Structure
    assessment : Assessment or None
        By the limits of the sheet, over the whole family; None where it cannot be had, which `refusal` then says.
    figures : tuple of Figure
        In the order of `figures.QUANTITIES`; empty without an assessment.
    stability : str
        Whether it can make a stable plant unstable, in a sentence.
    can_destabilise : bool
        The same as a truth.
    refusal : str
        Why there is no assessment, a sentence.
    """

    structure: Structure
    assessment: Assessment | None
    figures: tuple[Figure, ...]
    stability: str
    can_destabilise: bool
    refusal: str = ""

    @property
    def name(self) -> str:
        """What the structure is called."""
        return self.structure.name

    @property
    def remarks(self) -> tuple[str, ...]:
        """What must be known beside the numbers, a sentence each."""
        return (self.refusal,) if self.refusal else self.structure.remarks


def compare_structures(
    sheet: Sheet, family_size: int | None = None, *, stop: Callable[[], bool] = never
) -> tuple[Comparison, ...]:
    """Assess the loop of a sheet with feedforward alone, with feedback alone, and with both.

    Parameters
    ----------
    family_size : int or None
        As `assess` takes it.
    stop : callable
        Asked before each structure whether an answer is not wanted any more.

    Raises
    ------
    Overtaken
        When it is not.
    LoopError
        When the plant itself cannot be computed, with the reason.
    """
    found: list[Comparison] = []
    for structure in structures(sheet):
        if stop():
            raise Overtaken
        found.append(_compared(structure, family_size))
    return tuple(found)


def _compared(structure: Structure, family_size: int | None) -> Comparison:
    returns = structure.kind != "feedforward"
    if structure.sheet is None:
        return _without(structure, structure.refusal)
    try:
        assessment = assess(structure.sheet, family_size)
    except LoopError as error:
        return _without(structure, f"It cannot be compared: {error}.")
    said = _of_feedback(structure, assessment) if returns else NOTHING_COMES_BACK
    return Comparison(structure, assessment, figures_of(assessment), said, returns)


def _without(structure: Structure, why: str) -> Comparison:
    returns = structure.kind != "feedforward"
    return Comparison(structure, None, (), "" if returns else NOTHING_COMES_BACK, returns, why)


def _of_feedback(structure: Structure, assessment: Assessment) -> str:
    """Say how far feedback is from making the loop unstable, or that it does."""
    if assessment.verdict == "unstable":
        word = "It does" if structure.alone == "stable" else "The loop is unstable"
        sentence = assessment.instability.sentence if assessment.instability else ""
        return f"{word}. {sentence}".strip()
    margin = assessment.worst["gain_margin"]
    if structure.alone == "unstable":
        return f"The plant is unstable by itself; feedback holds it{_until(margin, assessment)}."
    if structure.alone == "integrating":
        return f"The plant integrates; feedback holds it{_until(margin, assessment)}."
    if margin.value in (None, inf):
        return NO_GAIN_DOES
    return f"Yes: {_times(margin, assessment)} would."


def _until(margin: WorstCase, assessment: Assessment) -> str:
    return "" if margin.value in (None, inf) else f", up to {_times(margin, assessment)}"


def _times(margin: WorstCase, assessment: Assessment) -> str:
    plant = at_plant(assessment.drift_of(margin.plant)) if margin.plant != "nominal" else at_plant(margin.plant)
    return f"{number(margin.value or 0.0, 3)} times the loop gain{plant}"
