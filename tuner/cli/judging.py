"""`judge`: sheets against their limits, for a person or for another program."""

import json
import sys
from typing import TYPE_CHECKING

from tuner.cli import status
from tuner.cli.command import Arguments, Command, Parser, whole_number
from tuner.cli.progress import watched
from tuner.cli.sheets import Missing, Source, sources
from tuner.errors import TrimwrightError
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    from tuner.judge.assessment import Assessment

LARGEST_FAMILY = 2000


def declare(parser: Parser) -> None:
    """Add the arguments of `judge`."""
    parser.add_argument("sheets", nargs="+", metavar="SHEET", help="a tuning sheet, a folder of them, or - for stdin")
    parser.add_argument("--json", action="store_true", help="print one JSON object a line")
    parser.add_argument("--traces", action="store_true", help="with --json: add the two runs of the nominal plant")
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
    """Judge every sheet; one that cannot be used does not stop the others."""
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
    except TrimwrightError as error:
        return status.refuse(error, source.name)
    if arguments.json:
        print_json(assessment, traces=arguments.traces)
    else:
        from tuner.cli.printing import console, show

        show(sheet, assessment, source.name, console())
    return status.of(assessment)


def print_json(assessment: "Assessment", *, traces: bool = False) -> None:
    """Print an assessment as one line of strict JSON, at once."""
    from tuner.judge.as_json import as_json

    sys.stdout.write(json.dumps(as_json(assessment, traces=traces), allow_nan=False) + "\n")
    sys.stdout.flush()


JUDGE = Command(
    name="judge",
    sentence="Judge tuning sheets by their limits over the whole spread. "
    "Exit status: 0 met, 1 missed or unstable, 2 a sheet cannot be used.",
    example="judge sample_plants/heater.toml --json",
    declare=declare,
    run=run,
)
