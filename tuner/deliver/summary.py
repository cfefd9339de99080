"""The same facts for the head of every delivered file: plain sentences, one a line."""

import unicodedata

from tuner.deliver.specification import CAUTIONS, Specification
from tuner.judge.assessment import Assessment, LimitResult
from tuner.model.loop import Manipulated, Signal
from tuner.model.measures import BY_NAME
from tuner.model.parameters import GAIN_KEYS, find
from tuner.model.sheet import Sheet
from tuner.model.units import unit_in

_PLAIN = {"°": "deg ", "µ": "u", "μ": "u", "Ω": "Ohm", "·": "*", "×": "x", "–": "-", "—": "-", "−": "-", "ß": "ss"}  # noqa: RUF001 - the signs that are replaced


def unmet(sheet: Sheet, assessment: Assessment) -> list[str]:
    """Return why a controller should not be accepted: the limits missed and the worst plants; empty when met."""
    if assessment.verdict == "met":
        return []
    missed = [_missed(sheet, limit) for limit in assessment.limits if not limit.met]
    return [*_unstable(assessment), *missed] or [f"the verdict is {assessment.verdict}"]


def banner(specification: Specification) -> list[str]:
    """Return the lines for the very top of a file that is delivered although its verdict is not met."""
    reasons = unmet(specification.sheet, specification.assessment)
    return ["NOT ACCEPTED. Delivered on request although the acceptance sheet is not met:", *reasons] if reasons else []


def head(specification: Specification) -> list[str]:
    """Return what the controller is, where it comes from, and the cautions."""
    sheet = specification.sheet
    dated = f" on {specification.date}" if specification.date else ""
    return [
        f"Loop: {sheet.loop.title}",
        f"Delivered by Trimwright {specification.version}{dated}",
        f"Tuning sheet: SHA-256 {specification.digest}",
        "",
        *_signals(sheet),
        f"Sample time: {sheet.controller.sample_time!r} {sheet.loop.time_unit}; step must run exactly that often",
        *_settings(specification),
        "",
        f"Verdict: {specification.assessment.verdict}, {_family(specification.assessment)}",
        *(_limit(sheet, limit) for limit in specification.assessment.limits),
        "",
        *(f"Caution: {caution}" for caution in CAUTIONS),
    ]


def printable(text: str) -> str:
    """Return text in one line, every character that does not print replaced by a space."""
    return "".join(sign if sign.isprintable() else " " for sign in text)


def plain(text: str) -> str:
    """Return text in printable ASCII that can close no comment and starts no trigraph."""
    respelt = "".join(_PLAIN.get(sign, sign) for sign in printable(text))
    apart = unicodedata.normalize("NFKD", respelt)
    kept = "".join(sign if sign.isascii() else "?" for sign in apart if not unicodedata.combining(sign))
    kept = kept.replace("\\", "/")  # first, since the slash that it leaves may close a comment
    for dangerous in ("*/", "/*", "??", "//"):
        while dangerous in kept:
            kept = kept.replace(dangerous, " ".join(dangerous))
    return kept


def _family(assessment: Assessment) -> str:
    return (
        f"over a family of {assessment.family_size} plants"
        if assessment.family_size > 1
        else "for the nominal plant alone"
    )


def _unstable(assessment: Assessment) -> list[str]:
    if assessment.verdict != "unstable":
        return []
    if assessment.instability is not None:
        told = assessment.instability.sentence.rstrip(".")
        return [told if told.lower().startswith("unstable") else f"unstable: {told}"]
    plants = [member.name for member in assessment.members if not member.stable]
    return [f"unstable, first with the plant {plants[0]}" if plants else "unstable"]


def _missed(sheet: Sheet, limit: LimitResult) -> str:
    return f"missed: {_limit(sheet, limit)}"


def _limit(sheet: Sheet, limit: LimitResult) -> str:
    measure = BY_NAME[limit.measure]
    symbol = unit_in(measure.unit, sheet.loop)
    bound = "at least" if measure.at_least else "at most"
    found = "does not exist" if limit.value is None else f"{limit.value:.4g} {symbol}".strip()
    verdict = "met" if limit.met else "not met"
    asked = f"{bound} {limit.limit:g} {symbol}".strip()
    return f"{measure.label} {found}, {asked} asked, {verdict}; worst plant: {limit.plant}"


