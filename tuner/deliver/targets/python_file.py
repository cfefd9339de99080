"""controller.py: one class in one file, without imports."""

import sys
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path
from textwrap import fill as wrap

from tuner.deliver import words
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import ON_WHAT, Proof, compared, not_run, run
from tuner.deliver.specification import Specification
from tuner.deliver.stages import Stage, body, stages, start
from tuner.deliver.summary import banner, head, printable
from tuner.deliver.target import Target, fill
from tuner.deliver.vectors import Row
from tuner.law import pid, print_python, translate
from tuner.law.translate import Statement
from tuner.model.units import unit_in

_FILE = "controller.py"
_SHIFTED = ("resting_measurement", "resting_effort")
_INDENT = " " * 8


def write(specification: Specification) -> dict[str, str]:
    """Return the text of controller.py."""
    law = translate.read(pid.law, (*pid.INPUTS, *pid.PARAMETERS))
    indent, found = _INDENT, stages(specification)
    feedback = specification.sheet.controller.feedback
    kept = [name for stage in found for name in stage.memories]
    disturbed = specification.feeds.disturbance is not None
    text = fill(
        _FILE,
        head=_head(specification),
        sample_time=repr(specification.sheet.controller.sample_time),
        resting_measurement=repr(specification.constants.resting_measurement),
        resting_effort=repr(specification.constants.resting_effort),
        constants=_constants(specification),
        slots="\n".join(f'{indent}"_{name}",' for name in (*pid.STATE, *kept, *_more_slots(specification))),
        reset="\n".join([f"{indent}self._{name} = 0.0" for name in (*pid.STATE, *kept)] + _more_reset(specification)),
        resting_disturbance=_RESTING.format(specification.resting_disturbance) if disturbed else "",
        more_resting=", resting_disturbance=RESTING_DISTURBANCE" if disturbed else "",
        keep_resting=f"{indent}self._resting_disturbance = float(resting_disturbance)\n" if disturbed else "",
        more_given=", disturbance=RESTING_DISTURBANCE" if disturbed else "",
        more_taken=", disturbance" if disturbed else "",
        take_disturbance=f"{indent}disturbance = float(disturbance)\n" if disturbed else "",
        spoil_disturbance=_SPOIL if disturbed else "",
        spoilings=", 5 disturbance not a number" if disturbed else "",
        columns=", disturbance" if disturbed else "",
        stages="".join(_stage(stage) for stage in found),
        fed="\n".join(_fed(found)),
        bump="; the first sample keeps the effort as it is" if feedback else ", which is not bumpless without feedback",
        set_auto=f"{indent}    self._mode = 2.0" if feedback else _plain_auto(indent + "    "),
        load="\n".join(f"{indent}{name} = self._{name}" for name in pid.STATE),
        law="\n".join(print_python.statements(law.body, _names(), indent)),
        store="\n".join(f"{indent}self._{name} = {name}" for name in pid.STATE),
        rows="\n".join(f"    {_row(row, disturbed=disturbed)}," for row in specification.rows),
    )
    return {_FILE: text}


def prove(folder: Path, work: Path, specification: Specification, recording: Recording) -> tuple[Proof, ...]:
    """Run controller.py in a bare interpreter: isolated, without site packages."""
    if not sys.executable:
        return (not_run(_FILE, "no Python interpreter was found"),)
    harness = work / "harness.py"
    disturbed = specification.feeds.disturbance is not None
    harness.write_text(fill("harness.py", more=", disturbance" if disturbed else ""), encoding="utf-8")
    found = run([sys.executable, "-I", "-S", harness, folder / _FILE], recording, work)
    version = ".".join(str(part) for part in sys.version_info[:3])
    how = f"run by Python {version} without packages, its self-test too, {ON_WHAT}"
    return (compared(_FILE, how, recording, found),)


