"""Changes refused where the file would be."""

from dataclasses import replace

import pytest

from tests.session.sheets import wash_bath
from tuner.errors import LoopError, SheetError
from tuner.session.checks import faults_of, refuse_new_faults, sentence
from tuner.session.fields import with_limit, with_value_at


def test_a_sound_sheet_has_no_faults() -> None:
    """What was read can be read again."""
    assert faults_of(wash_bath()) == ()


def test_new_faults_are_refused_and_old_ones_are_not() -> None:
    """A fault that was there before does not stop another change."""
    faulty = with_value_at(wash_bath(), "loop.controlled.low", 90.0)
    with pytest.raises(SheetError):
        refuse_new_faults(wash_bath(), faulty)
    refuse_new_faults(faulty, replace(faulty, trial=replace(faulty.trial, duration=100.0)))


def test_the_sentence_leaves_out_the_key_it_stands_beside() -> None:
    """Beside its field a fault need not name its key; another key is named."""
    with pytest.raises(SheetError) as refusal:
        refuse_new_faults(wash_bath(), with_limit(wash_bath(), "overshoot", -1.0))
    assert sentence(refusal.value, "limits.overshoot").startswith("expected a number")
    assert sentence(refusal.value, "trial.duration").startswith("limits.overshoot: expected a number")
    assert sentence(refusal.value, "limits").startswith("overshoot: expected a number")
    assert sentence(LoopError("it cannot be")) == "it cannot be"
