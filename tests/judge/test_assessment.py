"""The result that everyone shows: frozen, and whole without anything optional."""

import subprocess
import sys
from dataclasses import FrozenInstanceError

import numpy as np
import pytest

from tests.judge.invented import member, sheet, trace
from tuner.judge.assessment import Assessment, MemberResult, WorstCase
from tuner.judge.verdict import judge
from tuner.simulate.traces import Traces


def test_the_nominal_plant_is_the_first_of_the_family() -> None:
    """The order of the family tells it, not a name."""
    first = member("gain 2")
    found = judge(sheet(), [first, member("nominal")])
    assert found.nominal is first
    assert found.family_size == 2


def test_what_is_optional_is_empty() -> None:
    """A result has neither notes, reasons nor final values unless it is given some, an assessment no troubles."""
    bare = MemberResult("nominal", True, {}, np.zeros(0, np.complex128), Traces(trace(), trace(0.0)))
    assert (dict(bare.reasons), bare.final_reference, bare.final_disturbance, bare.notes) == ({}, None, None, ())
    assert bare.margins is None
    found = Assessment("Kiln zone", "met", (bare,), {}, ())
    assert (found.notes, found.instability) == ((), None)
    assert not WorstCase(1.0, "nominal").none


def test_two_results_do_not_share_their_reasons() -> None:
    """The reasons of one plant are not those of another."""
    one, other = (MemberResult("", True, {}, np.zeros(0, np.complex128), Traces(trace(), trace())) for _ in range(2))
    assert one.reasons is not other.reasons


@pytest.mark.parametrize("name", ["verdict", "members", "limits", "notes"])
def test_a_result_is_never_changed(name: str) -> None:
    """An assessment handed to several views cannot be changed by one of them."""
    found = judge(sheet(), [member()])
    with pytest.raises(FrozenInstanceError):
        setattr(found, name, None)


def test_who_only_shows_an_assessment_loads_no_compiled_loops() -> None:
    """Neither numba nor scipy comes with the type of the result."""
    program = (
        "import sys, tuner.judge.assessment; print([n for n in ('numba', 'scipy', 'control') if n in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert done.stdout == "[]\n"
