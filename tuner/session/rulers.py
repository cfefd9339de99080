"""Which numbers of a controller have a ruler: those of the law, and those of the blocks that are there."""

from tuner.model.controller import Controller
from tuner.model.parameters import BLOCKS, Parameter, block_rulers, rulers


def rulers_of(controller: Controller) -> tuple[Parameter, ...]:
    """Return the parameters that get a ruler, those of the law first."""
    return (*rulers(controller.form), *(one for block in BLOCKS for one in _of_block(controller, block)))


def _of_block(controller: Controller, block: str) -> tuple[Parameter, ...]:
    if not getattr(controller, block):
        return ()
    return tuple(one for one in block_rulers(block) if _has_meaning(controller, one))


def _has_meaning(controller: Controller, parameter: Parameter) -> bool:
    """Return whether a number means something in the block as it is: each kind of feedforward has its own."""
    if parameter.key == "disturbance_feedforward.filter_time":
        against = controller.disturbance_feedforward
        return against is not None and against.kind == "dynamic"
    return controller.value(parameter.key) is not None
