"""The expressions of the law as text."""

from tuner.law.expressions import bare, comparison, expression
from tuner.law.translate import Comparison, Name, Number, Operation


def test_expressions_are_parenthesised_and_respelt() -> None:
    """Every operation stands in parentheses; only the outermost pair may go."""
    node = Operation("-", Operation("*", Name("a"), Number(2.0)), Name("b"))
    assert expression(node, {"b": "state->b"}) == "((a * 2.0) - state->b)"
    assert bare(node, {}) == "(a * 2.0) - b"
    assert bare(Name("a"), {}) == "a"


def test_comparisons_respell_both_sides() -> None:
    """Names are respelt on either side of the sign."""
    assert comparison(Comparison("<", Name("a"), Name("b")), {"a": "A"}) == "A < b"
