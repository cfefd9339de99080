"""An invented tuning sheet for the tests of the session and the window, with comments that a save must keep."""

from tuner.files.sheet import parse
from tuner.model.sheet import Sheet

TEXT = """\
# Invented for the tests.
sheet = 1

[loop]
title = "Wash bath"   # the big one
time_unit = "s"
controlled = { name = "Bath temperature", unit = "degC", low = 0, high = 100, resting = 40 }
manipulated = { name = "Heater", unit = "%", low = 0, high = 100, resting = 30, rate = 5 }

[plant]
expression = "gain exp(-delay s) / (lag s + 1)"

[plant.parameters]
gain = { value = 0.8, unit = "degC/%", spread = "20 %" }
delay = { value = 4, spread = [3, 6] }
lag = 50

[controller]
form = "parallel"
sample_time = 1
kp = 3.0      # by hand
ki = 0.05
kd = 4.0
filter_time = 1.5
windup_time = 20

[controller.as_found]
kp = 1.5

[trial]
reference = 5
duration = 300

[limits]
overshoot = 8
"""


def wash_bath() -> Sheet:
    """Return the sheet of the text."""
    return parse(TEXT)
