"""A command reads its arguments, and refuses others in one sentence."""

import argparse

import pytest

from tuner.cli.command import Arguments, Command, Parser, UsageError, unexpected, whole_number
from tuner.errors import TrimwrightError


def declare(parser: Parser) -> None:
    """Add a sheet, a flag and a number."""
    parser.add_argument("sheet", metavar="SHEET", help="what to weigh")
    parser.add_argument("--heavy", action="store_true")
    parser.add_argument("--count", type=whole_number(1, 30), default=7, metavar="N")


WEIGH = Command("weigh", "Weigh a sheet. Slowly.", "weigh a.toml --heavy", declare, lambda _: 0)


def test_arguments_are_read_in_any_order() -> None:
    """Options may stand before or behind; what is not given has its default."""
    assert WEIGH.read(["--count", "3", "a.toml", "--heavy"]) == Arguments(sheet="a.toml", heavy=True, count=3)
    assert WEIGH.read(["-"]) == Arguments(sheet="-", heavy=False, count=7)


def test_what_follows_two_dashes_is_no_option() -> None:
    """A sheet whose name begins with a dash can be named."""
    assert WEIGH.read(["--", "--heavy"]) == Arguments(sheet="--heavy", heavy=False, count=7)


@pytest.mark.parametrize(
    ("words", "said"),
    [
        ([], "the following arguments are required: SHEET"),
        (["a.toml", "--hevy"], "expected an option, found '--hevy'; the nearest valid name is --heavy"),
        (["a.toml", "--cuont=3"], "expected an option, found '--cuont=3'; the nearest valid name is --count"),
        (["a.toml", "--heav"], "expected an option, found '--heav'; the nearest valid name is --heavy"),
        (["a.toml", "--zzz"], "expected an option, found '--zzz'"),
        (["a.toml", "b.toml"], "expected nothing more, found 'b.toml'"),
        (["a.toml", "--count"], "argument --count: expected one argument"),
        (["a.toml", "--count", "0"], "argument --count: expected a whole number from 1 to 30, found '0'"),
    ],
)
def test_arguments_that_cannot_be_used(words: list[str], said: str) -> None:
    """One sentence that begins with the command, and the nearest option where one is near; none is abbreviated."""
    with pytest.raises(UsageError) as refusal:
        WEIGH.read(words)
    assert str(refusal.value) == f"trimwright weigh: {said}"
    assert isinstance(refusal.value, TrimwrightError)


def test_help_explains_and_shows_an_example(capsys: pytest.CaptureFixture[str]) -> None:
    """The help ends the process well and holds the sentence, the arguments and the example."""
    with pytest.raises(SystemExit) as end:
        WEIGH.read(["--help"])
    said = capsys.readouterr().out
    assert end.value.code == 0
    assert "Weigh a sheet. Slowly." in said
    assert "what to weigh" in said
    assert said.endswith("Example: trimwright weigh a.toml --heavy\n")


def test_every_option_is_a_valid_name() -> None:
    """The names that a misspelt option is compared with are all there are, help included."""
    assert WEIGH.parser().option_names() == ["-h", "--help", "--heavy", "--count"]


def test_the_value_of_an_option_does_not_hide_its_name() -> None:
    """The nearest name is sought for what stands before the equals sign; without one near there is no hint."""
    assert unexpected("--famly=a very long value", ["--family"], "an option") == (
        "expected an option, found '--famly=a very long value'; the nearest valid name is --family"
    )
    assert unexpected("x", [], "a sheet") == "expected a sheet, found 'x'"


@pytest.mark.parametrize(("word", "number"), [("1", 1), ("30", 30), (" 7 ", 7), ("+7", 7)])
def test_a_whole_number_within_its_bounds(word: str, number: int) -> None:
    """Both bounds belong to the range."""
    assert whole_number(1, 30)(word) == number


@pytest.mark.parametrize("word", ["0", "31", "-3", "1.0", "many", "", "9" * 5000])
def test_what_is_no_whole_number_within_its_bounds(word: str) -> None:
    """Anything else is refused with the bounds and what was found, numbers beyond spelling out too."""
    with pytest.raises(argparse.ArgumentTypeError) as refusal:
        whole_number(1, 30)(word)
    assert str(refusal.value) == f"expected a whole number from 1 to 30, found {word!r}"
