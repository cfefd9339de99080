"""Which command is meant, and every refusal of the command line, word for word."""

import re

import pytest

from tuner import __version__
from tuner.cli import main as command_line
from tuner.cli.command import Arguments, Command, Parser
from tuner.cli.main import COMMANDS, main

Captured = pytest.CaptureFixture[str]


def command(name: str, run: object) -> Command:
    """Return a command without arguments."""
    return Command(name, "Try.", name, lambda _: None, run)  # type: ignore[arg-type] # tests hand in what they need


def test_version(capsys: Captured) -> None:
    """The version is that of the package."""
    assert main(["--version"]) == 0
    assert capsys.readouterr().out == f"trimwright {__version__}\n"


def test_the_overview_names_every_command(capsys: Captured) -> None:
    """`--help` lists the commands, says the exit status and shows an example."""
    assert main(["--help"]) == 0

    said = capsys.readouterr().out
    assert all(re.search(rf"^  {one.name} ", said, re.MULTILINE) for one in COMMANDS)
    assert "Exit status: 0 met, 1 a limit missed or the loop unstable, 2 the input cannot be used.\n" in said
    assert said.endswith("Example: trimwright judge sample_plants/heater.toml\n")


@pytest.mark.parametrize("one", COMMANDS, ids=lambda one: one.name)
def test_every_command_explains_itself(one: Command, capsys: Captured) -> None:
    """`COMMAND --help` ends well and shows an example."""
    assert main([one.name, "--help"]) == 0
    assert f"Example: trimwright {one.example}" in " ".join(capsys.readouterr().out.split())


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (
            ["juge", "x.toml"],
            "trimwright: expected a command or a tuning sheet, found 'juge'; the nearest valid name is judge\n",
        ),
        (["zzz"], "trimwright: expected a command or a tuning sheet, found 'zzz'\n"),
        (["z" * 300], f"trimwright: expected a command or a tuning sheet, found '{'z' * 300}'\n"),
        (
            ["--versoin"],
            "trimwright: expected a command, a sheet or an option, found '--versoin'; "
            "the nearest valid name is --version\n",
        ),
        (
            ["judge", "x.toml", "--jsn"],
            "trimwright judge: expected an option, found '--jsn'; the nearest valid name is --json\n",
        ),
        (["judge"], "trimwright judge: the following arguments are required: SHEET\n"),
        (["deliver", "x.toml"], "trimwright deliver: the following arguments are required: --to\n"),
        (["open", "a.toml", "b.toml"], "trimwright open: expected nothing more, found 'b.toml'\n"),
    ],
)
def test_a_command_line_that_cannot_be_used(words: list[str], said: str, capsys: Captured) -> None:
    """Status 2 and one sentence on stderr, with the nearest valid name where one is near."""
    assert main(words) == 2

    told = capsys.readouterr()
    assert (told.out, told.err) == ("", said)


def test_ctrl_c_says_one_line(monkeypatch: pytest.MonkeyPatch, capsys: Captured) -> None:
    """An interrupted command ends with status 130 and without a traceback."""

    def interrupted(_: Arguments) -> int:
        raise KeyboardInterrupt

    monkeypatch.setattr(command_line, "COMMANDS", (command("try", interrupted),))

    assert main(["try"]) == 130
    assert capsys.readouterr().err == "\nStopped.\n"


def test_a_sheet_by_itself_opens_the_window(monkeypatch: pytest.MonkeyPatch) -> None:
    """No word, or the name of a sheet, means `open`."""
    opened: list[str | None] = []

    def run(arguments: Arguments) -> int:
        opened.append(arguments.sheet)
        return 0

    def declare(parser: Parser) -> None:
        parser.add_argument("sheet", nargs="?")

    one = Command("open", "Open.", "open", declare, run)
    monkeypatch.setattr(command_line, "OPEN", one)
    monkeypatch.setattr(command_line, "COMMANDS", (one,))

    assert [main([]), main(["kiln.toml"]), main(["open"]), main(["open", "kiln.toml"])] == [0, 0, 0, 0]
    assert opened == [None, "kiln.toml", None, "kiln.toml"]
