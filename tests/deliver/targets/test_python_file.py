"""controller.py: one file without imports, and the same bits as the law."""

import ast
import sys
from collections.abc import Callable
from dataclasses import replace
from math import nan
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings

from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, controllers, recording, specification, written
from tuner.deliver.proof import call
from tuner.deliver.reference import Before
from tuner.deliver.targets import python_file
from tuner.model.sheet import Sheet

SHEETS = [
    pytest.param(FULL, id="full"),
    pytest.param(BARE, id="bare"),
    pytest.param(OPEN, id="open"),
    pytest.param(DYNAMIC, id="dynamic"),
]


def text_of(sheet: Sheet = FULL) -> str:
    """Return the text of controller.py."""
    return python_file.write(specification(sheet))["controller.py"]


def loaded(sheet: Sheet = FULL) -> Callable[..., Any]:
    """Return the class in controller.py."""
    space: dict[str, Any] = {"__name__": "controller"}
    exec(text_of(sheet), space)  # noqa: S102 - our own text
    found: Callable[..., Any] = space["Controller"]
    return found


@pytest.mark.parametrize("sheet", SHEETS)
def test_file_imports_nothing_and_is_old_python(sheet: Sheet) -> None:
    """Its tree has no import, and its grammar is that of Python 3.6."""
    tree = ast.parse(text_of(sheet), feature_version=(3, 6))
    assert not [node for node in ast.walk(tree) if isinstance(node, ast.Import | ast.ImportFrom)]
    assert "__import__" not in text_of(sheet)


@pytest.mark.parametrize("sheet", SHEETS)
def test_self_test_runs_by_itself(tmp_path: Path, sheet: Sheet) -> None:
    """A bare interpreter runs all rows and says so."""
    written("python", tmp_path, specification(sheet))
    done = call([sys.executable, "-I", "-S", tmp_path / "controller.py"])
    count = len(specification(sheet).rows)
    assert (done.returncode, done.stdout, done.stderr) == (0, f"selftest n={count} bad=0\n", "")


@pytest.mark.parametrize(
    ("right", "wrong"),
    [
        ("allowed > HIGH", "allowed < HIGH"),
        ("limited = 1.0", "limited = 0.0"),
        ("integral + (INTEGRAL_GAIN", "integral - (INTEGRAL_GAIN"),
        ("self._mode = 2.0", "self._mode = 0.0"),
        ("WINDUP_GAIN = ", "WINDUP_GAIN = 1e-9 + "),
    ],
)
def test_a_spoilt_file_fails_its_self_test(tmp_path: Path, right: str, wrong: str) -> None:
    """The self-test can fail, and the exit status tells."""
    assert right in text_of()
    (tmp_path / "controller.py").write_text(text_of().replace(right, wrong), encoding="utf-8")
    done = call([sys.executable, "-I", "-S", tmp_path / "controller.py"])
    assert done.returncode == 1
    assert done.stdout.startswith("selftest n=200 bad=")
    assert not done.stdout.endswith("bad=0\n")


def test_hundred_thousand_samples_are_the_same_bits(tmp_path: Path) -> None:
    """In closed loop with every kick, each effort and each flag of the file is that of the law."""
    written("python", tmp_path, specification())
    (proof,) = python_file.prove(tmp_path, tmp_path, specification(), recording())
    assert (proof.steps, proof.worst_difference, proof.proved) == (100_000, 0.0, True)


@given(sheet=controllers())
@settings(max_examples=50, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_every_combination_is_the_same_bits(sheet: Sheet) -> None:
    """Limits, rate, filters, notch, weights, forms, action, resting values, feedforward, feedback on or off."""
    record, controller = recording.__wrapped__(sheet, 2000), loaded(sheet)()
    found = []
    for sample in record.samples:
        if sample.before == Before.MANUAL:
            controller.set_manual(sample.value)
        elif sample.before != Before.NOTHING:
            (controller.set_auto if sample.before == Before.AUTO else controller.reset)()
        measured = (sample.disturbance,) if sheet.controller.disturbance_feedforward else ()
        effort = controller.step(sample.reference, sample.measurement, *measured)
        found.append((effort, controller.limited + 2 * controller.fault + 4 * controller.manual))
    assert found == [tuple(outcome) for outcome in record.outcomes]


def test_controller_says_what_it_does() -> None:
    """Effort, limit, fault and manual can be read, and nothing else can be set by a slip of the pen."""
    controller = loaded()()
    assert (controller.effort, controller.limited, controller.fault, controller.manual) == (40.0, False, False, False)
    effort = controller.step(150.0, 72.0)
    assert (controller.effort, controller.limited) == (effort, True)
    assert controller.step(nan, 72.0) == effort
    assert controller.fault
    controller.set_manual(50)
    assert controller.manual
    with pytest.raises(AttributeError):
        controller.efort = 1.0


def test_resting_values_of_zero_make_deviations() -> None:
    """The same controller in deviations answers what the one in engineering units answers, less the rest."""
    absolute, deviation = loaded()(), loaded()(resting_measurement=0, resting_effort=0)
    for k in range(200):
        y = float(k % 7) - 3.0
        assert deviation.step(5.0, y) == pytest.approx(absolute.step(77.0, 72.0 + y) - 40.0, abs=1e-12)


@pytest.mark.parametrize(("effort", "settled"), [(55.0, 55.0), (20.0, 20.0), (200.0, 100.0), (-50.0, 0.0)])
def test_set_auto_is_bumpless(effort: float, settled: float) -> None:
    """The first automatic sample keeps the effort to 1e-12, wherever the hand left it."""
    controller = loaded()()
    controller.set_manual(effort)
    for _ in range(40):
        controller.step(74.0, 71.0)
    controller.set_auto()
    assert controller.step(74.0, 71.0) == pytest.approx(settled, abs=1e-12)
    assert controller.step(74.0, 71.0) >= settled
    assert not controller.manual


@pytest.mark.parametrize(
    "title",
    [
        "coding: latin-1",
        "'''\"\"\" \\",
        "one\ntwo\r\nraise SystemExit(9)\x0craise\u2028raise",
        "\N{FIRE} \u202e \ud800 Öfen",
        "$head ${head} %s {0}",
    ],
)
def test_no_title_breaks_the_file(tmp_path: Path, title: str) -> None:
    """Whatever the loop and its signals are called, the comments stay comments."""
    loop = replace(FULL.loop, title=title, manipulated=replace(FULL.loop.manipulated, name=title, unit=title))
    written("python", tmp_path, specification(replace(FULL, loop=loop)))
    done = call([sys.executable, "-I", "-S", tmp_path / "controller.py"])
    assert (done.returncode, done.stdout) == (0, "selftest n=200 bad=0\n")


def test_without_an_interpreter_the_proof_says_so(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Nothing is claimed that was not run."""
    monkeypatch.setattr(sys, "executable", "")
    (proof,) = python_file.prove(tmp_path, tmp_path, specification(), recording(FULL, 100))
    assert (proof.proved, proof.how) == (False, "not run here, because no Python interpreter was found")
