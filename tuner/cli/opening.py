"""`open`: the window; without a display, the main job of the program on the terminal."""

import os
import sys
from argparse import Namespace
from pathlib import Path
from typing import TYPE_CHECKING

from tuner.cli import status
from tuner.cli.command import PROGRAM, Arguments, Command, Parser
from tuner.cli.delivering import hand_over
from tuner.cli.judging import assessed
from tuner.cli.sampling import built_in
from tuner.cli.sheets import Source
from tuner.errors import TrimwrightError
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    from tuner.judge.assessment import Assessment

NO_DISPLAY = "There is no display here, so no window opens."


def declare(parser: Parser) -> None:
    """Add the argument of `open`."""
    parser.add_argument("sheet", nargs="?", metavar="SHEET", help="a tuning sheet (default: a built-in loop)")


def run(arguments: Arguments) -> int:
    """Open the window on the sheet, or on the built-in one."""
    if not has_display():
        return without_display(arguments.sheet)
    from tuner.window.app import open_window

    return open_window(Path(arguments.sheet) if arguments.sheet else None)


def has_display() -> bool:
    """Tell whether a window can be shown; Linux says so in its environment, elsewhere there is a desktop."""
    names = ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM")
    return sys.platform != "linux" or any(os.environ.get(name) for name in names)


def without_display(named: str | None) -> int:
    """Judge the sheet on the terminal; deliver the built-in one, and say where."""
    source = Source(named or str(built_in()))
    try:
        sheet = source.read()
        assessment = assessed(sheet)
    except TrimwrightError as error:
        return status.refuse(error, source.name)
    _show(sheet, assessment, source.name)
    if named:
        sys.stdout.write(f"{NO_DISPLAY} To hand the controller over: {PROGRAM} deliver {named} --to FOLDER\n")
        return status.of(assessment)
    folder = free_folder(Path.cwd()) or free_folder(Path.home()) or _temporary()
    sys.stdout.write(f"{NO_DISPLAY} The built-in loop was judged; its controller is delivered instead.\n")
    choices = Namespace(to=str(folder), accept_unmet=False, overwrite=True, json=False)
    return hand_over(sheet, assessment, source.name, choices)


def free_folder(place: Path) -> Path | None:
    """Return a folder in `place` that does not exist yet, or None when `place` cannot be written to."""
    if not os.access(place, os.W_OK):
        return None
    stem = f"{PROGRAM}-delivery-{built_in().stem}"
    names = (stem if number == 1 else f"{stem}-{number}" for number in range(1, sys.maxsize))
    return next(place / name for name in names if not (place / name).exists())


def _temporary() -> Path:
    import tempfile

    return Path(tempfile.mkdtemp(prefix=f"{PROGRAM}-delivery-"))


def _show(sheet: Sheet, assessment: "Assessment", file: str) -> None:
    from tuner.cli.printing import console, show

    show(sheet, assessment, file, console())


OPEN = Command(
    name="open",
    sentence="Open the window on a tuning sheet, or on a built-in loop.",
    example="open sample_plants/heater.toml",
    declare=declare,
    run=run,
)
