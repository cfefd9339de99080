"""Sheets and assessments to deliver, of our own invention, and ways to run what was delivered."""

import shutil
from collections.abc import Sequence
from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
from hypothesis import strategies as st

from tuner.deliver.excitation import Recording, excite
from tuner.deliver.plant import nominal_plant
from tuner.deliver.proof import call, run
from tuner.deliver.reference import Outcome
from tuner.deliver.specification import Specification, specify
from tuner.deliver.target import fill
from tuner.deliver.targets import targets
from tuner.judge.assessment import Assessment, Instability, LimitResult, MemberResult, Verdict
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial
from tuner.simulate.traces import Trace, Traces

STRICT = (
    *("-std=c99", "-Wall", "-Wextra", "-Wpedantic", "-Wconversion", "-Wdouble-promotion", "-Wfloat-conversion"),
    *("-Wshadow", "-Wstrict-prototypes", "-Wmissing-prototypes", "-Wundef", "-Wcast-qual", "-Werror"),
)

LOOP = Loop(
    title="Drying oven, zone 2",
    controlled=Signal("Zone temperature", "degC", 0.0, 150.0, 72.0),
    manipulated=Manipulated("Steam valve", "%", 0.0, 100.0, 40.0, rate=8.0),
)
PLANT = ExpressionPlant("gain exp(-delay s)/(lag s + 1)", tuple(
    PlantParameter(name, value) for name, value in (("gain", 0.9), ("delay", 1.3), ("lag", 12.0))
))  # fmt: skip
FULL = Sheet(
    loop=LOOP,
    plant=PLANT,
    controller=Controller(
        sample_time=0.5,
        gain_1=3.0,
        gain_2=0.3,
        gain_3=2.0,
        filter_time=0.6,
        b=0.7,
        c=0.2,
        windup_time=12.0,
        feedforward=Feedforward("static", gain=0.4),
        measurement_filter=0.8,
        lead_lag=LeadLag(0.6, 0.2),
        notch=Notch(2.0, 0.2, 0.9),
    ),
    trial=Trial(duration=60.0, reference=5.0, disturbance=10.0),
    actuator=Actuator(0.8),
    sensor=Sensor(lag=0.4),
)
BARE = Sheet(
    loop=Loop("Bare"), plant=PLANT, controller=Controller(sample_time=0.2, gain_1=1.5), trial=Trial(duration=20.0)
)
OPEN = replace(FULL, controller=replace(FULL.controller, feedback=False))
INVERSE = Feedforward("inverse", filter_time=1.0)
MEASURED = DisturbanceFeedforward("0.4 exp(-5.2 s)/(7 s + 1)", filter_time=0.7, name="Feed", unit="kg/s", resting=4.0)
DYNAMIC = replace(
    FULL,
    controller=replace(
        FULL.controller,
        feedforward=INVERSE,
        disturbance_feedforward=MEASURED,
        reference_filter=ReferenceFilter(1.5, 3),
    ),
)
"""Filters of every kind: of the reference, of a measured disturbance that comes late, between reference and law."""


def assessment(
    verdict: Verdict = "met", *limits: LimitResult, stable: bool = True, instability: Instability | None = None
) -> Assessment:
    """Return an assessment that says so, without having computed anything."""
    none = np.zeros(1)
    trace = Trace(none, none, none, none, np.zeros(1, dtype=np.intp), np.zeros(1, dtype=bool), linear=True)
    member = MemberResult("nominal", stable, {}, none.astype(complex), Traces(trace, trace))
    return Assessment("Drying oven, zone 2", verdict, (member,), {}, limits, instability=instability)


def specification(sheet: Sheet = FULL) -> Specification:
    """Return what a delivery of the sheet says."""
    return specify(sheet, assessment(), "")


@cache
def recording(sheet: Sheet = FULL, steps: int = 100_000) -> Recording:
    """Return the closed loop's run."""
    return excite(specification(sheet), nominal_plant(sheet), steps)


