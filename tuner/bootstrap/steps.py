"""The steps of making an environment: one line each on stderr, and the output of the commands in a log file."""

import subprocess
import sys
import time
from pathlib import Path
from typing import IO, NamedTuple

_BUSY = "another program is installing packages; wait for it and run the same command again."
_OFFLINE = "the package server cannot be reached; is this machine online?"
_REASONS = (
    ("Could not get lock", _BUSY),
    ("Unable to acquire the dpkg", _BUSY),
    ("Could not resolve", _OFFLINE),
    ("Temporary failure", _OFFLINE),
    ("NewConnectionError", _OFFLINE),
    ("NameResolutionError", _OFFLINE),
    ("CERTIFICATE_VERIFY_FAILED", "the certificate of the package server is not trusted on this machine."),
    ("No space left", "the disk is full."),
)


class SetUpError(Exception):
    """The environment cannot be made; the text says what is missing and what to do."""


class Outcome(NamedTuple):
    """How a command ended, and the likeliest reason in a sentence if it failed."""

    status: int
    reason: str


class Steps:
    """Says what is being done and how long it has taken, and runs the commands that do it."""

    def __init__(self, log: Path) -> None:
        self.log = log
        self.descriptor: int | None = None
        self._start = time.monotonic()

    def say(self, text: str) -> None:
        """Write one line with the seconds since the start."""
        sys.stderr.write(f"[{time.monotonic() - self._start:4.0f} s] {text}\n")
        sys.stderr.flush()

    def say_waiting(self) -> None:
        """Say that another run has the lock."""
        self.say("Another run is making the environment; waiting for it.")

    def run(self, title: str, command: list[str], environment: dict[str, str] | None = None) -> Outcome:
        """Run a command with its output in the log.

        The lock goes along to the command, so that one that outlives this process is waited for as well.
        """
        self.say(title[0].upper() + title[1:] + " ...")
        with self.log.open("a+", encoding="utf-8", errors="replace") as log:
            log.write(f"\n$ {subprocess.list2cmdline(command)}\n")
            log.flush()
            begin = log.tell()
            status = self._call(command, log, environment)
            log.seek(begin)
            return Outcome(status, _reason(log.read()) if status else "")

    def _call(self, command: list[str], log: IO[str], environment: dict[str, str] | None) -> int:
        inherited = () if self.descriptor is None or sys.platform == "win32" else (self.descriptor,)
        return subprocess.call(
            command,
            stdin=subprocess.DEVNULL,
            stdout=log,
            stderr=subprocess.STDOUT,
            env=environment,
            pass_fds=inherited,
        )


def _reason(output: str) -> str:
    """Return why a command failed: in our words for the usual causes, else its own last error line."""
    for sign, reason in _REASONS:
        if sign in output:
            return reason
    lines = [line.strip() for line in output.splitlines() if line.strip()]
    errors = [line for line in lines if line.upper().startswith(("E:", "ERROR", "FATAL"))]
    return (errors or lines or ["it said nothing."])[-1]
