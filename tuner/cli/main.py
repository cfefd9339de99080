"""The command line: which command is meant, and what becomes of refusals, Ctrl-C and closed pipes."""

import os
import sys
from collections.abc import Sequence
from io import TextIOWrapper

from tuner import __version__
from tuner.cli import status
from tuner.cli.command import PROGRAM, Command, UsageError, unexpected
from tuner.cli.delivering import DELIVER
from tuner.cli.judging import JUDGE
from tuner.cli.opening import OPEN
from tuner.cli.rehearsing import REHEARSE
from tuner.cli.sampling import SAMPLES
from tuner.errors import TrimwrightError
from tuner.places import keep_compiled_kernels

COMMANDS: tuple[Command, ...] = (OPEN, JUDGE, DELIVER, REHEARSE, SAMPLES)

_OWN_OPTIONS = ("--help", "-h", "--version")


def console() -> None:
    """Run the program with the arguments of the process; the entry point of an installation."""
    sys.exit(main(sys.argv[1:]))


def main(words: Sequence[str]) -> int:
    """Run one command line and return its exit status: 0 met, 1 missed or unstable, 2 unusable input."""
    keep_compiled_kernels()
    _print_whatever_it_is()
    try:
        found = _run(list(words))
        sys.stdout.flush()
    except BrokenPipeError:
        # What is left in the buffer has no reader; without this the interpreter would say so at its end.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return status.PIPE_CLOSED
    except KeyboardInterrupt:
        sys.stderr.write("\nStopped.\n")
        return status.STOPPED
    except SystemExit as end:  # after --help
        return int(end.code or 0)
    except TrimwrightError as error:
        return status.refuse(error)
    return found


def _print_whatever_it_is() -> None:
    """Let a name that the terminal's encoding lacks come out escaped, rather than end the program."""
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, TextIOWrapper):
            stream.reconfigure(errors="backslashreplace")


def _run(words: list[str]) -> int:
    if words and words[0] in _OWN_OPTIONS:
        sys.stdout.write(f"{PROGRAM} {__version__}\n" if words[0] == "--version" else overview())
        return 0
    command, rest = _command(words)
    return command.run(command.read(rest))


def _command(words: list[str]) -> tuple[Command, list[str]]:
    """Return the command that is meant and its arguments; a sheet by itself means the window."""
    if not words:
        return OPEN, []
    first = words[0]
    for command in COMMANDS:
        if command.name == first:
            return command, words[1:]
    if first.startswith("-") and first != "-":
        raise UsageError(f"{PROGRAM}: {unexpected(first, _OWN_OPTIONS, 'a command, a sheet or an option')}")
    if first.endswith(".toml") or os.path.exists(first):  # noqa: PTH110 - Path's refuses what cannot be a name
        return OPEN, words
    raise UsageError(
        f"{PROGRAM}: {unexpected(first, [command.name for command in COMMANDS], 'a command or a tuning sheet')}"
    )


def overview() -> str:
    """Return the help on all commands."""
    width = max(len(command.name) for command in COMMANDS)
    lines = [f"  {command.name:{width}}  {command.sentence.partition('. ')[0].rstrip('.')}." for command in COMMANDS]
    return "\n".join(
        [
            f"usage: {PROGRAM} [SHEET]",
            f"       {PROGRAM} COMMAND ...",
            "",
            "Tune a feedback loop with its limits in sight and deliver a proved controller.",
            "Without a command the window opens, on the sheet or on a built-in loop.",
            "",
            *lines,
            "",
            f"  {PROGRAM} COMMAND --help   shows the options of a command and an example",
            f"  {PROGRAM} --version        shows the version",
            "",
            "Exit status: 0 met, 1 a limit missed or the loop unstable, 2 the input cannot be used.",
            f"Example: {PROGRAM} judge sample_plants/heater.toml",
            "",
        ]
    )
