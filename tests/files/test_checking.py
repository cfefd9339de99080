"""A whole sheet checked: all of its faults at once, or the sheet."""

import pytest

from tests.files.told import EXPRESSION, edited, sentences

CASES = [
    (
        "[controller.disturbance_feedforward] ",
        '[controller.disturbance_feedforward]\nexpression = "2/(lagg s + 1)"',
        "controller.disturbance_feedforward.expression, character 4: expected a name that has a value in "
        "[plant.parameters], found 'lagg'; the nearest valid name is lag",
    ),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_a_name_without_value_in_a_disturbance_path_is_told(old: str, new: str, said: str) -> None:
    """The paths of a measured disturbance share the parameters of the plant."""
    assert sentences(edited((old, new))) == [said]


def test_all_faults_are_told_at_once() -> None:
    """Faults of every kind, in keys, values, what must agree, the formula and the names, come together."""
    text = edited(
        ("kp = 3.0", "kpp = 3.0"),
        ("resting = 72", "resting = 151"),
        (EXPRESSION, 'expression = "gain exp(-delay s) / (lag s + 1)"'),
        ("[3, 6]", "[5, 6]"),
        ("duration = 240", "duration = '240'"),
        ("overshoot = 8", "overshot = 8"),
    )
    assert [said.partition(":")[0] for said in sentences(text)] == [
        "controller.kpp",
        "trial.duration",
        "limits.overshot",
        "loop.controlled.resting",
        "plant.parameters.tail",
        "plant.parameters.delay.spread",
    ]
