"""The checks in their order, each with its heading and time; all run to the end, and a summary closes the output."""

import os
import re
import shutil
import subprocess
import sys
import threading
import time
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from tests.display import NoDisplayError, virtual_display

ROOT = Path(__file__).resolve().parents[1]
REAL_WINDOW = ROOT / "tests" / "real_window"
LIMIT = 1500.0  # seconds after which a check is ended and counts as failed
NO_TEST_FOUND = 5  # the status of pytest when it collects nothing

_COUNT = re.compile(r"(\d+) (passed|failed|errors?|skipped|xfailed|xpassed)\b")
_COLOUR = re.compile(r"\x1b\[[0-9;]*m")


@dataclass(frozen=True, slots=True)
class Counts:
    """How many tests passed, failed and were skipped."""

    passed: int = 0
    failed: int = 0
    skipped: int = 0

    def __add__(self, other: "Counts") -> "Counts":
        """Return the sum of both."""
        return Counts(self.passed + other.passed, self.failed + other.failed, self.skipped + other.skipped)

    def __str__(self) -> str:
        skipped = f", {self.skipped} skipped" if self.skipped else ""
        return f"{self.passed} passed, {self.failed} failed{skipped}"


@dataclass(frozen=True, slots=True)
class Result:
    """What a check found and how long it took."""

    title: str
    counts: Counts
    seconds: float


def run(arguments: Sequence[str]) -> int:
    """Run what the arguments ask for and return the exit status.

    Parameters
    ----------
    arguments
        Nothing for all checks; ``bench`` and its options; else paths and options for pytest.
    """
    if arguments and arguments[0] == "bench":
        return subprocess.call([sys.executable, "-m", "tests.benchmarks", *arguments[1:]], cwd=ROOT)
    try:
        results = [] if arguments else _linters()
        results += _tests([_absolute(argument) for argument in arguments])
    except KeyboardInterrupt:
        _write("\nStopped before the end.\n")
        return 130
    return _close(results)


def counts_of(output: str, status: int) -> Counts:
    """Return the counts in pytest's last line; a run that ended without one, or badly, counts as one failure more."""
    lines = _COLOUR.sub("", output).strip().splitlines()
    found: dict[str, int] = {
        kind.rstrip("s"): int(number) for number, kind in _COUNT.findall(lines[-1] if lines else "")
    }
    passed, failed = found.get("passed", 0), found.get("failed", 0) + found.get("error", 0) + found.get("xpassed", 0)
    if not failed and status not in (0, NO_TEST_FOUND):
        failed = 1
    return Counts(passed, failed, found.get("skipped", 0) + found.get("xfailed", 0))


def _linters() -> list[Result]:
    tool = [sys.executable, "-m"]
    return [
        _check("ruff check", [*tool, "ruff", "check", "tuner", "tests"]),
        _check("ruff format", [*tool, "ruff", "format", "--check", "tuner", "tests"]),
        _check("mypy", [*tool, "mypy", "tuner", "tests"]),
    ]


def _tests(arguments: list[str]) -> list[Result]:
    """Run the tests that need no display, then those that need one, leaving out the half that no path asks for."""
    paths = [Path(argument.partition("::")[0]) for argument in arguments if not argument.startswith("-")]
    inside = [path for path in paths if REAL_WINDOW in (path, *path.parents)]
    around = [path for path in paths if path in REAL_WINDOW.parents]
    results = [] if inside and len(inside) == len(paths) else [_without_display(arguments)]
    return results + ([_with_display(arguments)] if inside or around or not paths else [])


def _absolute(argument: str) -> str:
    """Return a path given from the working folder as one that holds in any; an option stays."""
    path, separator, test = argument.partition("::")
    return f"{Path(path).resolve()}{separator}{test}" if Path(path).exists() else argument


def _check(title: str, command: list[str]) -> Result:
    start = _begin(title)
    status, _ = _call(command, dict(os.environ))
    return _end(title, Counts(passed=int(status == 0), failed=int(status != 0)), start)


def _without_display(arguments: list[str]) -> Result:
    title = "tests without a display"
    start = _begin(title)
    environment = {**os.environ, "QT_QPA_PLATFORM": "offscreen"}
    return _end(title, _pytest("not real_window and not fresh_machine", arguments, environment), start)


def _with_display(arguments: list[str]) -> Result:
    title = "tests in a real window"
    start = _begin(title)
    try:
        with virtual_display() as environment:
            return _end(title, _pytest("real_window", arguments or [str(REAL_WINDOW)], environment), start)
    except NoDisplayError as fault:
        _write(f"{fault}\n")
        # Whoever may install the tools has no excuse; for others the rest of the checks is still worth having.
        return _end(title, Counts(failed=1) if _may_install() else Counts(skipped=1), start)


def _may_install() -> bool:
    return os.name == "posix" and os.geteuid() == 0 and shutil.which("apt-get") is not None


def _pytest(marker: str, arguments: list[str], environment: dict[str, str]) -> Counts:
    colour = "yes" if sys.stdout.isatty() else "no"
    command = [sys.executable, "-m", "pytest", "-q", "-rfEs", f"--color={colour}", "-m", marker, *arguments]
    status, output = _call(command, environment)
    return counts_of(output, status)


def _call(command: list[str], environment: dict[str, str]) -> tuple[int, str]:
    """Run a command from the root of the checkout, show its output as it comes, and return its status and output."""
    pipe, lines = subprocess.PIPE, []
    with subprocess.Popen(
        command, cwd=ROOT, env=environment, stdout=pipe, stderr=subprocess.STDOUT, encoding="utf-8", errors="replace"
    ) as process:
        timer = threading.Timer(LIMIT, process.kill)
        timer.daemon = True
        timer.start()
        for line in process.stdout or ():
            _write(line)
            lines.append(line)
        timer.cancel()
    return process.returncode, "".join(lines)


def _begin(title: str) -> float:
    _write(f"\n== {title} ==\n")
    return time.monotonic()


def _end(title: str, counts: Counts, start: float) -> Result:
    result = Result(title, counts, time.monotonic() - start)
    _write(f"-- {title}: {counts} in {result.seconds:.1f} s\n")
    return result


def _close(results: list[Result]) -> int:
    """Write the table and the totals; the status is 0 only if something ran and nothing failed."""
    total = sum((result.counts for result in results), Counts())
    _write("\n")
    for result in results:
        _write(f"{result.title:<26}{result.seconds:8.1f} s   {result.counts}\n")
    _write(f"{total}\n")
    return int(total.failed > 0 or total.passed == 0)


def _write(text: str) -> None:
    sys.stdout.write(text)
    sys.stdout.flush()
