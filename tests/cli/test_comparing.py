"""`judge --structures` and `judge --as-found`: tables for a person, objects for a program, exit status as ever."""

import json
from pathlib import Path

import pytest

from tests.cli.written import MET, MISSED, UNSTABLE, put
from tuner.cli.comparing import sentences
from tuner.cli.main import main
from tuner.compare.comparison import compare_structures
from tuner.files.sheet import parse

Captured = pytest.CaptureFixture[str]

FOUND = MET.replace("[trial]", "[controller.as_found]\nkp = 1\nki = 0.05\n[trial]")


def columns(line: str) -> list[str]:
    """Return the cells of a line of a table."""
    return [cell.strip() for cell in line.split("   ") if cell.strip()]


def test_structures_for_a_person(tmp_path: Path, capsys: Captured) -> None:
    """Verdicts and figures side by side, then what each needs and whether it can destabilise."""
    (path,) = put(tmp_path, a=MET)
    assert main(["judge", path, "--structures"]) == 0
    lines = capsys.readouterr().out.splitlines()
    assert lines[0] == f"Bath  ({path})"
    assert columns(lines[1]) == ["worst over the family", "feedforward alone", "feedback alone", "both"]
    assert columns(lines[2]) == ["verdict", "met", "met", "met"]
    assert columns(lines[5]) == ["deviation that stays", "6 degC (nominal 6 degC)", *["0 degC (nominal 0 degC)"] * 2]
    assert columns(lines[10])[1] == "none: there is no feedback"
    assert lines[11:14] == [
        "Feedforward alone",
        "- Needs a model of the plant.",
        "- Can it make a stable plant unstable? No: nothing that it does depends on the output.",
    ]


def test_structures_for_a_program(tmp_path: Path, capsys: Captured) -> None:
    """One object a line and sheet, traces where they are asked for; the status is that of the sheets themselves."""
    assert main(["judge", *put(tmp_path, a=MET, b=UNSTABLE), "--structures", "--json", "--traces"]) == 1
    found = [json.loads(line) for line in capsys.readouterr().out.splitlines()]
    assert [one["title"] for one in found] == ["Bath", "Wild bath"]
    assert [part["assessment"]["verdict"] for part in found[1]["structures"]] == ["met", "unstable", "unstable"]
    assert set(found[0]["structures"][0]["assessment"]["traces"]) == {"reference", "disturbance"}


def test_the_family_is_as_large_as_asked(tmp_path: Path, capsys: Captured) -> None:
    """Of structures and of tunings alike."""
    spread = '"gain/(5 s + 1)"\n[plant.parameters]\ngain = {value = 2, spread = "5 %"}'
    drifting = FOUND.replace('"2/(5 s + 1)"', spread)
    (path,) = put(tmp_path, a=drifting)
    main(["judge", path, "--structures", "--json", "--family", "4"])
    main(["judge", path, "--as-found", "--json", "--family", "5"])
    first, second = (json.loads(line) for line in capsys.readouterr().out.splitlines())
    assert {one["assessment"]["family_size"] for one in first["structures"]} == {4}
    assert {one["assessment"]["family_size"] for one in second["tunings"]} == {5}


def test_as_found_for_a_person(tmp_path: Path, capsys: Captured) -> None:
    """Verdicts and measures side by side with the limits, what is missed and what is best in words."""
    (path,) = put(tmp_path, a=FOUND)
    assert main(["judge", path, "--as-found"]) == 0
    lines = capsys.readouterr().out.splitlines()
    assert columns(lines[1]) == ["worst over the family", "as found", "as left", "limit"]
    assert columns(lines[2]) == ["verdict", "missed", "met"]
    name, found, left, limit = columns(lines[3])
    assert (name, limit) == ("settling time", "at most 30 s")
    assert found == "none, missed"
    assert left.endswith(" s (best)")


def test_as_found_for_a_program(tmp_path: Path, capsys: Captured) -> None:
    """One object with both tunings; the status is that of the controller as left."""
    (path,) = put(tmp_path, a=FOUND)
    assert main(["judge", path, "--as-found", "--json"]) == 0
    found = json.loads(capsys.readouterr().out)
    assert [(one["name"], one["assessment"]["verdict"]) for one in found["tunings"]] == [
        ("as found", "missed"),
        ("as left", "met"),
    ]
    assert found["measures"][0]["measure"] == "settling_time"


def test_without_a_controller_as_found_there_is_nothing_to_compare(tmp_path: Path, capsys: Captured) -> None:
    """A sentence with the key, status 2, and other sheets are compared all the same."""
    bare, other = put(tmp_path, a=MISSED, b=FOUND)
    assert main(["judge", bare, other, "--as-found", "--json"]) == 2
    told = capsys.readouterr()
    why = "controller.as_found: expected the controller met on site, to compare with, found none"
    assert told.err == f"{bare}: {why}\n"
    assert len(told.out.splitlines()) == 1


def test_a_refused_tuning_is_told_below_the_table(tmp_path: Path, capsys: Captured) -> None:
    """The controller as found may be one that cannot be computed."""
    improper = 'kp = 1\n[controller.as_found.disturbance_feedforward]\nexpression = "1"\n'
    (path,) = put(tmp_path, a=FOUND.replace("kp = 1\nki = 0.05\n", improper))
    assert main(["judge", path, "--as-found"]) == 0
    out = capsys.readouterr().out
    assert columns(out.splitlines()[2]) == ["verdict", "none", "met"]
    assert "- as found: It cannot be computed: the disturbance feedforward would be improper: " in out


def test_one_comparison_at_a_time(tmp_path: Path, capsys: Captured) -> None:
    """Both options together are refused."""
    (path,) = put(tmp_path, a=FOUND)
    assert main(["judge", path, "--as-found", "--structures"]) == 2
    assert capsys.readouterr().err == "trimwright judge: expected --structures or --as-found, found both\n"


def test_a_refused_structure_says_why() -> None:
    """Its sentences are what it needs and the reason."""
    bare = parse(MET.replace("kp = 2", "kp = 0").replace("ki = 0.5", "ki = 0"))
    assert list(sentences(compare_structures(bare)[1])) == [
        "Needs a sensor of the controlled signal.",
        "There is no feedback to compare with: all gains of the controller are 0.",
    ]


def test_needs_are_listed() -> None:
    """With commas and an "and"."""
    path = '[controller.disturbance_feedforward]\nexpression = "1/(8 s + 1)"\n[trial]'
    said = [next(sentences(one)) for one in compare_structures(parse(MET.replace("[trial]", path)))]
    assert said == [
        "Needs a model of the plant and a measured disturbance.",
        "Needs a sensor of the controlled signal.",
        "Needs a sensor of the controlled signal, a model of the plant and a measured disturbance.",
    ]