def written(language: str, folder: Path, made: Specification) -> Path:
    """Write the files of one language into a folder, and return it."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, text in targets()[language].write(made).items():
        (folder / name).write_text(text, encoding="utf-8")
    return folder


def run_c(folder: Path, compiler: str, flags: Sequence[str], record: Recording) -> tuple[Outcome, ...]:
    """Compile controller.c with a program around it, and return its answers."""
    harness, program = folder / "harness.c", folder / "harness"
    more = ", given[4]" if "double disturbance" in (folder / "controller.h").read_text(encoding="utf-8") else ""
    harness.write_text(fill("harness.c", more=more), encoding="utf-8")
    made = call([compiler, *flags, folder / "controller.c", harness, "-o", program])
    assert made.returncode == 0, made.stderr
    return run([program], record, folder)


def clang() -> str | None:
    """Return the name of a clang on this machine."""
    names = ("clang", *(f"clang-{version}" for version in range(30, 10, -1)))
    return next((name for name in names if shutil.which(name)), None)


def controllers() -> st.SearchStrategy[Sheet]:
    """Draw sheets with every combination of what a controller may have."""
    maybe = st.none() | st.floats(0.5, 50.0)
    loops = st.builds(
        lambda low, high, rate, rest: Loop(
            "Drawn",
            controlled=Signal("", "", None, None, rest),
            manipulated=Manipulated(
                "", "", None if low is None else 40.0 - low, None if high is None else 40.0 + high, 40.0, rate=rate
            ),
        ),
        low=maybe,
        high=maybe,
        rate=maybe,
        rest=st.floats(-100.0, 100.0),
    )
    return st.builds(
        Sheet,
        loop=loops,
        plant=st.just(PLANT),
        trial=st.builds(Trial, duration=st.just(20.0), reference=st.floats(0.1, 10.0)),
        controller=st.builds(
            Controller,
            form=st.sampled_from(["parallel", "standard", "series"]),
            sample_time=st.floats(0.05, 1.0),
            gain_1=st.floats(0.0, 5.0),
            gain_2=st.just(0.0) | st.floats(0.5, 20.0),
            gain_3=st.floats(0.0, 5.0),
            filter_time=st.floats(0.0, 3.0),
            b=st.floats(0.0, 1.5),
            c=st.floats(0.0, 1.5),
            windup_time=st.none() | st.floats(0.5, 50.0),
            action=st.sampled_from(["reverse", "direct"]),
            feedback=st.booleans(),
            feedforward=st.none()
            | st.builds(Feedforward, st.just("static"), gain=st.floats(-3.0, 3.0))
            | st.builds(Feedforward, st.just("inverse"), filter_time=st.floats(0.1, 5.0)),
            reference_filter=st.none() | st.builds(ReferenceFilter, st.floats(0.1, 5.0), st.integers(1, 4)),
            disturbance_feedforward=st.none() | _disturbance_feedforwards(),
            lead_lag=st.none() | st.builds(LeadLag, st.floats(0.0, 3.0), st.floats(0.05, 3.0)),
            measurement_filter=st.just(0.0) | st.floats(0.1, 3.0),
            notch=st.none() | st.builds(Notch, st.floats(0.1, 3.0), st.floats(0.0, 1.0), st.floats(0.1, 3.0)),
        ),
    )


def _disturbance_feedforwards() -> st.SearchStrategy[DisturbanceFeedforward]:
    """Draw paths of a measured disturbance: slow, fast and late ones."""
    return st.builds(
        DisturbanceFeedforward,
        st.sampled_from(["1.5/(3 s + 1)", "0.4 exp(-4.2 s)/(7 s + 1)^3", "2 exp(-1.3 s)"]),
        kind=st.sampled_from(["static", "dynamic"]),
        filter_time=st.floats(0.2, 3.0),
        resting=st.floats(-10.0, 10.0),
    )
