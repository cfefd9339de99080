"""The whole delivery: files, proof, and all or nothing."""

import dataclasses
import json
import sys
import time
from dataclasses import replace
from pathlib import Path

import pytest

from tests.deliver.samples import BARE, DYNAMIC, FULL, assessment
from tuner.deliver import delivery
from tuner.deliver.delivery import deliver
from tuner.deliver.proof import call
from tuner.deliver.targets import targets
from tuner.errors import DeliveryError
from tuner.judge.assessment import LimitResult
from tuner.model.sheet import Sheet

FILES = ["controller.c", "controller.h", "controller.json", "controller.py", "proof.json"]
MISSED = LimitResult("settling_time", 90.0, 120.0, "gain 1.035, delay 6", met=False)


@pytest.fixture(autouse=True)
def short_proof(monkeypatch: pytest.MonkeyPatch) -> None:
    """Compare fewer samples than a real delivery does; other tests run the long ones."""
    monkeypatch.setattr(delivery, "STEPS", 500)


def names(folder: Path) -> list[str]:
    """Return what is in a folder."""
    return sorted(file.name for file in folder.iterdir())


def refusal(sheet: Sheet, folder: Path, **asked: bool) -> str:
    """Return the sentence of a refusal."""
    with pytest.raises(DeliveryError) as caught:
        deliver(sheet, assessment(), folder, **asked)  # type: ignore[arg-type] # flags alone
    return str(caught.value)


def test_delivery_is_whole_and_proved(tmp_path: Path) -> None:
    """Every file is written into a folder that is made for it, and each has its entry in proof.json."""
    done = deliver(FULL, assessment(), tmp_path / "hand over" / "Öfen \N{FIRE}")
    folder = tmp_path / "hand over" / "Öfen \N{FIRE}"
    assert names(folder) == FILES
    assert sorted(file.name for file in done.files) == FILES
    entries = json.loads((folder / "proof.json").read_text(encoding="utf-8"))
    assert [entry["file"] for entry in entries] == [proof.file for proof in done.proof]
    assert {entry["file"] for entry in entries} == set(FILES) - {"proof.json"}
    for entry in entries:
        assert set(entry) - {"reason"} == {"file", "how", "steps", "worst_difference", "proved"}
        assert entry["proved"] is True or entry["reason"]
        assert not entry["proved"] or (entry["steps"] >= 500 and entry["worst_difference"] == 0.0)
    assert names(tmp_path) == ["hand over"]


def test_same_sheet_gives_the_same_files(tmp_path: Path) -> None:
    """Without a date nothing in the files depends on the day."""
    deliver(FULL, assessment(), tmp_path / "one")
    time.sleep(0.01)
    deliver(FULL, assessment(), tmp_path / "two")
    for name in FILES:
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes()


def test_date_that_is_passed_in_is_told(tmp_path: Path) -> None:
    """Each file carries the date it was given."""
    deliver(BARE, assessment(), tmp_path / "to", date="2031-05-04")
    for name in FILES[:-1]:
        assert "2031-05-04" in (tmp_path / "to" / name).read_text(encoding="utf-8")


def test_languages_are_those_that_were_asked_for(tmp_path: Path) -> None:
    """One language makes its files alone; the same twice makes them once."""
    done = deliver(BARE, assessment(), tmp_path / "to", languages=("python", "python"))
    assert [file.name for file in done.files] == ["controller.py", "proof.json"]
    assert names(tmp_path / "to") == ["controller.py", "proof.json"]


def test_default_languages_are_registered() -> None:
    """The table of targets is what the folder of targets holds."""
    assert set(targets()) == {"json", "python", "c"}


def test_unknown_language_is_refused_with_the_nearest(tmp_path: Path) -> None:
    """A misspelt language gets the valid ones."""
    with pytest.raises(DeliveryError) as caught:
        deliver(BARE, assessment(), tmp_path / "to", languages=("pyton",))
    assert (
        str(caught.value) == "expected a language of c, json, python, found 'pyton'; the nearest valid name is python"
    )
    with pytest.raises(DeliveryError) as caught:
        deliver(BARE, assessment(), tmp_path / "to", languages=())
    assert str(caught.value) == "expected at least one language of c, json, python, found none"


def test_continuous_controller_is_refused(tmp_path: Path) -> None:
    """There is nothing to deliver without samples."""
    sheet = replace(BARE, controller=replace(BARE.controller, sample_time=0.0))
    assert refusal(sheet, tmp_path / "to") == (
        "controller.sample_time: a continuous controller has no samples: give a sample_time"
    )
    assert names(tmp_path) == []


