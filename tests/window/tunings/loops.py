"""Tables of tunings of small loops, made by the true road."""

from tests.compare.loops import mash
from tuner.compare.tuning_table import Tuning, TuningTable
from tuner.compare.tunings import compare_tunings
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop
from tuner.window.tunings.compared import ComparedTunings

AS_FOUND = "[controller.as_found]\nkp = 1\nki = 0.1\n"


def compare(sheet: Sheet, kept: tuple[Tuning, ...], *, stop: Stop = lambda: False) -> TuningTable:
    """Return the table of a sheet over a small family."""
    return compare_tunings(sheet, kept, 5, stop=stop)


def compared(*kept: Tuning, more: str = AS_FOUND) -> ComparedTunings:
    """Return what the page shows of a loop."""
    sheet = mash(more=more)
    return ComparedTunings(sheet, compare(sheet, kept))
