"""Assessments in closed form, of a loop that answers as a second-order system whose damping falls as kp rises.

They stand in for the simulation where a test is about the window alone.
"""

from collections.abc import Callable
from dataclasses import dataclass, replace
from math import exp, log, pi, sqrt

import numpy as np

from tuner.errors import LoopError
from tuner.judge.assessment import Assessment, Instability, LimitResult, MemberResult, WorstCase
from tuner.judge.overlay import Overlay, overlay
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter, spread_percent
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.traces import Array, Trace, Traces

Judge = Callable[[Sheet, int], Assessment]
"""Assesses a sheet over a family of so many plants."""

EDGE = 4.0
"""The kp from which the made-up loop runs away."""


def sheet(kp: float = 2.0, **changes: object) -> Sheet:
    """Return a made-up sheet; kp decides how the loop behaves, above `EDGE` it is unstable, 0 cannot be computed."""
    made = Sheet(
        loop=Loop(
            "Ink drier",
            "s",
            Signal("Web temperature", "degC", 0.0, 150.0, 72.0),
            Manipulated("Heater power", "%", 0.0, 100.0, 40.0, rate=8.0),
        ),
        plant=ExpressionPlant(
            "gain / (lag s + 1)^2",
            (PlantParameter("gain", 0.9, "degC/%", spread_percent(0.9, 15.0)), PlantParameter("lag", 20.0, "s")),
        ),
        controller=Controller(sample_time=0.5, gain_1=kp, gain_2=0.05, gain_3=4.0, filter_time=1.0, windup_time=12.0),
        trial=Trial(240.0, 5.0, 10.0),
        limits=(("overshoot", 8.0), ("settling_time", 90.0), ("max_sensitivity", 1.8), ("damping", 0.5)),
    )
    return replace(made, **changes)  # type: ignore[arg-type]  # the caller names fields of the sheet


def judge(asked: Sheet, size: int = 25) -> Assessment:
    """Return the assessment of a made-up sheet over a family of so many plants."""
    return _judged_over(asked, _family(asked, size))


def _family(asked: Sheet, size: int) -> tuple[MemberResult, ...]:
    if asked.controller.gain_1 == 0.0:
        raise LoopError("the loop has no gain: kp is 0")
    return tuple(_member(asked, share) for share in (0.0, *np.linspace(-0.15, 0.15, size - 1)))


def _judged_over(asked: Sheet, members: tuple[MemberResult, ...]) -> Assessment:
    limits = tuple(_judged(members, name, limit) for name, limit in asked.limits)
    unstable = next((member for member in members if not member.stable), None)
    met = all(limit.met for limit in limits)
    return Assessment(
        title=asked.loop.title,
        verdict="unstable" if unstable else "met" if met else "missed",
        members=members,
        worst={name: _worst(members, name) for name in members[0].measures},
        limits=limits,
        notes=("delay_margin: not looked at in this made-up loop.",),
        instability=_instability(unstable) if unstable else None,
    )


@dataclass(frozen=True)
class Sketched:
    """A made-up sheet that is judged when it is asked to be."""

    judge: Judge
    asked: Sheet
    size: int

    def outlined(self, plant: str = "") -> Assessment:
        """Judge by the nominal plant and the named one; the others have their curves."""
        whole = self.judge(self.asked, self.size)
        seen = tuple(one for one in whole.members if one.name in ("nominal", plant))
        bare = tuple(
            one if one in seen else replace(one, measures={"damping": one.measures["damping"]}) for one in whole.members
        )
        judged = _judged_over(self.asked, seen)
        return replace(judged, members=bare, worst={**judged.worst, "damping": whole.worst["damping"]})

    def judged(self) -> Assessment:
        """Judge the whole family."""
        return self.judge(self.asked, self.size)


def sketching(judge: Judge) -> Callable[[Sheet, int], Sketched]:
    """Return the first half of a road to an assessment, for which a whole one is given."""
    return lambda asked, size: Sketched(judge, asked, size)


def sketch(asked: Sheet, size: int = 25) -> Sketched:
    """Return half of the assessment of a made-up sheet."""
    return Sketched(judge, asked, size)


def glance(asked: Sheet, plant: str = "") -> Assessment:
    """Return the assessment of the nominal plant, and of the named one if the family has it."""
    return _judged_over(asked, tuple(one for one in _family(asked, 25) if one.name in ("nominal", plant)))


