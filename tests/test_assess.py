"""The one road, on whole sheets: what it gives, how it is called, and what it refuses."""

import json
import subprocess
import sys
from dataclasses import replace
from math import exp, inf

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import tuner
from tuner.assess import assess, glance, sketched
from tuner.errors import LoopError
from tuner.files.sheet import parse
from tuner.judge.as_json import as_json
from tuner.model.measures import MEASURES
from tuner.model.sheet import Sheet
from tuner.places import sample_plants

LAG = """
sheet = 1
[loop]
title = "Bath"
controlled = {{ name = "Temperature", unit = "degC", low = 0, high = 100, resting = 40 }}
manipulated = {{ name = "Heater", unit = "%", low = {low}, high = {high}, resting = 30 }}
[plant]
expression = "{plant}"
[plant.parameters]
gain = {{ value = 2, spread = "{spread} %" }}
[controller]
sample_time = {sample_time}
{gains}
[trial]
reference = {reference}
disturbance = {disturbance}
duration = 40
[limits]
{limits}
"""


def bath(**changes: object) -> Sheet:
    """Return a first-order bath, sampled, with PI control, unless changed."""
    values: dict[str, object] = {
        "plant": "gain/(5 s + 1)",
        "spread": 20,
        "sample_time": 0.5,
        "gains": "kp = 2\nki = 0.5",
        "reference": 5,
        "disturbance": 3,
        "limits": "",
        "low": 0,
        "high": 100,
    }
    return parse(LAG.format(**values | changes))


def test_the_whole_result() -> None:
    """A family of 25 with the nominal plant first, every measure, poles, traces, margins and a verdict."""
    found = assess(bath(limits="settling_time = 30"))

    assert (found.title, found.verdict, found.family_size) == ("Bath", "met", 25)
    assert found.nominal.name == "nominal"
    assert found.nominal.stable
    assert set(found.nominal.measures) == {measure.name for measure in MEASURES}
    assert set(found.worst) == set(found.nominal.measures)
    assert found.nominal.margins is not None
    assert found.nominal.margins.gain_margin == found.nominal.measures["gain_margin"]
    assert found.nominal.final_reference == 5.0
    assert found.instability is None


def test_every_way_to_call_it() -> None:
    """`tuner.assess(sheet)` holds before and after the module of that name is loaded, and so does `tuner.read`."""
    program = (
        "import tuner, sys\n"
        f"sheet = tuner.read({str(sample_plants() / 'tank_level.toml')!r})\n"
        "first = tuner.assess(sheet, 3).family_size\n"
        "from tuner.assess import assess\n"
        "print(first, tuner.assess(sheet, 3).family_size, assess(sheet, family_size=3).family_size)\n"
    )

    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=False)

    assert (done.stdout, done.stderr) == ("3 3 3\n", "")


def test_importing_the_package_is_cheap() -> None:
    """No heavy library comes with `import tuner`."""
    program = "import tuner, sys; print(sorted({'numpy', 'numba', 'scipy', 'PySide6'} & set(sys.modules)))"

    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=False)

    assert done.stdout == "[]\n"


def test_the_module_can_be_called() -> None:
    """The module that takes the place of the package's function is called the same way."""
    assert tuner.assess(bath(), 2).family_size == 2


def test_a_first_order_loop_by_hand() -> None:
    """P control of a sampled first-order plant without spread: z = a - b kp, final value and error by hand."""
    found = assess(bath(gains="kp = 1", spread=0, disturbance=3))
    a = exp(-0.1)
    z = a - 2.0 * (1.0 - a)

    assert found.family_size == 1
    assert found.nominal.poles == pytest.approx(np.array([np.log(z) / 0.5]), rel=1e-9)
    assert found.nominal.measures["steady_state_error"] == pytest.approx(100.0 / 3.0)
    assert found.nominal.final_reference == pytest.approx(10.0 / 3.0)
    assert found.nominal.final_disturbance == pytest.approx(2.0)
    assert found.nominal.measures["peak_effort"] == pytest.approx(5.0)
    assert found.nominal.measures["disturbance_peak"] == pytest.approx(2.0, rel=1e-6)
    assert found.nominal.measures["saturated_share"] == 0.0


