"""Make the environment: system packages, virtual environment, Python packages, in that order."""

import importlib
import os
import shutil
import sys
from importlib.metadata import PackageNotFoundError, distribution
from pathlib import Path
from typing import NamedTuple

from tuner.bootstrap import system
from tuner.bootstrap.folder import BEING_MADE, HANDED_OVER, Folder, choose
from tuner.bootstrap.lock import locked
from tuner.bootstrap.requirements import requirements
from tuner.bootstrap.steps import SetUpError, Steps


class Wish(NamedTuple):
    """What the environment is for."""

    testing: bool
    window: bool


def make(root: Path, wish: Wish) -> Folder:
    """Make the environment of a checkout, or complete it, and return it.

    Raises
    ------
    SetUpError
        When something is missing that this run may not or cannot install; its text says what to do.
    """
    folder = choose(root)
    steps = Steps(folder.path.with_name(f"{folder.path.name}.log"))
    try:
        with locked(folder.path.with_name(f"{folder.path.name}.lock"), steps.say_waiting) as descriptor:
            steps.descriptor = descriptor
            _complete(folder, root, wish, steps)
    except OSError as fault:
        raise SetUpError(f"The environment cannot be made in {folder.path}: {fault}.") from fault
    return folder


def has_distributions(lines: list[str]) -> bool:
    """Tell whether this Python has a package for each requirement line, of whatever version."""
    names = (line.split(";")[0].strip() for line in lines)
    return all(_has_distribution(_bare(name)) for name in names)


def _bare(requirement: str) -> str:
    """Return the name at the head of a requirement such as ``numpy>=2.1``."""
    return "".join(letter if letter.isalnum() or letter in "-_." else " " for letter in requirement).split()[0]


def _has_distribution(name: str) -> bool:
    try:
        distribution(name)
    except PackageNotFoundError:
        return False
    return True


def _complete(folder: Folder, root: Path, wish: Wish, steps: Steps) -> None:
    """Bring the machine and the folder to what the wish asks for; does nothing twice."""
    is_ready = folder.is_ready(root, wish.testing)
    if not is_ready:
        steps.say(f"Making the environment of Trimwright in {folder.path}: once, a minute or two.")
    _install_system_packages(wish, is_ready or folder.can_be_added_to, steps)
    if not is_ready:
        _install_python_packages(folder, requirements(root, wish.testing), steps)
    lacks_window = bool(system.missing(system.WINDOW))
    if not is_ready or lacks_window != folder.lacks_window:
        folder.mark_ready(root, requirements(root, wish.testing), lacks_window)
    if not is_ready:
        _compile_once(folder, root, steps)
        steps.say("The environment is complete.")


def _compile_once(folder: Folder, root: Path, steps: Steps) -> None:
    """Let the program judge its built-in loop, so that the first start finds it compiled."""
    command = [
        str(folder.python),
        str(root / "tuner" / "__main__.py"),
        "judge",
        str(root / "sample_plants/heater.toml"),
    ]
    # Whatever it finds, or if it fails: the program itself will say so better.
    steps.run("compiling the simulation", command, {**os.environ, HANDED_OVER: str(folder.path)})


def _install_system_packages(wish: Wish, has_environment: bool, steps: Steps) -> None:
    """Install what the machine lacks, or say how; goes on without what this run can do without."""
    required = system.missing((() if has_environment else system.VENV) + (system.WINDOW if wish.window else ()))
    useful = system.missing((() if wish.window else system.WINDOW) + (system.TESTS if wish.testing else ()))
    lacking = required + useful
    if lacking and system.has_apt() and system.is_root():
        reason = _run_apt(lacking, steps)
        required, useful = _still(required), _still(useful)
    else:
        reason = _advice(lacking)
    if required:
        raise SetUpError(f"Missing on this machine: {_list([*required, *useful])}.\n{reason}")
    if useful:
        steps.say(f"Going on without {_list(useful)}, which this run can do without. {reason}")


def _run_apt(lacking: list[system.Need], steps: Steps) -> str:
    """Let apt install the packages; returns what is to be said if something is still missing afterwards."""
    packages = system.package_names(lacking)
    quiet = {**os.environ, "DEBIAN_FRONTEND": "noninteractive"}
    apt = ["apt-get", "-q", "-o", "DPkg::Lock::Timeout=120"]
    # The lists may be partly out of reach, for a source this program needs nothing from; the install tells.
    steps.run("reading the lists of system packages", [*apt, "update"], quiet)
    install = [*apt, "install", "-y", "--no-install-recommends", *packages]
    outcome = steps.run(f"installing {len(packages)} system packages", install, quiet)
    if outcome.status and "dpkg was interrupted" in outcome.reason:
        steps.run("completing an interrupted installation", ["dpkg", "--configure", "-a"], quiet)
        # Packages of which only a part has been unpacked are for apt to mend.
        outcome = steps.run(f"installing {len(packages)} system packages", [*install, "--fix-broken"], quiet)
    if not outcome.status:
        return f"apt-get has installed the packages, but {sys.executable} does not find what is in them."
    return f"apt-get could not install them: {outcome.reason} The whole output is in {steps.log}.\n{_advice(lacking)}"


def _advice(lacking: list[system.Need]) -> str:
    if system.has_apt():
        line = system.install_line(lacking)
        return f"Install what is missing with this line, then run the same command again:\n  {line}"
    return "Install them with the package manager of this system, then run the same command again."


def _still(needs: list[system.Need]) -> list[system.Need]:
    importlib.invalidate_caches()
    return system.missing(tuple(needs))


def _list(needs: list[system.Need]) -> str:
    return ", ".join(need.name for need in needs)


def _install_python_packages(folder: Folder, lines: list[str], steps: Steps) -> None:
    """Install the requirements into the folder, which is made anew unless it can be added to."""
    before = folder.state
    if not folder.can_be_added_to:
        _make_empty(folder, steps)
    elif before:
        folder.state = BEING_MADE
    try:
        _run_pip(folder, lines, steps)
    except SetUpError:
        if before and not before.startswith(BEING_MADE):
            folder.state = before  # pip installs nothing until it has everything, so what was there still works
        raise


def _make_empty(folder: Folder, steps: Steps) -> None:
    if folder.path.exists():
        steps.say("An environment that was not completed is removed.")
        shutil.rmtree(folder.path)
    folder.path.mkdir(parents=True)
    folder.state = BEING_MADE
    outcome = steps.run("making a virtual environment", [sys.executable, "-m", "venv", str(folder.path)])
    if outcome.status:
        raise SetUpError(f"The virtual environment could not be made: {outcome.reason} The log is {steps.log}.")


def _run_pip(folder: Folder, lines: list[str], steps: Steps) -> None:
    quiet = ["--disable-pip-version-check", "--no-input", "--progress-bar", "off", "--prefer-binary"]
    outcome = steps.run(
        f"installing {len(lines)} Python packages and what they need",
        [str(folder.python), "-m", "pip", "install", *quiet, *lines],
    )
    if outcome.status:
        raise SetUpError(f"pip could not install the Python packages: {outcome.reason} The log is {steps.log}.")
