"""The law printed as C99."""

from hypothesis import given
from hypothesis import strategies as st

from tuner.law import print_c
from tuner.law.translate import parse


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_numbers_are_hexadecimal_and_exact(value: float) -> None:
    """The constant reads back as the very same bits, the sign of zero included."""
    text = print_c.number(value)
    assert float.fromhex(text).hex() == value.hex()
    assert "p" in text


def test_locals_are_declared_in_the_smallest_block_that_holds_them() -> None:
    """A local of one branch is declared there; one of both branches before them."""
    source = (
        "def f(a):\n    if a < 0.0 and a != 1.0:\n        # Only here.\n        inner = a\n        both = inner\n"
        "    else:\n        both = 0.0\n    return both\n"
    )
    found = parse(source)
    assert print_c.block(found.body, {}, found.locals, "") == [
        "double both;",
        "if ((a < 0.0) &&",
        "    (a != 1.0))",
        "{",
        "    double inner;",
        "",
        "    /* Only here. */",
        "    inner = a;",
        "    both = inner;",
        "}",
        "else",
        "{",
        "    both = 0.0;",
        "}",
    ]


def test_single_conditions_carry_no_second_parentheses() -> None:
    """Compilers warn about ``if ((a == b))``."""
    found = parse("def f(a, b):\n    if a == b:\n        a = 0.0\n    return a\n")
    assert print_c.block(found.body, {}, (), "")[0] == "if (a == b)"
