"""The blocks of the loop as a diagram shows them: what each is and is set to, how it comes and goes."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace

from tuner.model.beginnings import first_time
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Actuator, Sensor, Sheet
from tuner.session.fields import (
    first_lead_lag,
    first_measurement_filter,
    first_notch,
    first_reference_filter,
    with_disturbance_feedforward,
    with_feedforward,
    with_lead_lag,
    with_measurement_filter,
    with_notch,
    with_reference_filter,
)
from tuner.session.tunings import in_words


@dataclass(frozen=True, slots=True)
class Block:
    """One block of the loop.

    Parameters
    ----------
    key : str
        What it is called here.
    title, detail : str
        Its name, and what it is set to in a few figures.
    there : bool
        Whether the loop has it.
    page : str
        The page of editors that it is on.
    may_go : bool
        Whether it can be taken out, or put in where it is not there.
    """

    key: str
    title: str
    detail: str
    there: bool
    page: str
    may_go: bool = True

    @property
    def words(self) -> str:
        """What it is called within a sentence."""
        return self.key.replace("_", " ").replace("lead lag", "lead-lag")

    def sentence(self) -> str:
        """Say all of it, for who does not see the diagram."""
        if not self.there:
            return f"{self.words}, not there: add it"
        return f"{self.words}, {self.detail}: edit it" if self.detail else f"{self.words}: edit it"


def blocks(sheet: Sheet) -> Mapping[str, Block]:
    """Return every block that the loop has or may have, in the order of the signal, by its key."""
    found = (*_forward(sheet), *_around_the_plant(sheet), *_back(sheet))
    return {block.key: block for block in found}


def _forward(sheet: Sheet) -> tuple[Block, ...]:
    law, time = sheet.controller, sheet.loop.time_unit
    smooth, forward, against = law.reference_filter, law.feedforward, law.disturbance_feedforward
    told = "" if forward is None else forward.kind
    measured = against is not None and against.acts
    return (
        Block("feedforward", "Feedforward", told, forward is not None, "Feedforward"),
        Block(
            "reference_filter",
            "Filter",
            f"{smooth.time:.3g} {time}" if smooth else "",
            smooth is not None,
            "Feedforward",
        ),
        Block("law", "Control law", _short(in_words(law)), True, "Controller", may_go=False),
        Block(
            "disturbance_feedforward",
            "Feedforward",
            against.kind if against is not None and measured else "",
            measured,
            "Feedforward",
        ),
    )


def _around_the_plant(sheet: Sheet) -> tuple[Block, ...]:
    effort, time, path = sheet.loop.manipulated, sheet.loop.time_unit, sheet.controller.disturbance_feedforward
    lag, given = sheet.actuator.lag, [f"{end:.4g}" for end in (effort.low, effort.high) if end is not None]
    limits = " to ".join(given) if len(given) == 2 else ""
    return (
        Block("limits", "Limits", f"{limits} {effort.unit}".strip() if limits else "", True, "Loop", may_go=False),
        Block("actuator", "Actuator", f"{lag:.3g} {time}" if lag else "", bool(lag), "Actuator"),
        Block("path", "Path", "" if path is None else "of the disturbance", path is not None, "Feedforward"),
        Block("plant", "Plant", "", True, "Plant", may_go=False),
    )


def _back(sheet: Sheet) -> tuple[Block, ...]:
    law, time, lag = sheet.controller, sheet.loop.time_unit, sheet.sensor.lag
    smooth, led, notch = law.measurement_filter, law.lead_lag, law.notch
    ratio = f"{led.lead:.3g} to {led.lag:.3g} {time}" if led else ""
    cut = f"{notch.frequency:.3g} rad/{time}" if notch else ""
    return (
        Block("sensor", "Sensor", f"{lag:.3g} {time}" if lag else "", bool(lag), "Sensor"),
        Block("measurement_filter", "Filter", f"{smooth:.3g} {time}" if smooth else "", bool(smooth), "Filters"),
        Block("lead_lag", "Lead-lag", ratio, led is not None, "Filters"),
        Block("notch", "Notch", cut, notch is not None, "Filters"),
    )


def _short(words: str) -> str:
    return words.replace(", ", "  ")


def with_block(sheet: Sheet, key: str) -> Sheet:
    """Return a sheet with a block put in, its numbers to begin with.

    Raises
    ------
    KeyError
        When no block of that name can be put in.
    """
    return _ADDED[key](sheet)


def without_block(sheet: Sheet, key: str) -> Sheet:
    """Return a sheet with a block taken out.

    Raises
    ------
    KeyError
        When no block of that name can be taken out.
    """
    return _REMOVED[key](sheet)


def _with_disturbance(sheet: Sheet) -> Sheet:
    """Return a sheet with feedforward from a measured disturbance: along its path, else as if it met the effort."""
    present = sheet.controller.disturbance_feedforward
    if present is not None:
        return _with_kind(sheet, "dynamic")
    plant = sheet.plant
    lag = f"1 / ({first_time(sheet):g} s + 1)"
    return with_disturbance_feedforward(sheet, plant.expression if isinstance(plant, ExpressionPlant) else lag)


def _with_kind(sheet: Sheet, kind: str) -> Sheet:
    present = sheet.controller.disturbance_feedforward
    if present is None:
        return sheet
    changed = replace(present, kind=kind)  # type: ignore[arg-type] # one of the kinds
    return replace(sheet, controller=replace(sheet.controller, disturbance_feedforward=changed))


_ADDED: Mapping[str, Callable[[Sheet], Sheet]] = {
    "feedforward": lambda sheet: with_feedforward(sheet, "inverse"),
    "reference_filter": lambda sheet: with_reference_filter(sheet, first_reference_filter(sheet)),
    "disturbance_feedforward": _with_disturbance,
    "path": _with_disturbance,
    "actuator": lambda sheet: replace(sheet, actuator=Actuator(first_measurement_filter(sheet))),
    "sensor": lambda sheet: replace(sheet, sensor=replace(sheet.sensor, lag=first_measurement_filter(sheet))),
    "measurement_filter": lambda sheet: with_measurement_filter(sheet, first_measurement_filter(sheet)),
    "lead_lag": lambda sheet: with_lead_lag(sheet, first_lead_lag(sheet)),
    "notch": lambda sheet: with_notch(sheet, first_notch(sheet)),
}

_REMOVED: Mapping[str, Callable[[Sheet], Sheet]] = {
    "feedforward": lambda sheet: with_feedforward(sheet, "none"),
    "reference_filter": lambda sheet: with_reference_filter(sheet, None),
    "disturbance_feedforward": lambda sheet: _with_kind(sheet, "none"),
    "path": lambda sheet: with_disturbance_feedforward(sheet, ""),
    "actuator": lambda sheet: replace(sheet, actuator=Actuator()),
    "sensor": lambda sheet: replace(sheet, sensor=Sensor(0.0, sheet.sensor.noise, sheet.sensor.resolution)),
    "measurement_filter": lambda sheet: with_measurement_filter(sheet, 0.0),
    "lead_lag": lambda sheet: with_lead_lag(sheet, None),
    "notch": lambda sheet: with_notch(sheet, None),
}
