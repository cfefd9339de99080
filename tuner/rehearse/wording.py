"""What is done to a loop, in words."""

from collections.abc import Sequence

from tuner.judge.wording import minus, quantity
from tuner.model.demonstration import (
    Deed,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)
from tuner.model.loop import Loop

CAUTION = "A rehearsal is a simulation, no safety function."


def told(deed: Deed, loop: Loop) -> str:  # noqa: PLR0911 - one line for each kind of deed
    """Return what is done, in a few words with units."""
    controlled, manipulated = loop.controlled.unit, loop.manipulated.unit
    match deed:
        case SetController(values):
            return f"controller: {_numbers(values)}"
        case SetReference(to, over) if over > 0.0:
            return f"reference to {quantity(to, controlled)} over {quantity(over, loop.time_unit)}"
        case SetReference(to):
            return f"reference {quantity(to, controlled)}"
        case SetDisturbance(size):
            return f"disturbance {minus(f'{size:+.4g}')} {manipulated}".rstrip() if size else "disturbance off"
        case SetNoise(on):
            return f"noise {'on' if on else 'off'}"
        case SetPlant(values):
            return f"plant: {_numbers(values)}" if values else "nominal plant"
        case SetMode(mode):
            return f"{mode} mode"
        case SetEffort(effort):
            return f"effort by hand {quantity(effort, manipulated)}"
        case Stop():
            return "stop: by hand at the resting effort"


def _numbers(values: Sequence[tuple[str, float]]) -> str:
    return ", ".join(f"{name.replace('_', ' ')} {minus(f'{value:.4g}')}" for name, value in values)
