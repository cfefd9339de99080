"""What stands at the signals of the loop diagram: their names, their units, and what the assessment found there."""

from collections.abc import Mapping
from dataclasses import dataclass

from tuner.judge.assessment import Assessment
from tuner.judge.wording import minus, quantity, unit_of
from tuner.model.loop import Loop
from tuner.model.sheet import Sheet
from tuner.window.shown import Shown

_DIGITS = 3


@dataclass(frozen=True, slots=True)
class SignalWords:
    """What is written at one signal: its letter with its unit, its name, and what was found there, a line each."""

    letter: str
    name: str
    values: tuple[str, ...] = ()

    def sentence(self) -> str:
        """Return all of it for who does not see the diagram."""
        return ", ".join(part for part in (self.letter, self.name, *self.values) if part)


def signal_words(sheet: Sheet, shown: Shown | None) -> Mapping[str, SignalWords]:
    """Return the words at every signal; without values where no assessment is shown."""
    loop, measured = sheet.loop, sheet.controller.disturbance_feedforward
    found = shown.assessment if shown is not None else None
    unit = loop.manipulated.unit if measured is None else measured.unit
    name = "" if measured is None else measured.name
    return {
        "r": SignalWords(_lettered("r", loop.controlled.unit), "reference"),
        "u": SignalWords(_lettered("u", loop.manipulated.unit), loop.manipulated.name, _effort(found, loop)),
        "d": SignalWords(_lettered("d", unit), name or "disturbance", _disturbance(found, loop)),
        "y": SignalWords(_lettered("y", loop.controlled.unit), loop.controlled.name, _output(found, loop)),
    }


def _lettered(letter: str, unit: str) -> str:
    return f"{letter}, {unit}" if unit else letter


def _effort(found: Assessment | None, loop: Loop) -> tuple[str, ...]:
    if found is None:
        return ()
    share = found.worst.get("saturated_share")
    at_limit = "" if share is None or share.value is None else f"at a limit {100.0 * share.value:.3g} % of the time"
    return tuple(part for part in (_worst("peak_effort", "peak", found, loop), at_limit) if part)


def _disturbance(found: Assessment | None, loop: Loop) -> tuple[str, ...]:
    return () if found is None else (_worst("disturbance_peak", "moves y by", found, loop),)


def _output(found: Assessment | None, loop: Loop) -> tuple[str, ...]:
    return () if found is None else (_worst("overshoot", "overshoot", found, loop),)


def _worst(measure: str, words: str, found: Assessment, loop: Loop) -> str:
    """Return the nominal value of a measure, and the worst one of the family where that is another."""
    unit, own, worst = unit_of(measure, loop), found.nominal.measures.get(measure), found.worst.get(measure)
    if own is None:
        return ""
    if worst is None or worst.value is None or worst.value == own:
        return f"{words} {minus(quantity(own, unit, _DIGITS))}"
    most = minus(quantity(worst.value, unit, _DIGITS))
    return f"{words} {minus(quantity(own, '', _DIGITS))}, worst {most}"
