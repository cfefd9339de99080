"""controller.c and controller.h: C99 without libraries, allocation or globals."""

import shutil
from collections.abc import Iterator
from pathlib import Path
from textwrap import fill as wrap

from tuner.deliver import words
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import ON_WHAT, Proof, call, compared, not_run, run
from tuner.deliver.specification import Specification
from tuner.deliver.summary import banner, head, plain
from tuner.deliver.target import Target, fill, template
from tuner.deliver.vectors import Row
from tuner.errors import DeliveryError
from tuner.law import feedforward, pid, print_c, translate
from tuner.law.expressions import bare
from tuner.law.print_c import number
from tuner.model.units import unit_in

_SOURCE, _HEADER = "controller.c", "controller.h"
_COMPILERS = ("cc", "gcc", "clang")


def write(specification: Specification) -> dict[str, str]:
    """Return the texts of controller.c and controller.h."""
    return {_SOURCE: _source(specification), _HEADER: _header(specification)}


def prove(folder: Path, work: Path, specification: Specification, recording: Recording) -> tuple[Proof, ...]:
    """Compile the files with the compiler of this machine, if it has one that works, and run them."""
    del specification
    compiler = next(_working(work), None)
    if compiler is None:
        reason = "no C compiler was found" if not any(map(shutil.which, _COMPILERS)) else "no C compiler works here"
        return (not_run(_SOURCE, reason), not_run(_HEADER, reason))
    harness, program = work / "harness.c", work / "harness"
    harness.write_text(template("harness.c"), encoding="utf-8")
    made = call([compiler, "-std=c99", "-O2", "-I", folder, folder / _SOURCE, harness, "-o", program])
    if made.returncode != 0:
        raise DeliveryError(f"{_SOURCE}: the C compiler refuses it: {made.stderr.strip()[:400]}")
    found = run([program], recording, work)
    how = f"compiled by {compiler} -std=c99 -O2 and run, its self-test too, {ON_WHAT}"
    return (compared(_SOURCE, how, recording, found), compared(_HEADER, how, recording, found))


def _working(work: Path) -> Iterator[str]:
    """Yield the compilers of this machine that can make a program that runs."""
    trial, program = work / "trial.c", work / "trial"
    trial.write_text("#include <stdio.h>\nint main(void)\n{\n    return 0;\n}\n", encoding="utf-8")
    for name in _COMPILERS:
        if shutil.which(name) and call([name, "-std=c99", trial, "-o", program]).returncode == 0 and _runs(program):
            yield name


def _runs(program: Path) -> bool:
    try:
        return call([program]).returncode == 0
    except DeliveryError:  # such as a temporary folder from which nothing may be run
        return False


def _source(specification: Specification) -> str:
    law = translate.read(pid.law, (*pid.INPUTS, *pid.PARAMETERS))
    feedback = specification.sheet.controller.feedback
    names = {name: f"state->{name}" for name in pid.STATE}
    return fill(
        _SOURCE,
        head=_head(specification),
        unit_u=_bracketed(specification, "{u}"),
        resting_effort=number(specification.constants.resting_effort),
        reset="\n".join(f"    state->{name} = 0.0;" for name in pid.STATE),
        constants="\n".join(_constants(specification)),
        feedforward=_feedforward(specification),
        law="\n".join(print_c.block(law.body, names, law.locals, "    ")),
        set_auto=f"{' ' * 8}state->mode = 2.0;" if feedback else _plain_auto(" " * 8),
        count=str(len(specification.rows)),
        rows=",\n".join(f"        {_row(row)}" for row in specification.rows),
    )


def _header(specification: Specification) -> str:
    feedback = specification.sheet.controller.feedback
    sample_time = f"{specification.sheet.controller.sample_time!r} {specification.sheet.loop.time_unit}"
    return fill(
        _HEADER,
        head=_head(specification),
        state="\n".join(_state(specification)),
        sample_time=sample_time,
        bump="; the first sample keeps the effort as it is" if feedback else ", which is not bumpless without feedback",
    )


def _head(specification: Specification) -> str:
    top = banner(specification)
    lines = [*top, ""] if top else []
    lines += ["A controller in C99.", "", *head(specification)]
    return "\n".join(_comment(plain(line)) for line in lines)


def _comment(line: str) -> str:
    return wrap(line, 110, initial_indent=" * ", subsequent_indent=" *   ") if line.strip() else " *"


def _state(specification: Specification) -> Iterator[str]:
    for name in pid.STATE:
        sentence, unit = words.STATE[name]
        yield f"    double {name}; /* {sentence}{_bracketed(specification, unit)} */"


def _constants(specification: Specification) -> Iterator[str]:
    for name, value in specification.constants._asdict().items():
        if name != "resting_effort":
            sentence, unit = words.CONSTANTS[name]
            told = f"{value:.9g}: {sentence}{_bracketed(specification, unit)}"
            yield f"    static const double {name} = {number(value)}; /* {told} */"


def _bracketed(specification: Specification, unit: str) -> str:
    symbol = plain(unit_in(unit, specification.sheet.loop))
    return f" [{symbol}]" if symbol else ""


def _plain_auto(indent: str) -> str:
    return f"{indent}state->mode = 0.0;\n{indent}state->integral = 0.0;"


def _feedforward(specification: Specification) -> str:
    gain = specification.feedforward_gain
    if gain is None:
        return "0.0"
    (result,) = translate.read(feedforward.static).results
    return bare(result, {"feedforward_gain": number(gain)})


def _row(row: Row) -> str:
    before, *numbers = row.sample
    given = ", ".join(number(value) for value in (*numbers, row.outcome.effort))
    return f"{{{int(before)}, {int(row.spoiled)}, {given}, {row.outcome.flags}}}"


TARGET = Target("c", (_SOURCE, _HEADER), write, prove)