def test_every_filter_is_delivered_and_proved(tmp_path: Path) -> None:
    """Inverse, measured disturbance and filtered reference: every file gives every bit of the simulation."""
    done = deliver(DYNAMIC, assessment(), tmp_path / "to")
    assert {proof.worst_difference for proof in done.proof if proof.proved} == {0.0}
    assert {proof.file for proof in done.proof if proof.proved} >= {"controller.json", "controller.py"}


def test_verdict_that_is_not_met_is_refused(tmp_path: Path) -> None:
    """The sentence names the limits missed and the worst plant."""
    with pytest.raises(DeliveryError) as caught:
        deliver(BARE, assessment("missed", MISSED), tmp_path / "to")
    assert str(caught.value) == (
        "the acceptance sheet is not met: missed: settling time 120 s, at most 90 s asked, not met; "
        "worst plant: gain 1.035, delay 6; accept that to deliver all the same"
    )
    with pytest.raises(DeliveryError) as caught:
        deliver(BARE, assessment("unstable", stable=False), tmp_path / "to")
    assert str(caught.value) == (
        "the acceptance sheet is not met: unstable, first with the plant nominal; accept that to deliver all the same"
    )
    assert names(tmp_path) == []


def test_accepted_miss_is_told_at_the_very_top_of_each_file(tmp_path: Path) -> None:
    """Nobody can load such a controller without having read it."""
    deliver(BARE, assessment("missed", MISSED), tmp_path / "to", accept_unmet=True)
    for name in FILES[:-1]:
        lines = (tmp_path / "to" / name).read_text(encoding="utf-8").splitlines()
        top = " ".join(line.strip(" #*/") for line in lines[:6])
        assert "NOT ACCEPTED" in " ".join(lines[:3])
        assert "settling time 120 s" in top
        assert "gain 1.035, delay 6" in top
    done = call([sys.executable, "-I", "-S", tmp_path / "to" / "controller.py"])
    assert done.stdout == "selftest n=200 bad=0\n"


def test_nothing_is_overwritten_unless_told(tmp_path: Path) -> None:
    """Existing files are named and left alone; told so, they are replaced, and other files stay."""
    (tmp_path / "controller.py").write_text("mine", encoding="utf-8")
    (tmp_path / "notes.txt").write_text("mine", encoding="utf-8")
    assert refusal(BARE, tmp_path) == f"{tmp_path}: already holds controller.py; say so if they may be overwritten"
    assert names(tmp_path) == ["controller.py", "notes.txt"]
    assert (tmp_path / "controller.py").read_text(encoding="utf-8") == "mine"
    deliver(BARE, assessment(), tmp_path, overwrite=True)
    assert names(tmp_path) == sorted([*FILES, "notes.txt"])
    assert (tmp_path / "controller.py").read_text(encoding="utf-8") != "mine"


def test_files_of_an_older_delivery_do_not_stay_beside_new_ones(tmp_path: Path) -> None:
    """A proof must not lie beside a file that it does not speak of."""
    deliver(BARE, assessment(), tmp_path, languages=("c",))
    with pytest.raises(DeliveryError) as caught:
        deliver(FULL, assessment(), tmp_path, languages=("python",), overwrite=True)
    assert str(caught.value) == (
        f"{tmp_path}: also holds controller.c and controller.h of an older delivery; deliver or remove those too"
    )


@pytest.mark.parametrize("broken", ["write", "prove"])
def test_a_failure_leaves_nothing_behind(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, broken: str) -> None:
    """Whichever step of the last target fails, no file of any target is left, nor a folder."""

    def fail(*_: object) -> None:
        raise DeliveryError("broken on purpose")

    known = targets()
    spoilt = known | {"c": dataclasses.replace(known["c"], **{broken: fail})}  # type: ignore[arg-type] # one of its functions
    monkeypatch.setattr(delivery, "targets", lambda: spoilt)
    with pytest.raises(DeliveryError, match="broken on purpose"):
        deliver(BARE, assessment(), tmp_path / "new" / "to")
    assert names(tmp_path) == []


def test_a_file_that_answers_otherwise_is_not_delivered(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A wrong printer cannot get past the proof, and what was there before stays."""
    known = targets()

    def wrong(made: object) -> dict[str, str]:
        text = known["python"].write(made)["controller.py"]  # type: ignore[arg-type] # handed through
        return {
            "controller.py": text.replace("return effort + resting_effort", "return effort + 1e-9 + resting_effort")
        }

    spoilt = known | {"python": dataclasses.replace(known["python"], write=wrong)}
    monkeypatch.setattr(delivery, "targets", lambda: spoilt)
    (tmp_path / "controller.py").write_text("mine", encoding="utf-8")
    with pytest.raises(DeliveryError, match=r"controller\.py: its test failed"):
        deliver(BARE, assessment(), tmp_path, overwrite=True)
    assert names(tmp_path) == ["controller.py"]
    assert (tmp_path / "controller.py").read_text(encoding="utf-8") == "mine"
