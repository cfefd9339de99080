"""Loops of our own invention, whose static gains are known by heart."""

from tuner.files.sheet import parse
from tuner.model.sheet import Sheet

_TEXT = """
sheet = 1
[loop]
title = "Mash tun"
controlled = {{ name = "Temperature", unit = "degC" }}
manipulated = {{ name = "Steam", unit = "%" }}
[plant]
expression = "{plant}"
[plant.parameters]
gain = {{ value = 2, spread = {spread} }}
{controller}
[trial]
reference = 5
disturbance = 3
duration = {duration}
[limits]
overshoot = 10
max_sensitivity = 2
"""

PI = """[controller]
sample_time = {sample_time}
kp = 2
ki = 0.5
"""


def mash(
    plant: str = "gain exp(-0.5 s)/((5 s + 1)(s + 1))",
    spread: str = '"20 %"',
    sample_time: float = 0.1,
    more: str = "",
    duration: float = 40,
) -> Sheet:
    """Return a loop around a plant with a parameter `gain` of 2, under PI control with `more` below it."""
    controller = PI.format(sample_time=sample_time) + more
    return parse(_TEXT.format(plant=plant, spread=spread, controller=controller, duration=duration))


def without_gains(sheet_text_more: str = "") -> Sheet:
    """Return the same loop with a controller whose gains are all 0."""
    controller = "[controller]\nsample_time = 0.1\n" + sheet_text_more
    plant = "gain/(5 s + 1)"
    return parse(_TEXT.format(plant=plant, spread='"20 %"', controller=controller, duration=40))
