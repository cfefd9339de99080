"""What passes between the page of tunings and its worker."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol

from tuner.compare.tuning_table import Tuning, TuningTable
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop
from tuner.window.in_sight import Answer, Request


@dataclass(frozen=True, slots=True, eq=False)
class ComparedTunings:
    """The table of a sheet's tunings."""

    sheet: Sheet
    table: TuningTable


class CompareTunings(Protocol):
    """Compares the tunings of a sheet."""

    def __call__(self, sheet: Sheet, kept: tuple[Tuning, ...], *, stop: Stop) -> TuningTable:
        """Return the table; see `tuner.compare.tunings.compare_tunings`."""
        ...


def comparing_by(compare: CompareTunings) -> Callable[[Request, Stop], Answer]:
    """Return what answers requests for a table of tunings."""

    def answer(request: Request, stop: Stop) -> Answer:
        asked = request.question
        return Answer(request, ComparedTunings(asked.sheet, compare(asked.sheet, asked.kept, stop=stop)))

    return answer
