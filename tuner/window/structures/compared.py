"""What passes between the page of structures and its worker: a sheet, and its comparisons with what is drawn there."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Protocol

from tuner.judge.assessment import Assessment
from tuner.judge.overlay import Overlay
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop
from tuner.window.in_sight import Answer, Request

if TYPE_CHECKING:  # it comes with compiled loops, which the first picture does not wait for
    from tuner.compare.comparison import Comparison


@dataclass(frozen=True, slots=True, eq=False)
class Compared:
    """The structures of a sheet, and what is drawn beside their curves: the reference and the range of the effort."""

    sheet: Sheet
    comparisons: "tuple[Comparison, ...]"
    overlay: Overlay

    @property
    def judged(self) -> "tuple[tuple[Comparison, Assessment], ...]":
        """Those that have curves, with their assessments."""
        return tuple((one, one.assessment) for one in self.comparisons if one.assessment is not None)


class CompareStructures(Protocol):
    """Compares the structures of a sheet."""

    def __call__(self, sheet: Sheet, *, stop: Stop) -> "tuple[Comparison, ...]":
        """Return them; see `tuner.compare.comparison.compare_structures`."""
        ...


DrawPlain = Callable[[Sheet, Assessment], Overlay]
"""Says what to draw over the curves of an assessment."""


def comparing_by(compare: CompareStructures, draw: DrawPlain) -> Callable[[Request, Stop], Answer]:
    """Return what answers requests for a comparison of structures."""

    def answer(request: Request, stop: Stop) -> Answer:
        sheet = request.question.sheet
        found = compare(sheet, stop=stop)
        seen = next((one.assessment for one in found if one.assessment is not None), None)
        # Limits belong to one tuning; what all structures share is the reference and the range of the effort.
        overlay = Overlay() if seen is None else draw(replace(sheet, limits=()), seen)
        return Answer(request, Compared(sheet, found, overlay))

    return answer