def _signals(sheet: Sheet) -> list[str]:
    return [
        f"Measurement and reference: {_signal(sheet.loop.controlled, '')}",
        f"Effort: {_signal(sheet.loop.manipulated, sheet.loop.time_unit)}",
    ]


def _signal(signal: Signal, time_unit: str) -> str:
    symbol = f" {signal.unit}" if signal.unit else ""
    parts = [signal.name or "unnamed", _range(signal, symbol), f"at rest {signal.resting!r}{symbol}"]
    if isinstance(signal, Manipulated) and signal.rate is not None:
        parts.append(f"at most {signal.rate!r} {signal.unit or '1'}/{time_unit}")
    return ", ".join(parts)


def _range(signal: Signal, symbol: str) -> str:
    below = [] if signal.low is None else [f"from {signal.low!r}"]
    above = [] if signal.high is None else [f"to {signal.high!r}"]
    return " ".join(below + above) + symbol if below or above else "any value"


def _settings(specification: Specification) -> list[str]:
    controller = specification.sheet.controller
    given = [_setting(specification, key) for key in GAIN_KEYS[controller.form]]
    others = [_setting(specification, key) for key in ("filter_time", "b", "c", "windup_time")]
    gains = controller.parallel()
    parallel = f"kp {gains.kp!r}, ki {gains.ki!r}, kd {gains.kd!r}"
    return [
        f"Gains, {controller.form} form: {', '.join(given)}",
        *([f"The same, parallel form: {parallel}"] if controller.form != "parallel" else []),
        f"Further: {', '.join(others)}, action {controller.action}",
        *_blocks(specification),
    ]


def _setting(specification: Specification, key: str) -> str:
    value = specification.sheet.controller.value(key)
    if value is None:
        return f"{key} none"
    return f"{key} {value!r} {unit_in(find(f'controller.{key}').unit, specification.sheet.loop)}".strip()


def _blocks(specification: Specification) -> list[str]:
    controller, time = specification.sheet.controller, specification.sheet.loop.time_unit
    lines = []
    if controller.measurement_filter:
        lines.append(f"Measurement filter: {controller.measurement_filter!r} {time}")
    if controller.lead_lag is not None:
        lines.append(f"Lead-lag: lead {controller.lead_lag.lead!r} {time}, lag {controller.lead_lag.lag!r} {time}")
    if controller.notch is not None:
        cut = controller.notch
        lines.append(f"Notch: {cut.frequency!r} rad/{time}, depth {cut.depth!r}, width {cut.width!r}")
    if controller.reference_filter is not None:
        smooth = controller.reference_filter
        lines.append(f"Reference filter: {smooth.order} lag{'s' * (smooth.order > 1)} of {smooth.time!r} {time}")
    lines += _feedforwards(specification)
    if not controller.feedback:
        lines.append("Feedback is off: the effort is the feedforward alone; going to automatic is not bumpless")
    if controller.delay_samples:
        lines.append(f"Reckoned with {controller.delay_samples} samples of computing delay, which are the target's own")
    return lines


def _feedforwards(specification: Specification) -> list[str]:
    controller, time = specification.sheet.controller, specification.sheet.loop.time_unit
    forward, against = controller.feedforward, controller.disturbance_feedforward
    lines = []
    if forward is not None and forward.kind == "static":
        lines.append(f"Static feedforward: {forward.gain or 0.0!r} times the reference's distance from rest")
    elif forward is not None:
        lines.append(f"Inverse feedforward of the nominal plant, filter time {forward.filter_time!r} {time}")
    if against is not None and against.acts:
        name = against.name or "the measured disturbance"
        symbol = f" {against.unit}" if against.unit else ""
        lines.append(
            f"{against.kind.capitalize()} feedforward of {name}, at rest {against.resting!r}{symbol}; "
            f"its path to the output: {against.expression}"
        )
    return lines
