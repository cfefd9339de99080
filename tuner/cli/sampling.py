"""`samples`: the tuning sheets and demonstrations that come with the program, listed or copied."""

import shutil
import sys
from pathlib import Path

from tuner.cli import status
from tuner.cli.command import Arguments, Command, Parser
from tuner.errors import TrimwrightError
from tuner.places import demonstrations, sample_plants

BUILT_IN = "heater.toml"
"""The sheet that the program opens when none is named."""


def built_in() -> Path:
    """Return the sheet that the program opens when none is named."""
    return sample_plants() / BUILT_IN


def declare(parser: Parser) -> None:
    """Add the arguments of `samples`."""
    parser.add_argument("--to", metavar="FOLDER", help="copy them into this folder, made if need be")
    parser.add_argument("--overwrite", action="store_true", help="replace files of the same name there")


def run(arguments: Arguments) -> int:
    """List the samples, or copy them."""
    if arguments.to is None:
        return _list()
    try:
        copied = copy(Path(arguments.to), overwrite=arguments.overwrite)
    except OSError as error:
        return status.refuse(TrimwrightError(f"expected a folder to write to, found: {error.strerror}"), arguments.to)
    except TrimwrightError as error:
        return status.refuse(error, arguments.to)
    sys.stdout.write("".join(f"{path}\n" for path in copied))
    return status.MET


def copy(folder: Path, *, overwrite: bool = False) -> list[Path]:
    """Copy the samples into a folder and return where they are.

    Raises
    ------
    TrimwrightError
        When a file would be replaced that must not be; nothing is copied then.
    """
    originals = [path.relative_to(sample_plants()) for path in sorted(sample_plants().rglob("*")) if path.is_file()]
    present = [path for path in originals if (folder / path).exists()]
    if present and not overwrite:
        raise TrimwrightError(f"expected no file named {present[0]}, found one; --overwrite replaces it")
    return [_copied(path, folder) for path in originals]


def _copied(path: Path, folder: Path) -> Path:
    """Copy one sample, by its path in the folder of samples, to the same place in another folder."""
    (folder / path).parent.mkdir(parents=True, exist_ok=True)
    return Path(shutil.copyfile(sample_plants() / path, folder / path))


def _list() -> int:
    from tuner.files.demonstrations import read as read_demonstration
    from tuner.files.sheet import read

    for path in sorted(sample_plants().glob("*.toml")):
        loop = read(path).loop
        sys.stdout.write(f"{path}\n    {loop.title}. {loop.story}".rstrip() + "\n")
    for path in sorted(demonstrations().glob("*.toml")):
        sys.stdout.write(f"{path}\n    Demonstration. {read_demonstration(path).demonstration.title}\n")
    return status.MET


SAMPLES = Command(
    name="samples",
    sentence="List the sample loops that come with the program, or copy them to start from.",
    example="samples --to my_loops",
    declare=declare,
    run=run,
)
