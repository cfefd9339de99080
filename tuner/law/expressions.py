"""Prints the expressions of the law, which look the same in every target, each operation in parentheses."""

from collections.abc import Mapping

from tuner.law.translate import Comparison, Expression, Name, Number, Operation


def expression(node: Expression, names: Mapping[str, str]) -> str:
    """Return an expression as text; `names` respells names where it holds them."""
    match node:
        case Number(value):
            return repr(value)
        case Name(name):
            return names.get(name, name)
        case Operation(operator, left, right):
            return f"({expression(left, names)} {operator} {expression(right, names)})"


def bare(node: Expression, names: Mapping[str, str]) -> str:
    """Return an expression as text, without the parentheses around the whole of it."""
    text = expression(node, names)
    return text[1:-1] if isinstance(node, Operation) else text


def comparison(node: Comparison, names: Mapping[str, str]) -> str:
    """Return a comparison as text."""
    return f"{expression(node.left, names)} {node.operator} {expression(node.right, names)}"
