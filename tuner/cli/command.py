"""A command as data, and the reader of its arguments, whose refusals are one sentence each."""

import argparse
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import NoReturn

from tuner.errors import TrimwrightError, nearest

PROGRAM = "trimwright"

Arguments = argparse.Namespace


class UsageError(TrimwrightError):
    """Arguments that cannot be used, with the reason."""


class Parser(argparse.ArgumentParser):
    """The standard reader of arguments; a refusal is raised instead of printed."""

    def error(self, message: str) -> NoReturn:
        """Raise the refusal as a sentence that names the command."""
        raise UsageError(f"{self.prog}: {message}")

    def option_names(self) -> list[str]:
        """Return every option that may be given."""
        return [name for action in self._actions for name in action.option_strings]


@dataclass(frozen=True, slots=True)
class Command:
    """One command.

    Parameters
    ----------
    name, sentence, example : str
        The word it is called by, what it does, and a line that shows it.
    declare : callable
        Adds its arguments to a parser.
    run : callable
        Does it and returns the exit status.
    """

    name: str
    sentence: str
    example: str
    declare: Callable[[Parser], None]
    run: Callable[[Arguments], int]

    def parser(self) -> Parser:
        """Return the reader of this command's arguments."""
        parser = Parser(
            prog=f"{PROGRAM} {self.name}",
            description=self.sentence,
            epilog=f"Example: {PROGRAM} {self.example}",
            allow_abbrev=False,
        )
        self.declare(parser)
        return parser

    def read(self, words: Sequence[str]) -> Arguments:
        """Return the arguments as names and values.

        Raises
        ------
        UsageError
            For a missing, unknown or unusable argument, with the nearest valid name.
        """
        parser = self.parser()
        known, unknown = parser.parse_known_args(words)
        if unknown and unknown[0].startswith("-"):
            raise UsageError(f"{parser.prog}: {unexpected(unknown[0], parser.option_names(), 'an option')}")
        if unknown:
            raise UsageError(f"{parser.prog}: {unexpected(unknown[0], (), 'nothing more')}")
        return known


def unexpected(word: str, valid: Sequence[str], what: str) -> str:
    """Say that a word is not one of the valid ones, and which is nearest."""
    near = nearest(word.partition("=")[0], valid)
    hint = f"; the nearest valid name is {near}" if near else ""
    return f"expected {what}, found {word!r}{hint}"


def whole_number(low: int, high: int) -> Callable[[str], int]:
    """Return a reader of whole numbers within bounds."""

    def read(word: str) -> int:
        try:
            number = int(word)
        except ValueError:
            number = low - 1
        if low <= number <= high:
            return number
        raise argparse.ArgumentTypeError(f"expected a whole number from {low} to {high}, found {word!r}")

    return read
