"""Answers with curves over frequency, for the tests of the page."""

from collections.abc import Mapping
from dataclasses import replace
from functools import cache

from tuner.assess import glance, sketched
from tuner.files.sheet import read
from tuner.judge.overlay import overlay
from tuner.model.sheet import Sheet
from tuner.places import sample_plants
from tuner.session.tunings import KeptTuning
from tuner.simulate.curves import FrequencyCurves
from tuner.window.shown import Request, Shown
from tuner.window.worker import Assessing


def sample(name: str = "heater") -> Sheet:
    """Return a sample: the heater has dead time, is sampled, and has limits on margins."""
    return read(sample_plants() / f"{name}.toml")


def limited(sheet: Sheet, limits: Mapping[str, float]) -> Sheet:
    """Return a sheet with these limits alone."""
    return replace(sheet, limits=tuple(limits.items()))


def with_feedback(sheet: Sheet, *, on: bool) -> Sheet:
    """Return a sheet with its feedback on or off."""
    return replace(sheet, controller=replace(sheet.controller, feedback=on))


@cache
def answer(
    sheet: Sheet | None = None,
    *,
    whole: bool = True,
    looked_at: str = "",
    family_view: str = "both",
    kept: tuple[KeptTuning, ...] = (),
) -> Shown:
    """Return the answer on a sheet, the heater's as a rule, with its curves over frequency, as the plots show it."""
    assessing = Assessing(sketched, glance, overlay)
    request = Request(1, sheet or sample(), kept, frequency=True, looked_at=looked_at, family_view=family_view)  # type: ignore[arg-type] # a view
    return (assessing.whole(request) if whole else assessing.nominal(request)).as_seen()


def curves_in(shown: Shown) -> FrequencyCurves:
    """Return the curves of an answer."""
    assert shown.frequency is not None
    return shown.frequency


def slower() -> KeptTuning:
    """Return a tuning of the heater to compare with: half its proportional gain."""
    law = sample().controller
    return KeptTuning("A", "slower", replace(law, gain_1=0.5 * law.gain_1, as_found=None))
