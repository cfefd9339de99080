"""What must agree between the keys of a sheet, beyond what its schema says."""

from collections.abc import Callable, Iterator
from math import pi
from typing import Any, Final

from tuner.errors import Fault
from tuner.files import words
from tuner.files.named_parameters import read_spread
from tuner.files.schema import NONE
from tuner.model.parameters import GAIN_KEYS

Table = dict[str, Any]

MOST_SAMPLES: Final = 5_000_000
"""Samples that a trial may have."""


def check_all(written: Table, sound: Table) -> list[Fault]:
    """Tell of everything in a sheet that does not agree; a key that the schema refused is as good as absent."""
    return [fault for check in _CHECKS for fault in check(sound)] + list(_foreign_gains(written, sound))


def table(sheet: Table, path: str) -> Table:
    """Return the table at a dotted path, empty when there is none."""
    found: Any = sheet
    for name in path.split("."):
        found = found.get(name, {}) if isinstance(found, dict) else {}
    return found if isinstance(found, dict) else {}


def _ranges(sheet: Table) -> Iterator[Fault]:
    for key in ("loop.controlled", "loop.manipulated"):
        signal = table(sheet, key)
        low, high, resting = signal.get("low"), signal.get("high"), signal.get("resting", 0.0)
        if low is not None and high is not None and low >= high:
            yield Fault(f"{key}.low", f"a number below {key}.high, {words.number(high)}", words.number(low))
        elif low is not None and resting < low:
            yield Fault(f"{key}.resting", f"a number of at least {key}.low, {words.number(low)}", _resting(signal))
        elif high is not None and resting > high:
            yield Fault(f"{key}.resting", f"a number of at most {key}.high, {words.number(high)}", _resting(signal))


def _spreads_of_lags(sheet: Table) -> Iterator[Fault]:
    """Tell of spreads of actuator and sensor that do not go with their lag."""
    for block in ("actuator", "sensor"):
        here = table(sheet, block)
        if "spread" not in here:
            continue
        if not here.get("lag"):
            yield Fault(f"{block}.spread", f"a lag above 0 in [{block}] beside it", "none")
            continue
        found: list[Fault] = []
        spread = read_spread(f"{block}.spread", float(here["lag"]), here["spread"], found)
        if not found and spread.low <= 0.0:
            found.append(
                Fault(f"{block}.spread", "a range of lags above 0", f"{words.number(spread.low)} at its lower end")
            )
        yield from found


def _resting(signal: Table) -> str:
    return words.number(signal["resting"]) if "resting" in signal else "nothing, which means 0"


def _foreign_gains(written: Table, sound: Table) -> Iterator[Fault]:
    """Tell of gains that belong to another form than the controller's; silent while the form itself is wrong."""
    form: str = table(sound, "controller").get("form", "parallel")
    for path in ("controller", "controller.as_found"):
        here = table(written, path)
        form = str(table(sound, path).get("form", form))
        if "form" in here and here["form"] != form:
            return
        for key in here:
            if any(key in keys for keys in GAIN_KEYS.values()) and key not in GAIN_KEYS[form]:
                owners = [owner for owner, keys in GAIN_KEYS.items() if key in keys]
                whose = f"a gain of the {' and '.join(owners)} form{'s' if len(owners) > 1 else ''}"
                yield Fault(f"{path}.{key}", f"the gains of the {form} form: {', '.join(GAIN_KEYS[form])}", whose)


def _feedforward(sheet: Table) -> Iterator[Fault]:
    for path in ("controller.feedforward", "controller.as_found.feedforward"):
        yield from _feedforward_at(path, table(sheet, path))


def _feedforward_at(path: str, block: Table) -> Iterator[Fault]:
    needed = {"static": "gain", "inverse": "filter_time"}
    for kind, key in needed.items():
        there = key in block
        if block.get("kind") == kind and not there:
            yield Fault(f"{path}.{key}", f'a number, for kind = "{kind}"', "nothing")
        elif block.get("kind") not in (kind, None) and there:
            only = needed[block["kind"]]
            yield Fault(f"{path}.{key}", f'{only} alone beside kind = "{block["kind"]}"', f"{key}")


def _notch(sheet: Table) -> Iterator[Fault]:
    """Tell of notches that a sampled controller cannot have; what as found leaves out is the controller's."""
    period, frequency = 0.0, 0.0
    for path in ("controller", "controller.as_found"):
        here = table(sheet, path)
        own = table(here, "notch").get("frequency")
        period = here.get("sample_time", period)
        frequency = 0.0 if here.get("notch") == NONE else frequency if own is None else own
        if frequency * period >= pi and here.keys() & {"sample_time", "notch"}:
            top = f"a frequency below pi / sample_time, {pi / period:.4g}"
            inherited = f'{top}, or notch = "{NONE}"', f"the controller's, {words.number(frequency)}"
            yield Fault(f"{path}.notch.frequency", *(inherited if own is None else (top, words.number(frequency))))


def _seconds(sheet: Table) -> Iterator[Fault]:
    unit = table(sheet, "loop").get("time_unit", "s")
    if "physics" in table(sheet, "plant") and unit != "s":
        yield Fault("loop.time_unit", '"s", the time unit of physical models', f"the text {words.quoted(unit)}")


def _samples(sheet: Table) -> Iterator[Fault]:
    duration = table(sheet, "trial").get("duration")
    for path in ("controller", "controller.as_found"):
        period = table(sheet, path).get("sample_time", 0.0)
        if duration is None or not period:
            continue
        if period > duration:
            yield Fault(
                f"{path}.sample_time", f"at most trial.duration, {words.number(duration)}", words.number(period)
            )
        elif duration > MOST_SAMPLES * period:
            most = f"at most {MOST_SAMPLES:,} samples of {path}.sample_time, {words.number(period)}"
            yield Fault("trial.duration", most, f"{duration / period:,.0f}")


_CHECKS: Final[tuple[Callable[[Table], Iterator[Fault]], ...]] = (
    _ranges,
    _spreads_of_lags,
    _seconds,
    _feedforward,
    _notch,
    _samples,
)