def _head(specification: Specification) -> str:
    """Return comment lines; the first, and the second when there is a banner, are words of ours alone.

    A title in the first two lines could pass for a declaration of the file's encoding.
    """
    top = banner(specification)
    lines = [*top, ""] if top else []
    lines += ["A controller in one file, without imports.", "", *head(specification)]
    return "\n".join(_comment(printable(line)) for line in lines)


def _comment(line: str) -> str:
    return wrap(line, 110, initial_indent="# ", subsequent_indent="#   ") if line.strip() else "#"


def _constants(specification: Specification) -> str:
    loop = specification.sheet.loop
    lines = []
    for name, value in specification.constants._asdict().items():
        if name not in _SHIFTED:
            sentence, unit = words.CONSTANTS[name]
            symbol = printable(unit_in(unit, loop))
            lines.append(f"{name.upper()} = {value!r}  # {sentence}{f' [{symbol}]' if symbol else ''}")
    return "\n".join(lines)


def _names() -> dict[str, str]:
    return {name: name.upper() for name in pid.PARAMETERS if name not in _SHIFTED}


def _plain_auto(indent: str) -> str:
    return f"{indent}self._mode = 0.0\n{indent}self._integral = 0.0"


class _Dialect:
    """How Python writes a stage."""

    number = staticmethod(repr)

    @staticmethod
    def memory(name: str) -> str:
        return f"self._{name}"

    @staticmethod
    def note(text: str) -> str:
        return f"{_INDENT}# {text}"

    @staticmethod
    def block(nodes: Sequence[Statement], names: Mapping[str, str]) -> Iterator[str]:
        yield from print_python.statements(nodes, names, _INDENT)

    @staticmethod
    def assigned(name: str, value: str) -> str:
        return f"{_INDENT}{name} = {value}"


_RESTING = "RESTING_DISTURBANCE = {!r}\n"
_SPOIL = "        elif spoilt == 5:\n            disturbance = NAN\n"


def _stage(stage: Stage) -> str:
    """Return the method of one filter."""
    lines = ["", f"    def _{stage.name}(self, given):", f'{_INDENT}"""{stage.sentence}."""']
    if stage.digital.delay:
        lines += [
            f"{_INDENT}# What is not finite spoils this sample; late comes the last good value in its place.",
            f"{_INDENT}spoilt = given - given",
            f"{_INDENT}self._late.append(given if spoilt == 0.0 else self._late[-1])",
            f"{_INDENT}given = self._late.pop(0)",
        ]
    resting = "resting_measurement" if stage.given == "reference" else "resting_disturbance"
    lines += [
        f"{_INDENT}{resting} = self._{resting}",
        f"{_INDENT}value = {start(stage, _Dialect(), 'given')}",
        *body(stage, _Dialect()),
        f"{_INDENT}return value{' + spoilt' if stage.digital.delay else ''}",
        "",
    ]
    return "\n".join(lines)


def _fed(found: Sequence[Stage]) -> Iterator[str]:
    """Yield what the law is fed: the sum of the feedforwards, and the filtered reference where there is a filter."""
    efforts = [f"self._{stage.name}({stage.given})" for stage in found if stage.name != "asked_for"]
    yield f"{_INDENT}feedforward = {' + '.join(efforts) or '0.0'}"
    if any(stage.name == "asked_for" for stage in found):
        yield f"{_INDENT}reference = self._asked_for(reference) + resting_measurement"


def _more_slots(specification: Specification) -> list[str]:
    late = specification.feeds.disturbance
    return [] if late is None else ["resting_disturbance", *(["late"] if late.delay else [])]


def _more_reset(specification: Specification) -> list[str]:
    late = specification.feeds.disturbance
    return [f"{_INDENT}self._late = [self._resting_disturbance] * {late.delay}"] if late and late.delay else []


def _row(row: Row, *, disturbed: bool) -> str:
    before, *numbers, disturbance = row.sample
    given = (*numbers, disturbance) if disturbed else tuple(numbers)
    return repr((int(before), int(row.spoiled), *given, *row.outcome))


TARGET = Target("python", (_FILE,), write, prove)
