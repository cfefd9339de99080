"""The feedforward of a comparison: the sheet's own, or one that is chosen for it, and what is said of that."""

from dataclasses import dataclass, replace

from tuner.errors import LoopError
from tuner.judge.wording import quantity
from tuner.model.beginnings import first_time
from tuner.model.controller import Feedforward
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in
from tuner.simulate.algebra import series
from tuner.simulate.batch import nominal
from tuner.simulate.feedforward import inverse
from tuner.simulate.linear import Linear, lag


@dataclass(frozen=True, slots=True)
class Chosen:
    """A feedforward of the reference, and a sentence on where it comes from; None with the reason why there is none."""

    feedforward: Feedforward | None
    sentence: str


def choose_feedforward(sheet: Sheet) -> Chosen:
    """Return the feedforward of a sheet; one is chosen where it has none.

    That is the inverse of the nominal plant with its actuator; where that does not exist the static gain 1/G(0);
    where the plant has no such gain either there is none.
    """
    own = sheet.controller.feedforward
    if own is not None:
        return Chosen(own, f"Feedforward as in the sheet: {in_words(own, sheet)}.")
    process = _process(sheet)
    chosen, why = None, ""
    try:
        chosen = _inverse(sheet, process)
    except LoopError as refusal:
        chosen, why = _static(process), str(refusal)
    if chosen is None:
        return Chosen(None, f"There is no feedforward to compare with: {why}.")
    refused = f", for {why}" if why else ""
    return Chosen(chosen, f"The sheet has no feedforward; this is {in_words(chosen, sheet)}{refused}.")


def in_words(feedforward: Feedforward, sheet: Sheet) -> str:
    """Return what a feedforward of the reference is, in words with units."""
    if feedforward.kind == "static":
        gain = quantity(feedforward.gain or 0.0, unit_in("{u}/{y}", sheet.loop))
        return f"a static gain of {gain}"
    time = feedforward.filter_time or 0.0
    lags = f" with lags of {quantity(time, sheet.loop.time_unit)}" if time else ""
    return f"the inverse of the nominal plant{lags}"


def with_feedforward(sheet: Sheet, feedforward: Feedforward | None) -> Sheet:
    """Return a sheet with another feedforward of the reference, or without one."""
    return replace(sheet, controller=replace(sheet.controller, feedforward=feedforward))


def _process(sheet: Sheet) -> Linear:
    return series(lag(sheet.actuator.lag), nominal(sheet).plant)


def _inverse(sheet: Sheet, process: Linear) -> Feedforward:
    """Return the inverse behind lags to begin with.

    Raises
    ------
    LoopError
        When the process has none.
    """
    time = first_time(sheet)
    inverse(process, time)
    return Feedforward("inverse", filter_time=time)


def static_gain(sheet: Sheet) -> float:
    """Return the effort for each unit of reference that brings the nominal output there; 0 where none does.

    Raises
    ------
    LoopError
        When the plant cannot be computed.
    """
    gain = _process(sheet).static_gain()
    return 1.0 / gain if gain else 0.0


def _static(process: Linear) -> Feedforward | None:
    """Return the gain that brings the nominal output to its reference; None where no steady effort does."""
    gain = process.static_gain()
    return Feedforward("static", gain=1.0 / gain) if gain else None
