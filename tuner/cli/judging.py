"""`judge`: sheets against their limits, for a person or for another program."""

import json
import sys
from typing import TYPE_CHECKING, Any

from tuner.cli import status
from tuner.cli.command import Arguments, Command, Parser, UsageError, whole_number
from tuner.cli.progress import watched
from tuner.cli.sheets import Missing, Source, sources
from tuner.errors import Fault, SheetError, TrimwrightError
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    from tuner.judge.assessment import Assessment

LARGEST_FAMILY = 2000


def declare(parser: Parser) -> None:
    """Add the arguments of `judge`."""
    parser.add_argument("sheets", nargs="+", metavar="SHEET", help="a tuning sheet, a folder of them, or - for stdin")
    parser.add_argument("--json", action="store_true", help="print one JSON object a line")
    parser.add_argument("--traces", action="store_true", help="with --json: add the two runs of the nominal plant")
    parser.add_argument(
        "--structures",
        action="store_true",
        help="compare feedforward alone, feedback alone and both over the whole spread",
    )
    parser.add_argument(
        "--as-found", action="store_true", help="compare the controller met on site with the one that is left"
    )
    add_family(parser)


def add_family(parser: Parser) -> None:
    """Add the option for the size of the family."""
    parser.add_argument(
        "--family",
        type=whole_number(1, LARGEST_FAMILY),
        metavar="N",
        help="plants to judge the spread by, the nominal one included (as many as the sheet says unless told)",
    )


def run(arguments: Arguments) -> int:
    """Judge every sheet; one that cannot be used does not stop the others.

    With ``--json`` each sheet gives one object a line: see `judge.as_json.as_json`; with ``--structures``
    `compare.as_json.structures_as_json`; with ``--as-found`` `compare.as_json.tunings_as_json`. The exit status is
    that of the sheet itself in any case.
    """
    if arguments.structures and arguments.as_found:
        raise UsageError("trimwright judge: expected --structures or --as-found, found both")
    named = sources(arguments.sheets)
    return max(_judge_one(source, arguments) for source in watched(named, "judging"))


def assessed(sheet: Sheet, family_size: int | None = None) -> "Assessment":
    """Return the assessment of a sheet; what computes it is loaded only now.

    Raises
    ------
    LoopError
        When the loop cannot be computed, with the reason.
    """
    from tuner.assess import assess

    return assess(sheet, family_size)


def _judge_one(source: Source | Missing, arguments: Arguments) -> int:
    try:
        sheet = source.read()
        assessment = assessed(sheet, arguments.family)
        _print(sheet, assessment, source.name, arguments)
    except TrimwrightError as error:
        return status.refuse(error, source.name)
    return status.of(assessment)


def _print(sheet: Sheet, assessment: "Assessment", file: str, arguments: Arguments) -> None:
    if arguments.structures:
        _print_structures(sheet, file, arguments)
    elif arguments.as_found:
        _print_tunings(sheet, file, arguments)
    elif arguments.json:
        print_json(assessment, traces=arguments.traces)
    else:
        from tuner.cli.printing import console, show

        show(sheet, assessment, file, console())


def _print_structures(sheet: Sheet, file: str, arguments: Arguments) -> None:
    from tuner.cli.comparing import show_structures
    from tuner.cli.printing import console
    from tuner.compare.as_json import structures_as_json
    from tuner.compare.comparison import compare_structures

    found = compare_structures(sheet, arguments.family)
    if arguments.json:
        _write_line(structures_as_json(sheet, found, traces=arguments.traces))
    else:
        show_structures(sheet, found, file, console())


def _print_tunings(sheet: Sheet, file: str, arguments: Arguments) -> None:
    from tuner.cli.comparing import show_tunings
    from tuner.cli.printing import console
    from tuner.compare.as_json import tunings_as_json
    from tuner.compare.tunings import compare_tunings

    if sheet.controller.as_found is None:
        raise SheetError([Fault("controller.as_found", "the controller met on site, to compare with", "none")])
    found = compare_tunings(sheet, (), arguments.family)
    if arguments.json:
        _write_line(tunings_as_json(sheet, found, traces=arguments.traces))
    else:
        show_tunings(sheet, found, file, console())


def print_json(assessment: "Assessment", *, traces: bool = False) -> None:
    """Print an assessment as one line of strict JSON, at once."""
    from tuner.judge.as_json import as_json

    _write_line(as_json(assessment, traces=traces))


def _write_line(found: dict[str, Any]) -> None:
    sys.stdout.write(json.dumps(found, allow_nan=False) + "\n")
    sys.stdout.flush()


JUDGE = Command(
    name="judge",
    sentence="Judge tuning sheets by their limits over the whole spread. "
    "Exit status: 0 met, 1 missed or unstable, 2 a sheet cannot be used.",
    example="judge sample_plants/heater.toml --json",
    declare=declare,
    run=run,
)
