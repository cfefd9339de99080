"""What the state and the constants of the law are, in a sentence and a unit, for comments and for controller.json."""

from typing import NamedTuple


class Meaning(NamedTuple):
    """A sentence, and a unit with ``{t}``, ``{y}``, ``{u}`` as in `model.parameters`."""

    sentence: str
    unit: str = ""


STATE: dict[str, Meaning] = {
    "effort": Meaning("Effort, as a deviation from rest", "{u}"),
    "integral": Meaning("Integral part", "{u}"),
    "derivative": Meaning("Derivative part", "{u}"),
    "weighted_error": Meaning("Last weighted error of the derivative part", "{y}"),
    "filtered": Meaning("Filtered measurement, as a deviation", "{y}"),
    "lead_memory": Meaning("Memory of the lead-lag", "{y}"),
    "notch_1": Meaning("First memory of the notch", "{y}"),
    "notch_2": Meaning("Second memory of the notch", "{y}"),
    "mode": Meaning("0 automatic, 1 manual, 2 transfer to automatic"),
    "limited": Meaning("1 when a limit changed the effort"),
    "fault": Meaning("1 when an input was not finite and the effort is held"),
}

CONSTANTS: dict[str, Meaning] = {
    "proportional_gain": Meaning("Proportional gain", "{u}/{y}"),
    "integral_gain": Meaning("Integral gain times the sample time", "{u}/{y}"),
    "derivative_gain": Meaning("Derivative gain over filter time plus sample time", "{u}/{y}"),
    "derivative_decay": Meaning("Share of the derivative part kept from sample to sample"),
    "windup_gain": Meaning("Sample time over wind-up time; 0: none"),
    "b": Meaning("Weight of the reference in the proportional part"),
    "c": Meaning("Weight of the reference in the derivative part"),
    "action": Meaning("+1 reverse action, -1 direct action"),
    "low": Meaning("Lowest effort, as a deviation from rest", "{u}"),
    "high": Meaning("Highest effort, as a deviation from rest", "{u}"),
    "rate_step": Meaning("Largest change of the effort in one sample", "{u}"),
    "filter_gain": Meaning("Share of the new measurement that the filter takes; 1: no filter"),
    "lead_gain": Meaning("Lead-lag, what passes at once; 1: no lead-lag"),
    "lead_rest": Meaning("Lead-lag, what is added in the end; 0: no lead-lag"),
    "lead_share": Meaning("Lead-lag, the share of it that one sample adds; 0: no lead-lag"),
    "notch_b0": Meaning("Notch, numerator; 1, 0, 0: no notch"),
    "notch_b1": Meaning("Notch, numerator"),
    "notch_b2": Meaning("Notch, numerator"),
    "notch_a1": Meaning("Notch, denominator"),
    "notch_a2": Meaning("Notch, denominator"),
    "resting_measurement": Meaning("Measurement at the resting point", "{y}"),
    "resting_effort": Meaning("Effort at the resting point", "{u}"),
}
