"""A plant formula as a tree: ordinary mathematics in the variable s and named parameters."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Number:
    """A number."""

    value: float


@dataclass(frozen=True, slots=True)
class Name:
    """A named parameter, or the variable s; `position` is the index of its first character."""

    name: str
    position: int


@dataclass(frozen=True, slots=True)
class Sum:
    """A sum; a difference is a sum with a negated term."""

    terms: tuple["Node", ...]


@dataclass(frozen=True, slots=True)
class Product:
    """A product of factors."""

    factors: tuple["Node", ...]


@dataclass(frozen=True, slots=True)
class Quotient:
    """One node over another."""

    over: "Node"
    under: "Node"


@dataclass(frozen=True, slots=True)
class Negative:
    """A node with its sign turned."""

    of: "Node"


@dataclass(frozen=True, slots=True)
class Power:
    """A node to a power, which must come out as a whole number wherever s is in the base."""

    base: "Node"
    exponent: "Node"
    position: int


@dataclass(frozen=True, slots=True)
class Exponential:
    """exp(argument): a dead time when the argument is a negative multiple of s; a number when s is not in it."""

    argument: "Node"
    position: int


@dataclass(frozen=True, slots=True)
class SquareRoot:
    """The square root of a node without s."""

    argument: "Node"
    position: int


Node = Number | Name | Sum | Product | Quotient | Negative | Power | Exponential | SquareRoot


def names(node: Node) -> dict[str, int]:
    """Return the parameter names in a formula, without s, each with the position of its first use."""
    found: dict[str, int] = {}
    _gather(node, found)
    found.pop("s", None)
    return found


def _gather(node: Node, found: dict[str, int]) -> None:
    if isinstance(node, Name):
        found.setdefault(node.name, node.position)
    for child in children(node):
        _gather(child, found)


def children(node: Node) -> tuple[Node, ...]:
    """Return the nodes directly below a node."""
    match node:
        case Sum(below) | Product(below):
            return below
        case Quotient(first, second) | Power(first, second):
            return (first, second)
        case Negative(only) | Exponential(only) | SquareRoot(only):
            return (only,)
        case _:
            return ()
