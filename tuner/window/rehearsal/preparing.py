"""A loop at rest, made ready beside the main thread: its kernel may have to be compiled first."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

from tuner.model.sheet import Sheet
from tuner.window.beside import Stop

if TYPE_CHECKING:  # both load much that a window without a rehearsal does not need
    from tuner.files.demonstrations import Staged
    from tuner.rehearse.rehearsal import Rehearsal


@dataclass(frozen=True, slots=True)
class Wanted:
    """A loop that is to be rehearsed, perhaps with a demonstration, and whether it is to run at once."""

    number: int
    sheet: Sheet
    staged: "Staged | None" = None
    at_once: bool = False


@dataclass(frozen=True, slots=True)
class Ready:
    """The answer: the loop at rest."""

    wanted: Wanted
    rehearsal: "Rehearsal"


def prepare(wanted: Wanted, _stop: Stop) -> Ready:
    """Return a loop at rest whose next sample takes no longer than any other.

    Raises
    ------
    LoopError
        When the loop cannot be computed.
    """
    from tuner.rehearse.rehearsal import Rehearsal

    trial = Rehearsal(wanted.sheet)
    trial.advance(1)
    _ = trial.stable
    return Ready(wanted, Rehearsal(wanted.sheet))
