"""controller.c and controller.h: C99 without libraries, allocation or globals."""

import shutil
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path
from textwrap import fill as wrap

from tuner.deliver import words
from tuner.deliver.excitation import Recording
from tuner.deliver.proof import ON_WHAT, Proof, call, compared, not_run, run
from tuner.deliver.specification import Specification
from tuner.deliver.stages import Stage, body, stages, start
from tuner.deliver.summary import banner, head, plain
from tuner.deliver.target import Target, fill
from tuner.deliver.vectors import Row
from tuner.errors import DeliveryError
from tuner.law import pid, print_c, translate
from tuner.law.print_c import number
from tuner.law.translate import Statement
from tuner.model.units import unit_in

_SOURCE, _HEADER = "controller.c", "controller.h"
_COMPILERS = ("cc", "gcc", "clang")


def write(specification: Specification) -> dict[str, str]:
    """Return the texts of controller.c and controller.h."""
    return {_SOURCE: _source(specification), _HEADER: _header(specification)}


def prove(folder: Path, work: Path, specification: Specification, recording: Recording) -> tuple[Proof, ...]:
    """Compile the files with the compiler of this machine, if it has one that works, and run them."""
    compiler = next(_working(work), None)
    if compiler is None:
        reason = "no C compiler was found" if not any(map(shutil.which, _COMPILERS)) else "no C compiler works here"
        return (not_run(_SOURCE, reason), not_run(_HEADER, reason))
    harness, program = work / "harness.c", work / "harness"
    more = ", given[4]" if specification.feeds.disturbance else ""
    harness.write_text(fill("harness.c", more=more), encoding="utf-8")
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
    found, late = stages(specification), specification.feeds.disturbance
    names = {name: f"state->{name}" for name in pid.STATE}
    if specification.feeds.asked is not None:
        names["reference"] = "filtered_reference"
    kept = [name for stage in found for name in stage.memories]
    return fill(
        _SOURCE,
        head=_head(specification),
        unit_u=_bracketed(specification, "{u}"),
        resting_effort=number(specification.constants.resting_effort),
        counter="    int position;\n\n" if late and late.delay else "",
        reset="\n".join([f"    state->{name} = 0.0;" for name in (*pid.STATE, *kept)] + _more_reset(specification)),
        stages="".join(_stage(stage, specification) for stage in found),
        more_given=_MORE if late else "",
        more_taken=", disturbance" if late else "",
        row_taken=", disturbance" if late else "",
        row_disturbance="        double disturbance = row->disturbance;\n" if late else "",
        spoil_disturbance=_SPOIL if late else "",
        column="    double disturbance;\n" if late else "",
        spoilings=", 5 disturbance" if late else "",
        constants="\n".join(_constants(specification)),
        fed="\n".join(_fed(found)),
        law="\n".join(print_c.block(law.body, names, law.locals, "    ")),
        set_auto=f"{' ' * 8}state->mode = 2.0;" if feedback else _plain_auto(" " * 8),
        count=str(len(specification.rows)),
        rows=",\n".join(f"        {_row(row, disturbed=late is not None)}" for row in specification.rows),
    )


