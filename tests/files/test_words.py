"""What was found in a sheet, in words."""

from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.files import words


@pytest.mark.parametrize(
    ("value", "said"),
    [
        (True, "true"),
        (False, "false"),
        (3, "3"),
        (-0.5, "-0.5"),
        (3.0, "3.0"),
        (float("nan"), "nan"),
        (10**40 - 1, "9" * 40),
        (-(10**40), "a number over 40 digits long"),
        pytest.param(2**20000, "a number over 40 digits long", id="thousands of digits"),
        ("kp", "the text 'kp'"),
        ("", "the text ''"),
        ([], "an empty array"),
        ([[]], "an array of one"),
        ([1, 2], "an array of 2"),
        ({}, "a table"),
        (date(1979, 5, 27), "the date or time 1979-05-27"),
    ],
)
def test_what_a_value_is(value: object, said: str) -> None:
    """Each kind of value of a TOML file has its words; a number stands as it is written."""
    assert words.found(value) == said


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("lag", "'lag'"),
        ("x" * 40, f"'{'x' * 40}'"),
        ("x" * 41, f"'{'x' * 37}...'"),
        ("a\nb", r"'a\nb'"),
        ("it's", "'it's'"),
        ("τ", "'τ'"),
    ],
)
def test_a_text_in_quotes(text: str, said: str) -> None:
    """A long text is shortened to forty characters, a line break made visible, other alphabets left alone."""
    assert words.quoted(text) == said


@given(st.text())
def test_a_quoted_text_is_one_printable_line(text: str) -> None:
    """Whatever is quoted can be printed in one line of bounded length."""
    said = words.quoted(text)
    assert said.isprintable()
    assert len(said) <= 40 * len(r"\U0001f600") + 2


@pytest.mark.parametrize(
    ("value", "said"),
    [(4.0, "4"), (4, "4"), (0.1, "0.1"), (150.0000001, "150.0000001"), (1e-5, "1e-05"), (2.5e20, "2.5e+20")],
)
def test_a_number_has_the_digits_it_needs(value: float, said: str) -> None:
    """No point where none is needed, and no digit lost of what a person writes."""
    assert words.number(value) == said
