"""controller.json: every number of the controller with its unit and meaning, for other programs to read."""

import json
from collections.abc import Iterator
from dataclasses import asdict
from math import isfinite
from pathlib import Path
from typing import Any

from tuner.deliver import words
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import ON_WHAT, Proof, compared
from tuner.deliver.reference import Flags, Reference
from tuner.deliver.specification import CAUTIONS, Specification
from tuner.deliver.summary import banner
from tuner.deliver.target import Target
from tuner.deliver.vectors import Row
from tuner.errors import DeliveryError
from tuner.judge.assessment import LimitResult
from tuner.law.constants import NO_LEAD, NO_NOTCH, Constants, bake, lead_lag, notch
from tuner.model.loop import Signal
from tuner.model.measures import BY_NAME
from tuner.model.parameters import GAIN_KEYS, PARAMETERS, Parameter
from tuner.model.plant import Spread
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in
from tuner.simulate.feeding import Digital, Feeds

_FILE = "controller.json"


def write(specification: Specification) -> dict[str, str]:
    """Return the text of controller.json."""
    return {_FILE: json.dumps(_content(specification), indent=1, allow_nan=False) + "\n"}


def prove(folder: Path, work: Path, specification: Specification, recording: Recording) -> tuple[Proof, ...]:
    """Read the file back, make the constants anew from its gains and times, and run the law with them."""
    del work
    content = json.loads((folder / _FILE).read_text(encoding="utf-8"))
    made = _baked(content)
    if made != specification.constants or made != Constants(**_values(content["constants"])):
        raise DeliveryError(f"{_FILE}: its constants are not those of its gains")
    feeds = Feeds(**{key: entry and _digital(entry) for key, entry in content["filters"].items()})
    if feeds != specification.feeds:
        raise DeliveryError(f"{_FILE}: its filters are not those of its sheet")
    resting = content["resting_disturbance"]
    reference = Reference(made, feeds, resting_disturbance=resting, feedback=content["feedback"])
    how = f"read back, its constants made anew from its gains, and the law run with them {ON_WHAT}"
    return (compared(_FILE, how, recording, reference.run(recording.samples)),)


def _content(specification: Specification) -> dict[str, object]:
    sheet, assessment = specification.sheet, specification.assessment
    top = banner(specification)
    return ({"not_accepted": top} if top else {}) | {
        "title": sheet.loop.title,
        "made_by": f"Trimwright {specification.version}",
        "date": specification.date,
        "sheet_sha256": specification.digest,
        "sheet_sha256_of": "the data of the tuning sheet as JSON with sorted keys",
        "time_unit": sheet.loop.time_unit,
        "controlled": _signal(sheet.loop.controlled),
        "manipulated": _signal(sheet.loop.manipulated) | {"rate": sheet.loop.manipulated.rate},
        "sample_time": sheet.controller.sample_time,
        "form": sheet.controller.form,
        "feedback": sheet.controller.feedback,
        "gains": {key: sheet.controller.value(key) for key in GAIN_KEYS[sheet.controller.form]},
        "parallel_gains": asdict(sheet.controller.parallel()),
        "parameters": dict(_parameters(sheet)),
        "constants": dict(_constants(specification)),
        "filters": {key: one and asdict(one) for key, one in specification.feeds._asdict().items()},
        "filters_in": "x = z - 1: gain times the distance from rest, late by the delay in samples, then in turn "
        "(b0 x^2 + b1 x + b2)/(x^2 + a1 x + a2) for each section [b0, b1, b2, a1, a2]",
        "resting_disturbance": specification.resting_disturbance,
        "verdict": assessment.verdict,
        "family_size": assessment.family_size,
        "limits": [_limit(specification, limit) for limit in assessment.limits],
        "selftest": [_row(row) for row in specification.rows],
        "cautions": CAUTIONS,
    }


def _signal(signal: Signal) -> dict[str, object]:
    return {key: getattr(signal, key) for key in ("name", "unit", "low", "high", "resting")}


