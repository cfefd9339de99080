"""Prints the checked tree of the law as Python, every operation in parentheses."""

from collections.abc import Iterable, Mapping, Sequence

from tuner.law.translate import Assignment, Choice, Comparison, Expression, Name, Number, Operation, Statement


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


def statements(nodes: Iterable[Statement], names: Mapping[str, str], indent: str) -> list[str]:
    """Return statements as lines that start with `indent`."""
    lines: list[str] = []
    for node in nodes:
        if node.note:
            lines += [""] * bool(lines) + [f"{indent}# {node.note}"]
        lines += _statement(node, names, indent)
    return lines


def _statement(node: Statement, names: Mapping[str, str], indent: str) -> list[str]:
    match node:
        case Assignment(target, value):
            return [f"{indent}{names.get(target, target)} = {bare(value, names)}"]
        case Choice(conditions, then, otherwise):
            inner = indent + "    "
            tail = [f"{indent}else:", *statements(otherwise, names, inner)] if otherwise else []
            return [*_head(conditions, names, indent), *statements(then, names, inner), *tail]


def _head(conditions: Sequence[Comparison], names: Mapping[str, str], indent: str) -> list[str]:
    texts = [_comparison(condition, names) for condition in conditions]
    if len(texts) == 1:
        return [f"{indent}if {texts[0]}:"]
    lines = [f"{indent}    {'and ' if position else ''}({text})" for position, text in enumerate(texts)]
    return [f"{indent}if (", *lines, f"{indent}):"]


def _comparison(node: Comparison, names: Mapping[str, str]) -> str:
    return f"{expression(node.left, names)} {node.operator} {expression(node.right, names)}"
