"""controller.py: one class in one file, without imports."""

import sys
from pathlib import Path
from textwrap import fill as wrap

from tuner.deliver import words
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import ON_WHAT, Proof, compared, not_run, run
from tuner.deliver.specification import Specification
from tuner.deliver.summary import banner, head, printable
from tuner.deliver.target import Target, fill, template
from tuner.deliver.vectors import Row
from tuner.law import feedforward, pid, print_python, translate
from tuner.law.expressions import bare
from tuner.model.units import unit_in

_FILE = "controller.py"
_SHIFTED = ("resting_measurement", "resting_effort")


def write(specification: Specification) -> dict[str, str]:
    """Return the text of controller.py."""
    law = translate.read(pid.law, (*pid.INPUTS, *pid.PARAMETERS))
    indent = " " * 8
    feedback = specification.sheet.controller.feedback
    text = fill(
        _FILE,
        head=_head(specification),
        sample_time=repr(specification.sheet.controller.sample_time),
        resting_measurement=repr(specification.constants.resting_measurement),
        resting_effort=repr(specification.constants.resting_effort),
        constants=_constants(specification),
        slots="\n".join(f'{indent}"_{name}",' for name in pid.STATE),
        reset="\n".join(f"{indent}self._{name} = 0.0" for name in pid.STATE),
        bump="; the first sample keeps the effort as it is" if feedback else ", which is not bumpless without feedback",
        set_auto=f"{indent}    self._mode = 2.0" if feedback else _plain_auto(indent + "    "),
        load="\n".join(f"{indent}{name} = self._{name}" for name in pid.STATE),
        feedforward=_feedforward(specification),
        law="\n".join(print_python.statements(law.body, _names(), indent)),
        store="\n".join(f"{indent}self._{name} = {name}" for name in pid.STATE),
        rows="\n".join(f"    {_row(row)}," for row in specification.rows),
    )
    return {_FILE: text}


def prove(folder: Path, work: Path, specification: Specification, recording: Recording) -> tuple[Proof, ...]:
    """Run controller.py in a bare interpreter: isolated, without site packages."""
    del specification
    if not sys.executable:
        return (not_run(_FILE, "no Python interpreter was found"),)
    harness = work / "harness.py"
    harness.write_text(template("harness.py"), encoding="utf-8")
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


def _feedforward(specification: Specification) -> str:
    gain = specification.feedforward_gain
    if gain is None:
        return "0.0"
    (result,) = translate.read(feedforward.static).results
    return bare(result, {"feedforward_gain": repr(gain)})


def _row(row: Row) -> str:
    before, *numbers = row.sample
    return repr((int(before), int(row.spoiled), *numbers, *row.outcome))


TARGET = Target("python", (_FILE,), write, prove)
