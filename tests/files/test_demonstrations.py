"""Demonstrations as files: what they say, and every fault in its sentence."""

from pathlib import Path

import pytest

from tests.files.told import HEATER
from tuner.errors import SheetError
from tuner.files.demonstrations import is_demonstration, parse, read
from tuner.model.demonstration import (
    Action,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)

TOP = 'demonstration = 1\ntitle = "Heater"\nsheet = "heater.toml"\nspeed = 5\n'
FULL = f"""{TOP}
action = [
    {{ at = 0, say = "Begin." }},
    {{ at = 1, set = {{ kp = 8, b = 1 }}, say = "Eager." }},
    {{ at = 2, reference = 80 }},
    {{ at = 2, ramp = {{ to = 75, over = 20 }} }},
    {{ at = 3, disturbance = 10 }},
    {{ at = 4, noise = true }},
    {{ at = 5, plant = {{ gain = 1.0, delay = 6 }} }},
    {{ at = 6, plant = "nominal" }},
    {{ at = 7, mode = "manual" }},
    {{ at = 8, effort = 45 }},
    {{ at = 9, stop = true }},
]
"""


@pytest.fixture
def place(tmp_path: Path) -> Path:
    """Return where a demonstration lies, with the heater's sheet beside it."""
    (tmp_path / "heater.toml").write_text(HEATER, encoding="utf-8")
    return tmp_path / "show.toml"


def said(text: str, place: Path) -> list[str]:
    """Return what is said of a demonstration that cannot be used, without its path."""
    with pytest.raises(SheetError) as caught:
        parse(text, place)
    return [sentence.removeprefix(f"{place}: ") for sentence in caught.value.sentences()]


def test_every_kind_of_action(place: Path) -> None:
    """Each is read as what it does, at its time, with what is said of it; the sheet comes along."""
    place.write_text(FULL, encoding="utf-8")
    staged = read(place)
    told = staged.demonstration
    assert (told.title, told.sheet, told.speed, told.duration) == ("Heater", "heater.toml", 5.0, 9.0)
    assert staged.sheet_path == place.parent / "heater.toml"
    assert staged.sheet.loop.controlled.unit == "degC"
    assert told.actions == (
        Action(0.0, None, "Begin."),
        Action(1.0, SetController((("kp", 8.0), ("b", 1.0))), "Eager."),
        Action(2.0, SetReference(80.0)),
        Action(2.0, SetReference(75.0, 20.0)),
        Action(3.0, SetDisturbance(10.0)),
        Action(4.0, SetNoise(True)),
        Action(5.0, SetPlant((("gain", 1.0), ("delay", 6.0)))),
        Action(6.0, SetPlant(())),
        Action(7.0, SetMode("manual")),
        Action(8.0, SetEffort(45.0)),
        Action(9.0, Stop()),
    )


def test_keys_of_blocks_are_dotted(place: Path) -> None:
    """A number of a block that the sheet has is set by its dotted key; without the block the key is unknown."""
    action = "[[action]]\nat = 0\nset = { lead_lag.lead = 1.5 }\n"
    assert said(TOP + action, place) == ["action 1.set.lead_lag: expected a key of [set], found an unknown one"]
    sheet = place.parent / "heater.toml"
    block = "[controller.lead_lag]\nlead = 2\nlag = 1\n"
    sheet.write_text(HEATER.replace("[trial]", f"{block}\n[trial]"), encoding="utf-8")
    (found,) = parse(TOP + action, place).demonstration.actions
    assert found.deed == SetController((("lead_lag.lead", 1.5),))


@pytest.mark.parametrize(
    ("action", "sentences"),
    [
        (
            "at = 0\nset = { kpp = 1, ki = -1 }\nreference = 5",
            [
                "action 1.set.ki: expected a number of at least 0 (for a plant whose output falls as the effort rises, "
                'write action = "direct"), found -1',
                "action 1.set.kpp: expected a key of [set], found an unknown one; the nearest valid name is kp",
                "action 1: expected exactly one of set | reference | ramp | disturbance | noise | plant | mode "
                "| effort | stop, or say alone, found set and reference",
            ],
        ),
        (
            "at = -1\nplant = { gian = 1 }",
            [
                "action 1.at: expected a number of at least 0, found -1",
                "action 1.plant.gian: expected a key of [plant], found an unknown one; the nearest valid name is gain",
            ],
        ),
        (
            'at = 3\nmode = "automatik"\n[[action]]\nat = 2\nramp = { to = 3 }',
            [
                'action 1.mode: expected "manual" or "automatic", found the text \'automatik\'; '
                "the nearest valid name is automatic",
                "action 2.ramp.over: expected a number above 0, found nothing",
                "action 2.at: expected a time of at least 3, that of the action before, found 2",
            ],
        ),
        (
            "at = 0",
            [
                "action 1: expected exactly one of set | reference | ramp | disturbance | noise | plant | mode "
                "| effort | stop, or say alone, found none of them"
            ],
        ),
        ("at = 0\nstop = false", ["action 1.stop: expected true, found false"]),
        (
            'at = 0\nplant = "worst"',
            ["action 1.plant: expected \"nominal\" or a table of parameters, found the text 'worst'"],
        ),
    ],
)
def test_faults_carry_the_number_of_their_action(place: Path, action: str, sentences: list[str]) -> None:
    """Every fault of every action, in words."""
    assert said(f"{TOP}[[action]]\n{action}\n", place) == sentences


def test_faults_of_the_top_and_of_the_sheet(place: Path) -> None:
    """What is wrong at the top is told together with what is wrong in the sheet."""
    sheet = place.parent / "heater.toml"
    sheet.write_text(HEATER.replace("duration = 240", "duration = -240"), encoding="utf-8")
    text = TOP.replace("speed = 5", "sped = 5") + "action = [3]\n"
    assert said(text, place) == [
        "sped: expected a key of the demonstration, found an unknown one; the nearest valid name is speed",
        "sheet: expected a tuning sheet that can be used, found in heater.toml: trial.duration: expected a number "
        "above 0, found -240",
        "action 1: expected a table [[action]], found 3",
    ]


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        ("", "expected a demonstration, found an empty file"),
        (
            FULL.replace("demonstration = 1", "demonstration = 2"),
            "demonstration: expected 1, the newest format that this version of Trimwright reads, found 2",
        ),
        (TOP, "action: expected 1 to 10,000 tables [[action]], found nothing"),
        (FULL.replace("speed = 5", "speed = 200"), "speed: expected a number from 0.1 to 100, found 200"),
    ],
)
def test_faults_of_the_whole(place: Path, text: str, sentence: str) -> None:
    """Nothing there, a newer format, no actions, a speed beyond its bounds."""
    assert said(text, place) == [sentence]


def test_a_missing_sheet_is_told_with_its_name(place: Path) -> None:
    """The path is relative to the demonstration."""
    text = FULL.replace('"heater.toml"', '"there/oven.toml"')
    assert said(text, place)[0] == (
        "sheet: expected a tuning sheet that can be used, found in oven.toml: expected a file that can be read, "
        "found no such file"
    )


def test_a_demonstration_is_told_from_a_sheet() -> None:
    """By its key, whatever else is wrong with it."""
    assert is_demonstration(TOP)
    assert not is_demonstration(HEATER)
    assert not is_demonstration("demonstration = ")
