"""Plant formulas are read as ordinary mathematics, and what is wrong is told where it stands."""

from collections.abc import Callable
from math import exp, pi, prod, sqrt

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from tuner.errors import FormulaError
from tuner.files.formula import DEEPEST, LONGEST, is_name, parse
from tuner.model.formula import (
    Exponential,
    Name,
    Negative,
    Node,
    Number,
    Power,
    Product,
    Quotient,
    SquareRoot,
    Sum,
    children,
    names,
)

VALUES = {
    "s": 0.7,
    "gain": 1.9,
    "lag": 2.5,
    "delay": 1.3,
    "s2": 3.0,
    "e": 5.0,
    "τ": 0.4,
    "K_1": 6.0,
    "a": 2.0,
    "b": 3.0,
}


def value(node: Node) -> float:
    """Compute a tree with the values above, independently of the program's own evaluation."""
    if isinstance(node, Number):
        return node.value
    if isinstance(node, Name):
        return VALUES[node.name]
    return COMPUTE[type(node)](*(value(below) for below in children(node)))


COMPUTE: dict[type, Callable[..., float]] = {
    Sum: lambda *terms: sum(terms),
    Product: lambda *factors: prod(factors),
    Quotient: lambda over, under: over / under,
    Negative: lambda of: -of,
    Power: lambda base, exponent: base**exponent,
    Exponential: exp,
    SquareRoot: sqrt,
}


S, GAIN, LAG, DELAY, TAU = (VALUES[name] for name in ("s", "gain", "lag", "delay", "τ"))
MEANT = [
    ("gain exp(-delay s) / ((lag s + 1)(τ s + 1))", GAIN * exp(-DELAY * S) / ((LAG * S + 1) * (TAU * S + 1))),
    ("2/(10 s+1) exp(-3 s)", 2 / (10 * S + 1) * exp(-3 * S)),
    ("2/(10 s+1) exp(-3 s)^2", 2 / (10 * S + 1) * exp(-3 * S) ** 2),
    ("2/(10 s+1) e^(-3 s)", 2 / (10 * S + 1) * exp(-3 * S)),
    ("gain(lag s + 1)", GAIN * (LAG * S + 1)),
    ("2s", 2 * S),
    ("s2", 3.0),
    ("1e-3 s", 1e-3 * S),
    ("3e s", 3 * 5.0 * S),
    ("2exp(-3s)", 2 * exp(-3 * S)),
    ("2e3", 2000.0),
    (".5 + 5.", 5.5),
    ("-s^2", -(S**2)),
    ("2^-s", 2**-S),
    ("2^3^2", 512.0),
    ("(-2)^2", 4.0),
    ("s**2", S**2),
    ("s² + s⁻¹ + 2³", S**2 + 1 / S + 8),
    ("s^{2}", S**2),
    ("e^(-delay s)", exp(-DELAY * S)),
    ("e^{-delay s}", exp(-DELAY * S)),
    ("e ^ [2]", exp(2)),
    ("e", 5.0),
    ("1/[s(s + 1)]", 1 / (S * (S + 1))),
    ("8/4/2", 1.0),
    ("8/4*2", 4.0),
    ("8 - 4 - 2", 2.0),
    ("2*-3", -6.0),
    ("a/-b", -2 / 3),
    ("--2", 2.0),
    ("+2", 2.0),
    ("a \u2212 b \u2013 1", -2.0),
    ("a·b \u00d7 2 \u22c5 3", 36.0),
    ("6 ÷ 2", 3.0),
    ("sqrt(K_1 a)", sqrt(12.0)),
    ("2 pi s", 2 * pi * S),
    ("π", pi),
    ("s\u00a0+\n1", S + 1),
    ("a b/2", 3.0),
]


@pytest.mark.parametrize(("text", "meant"), MEANT)
def test_a_formula_means_what_mathematics_means(text: str, meant: float) -> None:
    """Products without signs, powers, signs, brackets and the dead time are read as they are written by hand."""
    assert value(parse(text)) == pytest.approx(meant, rel=1e-14)


PLACE = "an operator such as + or *, or the end of the formula"
OPERAND = "a number, a name or an opening bracket"
BELOW = "brackets around all that '/' divides by, or a sign between the factors after it"
EITHER = "a product without a sign, which could be meant either way"
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
    ("1e999 s", 0, "a number that is not too large to compute with", "'1e999'"),
    ("e^-delay s", 2, "an opening bracket around the exponent of e", "none"),
    ("e^2", 2, "an opening bracket around the exponent of e", "none"),
    ("1/2s", 1, BELOW, EITHER),
    ("1/(s+1)(s+2)", 1, BELOW, EITHER),
    ("1/(s+1) exp(-s) (s+2)", 1, BELOW, EITHER),
    ("a + b/a b", 5, BELOW, EITHER),
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
