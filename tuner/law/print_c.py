"""Prints the checked tree of the law as C99, every operation in parentheses."""

from collections.abc import Collection, Iterable, Mapping, Sequence

from tuner.law.expressions import bare, comparison
from tuner.law.translate import Assignment, Choice, Comparison, Statement, used


def number(value: float) -> str:
    """Return a finite number as a hexadecimal constant, which every C99 compiler reads exactly."""
    text = value.hex()
    mantissa, _, exponent = text.partition("p")
    whole, _, fraction = mantissa.partition(".")
    fraction = fraction.rstrip("0") or "0"
    return f"{whole}.{fraction}p{exponent}"


def block(nodes: Sequence[Statement], names: Mapping[str, str], local: Collection[str], indent: str) -> list[str]:
    """Return the lines of a block; a name of `local` is declared at the top of the smallest block that holds it."""
    here = [name for name in local if _belongs_here(name, nodes)]
    lines = [f"{indent}double {names.get(name, name)};" for name in here]
    below = [name for name in local if name not in here]
    for node in nodes:
        if node.note:
            lines += [""] * bool(lines) + [f"{indent}/* {node.note} */"]
        lines += _statement(node, names, below, indent)
    return lines


def _belongs_here(name: str, nodes: Iterable[Statement]) -> bool:
    """Tell whether no single block below holds every use of a name."""
    users = [node for node in nodes if name in used(node)]
    if not users:
        return False
    only = users[0]
    if len(users) > 1 or not isinstance(only, Choice):
        return True
    branches = [any(name in used(node) for node in branch) for branch in (only.then, only.otherwise)]
    return all(branches) or any(name in used(condition) for condition in only.conditions)


def _statement(node: Statement, names: Mapping[str, str], local: Collection[str], indent: str) -> list[str]:
    match node:
        case Assignment(target, value):
            return [f"{indent}{names.get(target, target)} = {bare(value, names)};"]
        case Choice(conditions, then, otherwise):
            inner = indent + "    "
            tail = [f"{indent}else", f"{indent}{{", *block(otherwise, names, local, inner), f"{indent}}}"]
            return [
                *_head(conditions, names, indent),
                f"{indent}{{",
                *block(then, names, local, inner),
                f"{indent}}}",
                *(tail if otherwise else []),
            ]


def _head(conditions: Sequence[Comparison], names: Mapping[str, str], indent: str) -> list[str]:
    texts = [comparison(condition, names) for condition in conditions]
    if len(texts) == 1:
        return [f"{indent}if ({texts[0]})"]
    return f" &&\n{indent}    ".join(f"({text})" for text in texts).join((f"{indent}if (", ")")).splitlines()
