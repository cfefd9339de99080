"""The checked tree: what it holds of the law, and what it refuses."""

import pytest

from tuner.law import pid
from tuner.law.translate import (
    Assignment,
    Choice,
    Comparison,
    Name,
    Number,
    Operation,
    Routine,
    SubsetError,
    assigned,
    parse,
    read,
    used,
)


def routine() -> Routine:
    """Return the law, read."""
    return read(pid.law, (*pid.INPUTS, *pid.PARAMETERS))


def test_the_law_lies_within_the_subset() -> None:
    """Its arguments are inputs, state and parameters, and it returns the state in order."""
    law = routine()
    assert law.arguments == (*pid.INPUTS, *pid.STATE, *pid.PARAMETERS)
    assert law.results == tuple(Name(name) for name in pid.STATE)


def test_every_state_is_assigned_and_the_rest_are_locals() -> None:
    """What is assigned is a state or a local; inputs and parameters never are."""
    law = routine()
    assert set(assigned(law.body)) == set(pid.STATE) | set(law.locals)
    assert law.locals == ("asked", "led", "found", "proportional", "weighted", "wanted", "allowed")


def test_a_small_function_becomes_its_tree() -> None:
    """Operations keep their order, comparisons theirs, and the comment above a statement stays with it."""
    found = parse(
        "def f(a, b):\n    # Doubled.\n    c = (a + b) * 2.0\n    if a < b and b != c:\n        c = a\n    return c\n"
    )
    total = Operation("*", Operation("+", Name("a"), Name("b")), Number(2.0))
    conditions = (Comparison("<", Name("a"), Name("b")), Comparison("!=", Name("b"), Name("c")))
    choice = Choice(conditions, (Assignment("c", Name("a")),), ())
    assert found == Routine("f", ("a", "b"), (Assignment("c", total, "Doubled."), choice), (Name("c"),))
    assert used(choice) == {"a", "b", "c"}


@pytest.mark.parametrize(
    ("body", "sentence"),
    [
        ("return a / b", "this expression is outside the subset of the law: a / b"),
        ("return -a", "this expression is outside the subset of the law: -a"),
        ("return a + 1", "this expression is outside the subset of the law: 1"),
        ("return a + True", "this expression is outside the subset of the law: True"),
        ("return a * 1e999", "this expression is outside the subset of the law: 1e999"),
        ("return min(a, b)", "this expression is outside the subset of the law: min(a, b)"),
        ("return a if a < b else b", "this expression is outside the subset of the law: a if a < b else b"),
        ("return d", "a name that has no value on every path is outside the subset of the law: d"),
        ("return", "a return without a value is outside the subset of the law: return"),
        ("a += 1.0\nreturn a", "this statement is outside the subset of the law: a += 1.0"),
        ("for i in b: a = i\nreturn a", "this statement is outside the subset of the law: for i in b: a = i"),
        (
            "a, b = b, a\nreturn a",
            "an assignment to anything but one name is outside the subset of the law: a, b = b, a",
        ),
        (
            "a = b = 1.0\nreturn a",
            "an assignment to anything but one name is outside the subset of the law: a = b = 1.0",
        ),
        ("k = 1.0\nreturn a", "an assignment to a constant is outside the subset of the law: k = 1.0"),
    ],
)
def test_anything_else_is_refused_with_its_text(body: str, sentence: str) -> None:
    """Each refusal names the function, the line and the offending text."""
    source = "def f(a, b, k):\n" + "".join(f"    {line}\n" for line in body.splitlines())
    with pytest.raises(SubsetError) as caught:
        parse(source, constant=("k",))
    assert str(caught.value) == f"f, line 2: {sentence}"


@pytest.mark.parametrize("condition", ["a or b", "a", "not a < b", "a < b < 1.0", "a is b", "a < b or b < a"])
def test_conditions_are_comparisons_joined_by_and(condition: str) -> None:
    """Chained, negated and alternative comparisons differ between languages, and are refused."""
    with pytest.raises(SubsetError, match="a condition that is not one comparison, or several joined by `and`"):
        parse(f"def f(a, b):\n    if {condition}:\n        a = b\n    return a\n")


def test_a_local_must_have_a_value_on_every_path() -> None:
    """A local set in one branch only would be garbage in C after the other."""
    with pytest.raises(SubsetError, match="no value on every path"):
        parse("def f(a):\n    if a < 0.0:\n        c = a\n    return c\n")
    both = parse("def f(a):\n    if a < 0.0:\n        c = a\n    else:\n        c = 0.0\n    return c\n")
    assert both.locals == ("c",)


@pytest.mark.parametrize("head", ["def f(a, b=1.0):", "def f(a, *b):", "def f(a, *, b):", "@cache\ndef f(a, b):"])
def test_arguments_are_plain(head: str) -> None:
    """Defaults, keywords, rests and decorators are refused."""
    with pytest.raises(SubsetError, match="a decorator, a default or an argument that is not plain"):
        parse(f"{head}\n    return a\n")


def test_a_function_must_end_in_a_return() -> None:
    """There is one way out, at the end."""
    with pytest.raises(SubsetError, match="a function without a return at its end"):
        parse("def f(a):\n    a = a + 1.0\n")
    with pytest.raises(SubsetError, match=r"expected one function, found: a = 1\.0"):
        parse("a = 1.0\n")