def test_a_deadbeat_loop_by_hand() -> None:
    """An integrator with kp = 1/Ts is there after one sample, in a straight line, and stays: every pole at z = 0."""
    found = assess(bath(plant="gain/(2 s)", sample_time=1, gains="kp = 1", spread=0, reference=1, disturbance=0))
    measures = found.nominal.measures

    assert found.nominal.stable
    assert (measures["overshoot"], measures["undershoot"], measures["damping"]) == (0.0, 0.0, 1.0)
    assert measures["rise_time"] == pytest.approx(0.8, rel=1e-9)
    assert measures["settling_time"] == pytest.approx(0.98, rel=1e-9)
    assert measures["iae_reference"] == pytest.approx(0.5, rel=1e-9)
    assert measures["peak_effort"] == pytest.approx(1.0)
    assert measures["effort_travel"] == pytest.approx(2.0)
    assert measures["gain_margin"] == pytest.approx(2.0)


def test_a_touched_limit_is_counted() -> None:
    """A heater that is too small saturates, and the error that stays is measured on the run itself."""
    found = assess(bath(high=31, spread=0))

    share = found.nominal.measures["saturated_share"]
    assert share is not None
    assert share > 0.9
    assert found.nominal.measures["steady_state_error"] == pytest.approx(60.0, abs=0.1)
    assert "Limits or the resolution act in a run: its final value is the mean of its last tenth." in found.notes


def test_an_unstable_sheet() -> None:
    """No measures but the damping, one sentence on why, and the way back."""
    found = assess(bath(gains="kp = 12", limits="overshoot = 10\ndamping = 0.1"))

    assert found.verdict == "unstable"
    assert {name for name, value in found.nominal.measures.items() if value is not None} == {"damping"}
    assert (
        "No measures of the reference trial, measures of the disturbance trial, margins: the loop is unstable for "
        f"{sum(not member.stable for member in found.members)} of 25 plants, the nominal plant among them."
    ) in found.notes
    assert found.instability is not None
    assert found.instability.gain == "kp"
    worst = 2.4
    a = exp(-0.1)
    assert found.instability.edge == pytest.approx((1.0 + a) / (worst * (1.0 - a)), rel=1e-4)
    assert found.instability.frequency == pytest.approx(np.pi / 0.5)


@pytest.mark.parametrize("gains", ["kp = 2\nki = 0.5", "kp = 12"])
def test_a_glance_sees_the_same_plants(gains: str) -> None:
    """The nominal plant and the one that is looked at have the very numbers of the whole assessment, also unstable."""
    sheet = bath(gains=gains, limits="overshoot = 10")
    whole = assess(sheet)
    looked_at = whole.members[2]

    found = glance(sheet, looked_at.name)

    assert [member.name for member in found.members] == ["nominal", looked_at.name]
    for one, other in zip(found.members, (whole.nominal, looked_at), strict=True):
        assert one.measures == pytest.approx(other.measures, nan_ok=True)
        assert np.array_equal(one.traces.reference.y, other.traces.reference.y)
    assert found.instability is None


def test_a_glance_at_a_plant_that_is_not_there() -> None:
    """It sees the nominal one."""
    assert [member.name for member in glance(bath(), "gain 99").members] == ["nominal"]
    assert [member.name for member in glance(bath()).members] == ["nominal"]


@pytest.mark.parametrize("gains", ["kp = 2\nki = 0.5", "kp = 12"])
def test_a_sketch_has_every_curve_before_anything_is_judged(gains: str) -> None:
    """Those of the assessment, to which it leads; measures of the nominal plant and the one that is looked at alone."""
    sheet = bath(gains=gains, limits="overshoot = 10")
    sketch, whole = sketched(sheet), assess(sheet)
    looked_at = whole.members[2].name
    outline = sketch.outlined(looked_at)

    assert [member.name for member in outline.members] == [member.name for member in whole.members]
    for one, other in zip(outline.members, whole.members, strict=True):
        assert np.array_equal(one.traces.disturbance.y, other.traces.disturbance.y)
        assert np.array_equal(one.poles, other.poles)
        assert (one.stable, one.drift) == (other.stable, other.drift)
        known = other.measures if one.name in ("nominal", looked_at) else {"damping": other.measures["damping"]}
        assert one.measures == pytest.approx(known, nan_ok=True)
    assert outline.worst["damping"] == whole.worst["damping"]
    assert outline.limits == glance(sheet, looked_at).limits
    judged = sketch.judged()
    assert (judged.verdict, judged.limits, judged.notes) == (whole.verdict, whole.limits, whole.notes)
    assert judged.members[0].traces is outline.members[0].traces


