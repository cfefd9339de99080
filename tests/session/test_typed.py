"""What is typed, turned into values or into a sentence."""

import re
from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.model.parameters import find
from tuner.model.plant import Spread, spread_percent
from tuner.session import typed
from tuner.session.typed import NOT_NEGATIVE, Bounds, TypedError

FINITE = st.floats(allow_nan=False, allow_infinity=False)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1.5", 1.5),
        ("1,5", 1.5),
        ("2e-3", 2e-3),
        (" 7 s", 7.0),
        ("7s", 7.0),
        (".5", 0.5),
        ("\u22123", -3.0),
        ("+1", 1.0),
    ],
)
def test_numbers_are_read(text: str, value: float) -> None:
    """Points and commas, exponents, the typographic minus, the unit with a space, without, or left out."""
    assert typed.number(text, unit="s") == value


@pytest.mark.parametrize(
    ("text", "bounds", "sentence"),
    [
        ("", NOT_NEGATIVE, "expected a number of at least 0, found nothing"),
        ("-3", NOT_NEGATIVE, 'expected a number of at least 0, found "-3"'),
        ("0", Bounds(0.0, above=True), 'expected a number above 0, found "0"'),
        ("1.5", Bounds(0.0, 10.0, whole=True), 'expected a whole number of at least 0 and at most 10, found "1.5"'),
        ("1,234.5", Bounds(), 'expected a number, found "1,234.5"'),
        ("nan", Bounds(), 'expected a number, found "nan"'),
        ("1e999", Bounds(), 'expected a number, found "1e999"'),
        ("3 min", Bounds(), 'expected the unit s or nothing behind the number, found "min"'),
    ],
)
def test_refused_numbers_say_why(text: str, bounds: Bounds, sentence: str) -> None:
    """Each refusal says what was expected and what was found."""
    with pytest.raises(TypedError, match=f"^{re.escape(sentence)}$"):
        typed.number(text, bounds, "s")


@given(FINITE)
def test_numbers_come_back_exactly(value: float) -> None:
    """A number as it is shown is read as the same number, to the last digit."""
    assert typed.number(typed.shown(value)) == value


def test_bounds_come_from_the_table() -> None:
    """The table of parameters gives the bounds in words."""
    words = Bounds.of(find("controller.delay_samples")).in_words()
    assert words == "a whole number of at least 0 and at most 1000"


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("20 %", Spread(3.2, 4.8, 20.0)),
        ("20%", Spread(3.2, 4.8, 20.0)),
        ("3 to 6", Spread(3.0, 6.0)),
        ("[3, 6]", Spread(3.0, 6.0)),
        ("3 .. 6", Spread(3.0, 6.0)),
        ("  ", None),
    ],
)
def test_spreads_are_read(text: str, expected: Spread | None) -> None:
    """In percent, as two ends, or none."""
    assert typed.spread(text, 4.0) == expected
    assert typed.spread(typed.shown_spread(expected), 4.0) == expected


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        ("5 to 6", 'expected a spread that holds the value 4, found "5 to 6"'),
        ("wide", 'expected a spread such as "20 %" or "3 to 6", found "wide"'),
        ("-5 %", 'expected a number of at least 0, found "-5"'),
    ],
)
def test_refused_spreads_say_why(text: str, sentence: str) -> None:
    """Each refusal says what was expected and what was found."""
    with pytest.raises(TypedError, match=f"^{re.escape(sentence)}$"):
        typed.spread(text, 4.0)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("1 2 3", (1.0, 2.0, 3.0)),
        ("[1, 2, 3]", (1.0, 2.0, 3.0)),
        ("1,2,3", (1.0, 2.0, 3.0)),
        ("1,5 2,5", (1.5, 2.5)),
        ("1,5; 2", (1.5, 2.0)),
        ("1.5,2.5", (1.5, 2.5)),
        ("", ()),
    ],
)
def test_lists_are_read(text: str, expected: tuple[float, ...]) -> None:
    """Spaces, semicolons and commas part; a comma is a decimal sign where it can be nothing else."""
    assert typed.numbers(text) == expected


def test_a_comma_that_could_be_either_is_refused() -> None:
    """One comma between two numbers is one number or two, and nobody guesses."""
    with pytest.raises(TypedError, match="which is one number or two"):
        typed.numbers("1,2")


