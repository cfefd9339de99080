"""`deliver`: a judged sheet becomes a folder of controller files, each run against the simulation first."""

import json
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from tuner.cli import status
from tuner.cli.command import Arguments, Command, Parser
from tuner.cli.judging import add_family, assessed
from tuner.cli.progress import working
from tuner.cli.sheets import Source
from tuner.errors import DeliveryError, TrimwrightError
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    from tuner.deliver.delivery import Delivery
    from tuner.judge.assessment import Assessment

CAUTION = (
    "Before loading: this is no safety function, interlocks and trips stay in force, local codes and licensed "
    "practice decide; start with the loop watched and the hand on manual."
)


def declare(parser: Parser) -> None:
    """Add the arguments of `deliver`."""
    parser.add_argument("sheet", metavar="SHEET", help="a tuning sheet, or - for stdin")
    parser.add_argument("--to", required=True, metavar="FOLDER", help="where the files go; made if need be")
    parser.add_argument("--accept-unmet", action="store_true", help="deliver although the limits are not all met")
    parser.add_argument("--overwrite", action="store_true", help="replace files of the same names")
    parser.add_argument("--json", action="store_true", help="print the folder, the files and their proof as JSON")
    add_family(parser)


def run(arguments: Arguments) -> int:
    """Judge the sheet and hand it over."""
    source = Source(arguments.sheet)
    try:
        sheet = source.read()
        assessment = assessed(sheet, arguments.family)
    except TrimwrightError as error:
        return status.refuse(error, source.name)
    return hand_over(sheet, assessment, source.name, arguments)


def hand_over(sheet: Sheet, assessment: "Assessment", file: str, arguments: Arguments) -> int:
    """Deliver and print what was handed over; status 1 when the verdict stands against it."""
    from tuner.deliver.delivery import deliver

    folder = Path(arguments.to)
    try:
        with working("writing the files and running them against the simulation"):
            delivery = deliver(
                sheet, assessment, folder, accept_unmet=arguments.accept_unmet, overwrite=arguments.overwrite
            )
    except DeliveryError as error:
        status.refuse(error, file)
        refused_by_verdict = assessment.verdict != "met" and not arguments.accept_unmet
        return status.NOT_MET if refused_by_verdict else status.UNUSABLE
    except OSError as error:
        return status.refuse(DeliveryError(f"expected a folder to write to, found: {error.strerror}"), str(folder))
    tell(delivery, folder, assessment, as_json=arguments.json)
    return status.MET


def tell(delivery: "Delivery", folder: Path, assessment: "Assessment", *, as_json: bool = False) -> None:
    """Print what was handed over."""
    if as_json:
        told = {
            "folder": str(folder),
            "verdict": assessment.verdict,
            "files": [str(path) for path in delivery.files],
            "proof": [proof.entry() for proof in delivery.proof],
        }
        sys.stdout.write(json.dumps(told, allow_nan=False) + "\n")
        return
    lines = [f"Delivered to {folder}:", *(f"  {path.name}" for path in delivery.files)]
    lines += [f"{proof.file}: {_proof(proof.entry())}" for proof in delivery.proof]
    sys.stdout.write("\n".join([*lines, CAUTION, ""]))
    sys.stdout.flush()


def _proof(entry: dict[str, object]) -> str:
    if not entry["proved"]:
        return f"not proved; {entry['how']}"
    return f"proved, {entry['how']}: {entry['steps']:,} samples, every effort the same"


DELIVER = Command(
    name="deliver",
    sentence="Write the controller files of a tuning sheet, each run against the simulation before it is handed over. "
    "Exit status: 0 delivered, 1 refused for a missed limit or an unstable loop, 2 the input cannot be used.",
    example="deliver sample_plants/heater.toml --to heater_delivery",
    declare=declare,
    run=run,
)
