"""What is said beside plots over frequency: the loop at one frequency, worst margins, and what is missed."""

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from tuner.judge.wording import minus, quantity, shortfall, unit_of
from tuner.model.family import NOMINAL
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.window.plots.words import met_words
from tuner.window.shown import Shown

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

NO_GAIN = "There is no loop gain to show: all gains of the feedback are zero."
OFF = "feedback off, so no margins: curves as if it were closed"


def loop_words(curves: "FrequencyCurves", index: int, sheet: Sheet) -> str:
    """Return the loop at one frequency in words: size and phase of its gain, both sensitivities."""
    phase = float(np.degrees(np.angle(curves.gain[0, index])))
    phase -= 360.0 * (phase > 0.0)
    size, s, t = (float(row[0, index]) for row in (curves.decibels, curves.sensitivity, curves.complementary))
    w = frequency_words(float(curves.w[index]), sheet)
    return minus(f"{w}: |L| {size:.1f} dB, {phase:.0f}°, |S| {s:.3g}, |T| {t:.3g}")


def frequency_words(w: float, sheet: Sheet) -> str:
    """Return a frequency in words."""
    return quantity(w, f"rad/{sheet.loop.time_unit}", 3)


def worst_plant(shown: Shown, measures: tuple[str, ...]) -> tuple[str, str] | None:
    """Return the one of some measures that counts most, and the name of the plant that has its worst value.

    That is the limit that is missed by most, or comes nearest to it; without a limit the first of the measures.
    """
    limits = [limit for limit in shown.assessment.limits if limit.measure in measures]
    if limits:
        limit = max(limits, key=shortfall)
        return limit.measure, limit.plant
    worst = shown.assessment.worst.get(measures[0])
    return None if worst is None or worst.value is None else (measures[0], worst.plant)


def worst_name(shown: Shown, measures: tuple[str, ...], measure: str, plant: str) -> str:
    """Return what the curve of the worst plant is called; which measure is meant, where there is a choice."""
    whose = f" {BY_NAME[measure].label}" if len(measures) > 1 else ""
    return minus(f"worst{whose}: {shown.assessment.drift_of(plant)}")


def worst_words(shown: Shown, measures: tuple[str, ...]) -> str:
    """Return the worst of some measures over the family, and the plants that have them."""
    said = [found for name in measures if (found := _worst(shown, name))]
    return minus("; ".join(("", *said)))


def _worst(shown: Shown, name: str) -> str:
    worst = shown.assessment.worst.get(name)
    if worst is None or worst.value is None:
        return ""
    where = "the nominal plant" if worst.plant == NOMINAL else shown.assessment.drift_of(worst.plant)
    return f"worst {BY_NAME[name].label} {_value(worst.value, unit_of(name, shown.sheet.loop))} at {where}"


def _value(value: float, unit: str) -> str:
    if value == inf:
        return "unbounded"
    return f"{value:.3g}°" if unit == "deg" else quantity(value, unit, 3)


def missed_of(shown: Shown, measures: tuple[str, ...]) -> tuple[str, bool]:
    """Return the words on the limits of some measures or why there are no margins, and whether something is amiss."""
    missed = [one.sentence for one in shown.overlay.callouts if one.measure in measures]
    if not shown.sheet.controller.feedback:
        return "; ".join((OFF, *missed)), bool(missed)
    if missed:
        return "; ".join(missed), True
    members = shown.assessment.members
    unstable = sum(not member.stable for member in members)
    if unstable:
        return f"no margins where the loop is unstable: {unstable} of {len(members)} plants", True
    return met_words(sum(limit.measure in measures for limit in shown.assessment.limits)), False
