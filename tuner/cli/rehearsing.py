"""`rehearse`: a loop run in time without a window, as fast as it goes; what happens is told and may be recorded."""

import argparse
import json
import sys
from contextlib import closing
from dataclasses import dataclass
from math import isfinite
from pathlib import Path
from typing import TYPE_CHECKING, Any

from tuner.cli import status
from tuner.cli.command import Arguments, Command, Parser
from tuner.cli.progress import watched
from tuner.cli.sheets import STANDARD_INPUT, Source
from tuner.errors import TrimwrightError
from tuner.model.demonstration import Action, Deed, Demonstration, SetDisturbance, SetReference
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    from tuner.rehearse.account import Account, Peaks
    from tuner.rehearse.recording import Recorder
    from tuner.rehearse.rehearsal import Rehearsal
    from tuner.rehearse.script import Played, Script

_PIECES = 200
"""Pieces in which a run goes by, for the bar."""


def declare(parser: Parser) -> None:
    """Add the arguments of `rehearse`."""
    parser.add_argument("source", metavar="SHEET|DEMONSTRATION", help="a tuning sheet, a demonstration, or - for stdin")
    parser.add_argument(
        "--for",
        dest="lasting",
        type=_time,
        metavar="TIME",
        help="how long, in the sheet's unit of time (until the last action of a demonstration unless told)",
    )
    parser.add_argument("--to", metavar="RECORD.csv", help="write the record to this file")
    parser.add_argument("--overwrite", action="store_true", help="replace a record of the same name")
    parser.add_argument("--json", action="store_true", help="print one JSON object")


def _time(word: str) -> float:
    try:
        time = float(word)
    except ValueError:
        time = -1.0
    if isfinite(time) and time > 0.0:
        return time
    raise argparse.ArgumentTypeError(f"expected a time above 0, found {word!r}")


@dataclass(frozen=True, slots=True)
class Run:
    """What is to be run: actions on a loop, and for how long, time units."""

    sheet: Sheet
    demonstration: Demonstration
    duration: float


@dataclass(frozen=True, slots=True)
class Finished:
    """What a run left behind."""

    rehearsal: "Rehearsal"
    account: "Account"
    recorder: "Recorder | None"
    played: "tuple[Played, ...]"


def run(arguments: Arguments) -> int:
    """Run a loop, tell what happened, and write its record."""
    try:
        _refuse_record(arguments.to, overwrite=arguments.overwrite)
        finished = _go(_wanted(arguments.source, arguments.lasting), recorded=arguments.to is not None)
        if finished.recorder is not None:
            _save(finished.recorder, finished.rehearsal.sheet, Path(arguments.to))
    except TrimwrightError as error:
        return status.refuse(error, arguments.source)
    if arguments.json:
        sys.stdout.write(json.dumps(as_json(finished, arguments.to), allow_nan=False) + "\n")
    else:
        sys.stdout.write("".join(f"{line}\n" for line in _lines(finished, arguments.to)))
    sys.stdout.flush()
    return status.MET if finished.rehearsal.stable else status.NOT_MET


def _refuse_record(name: str | None, *, overwrite: bool) -> None:
    """Refuse to write over a record, before anything is run."""
    if name is not None and Path(name).exists() and not overwrite:
        raise TrimwrightError(f"expected no file named {name}, found one; --overwrite replaces it")


def _wanted(source: str, lasting: float | None) -> Run:
    """Return what a source asks for: a demonstration, or of a sheet by itself its two steps one after the other."""
    from tuner.files import demonstrations
    from tuner.files.sheet import read_text

    path = Path(source)
    if source != STANDARD_INPUT and demonstrations.is_demonstration(read_text(path, "a sheet or a demonstration")):
        staged = demonstrations.read(path)
        duration = lasting or staged.demonstration.duration or staged.sheet.trial.duration
        return Run(staged.sheet, staged.demonstration, duration)
    sheet = Source(source).read()
    duration = lasting or 2.0 * sheet.trial.duration
    return Run(sheet, _trial(sheet, source, duration), duration)


def _trial(sheet: Sheet, source: str, duration: float) -> Demonstration:
    """Return the steps of a sheet's trial as actions: the reference at the start, the disturbance half way."""
    deeds: list[tuple[float, Deed]] = []
    if sheet.trial.reference:
        deeds.append((0.0, SetReference(sheet.loop.controlled.resting + sheet.trial.reference)))
    if sheet.trial.disturbance:
        deeds.append((duration / 2.0, SetDisturbance(sheet.trial.disturbance)))
    return Demonstration(sheet.loop.title, source, tuple(Action(at, deed) for at, deed in deeds))