def test_an_open_loop() -> None:
    """Without feedback there are no margins, and the plant answers the disturbance alone."""
    found = assess(bath(gains="kp = 2\nfeedback = false", spread=0))

    assert found.verdict == "met"
    assert found.nominal.measures["gain_margin"] is None
    assert found.nominal.reasons["gain_margin"] == "there is no feedback"
    assert found.nominal.final_disturbance == pytest.approx(6.0)
    assert found.nominal.measures["steady_state_error"] == 100.0
    assert found.nominal.reasons["overshoot"] == "the final value is 0"


def test_no_steps() -> None:
    """A trial without steps measures nothing in time, and its limits are missed."""
    found = assess(bath(reference=0, disturbance=0, limits="overshoot = 10\ngain_margin = 2"))

    assert [limit.met for limit in found.limits] == [False, True]
    assert "No measures of the reference trial: the trial has no reference step." in found.notes
    assert "No measures of the disturbance trial: the trial has no disturbance step." in found.notes


def test_infinite_margins() -> None:
    """A continuous first-order loop has no phase crossing: infinite in Python, "inf" in JSON."""
    found = assess(bath(sample_time=0, gains="kp = 2", spread=0))

    assert found.nominal.measures["gain_margin"] == inf
    assert as_json(found)["nominal"]["gain_margin"] == "inf"


def test_the_json_of_every_sample_is_strict() -> None:
    """Whatever the verdict, a strict reader takes the object, traces and all."""
    for path in sorted(sample_plants().glob("*.toml")):
        found = as_json(assess(tuner.read(path), 5), traces=True)
        read = json.loads(json.dumps(found, allow_nan=False))
        lengths = {len(signal) for run in read["traces"].values() for signal in run.values()}
        assert len(lengths) == 1, path


def test_a_sheet_that_cannot_be_computed() -> None:
    """What is well written but has no trial is one sentence."""
    sheet = bath()
    endless = replace(sheet, trial=replace(sheet.trial, duration=1e9))

    with pytest.raises(LoopError, match="samples"):
        assess(endless)


def test_arithmetic_that_fails_is_a_refusal(monkeypatch: pytest.MonkeyPatch) -> None:
    """Numbers that nothing refused before end in a sentence too, with the cause behind it."""

    def broken(*_: object) -> None:
        raise OverflowError("too large")

    monkeypatch.setattr(sys.modules["tuner.assess"], "run", broken)

    with pytest.raises(LoopError, match=r"^the loop cannot be computed with these numbers: too large$") as caught:
        assess(bath())
    assert isinstance(caught.value.__cause__, OverflowError)


@settings(max_examples=25)
@given(
    st.floats(0.01, 3.0),
    st.floats(0.01, 1.0),
    st.floats(0.1, 50.0),
)
def test_a_linear_loop_scales_with_its_reference(kp: float, ki: float, factor: float) -> None:
    """Percentages and times of a loop without limits do not depend on the size of the step, nor on its sign."""
    wide = {"low": -1e6, "high": 1e6, "spread": 0, "gains": f"kp = {kp}\nki = {ki}"}
    one, other = assess(bath(reference=1, **wide)).nominal, assess(bath(reference=-factor, **wide)).nominal

    assert one.stable
    for name in ("overshoot", "peak_time", "rise_time", "settling_time", "steady_state_error"):
        value = one.measures[name]
        assert other.measures[name] == (None if value is None else pytest.approx(value, rel=1e-6, abs=1e-6)), name
