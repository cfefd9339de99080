"""The demonstrations that come with the program: each shows what it says."""

import re
from functools import cache
from pathlib import Path

import pytest

from tuner.files.demonstrations import Staged, read
from tuner.places import demonstrations
from tuner.rehearse.account import Account
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.script import Played, Script

FILES = sorted(demonstrations().glob("*.toml"))
every_one = pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)

LONGEST_SENTENCE = 120


@cache
def played(file: Path) -> tuple[Staged, Rehearsal, tuple[Played, ...], tuple[str, ...]]:
    """Return a demonstration, the loop at its end, what was done, and what happened."""
    staged = read(file)
    rehearsal = Rehearsal(staged.sheet)
    script, account = Script(staged.demonstration, rehearsal), Account(rehearsal)
    done: list[Played] = []
    while True:
        done += script.play()
        account.look()
        if script.over:
            return staged, rehearsal, tuple(done), tuple(account.sentences())
        account.follow(rehearsal.advance(script.room(500)))


def factors(spell: str) -> tuple[float, float]:
    """Return the measured and the predicted growth that a sentence tells."""
    measured, predicted = re.findall(r"(?:a factor of|the pole says) ([0-9.]+[0-9])", spell)
    return float(measured), float(predicted)


def test_there_are_two_that_say_they_are_invented() -> None:
    """Both begin with a comment that says so."""
    assert len(FILES) == 2
    assert all(file.read_text(encoding="utf-8").startswith("# Invented for this program: ") for file in FILES)


@every_one
def test_each_plays_to_its_end(file: Path) -> None:
    """Nothing in it is refused, every action is done at its time, and its sentences are short enough to be read."""
    staged, rehearsal, done, _ = played(file)
    assert not [entry.words for entry in done if "refused" in entry.words]
    late = [entry.time - action.at for entry, action in zip(done, staged.demonstration.actions, strict=True)]
    assert all(-1e-9 <= one <= rehearsal.sample_time for one in late)
    assert all(len(entry.say) <= LONGEST_SENTENCE for entry in done)


@every_one
def test_each_goes_unstable_and_is_brought_back(file: Path) -> None:
    """The loop is unstable for a while, as the pole says to 5 %, and at rest at the end."""
    staged, rehearsal, _, told = played(file)
    spells = [sentence for sentence in told if sentence.startswith("Unstable from")]
    assert spells
    for spell in spells:
        measured, predicted = factors(spell)
        assert measured == pytest.approx(predicted, rel=0.05)
        assert measured > 1.1
    assert rehearsal.stable
    resting = staged.sheet.loop.controlled.resting
    assert rehearsal.advance(2000).y[-1] == pytest.approx(resting, abs=0.01 * staged.sheet.trial.reference)


def test_the_heater_grows_step_by_step() -> None:
    """Each more eager tuning grows faster than the one before."""
    _, _, _, told = played(demonstrations() / "heater_too_eager.toml")
    found = [factors(spell)[0] for spell in told if spell.startswith("Unstable from")]
    assert len(found) == 2
    assert found[0] < found[1]