def _parameters(sheet: Sheet) -> Iterator[tuple[str, dict[str, object]]]:
    """Yield every number and word of the sheet that is not the plant's or a signal's."""
    foreign = {key for keys in GAIN_KEYS.values() for key in keys} - set(GAIN_KEYS[sheet.controller.form])
    for parameter in PARAMETERS:
        value = _value(sheet, parameter)
        if value is not None and parameter.name not in foreign:
            yield (
                parameter.path,
                {"value": value, "unit": unit_in(parameter.unit, sheet.loop), "sentence": parameter.sentence},
            )


def _value(sheet: Sheet, parameter: Parameter) -> object:
    if parameter.path == "controller.measurement_filter.time":
        return sheet.controller.measurement_filter or None
    if parameter.section == "controller":
        return sheet.controller.value(parameter.name) if _is_own(sheet, parameter) else None
    holder: object = sheet
    for name in filter(None, parameter.section.split(".")):
        holder = getattr(holder, name, None)
    value = getattr(holder, parameter.name, None) if holder is not sheet else None
    return [value.low, value.high] if isinstance(value, Spread) else value


def _is_own(sheet: Sheet, parameter: Parameter) -> bool:
    return hasattr(sheet.controller, parameter.name) or parameter.name in GAIN_KEYS[sheet.controller.form]


def _constants(specification: Specification) -> Iterator[tuple[str, dict[str, object]]]:
    for name, value in specification.constants._asdict().items():
        sentence, unit = words.CONSTANTS[name]
        yield (
            name,
            {"value": value, "unit": unit_in(unit, specification.sheet.loop), "sentence": f"{sentence}."},
        )


def _limit(specification: Specification, limit: LimitResult) -> dict[str, object]:
    measure = BY_NAME[limit.measure]
    value = limit.value if limit.value is None or isfinite(limit.value) else "inf"
    unit = unit_in(measure.unit, specification.sheet.loop)
    return asdict(limit) | {"value": value, "unit": unit, "bound": "at least" if measure.at_least else "at most"}


def _row(row: Row) -> dict[str, object]:
    told: dict[str, object] = {
        "before": row.sample.before.name.lower(),
        "spoilt": row.spoiled.name.lower(),
        "manual_effort": row.sample.value,
        "reference": row.sample.reference,
        "measurement": row.sample.measurement,
        "disturbance": row.sample.disturbance,
        "effort": row.outcome.effort,
    }
    return told | {flag.name.lower(): bool(row.outcome.flags & flag) for flag in Flags if flag.name}


def _values(table: dict[str, dict[str, Any]]) -> dict[str, Any]:
    return {name: entry["value"] for name, entry in table.items()}


def _digital(entry: dict[str, Any]) -> Digital:
    return Digital(entry["gain"], tuple(map(tuple, entry["sections"])), entry["delay"])


def _baked(content: dict[str, Any]) -> Constants:
    """Make the constants from what the file says, and nothing else."""
    values, on = _values(content["parameters"]), float(content["feedback"])
    gains, effort = content["parallel_gains"], content["manipulated"]
    cut = [
        values[f"controller.notch.{key}"]
        for key in ("frequency", "depth", "width")
        if "controller.notch.frequency" in values
    ]
    led = [values[f"controller.lead_lag.{key}"] for key in ("lead", "lag") if "controller.lead_lag.lag" in values]
    sample_time = content["sample_time"]
    return bake(
        sample_time=sample_time,
        **{key: on * gain for key, gain in gains.items()},
        filter_time=values["controller.filter_time"],
        windup_time=values.get("controller.windup_time") if content["feedback"] else None,
        b=values["controller.b"],
        c=values["controller.c"],
        action=1.0 if values["controller.action"] == "reverse" else -1.0,
        low=effort["low"],
        high=effort["high"],
        rate=effort["rate"],
        measurement_filter_time=values.get("controller.measurement_filter.time", 0.0),
        lead_section=lead_lag(sample_time, *led) if led else NO_LEAD,
        notch_section=notch(sample_time, *cut) if cut else NO_NOTCH,
        resting_measurement=content["controlled"]["resting"],
        resting_effort=effort["resting"],
    )


TARGET = Target("json", (_FILE,), write, prove)