def draw(asked: Sheet, assessment: Assessment) -> Overlay:
    """Return the overlay, made by the program's own geometry."""
    return overlay(asked, assessment)


def _member(asked: Sheet, share: float) -> MemberResult:
    gain = asked.controller.gain_1 * (1.0 + share)
    damping, natural = 1.2 * (1.0 - gain / EDGE), 0.06 * sqrt(gain)
    poles = np.array([complex(-damping * natural, natural * sqrt(max(1.0 - damping**2, 0.0)))])
    poles = np.concatenate((poles, poles.conj(), [-0.8]))
    name = "nominal" if share == 0.0 else f"gain {0.9 * (1.0 + share):.4g}"
    stable = damping > 0.0
    final = asked.trial.reference if stable else None
    return MemberResult(
        name,
        stable,
        _measures(damping, natural),
        poles,
        _traces(asked, damping, natural),
        final_reference=final,
        final_disturbance=0.0,
        drift=f"gain {100.0 * share:+.3g} %".replace("-", "\u2212") if share else "",
    )


def _measures(damping: float, natural: float) -> dict[str, float | None]:
    stable, rings = damping > 0.0, 0.0 < damping < 1.0
    over = 100.0 * exp(-pi * damping / sqrt(1.0 - damping**2)) if rings else 0.0
    settles = log(50.0) / (min(damping, 1.0) * natural) if stable else None
    return {
        "overshoot": over if stable else None,
        "settling_time": settles,
        "max_sensitivity": 1.0 + 0.4 / damping if stable else None,
        "damping": min(damping, 1.0),
        "disturbance_peak": 1.0,
        "gain_margin": None,
    }


def _traces(asked: Sheet, damping: float, natural: float) -> Traces:
    t = np.linspace(0.0, asked.trial.duration, 1921)
    answer = _step(t, damping, natural)
    r = np.full_like(t, asked.trial.reference)
    kick = np.clip(8.0 * np.exp(-0.05 * t) * (1.2 - answer), -200.0, 200.0) + 6.0 * answer
    bump = 0.3 * np.gradient(answer, t) / natural * asked.trial.disturbance
    return Traces(_trace(asked, t, r, 5.0 * answer, kick), _trace(asked, t, 0.0 * r, bump, -10.0 * answer))


def _step(t: Array, damping: float, natural: float) -> Array:
    """Return the unit step answer of natural^2 / (s^2 + 2 damping natural s + natural^2), damping held within 1."""
    held = min(max(damping, -0.999), 0.999)
    rate, ring = held * natural, natural * sqrt(1.0 - held**2)
    return 1.0 - np.exp(-rate * t) * (np.cos(ring * t) + rate / ring * np.sin(ring * t))


def _trace(asked: Sheet, t: Array, r: Array, y: Array, u: Array) -> Trace:
    signal = asked.loop.manipulated
    high = (signal.high or 0.0) - signal.resting
    held = np.clip(u, -signal.resting, high)
    index = np.arange(0, t.size, 4)
    return Trace(t, r, y, held, index, (held != u)[index], bool(np.all(held == u)))


def _judged(members: tuple[MemberResult, ...], name: str, limit: float) -> LimitResult:
    worst = _worst(members, name)
    least = name in ("damping", "gain_margin")
    met = worst.value is not None and (worst.value >= limit if least else worst.value <= limit)
    return LimitResult(name, limit, worst.value, worst.plant, met)


def _worst(members: tuple[MemberResult, ...], name: str) -> WorstCase:
    missing = next((member for member in members if member.measures[name] is None), None)
    if missing is not None:
        return WorstCase(None, missing.name)
    pick = min if name in ("damping", "gain_margin") else max
    member = pick(members, key=lambda one: one.measures[name] or 0.0)
    return WorstCase(member.measures[name], member.name)


def _instability(member: MemberResult) -> Instability:
    pole = member.poles[0]
    doubling = log(2.0) / pole.real if pole.real > 0.0 else float("inf")
    sentence = (
        f"At {member.name} the loop rings with growing swings: they double every {doubling:.3g} s, "
        f"at {pole.imag:.3g} rad/s; kp at {EDGE / 1.15:.3g} or less brings it back."
    )
    return Instability(member.name, pole.real, doubling, pole.imag, "kp", EDGE / 1.15, sentence)
