"""What a person or a demonstration does to a loop while it runs."""

from math import ceil
from typing import TYPE_CHECKING, NamedTuple

from tuner.errors import LoopError
from tuner.model.controller import Controller
from tuner.model.demonstration import (
    Action,
    Deed,
    Demonstration,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)
from tuner.model.family import family_of
from tuner.rehearse.wording import told

if TYPE_CHECKING:  # it loads the compiler, which not everyone needs who speaks of what was played
    from tuner.rehearse.rehearsal import Rehearsal

_ROUNDING = 1e-9
"""Share of a sample by which an action may lie before it and yet belong to it."""


class Played(NamedTuple):
    """An action that was done: its time, what was done in words, and what the demonstration says of it."""

    time: float
    words: str
    say: str


def do(deed: Deed, rehearsal: "Rehearsal") -> None:  # noqa: C901 - one line for each kind of deed
    """Do something to a loop.

    Raises
    ------
    LoopError
        When the loop cannot be computed then; nothing is changed.
    """
    match deed:
        case SetController(values):
            rehearsal.set_controller(with_values(rehearsal.sheet.controller, dict(values)))
        case SetReference(to, over) if over > 0.0:
            rehearsal.ramp_reference(to, over)
        case SetReference(to):
            rehearsal.set_reference(to)
        case SetDisturbance(size):
            rehearsal.set_disturbance(size)
        case SetNoise(on):
            rehearsal.set_noise(on)
        case SetPlant(values):
            rehearsal.set_plant(dict(values) or family_of(rehearsal.sheet, 1)[0].values)
        case SetMode("manual"):
            rehearsal.to_manual()
        case SetMode():
            rehearsal.to_automatic()
        case SetEffort(effort):
            rehearsal.set_manual(effort)
        case Stop():
            rehearsal.stop()


def with_values(controller: Controller, values: dict[str, float]) -> Controller:
    """Return a controller with other numbers, by their keys."""
    for name, value in values.items():
        controller = controller.with_value(name, value)
    return controller


class Script:
    """Plays a demonstration on a rehearsal that has just begun.

    Parameters
    ----------
    demonstration : Demonstration
        What is done.
    rehearsal : Rehearsal
        To what.
    """

    def __init__(self, demonstration: Demonstration, rehearsal: "Rehearsal") -> None:
        self.demonstration = demonstration
        self._rehearsal = rehearsal
        self._left = list(reversed(demonstration.actions))

    @property
    def over(self) -> bool:
        """Whether all actions are done."""
        return not self._left

    def room(self, most: int) -> int:
        """Return how many samples, at most `most`, may go by before the next action is due."""
        if not self._left:
            return most
        wait = (self._left[-1].at - self._rehearsal.time) / self._rehearsal.sample_time
        return min(max(ceil(wait - _ROUNDING), 0), most)

    def play(self) -> tuple[Played, ...]:
        """Do what is due by now, and return it; an action that the loop refuses says why in its words."""
        done: list[Played] = []
        while self._left and self.room(1) == 0:
            done.append(self._play(self._left.pop()))
        return tuple(done)

    def _play(self, action: Action) -> Played:
        words = ""
        if action.deed is not None:
            words = told(action.deed, self._rehearsal.sheet.loop)
            try:
                do(action.deed, self._rehearsal)
            except LoopError as refusal:
                words = f"{words} was refused: {refusal}"
        return Played(self._rehearsal.time, words, action.say)
