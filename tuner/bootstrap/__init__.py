"""The environment of the two commands `python3 tuner` and `python3 tests`, made by the standard library alone.

This module is the quick road: it runs at every start, so it only looks whether the environment is complete and hands
over to it. What makes one is imported when there is something to make.
"""

import os
import sys
from pathlib import Path

from tuner.bootstrap.folder import HANDED_OVER, Folder, candidates, is_inside


def enter(program: Path, arguments: list[str], testing: bool = False) -> None:
    """Return in a Python that has all the program needs; otherwise replace this process by one that has.

    Parameters
    ----------
    program
        The ``__main__.py`` to run again in the environment.
    arguments
        Its arguments.
    testing
        Whether the tools of the tests are needed as well.

    Raises
    ------
    SystemExit
        With status 2 after a sentence on stderr when the environment cannot be made, 130 when it was interrupted.
    """
    root = program.parent.parent
    handed_over = os.environ.pop(HANDED_OVER, None)
    if handed_over and not is_inside(handed_over):
        sys.stderr.write(f"{handed_over} is no whole environment; remove it and run the same command again.\n")
        sys.exit(2)
    if handed_over or not (root / "pyproject.toml").is_file():
        return
    folder = _ready(root, arguments, testing)
    if folder is None and _has_all_already(root, testing):
        return
    if folder is None:
        folder = _make(root, arguments, testing)
    if not is_inside(folder.path):
        hand_over(folder, program, arguments)


def hand_over(folder: Folder, program: Path, arguments: list[str]) -> None:
    """Run the program in the environment in place of this process; the working folder stays."""
    command = [str(folder.python), str(program), *arguments]
    os.environ[HANDED_OVER] = str(folder.path)
    sys.stdout.flush()
    sys.stderr.flush()
    if os.name == "nt":  # exec there starts a second process and returns to the prompt at once
        import subprocess

        sys.exit(subprocess.call(command))
    os.execv(command[0], command)


def _ready(root: Path, arguments: list[str], testing: bool) -> "Folder | None":
    """Return the complete environment of this checkout, or None."""
    for folder in candidates(root):
        if folder.is_ready(root, testing):
            return None if _lacks_something(folder, arguments, testing) else folder
    return None


def _lacks_something(folder: Folder, arguments: list[str], testing: bool) -> bool:
    """Tell whether the machine, as far as is known without a search, lacks what this run needs."""
    if not testing and not folder.lacks_window:
        return False
    from tuner.bootstrap.system import TESTS, missing, wants_window

    return bool(missing(TESTS)) if testing else wants_window(arguments)


def _has_all_already(root: Path, testing: bool) -> bool:
    """Tell whether this Python is an environment of the user's own choice with everything in it."""
    chosen = sys.prefix != sys.base_prefix or Path(sys.prefix, "conda-meta").is_dir()
    if not chosen:
        return False
    from tuner.bootstrap.making import has_distributions
    from tuner.bootstrap.requirements import requirements

    return has_distributions(requirements(root, testing))


def _make(root: Path, arguments: list[str], testing: bool) -> Folder:
    """Make the environment; a fault ends the process with its sentence."""
    from tuner.bootstrap.making import Wish, make
    from tuner.bootstrap.steps import SetUpError
    from tuner.bootstrap.system import wants_window

    try:
        return make(root, Wish(testing=testing, window=testing or wants_window(arguments)))
    except SetUpError as fault:
        sys.stderr.write(f"{fault}\n")
        sys.exit(2)
    except KeyboardInterrupt:
        sys.stderr.write("\nStopped; the next run completes the environment.\n")
        sys.exit(130)
