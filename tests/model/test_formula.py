"""The tree of a formula can be walked."""

from tuner.model.formula import (
    Exponential,
    Name,
    Negative,
    Number,
    Power,
    Product,
    Quotient,
    SquareRoot,
    Sum,
    children,
    names,
)

S, A, B = Name("s", 0), Name("a", 4), Name("b", 8)


def test_children_of_every_kind_of_node() -> None:
    """Each node gives what is directly below it, in the order of reading."""
    assert children(Number(1.0)) == children(A) == ()
    assert children(Sum((S, A))) == children(Product((S, A))) == children(Quotient(S, A)) == (S, A)
    assert children(Power(S, A, 2)) == (S, A)
    assert children(Negative(A)) == children(Exponential(A, 0)) == children(SquareRoot(A, 0)) == (A,)


def test_names_are_found_wherever_they_stand() -> None:
    """Every parameter comes with its first place; s is none."""
    again = Name("a", 20)
    tree = Quotient(
        Product((A, Exponential(Negative(Product((B, S))), 6))), Sum((Power(SquareRoot(again, 18), S, 19), A))
    )
    assert names(tree) == {"a": 4, "b": 8}
