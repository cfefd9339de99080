"""The grammar of formulas: what each way of writing means, the tree it makes, and what it refuses by itself."""

from collections.abc import Callable
from math import exp, pi, prod, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.files.grammar import RefusedError, parser
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
)


def parse(text: str) -> Node:
    """Return the tree of a formula."""
    return parser().parse(text)  # type: ignore[return-value] # its transformer makes a node where the type says a tree


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


BELOW = "brackets around all that '/' divides by, or a sign between the factors after it"
EITHER = "a product without a sign, which could be meant either way"
TOO_LARGE = "a number that is not too large to compute with"
REFUSED = [
    ("1e999 s", 0, TOO_LARGE, "'1e999'"),
    ("e^-delay s", 2, "an opening bracket around the exponent of e", "none"),
    ("e^2", 2, "an opening bracket around the exponent of e", "none"),
    ("1/2s", 1, BELOW, EITHER),
    ("1/(s+1)(s+2)", 1, BELOW, EITHER),
    ("1/(s+1) exp(-s) (s+2)", 1, BELOW, EITHER),
    ("a + b/a b", 5, BELOW, EITHER),
    ("s" + "²" * 400, 1, TOO_LARGE, f"'{'²' * 37}...'"),
    ("exp(-s)*1e999", 8, TOO_LARGE, "'1e999'"),
]


@pytest.mark.parametrize(("text", "position", "expected", "found"), REFUSED)
def test_what_the_grammar_could_read_is_refused(text: str, position: int, expected: str, found: str) -> None:
    """What could be meant either way, or is beyond computing, is refused where it stands."""
    with pytest.raises(RefusedError) as caught:
        parse(text)
    refusal = caught.value
    assert (refusal.position, refusal.expected, refusal.found) == (position, expected, found)


ONE, TWO, THREE = Number(1.0), Number(2.0), Number(3.0)
TREES = [
    ("2", TWO),
    ("((2))", TWO),
    ("+2", TWO),
    ("--2", TWO),
    ("-2", Negative(TWO)),
    ("3 a b(2)", Product((THREE, Name("a", 2), Name("b", 4), TWO))),
    ("1 + 2 - 3", Sum((ONE, TWO, Negative(THREE)))),
    ("1 - (2 + 3)", Sum((ONE, Negative(Sum((TWO, THREE)))))),
    ("1/2/3", Quotient(Quotient(ONE, TWO), THREE)),
    ("1/2*3", Product((Quotient(ONE, TWO), THREE))),
    ("1/2 exp(3)", Product((Quotient(ONE, TWO), Exponential(THREE, 4)))),
    ("1*2*3", Product((ONE, TWO, THREE))),
    ("1^2^3", Power(ONE, Power(TWO, THREE, 3), 1)),
    ("-1^2", Negative(Power(ONE, TWO, 2))),
    ("2 sqrt(1)", Product((TWO, SquareRoot(ONE, 2)))),
    ("1²", Power(ONE, TWO, 1)),
]


@pytest.mark.parametrize(("text", "tree"), TREES)
def test_each_rule_makes_its_node(text: str, tree: Node) -> None:
    """Products and sums are flat, brackets leave no trace, and a node knows where its word or sign stands."""
    assert parse(text) == tree


@given(st.floats(0.0, 1e300))
def test_every_number_is_read_as_it_is_written(number: float) -> None:
    """Whatever finite number is spelt out is read back the same."""
    assert parse(repr(number)) == Number(number)


def test_the_parser_is_made_once() -> None:
    """The grammar is compiled at first use and kept."""
    assert parser() is parser()