def _header(specification: Specification) -> str:
    feedback = specification.sheet.controller.feedback
    sample_time = f"{specification.sheet.controller.sample_time!r} {specification.sheet.loop.time_unit}"
    return fill(
        _HEADER,
        head=_head(specification),
        state="\n".join(_state(specification)),
        more_given=_MORE if specification.feeds.disturbance else "",
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
    for stage in stages(specification):
        for name in stage.memories:
            yield f"    double {name}; /* Memory of a filter. {stage.sentence} */"
        if stage.digital.delay:
            yield f"    double late[{stage.digital.delay}]; /* Past values of the measured disturbance */"
            yield "    int place; /* Where the oldest of them is */"


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


class _Dialect:
    """How C writes a stage."""

    number = staticmethod(number)

    @staticmethod
    def memory(name: str) -> str:
        return f"state->{name}"

    @staticmethod
    def note(text: str) -> str:
        return f"\n    /* {text} */"

    @staticmethod
    def block(nodes: Sequence[Statement], names: Mapping[str, str]) -> Iterator[str]:
        yield from print_c.block(nodes, names, (), "    ")

    @staticmethod
    def assigned(name: str, value: str) -> str:
        return f"    {name} = {value};"


_MORE = ", double disturbance"
_SPOILT = "value + (given - given)"
_SPOIL = """        if (row->spoilt == 5)
        {
            disturbance = spoilt_number(row->spoilt);
        }
"""


def _stage(stage: Stage, specification: Specification) -> str:
    """Return the function of one filter."""
    resting = {
        "reference": ("resting_measurement", specification.constants.resting_measurement),
        "disturbance": ("resting_disturbance", specification.resting_disturbance),
    }
    name, value = resting[stage.given]
    lines = [
        *(_taken_late(stage.digital.delay) if stage.digital.delay else []),
        f"/* {stage.sentence}. */",
        f"static double {stage.name}({'' if stage.digital.sections or stage.digital.delay else 'const '}"
        f"controller_state *state, double given)",
        "{",
        f"    static const double {name} = {number(value)};",
        *_delayed(stage),
        f"    double value = {start(stage, _Dialect(), 'delayed' if stage.digital.delay else 'given')};",
        *(
            ["    double out;"]
            if stage.digital.sections
            else ["", "    (void)state;"]
            if not stage.digital.delay
            else []
        ),
        *body(stage, _Dialect()),
        f"    return {_SPOILT if stage.digital.delay else 'value'};",
        "}",
        "",
        "",
    ]
    return "\n".join(lines)


def _taken_late(delay: int) -> list[str]:
    return [
        "/* The measured disturbance of as many samples ago as it is late. */",
        "static double taken_late(controller_state *state, double given)",
        "{",
        "    const double oldest = state->late[state->place];",
        f"    const int last = (state->place > 0) ? (state->place - 1) : {delay - 1};",
        "",
        "    /* What is not finite spoils this sample; late comes the last good value in its place. */",
        "    state->late[state->place] = ((given - given) == 0.0) ? given : state->late[last];",
        f"    state->place = ((state->place + 1) < {delay}) ? (state->place + 1) : 0;",
        "    return oldest;",
        "}",
        "",
    ]


def _delayed(stage: Stage) -> list[str]:
    if not stage.digital.delay:
        return []
    return ["    const double delayed = taken_late(state, given);"]


def _fed(found: Sequence[Stage]) -> Iterator[str]:
    """Yield what the law is fed: the efforts of the feedforwards, and the filtered reference where there is one."""
    for stage in found:
        if stage.name == "asked_for":
            yield "    const double filtered_reference = asked_for(state, reference) + resting_measurement;"
        else:
            yield f"    const double {stage.name}_effort = {stage.name}(state, {stage.given});"
    efforts = [f"{stage.name}_effort" for stage in found if stage.name != "asked_for"]
    yield f"    const double feedforward = {' + '.join(efforts) or '0.0'};"


def _more_reset(specification: Specification) -> list[str]:
    late = specification.feeds.disturbance
    if late is None or not late.delay:
        return []
    return [
        "    state->place = 0;",
        f"    for (position = 0; position < {late.delay}; position++)",
        "    {",
        f"        state->late[position] = {number(specification.resting_disturbance)};",
        "    }",
    ]


def _row(row: Row, *, disturbed: bool) -> str:
    before, *numbers, disturbance = row.sample
    measured = [disturbance] if disturbed else []
    given = ", ".join(number(value) for value in (*numbers, *measured, row.outcome.effort))
    return f"{{{int(before)}, {int(row.spoiled)}, {given}, {row.outcome.flags}}}"


TARGET = Target("c", (_SOURCE, _HEADER), write, prove)