@given(st.lists(FINITE, max_size=6).map(tuple))
def test_lists_come_back_exactly(values: tuple[float, ...]) -> None:
    """A list as it is shown is read as the same list."""
    assert typed.numbers(typed.shown_numbers(values)) == values


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("-1 ± 2j; -3", (-1 + 2j, -1 - 2j, -3 + 0j)),
        ("\u22121 +/- j2", (-1 + 2j, -1 - 2j)),
        ("-1+2j, -1-2j", (-1 + 2j, -1 - 2j)),
        ("2j; -2j", (2j, -2j)),
        ("±0.5i", (0.5j, -0.5j)),
        ("-1 -2", (-1 + 0j, -2 + 0j)),
        ("-1e-3 ± 1,5j", (-1e-3 + 1.5j, -1e-3 - 1.5j)),
        ("", ()),
    ],
)
def test_complex_lists_are_read(text: str, expected: tuple[complex, ...]) -> None:
    """Pairs by ±, i or j before or behind, pure imaginary ones, and real ones by spaces."""
    assert typed.complex_numbers(text) == expected


@pytest.mark.parametrize(
    ("read", "text", "sentence"),
    [
        (
            typed.complex_numbers,
            "-1 + 2j",
            'expected complex numbers in conjugate pairs, found -1 + 2j alone; write "-1 ± 2j" for both',
        ),
        (typed.complex_numbers, "-1 ± 2k; 3j", 'expected a number such as "-2" or "-1 ± 2j", found "-1 ± 2k"'),
        (typed.rows, "1 2\n3", "expected 2 numbers in every row, found 1 in row 2"),
        (typed.numbers, "1 x", 'expected a number, found "x"'),
    ],
)
def test_refused_lists_say_why(read: Callable[[str], object], text: str, sentence: str) -> None:
    """Each refusal names the item to blame."""
    with pytest.raises(TypedError, match=f"^{re.escape(sentence)}$"):
        read(text)


@given(st.lists(st.tuples(FINITE, FINITE.filter(lambda x: x > 0)), max_size=3), st.lists(FINITE, max_size=3))
def test_roots_come_back_exactly(pairs: list[tuple[float, float]], reals: list[float]) -> None:
    """Roots as they are shown are read as the same roots, conjugates folded into one item."""
    roots = tuple(root for re_, im in pairs for root in (complex(re_, im), complex(re_, -im)))
    everything = (*roots, *(complex(real) for real in reals))
    assert typed.complex_numbers(typed.shown_complex_numbers(everything)) == everything


def test_matrices_come_back() -> None:
    """A matrix is one row a line; empty lines do not count."""
    matrix = ((0.0, 1.0), (-2.0, -0.5))
    assert typed.rows(typed.shown_rows(matrix) + "\n\n") == matrix


def test_no_zero_is_negative() -> None:
    """A zero that came out of a conversion with a sign is shown without one."""
    assert typed.shown(-0.0) == "0"
    assert typed.shown_complex(complex(-0.0, 2.0)) == "0 + 2j"


KNOWN = {"gain": 2.0, "dead time": 4.0, "pole 1": 1.0, "pole 11": 1.0, "d": 0.5}


def test_what_drifts_is_typed_a_line_each() -> None:
    """By name and spread, in any order; a longer name is not taken for a shorter one; shown again as it was typed."""
    text = "gain 15 %\n dead time: 3 to 6 ;pole 11 = 10 %\n\n"
    found = typed.drifts(text, KNOWN)
    assert [(one.name, one.value) for one in found] == [("gain", 2.0), ("dead time", 4.0), ("pole 11", 1.0)]
    assert found[0].spread == spread_percent(2.0, 15.0)
    assert found[1].spread == Spread(3.0, 6.0)
    assert typed.shown_drifts(found) == "gain 15 %\ndead time 3 to 6\npole 11 10 %"
    assert typed.drifts(typed.shown_drifts(found), KNOWN) == found
    assert typed.drifts(" \n", KNOWN) == ()


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        (
            "gian 10 %",
            'expected a number of the plant and its spread, such as "gain 15 %", found "gian 10 %"; the nearest valid '
            "name is gain",
        ),
        (
            "pole 2 10 %",
            'expected a number of the plant and its spread, such as "gain 15 %", found "pole 2 10 %"; the nearest '
            "valid name is pole 1",
        ),
        ("7", 'expected a number of the plant and its spread, such as "gain 15 %", found "7"'),
        ("gain 5 %\ngain 6 %", "expected each spread once, found two of gain"),
        ("gain", 'expected a spread behind gain, such as "gain 10 %"'),
        ("dead time 5 to 6", 'expected a spread that holds the value 4, found "5 to 6"'),
        ("d much", 'expected a spread such as "20 %" or "3 to 6", found "much"'),
    ],
)
def test_what_cannot_drift_is_said(text: str, sentence: str) -> None:
    """In one sentence, with the nearest name where one is near."""
    with pytest.raises(typed.TypedError) as caught:
        typed.drifts(text, KNOWN)
    assert str(caught.value) == sentence
