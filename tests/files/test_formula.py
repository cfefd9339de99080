"""Plant formulas are read as ordinary mathematics, and what is wrong is told where it stands."""

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from tuner.errors import FormulaError
from tuner.files.formula import DEEPEST, LONGEST, is_name, parse
from tuner.model.formula import (
    Name,
    names,
)

PLACE = "an operator such as + or *, or the end of the formula"
OPERAND = "a number, a name or an opening bracket"
REFUSED = [
    ("", 0, "a formula in s", "nothing"),
    ("  ", 0, "a formula in s", "nothing"),
    ("gain & 2", 5, PLACE, "'&'"),
    ("& 2", 0, OPERAND, "'&'"),
    ("(gain & 2)", 6, "an operator such as + or *, or ')'", "'&'"),
    ("[gain = 2]", 6, "an operator such as + or *, or ']'", "'='"),
    ("s + ", 4, OPERAND, "the end of the formula"),
    ("s * / 2", 4, OPERAND, "'/'"),
    ("()", 1, OPERAND, "')'"),
    ("exp -s", 4, "an opening bracket", "'-'"),
    ("sqrt 2", 5, "an opening bracket", "'2'"),
    ("1,5 s", 1, "an operator such as + or *, or a point as the decimal sign", "','"),
    ("1.2.3", 3, PLACE, "'.3'"),
    ("s 2", 2, PLACE, "'2'"),
    ("_a", 0, OPERAND, "'_'"),
    ("{s}", 0, OPERAND, "'{'"),
    ("s²²^2", 3, PLACE, "'^'"),
    ("(s+1", 0, "a ')' that closes this '('", "none"),
    ("s+1)", 3, "an opening bracket before this one", "')' alone"),
    ("[s+1)", 4, "']' for the '[' at character 1", "')'"),
    ("(" * 200 + "s" + ")" * 200, DEEPEST, f"parts nested at most {DEEPEST} deep", "deeper ones"),
    ("s^" * 200 + "s", 0, f"parts nested at most {DEEPEST} deep", "deeper ones"),
    ("1" + "/s" * 200, 0, f"parts nested at most {DEEPEST} deep", "deeper ones"),
    ("s" * (LONGEST + 1), LONGEST, "at most 10,000 characters", "10,001"),
]


@pytest.mark.parametrize(("text", "position", "expected", "found"), REFUSED)
def test_a_wrong_formula_is_told(text: str, position: int, expected: str, found: str) -> None:
    """Where a formula goes wrong is said, with what was expected there in an engineer's words, and what was found."""
    with pytest.raises(FormulaError) as caught:
        parse(text)
    error = caught.value
    assert (error.position, error.expected, error.found) == (position, expected, found)
    assert str(error) == f"expected {expected} at character {position + 1}, found {found}"


def test_what_the_grammar_refuses_has_its_text_too() -> None:
    """A formula that could be meant either way is told as every other, with the formula for an editor to show."""
    with pytest.raises(
        FormulaError, match=r"^expected brackets around all that '/' divides by, .* at character 2, "
    ) as caught:
        parse("1/2s")
    assert (caught.value.text, caught.value.position) == ("1/2s", 1)


def test_names_keep_their_first_place() -> None:
    """The tree knows where each name was first used; the variable s is no parameter."""
    assert names(parse("gain exp(-L s)/(τ s + gain)")) == {"gain": 0, "L": 10, "τ": 16}


@pytest.mark.parametrize(
    ("text", "usable"),
    [
        ("gain", True),
        ("τ₁", True),
        ("K_1", True),
        ("e", True),
        ("s", False),
        ("exp", False),
        ("pi", False),
        ("1a", False),
        ("_a", False),
        ("a-b", False),
        ("a²", False),
        ("²", False),
        ("", False),
        ("a\n", False),
    ],
)
def test_a_usable_name_is_one_that_a_formula_reads(text: str, usable: bool) -> None:
    """A name that parameters may take is exactly one that is read back as one name other than s."""
    assert is_name(text) == usable


@given(st.text(max_size=8))
def test_usable_names_and_formulas_agree(text: str) -> None:
    """Whatever counts as a usable name is read by the formula as that one name."""
    if is_name(text):
        assert parse(text) == Name(text, 0)


SIGNS = "s gain exp sqrt e pi ( ) [ ] { } + - * / ^ ** ² ⁻ 2 1e 3. . , τ · _ \0 \u2212 \n '' e^("
pieces = st.sampled_from([" ", *SIGNS.split(" ")])


@given(st.lists(pieces, max_size=30).map("".join) | st.text(max_size=50))
@example("-" * 5000 + "s")
@example("s" + "²" * 400)
@example("s+" * 4000 + "s")
@example("s " * 4000)
def test_any_text_is_a_formula_or_told(text: str) -> None:
    """No text makes anything but a tree, which can be walked, or a sentence with a place within the text."""
    try:
        place = max(names(parse(text)).values(), default=0)
    except FormulaError as error:
        place = error.position
    assert 0 <= place <= len(text)