def _go(wanted: Run, *, recorded: bool) -> Finished:
    """Run it to its end."""
    from tuner.rehearse.account import Account
    from tuner.rehearse.recording import MOST_SAMPLES, Recorder
    from tuner.rehearse.rehearsal import Rehearsal
    from tuner.rehearse.script import Script

    rehearsal = Rehearsal(wanted.sheet)
    samples = round(wanted.duration / rehearsal.sample_time) + 1
    if samples > MOST_SAMPLES:
        raise TrimwrightError(
            f"expected at most {MOST_SAMPLES:,} samples of {rehearsal.sample_time:g} {wanted.sheet.loop.time_unit}, "
            f"found {samples:,} in {wanted.duration:g} {wanted.sheet.loop.time_unit}"
        )
    finished = Finished(rehearsal, Account(rehearsal), Recorder() if recorded else None, ())
    script = Script(wanted.demonstration, rehearsal)
    played: list[Played] = []
    ends = [samples * (piece + 1) // _PIECES for piece in range(_PIECES)]
    for count in watched(
        [end - begin for begin, end in zip([0, *ends], ends, strict=False)], "rehearsing", silent=True
    ):
        played += _advance(finished, script, count)
    return Finished(rehearsal, finished.account, finished.recorder, tuple(played))


def _advance(finished: Finished, script: "Script", samples: int) -> "list[Played]":
    """Go on by some samples, doing on the way what is due."""
    done: list[Played] = []
    while samples > 0 and not finished.rehearsal.ran_away:
        for played in script.play():
            done.append(played)
            if finished.recorder is not None and played.words:
                finished.recorder.note(played.time, played.words)
            finished.account.look()
        strip = finished.rehearsal.advance(script.room(samples))
        finished.account.follow(strip)
        if finished.recorder is not None:
            finished.recorder.add(strip)
        samples -= len(strip)
    return done


def _save(recorder: "Recorder", sheet: Sheet, path: Path) -> None:
    from tuner.rehearse.saving import save

    with closing(recorder):
        for _ in save(recorder, path, sheet.loop):
            pass


def _lines(finished: Finished, record: str | None) -> list[str]:
    """Return what a person reads."""
    from tuner.judge.wording import minus, quantity
    from tuner.rehearse.wording import CAUTION

    rehearsal, loop = finished.rehearsal, finished.rehearsal.sheet.loop
    lines = [f"{loop.title}, rehearsed for {quantity(rehearsal.time, loop.time_unit)}."]
    for time, words, say in finished.played:
        said = "  ".join(filter(None, (words, say)))
        lines.append(f"  {quantity(time, loop.time_unit):>10}  {said}")
    lines += [minus(sentence) for sentence in finished.account.sentences()]
    lines += [f"- {note}" for note in rehearsal.notes]
    lines += [f"The record is in {record}."] if record else []
    return [*lines, CAUTION]


def as_json(finished: Finished, record: str | None) -> dict[str, Any]:
    """Return the same for another program."""
    from tuner.rehearse.wording import CAUTION

    rehearsal, loop = finished.rehearsal, finished.rehearsal.sheet.loop
    return {
        "title": loop.title,
        "time": rehearsal.time,
        "time_unit": loop.time_unit,
        "sample_time": rehearsal.sample_time,
        "actions": [one._asdict() for one in finished.played],
        "unstable": [_spell(spell.begin, spell.end, spell.growth) for spell in finished.account.spells],
        "output": _peaks(finished.account.output),
        "effort": _peaks(finished.account.effort),
        "stable": bool(rehearsal.stable),
        "ran_away": bool(rehearsal.ran_away),
        "sentences": finished.account.sentences(),
        "notes": list(rehearsal.notes),
        "record": record,
        "caution": CAUTION,
    }


def _spell(begin: float, end: float | None, growth: Any) -> dict[str, Any]:  # noqa: ANN401 - a `Growth`, loaded late
    period = None if growth is None or not isfinite(growth.period) else growth.period
    predicted, measured = (None, None) if growth is None else (growth.predicted, growth.measured)
    numbers = {"predicted": _finite(predicted), "measured": _finite(measured), "period": period}
    return {"from": begin, "to": end, "growth": numbers}


def _finite(value: float | None) -> float | None:
    return value if value is not None and isfinite(value) else None


def _peaks(peaks: "Peaks") -> dict[str, Any]:
    (low, low_at), (high, high_at) = peaks.low, peaks.high
    return {"low": _finite(low), "low_at": low_at, "high": _finite(high), "high_at": high_at}


REHEARSE = Command(
    name="rehearse",
    sentence="Run a loop in time with a demonstration, or with its own steps, and tell what happened. "
    "Exit status: 0 stable at the end, 1 unstable, 2 the input cannot be used.",
    example="rehearse sample_plants/demonstrations/heater_too_eager.toml --to record.csv",
    declare=declare,
    run=run,
)
