"""The shape of the object that other programs read."""

import json

import pytest

from tests.judge.invented import member, sheet
from tuner.judge.as_json import as_json
from tuner.judge.assessment import Instability
from tuner.judge.verdict import judge
from tuner.model.measures import MEASURES

NAMES = [measure.name for measure in MEASURES]


def test_the_keys_and_their_order() -> None:
    """Exactly the agreed keys; traces only when asked for."""
    found = as_json(judge(sheet({"overshoot": 8.0}), [member()]))

    assert list(found) == ["title", "verdict", "family_size", "nominal", "worst", "limits", "poles", "notes"]
    assert list(found["nominal"]) == ["stable", *NAMES]
    assert list(found["worst"]) == NAMES
    assert found["worst"]["overshoot"] == {"value": 1.0, "plant": "nominal"}
    assert (found["title"], found["verdict"], found["family_size"]) == ("Kiln zone", "met", 1)


def test_poles_come_with_their_conjugates_rightmost_first() -> None:
    """Pairs of real and imaginary part, the upper one of a conjugate pair first."""
    poles = (-2.0 + 0j, -0.5 - 1j, -0.5 + 1j)

    assert as_json(judge(sheet(), [member(poles=poles)]))["poles"] == [[-0.5, 1.0], [-0.5, -1.0], [-2.0, 0.0]]


def test_traces_hold_the_nominal_runs() -> None:
    """Four signals of equal length in either run."""
    runs = as_json(judge(sheet(), [member()]), traces=True)["traces"]

    assert list(runs) == ["reference", "disturbance"]
    assert {len(runs["reference"][key]) for key in ("t", "r", "y", "u")} == {1201}
    assert runs["reference"]["y"][-1] == pytest.approx(10.0, rel=1e-4)


def test_numbers_are_strict_json() -> None:
    """Infinity is a text, what is missing is null, and a strict writer takes all of it."""
    family = [member(gain_margin=float("inf"), rise_time=None)]

    read = json.loads(json.dumps(as_json(judge(sheet({"gain_margin": 2.0}), family), traces=True), allow_nan=False))

    assert read["nominal"]["gain_margin"] == "inf"
    assert read["nominal"]["rise_time"] is None
    assert read["limits"] == [{"measure": "gain_margin", "limit": 2.0, "value": "inf", "plant": "nominal", "met": True}]


def test_an_unstable_loop_says_how_it_runs_away() -> None:
    """The extra key is there only for an unstable verdict."""
    runaway = Instability("nominal", 0.0, float("inf"), 2.0, "kp", 7.2, "Unstable.")
    found = as_json(judge(sheet(), [member(stable=False)], runaway))

    assert found["instability"] == {
        "plant": "nominal",
        "growth": 0.0,
        "doubling_time": "inf",
        "frequency": 2.0,
        "gain": "kp",
        "edge": 7.2,
        "sentence": "Unstable.",
    }
