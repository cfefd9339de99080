"""Prints the checked tree of the law as Python, every operation in parentheses."""

from collections.abc import Iterable, Mapping, Sequence

from tuner.law.expressions import bare, comparison
from tuner.law.translate import Assignment, Choice, Comparison, Statement


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
    texts = [comparison(condition, names) for condition in conditions]
    if len(texts) == 1:
        return [f"{indent}if {texts[0]}:"]
    lines = [f"{indent}    {'and ' if position else ''}({text})" for position, text in enumerate(texts)]
    return [f"{indent}if (", *lines, f"{indent}):"]
