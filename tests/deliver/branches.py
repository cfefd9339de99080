"""Runs the checked tree of the law while it notes which way every choice went."""

import operator
from collections.abc import Iterable

from tuner.law.translate import Assignment, Choice, Expression, Name, Number, Operation, Routine, Statement

_ARITHMETIC = {"+": operator.add, "-": operator.sub, "*": operator.mul}
_COMPARISON = {
    "<": operator.lt,
    ">": operator.gt,
    "<=": operator.le,
    ">=": operator.ge,
    "==": operator.eq,
    "!=": operator.ne,
}


def every_way(statements: Iterable[Statement]) -> set[tuple[str, bool]]:
    """Return every choice in statements with both its outcomes."""
    found: set[tuple[str, bool]] = set()
    for statement in statements:
        if isinstance(statement, Choice):
            found |= {(str(statement), True), (str(statement), False)}
            found |= every_way((*statement.then, *statement.otherwise))
    return found


def evaluate(routine: Routine, arguments: Iterable[float], ways: set[tuple[str, bool]]) -> tuple[float, ...]:
    """Run a routine, add the ways it went, and return its results."""
    values = dict(zip(routine.arguments, arguments, strict=True))
    _run(routine.body, values, ways)
    return tuple(_value(result, values) for result in routine.results)


def _run(statements: Iterable[Statement], values: dict[str, float], ways: set[tuple[str, bool]]) -> None:
    for statement in statements:
        if isinstance(statement, Assignment):
            values[statement.target] = _value(statement.value, values)
            continue
        holds = all(
            _COMPARISON[each.operator](_value(each.left, values), _value(each.right, values))
            for each in statement.conditions
        )
        ways.add((str(statement), holds))
        _run(statement.then if holds else statement.otherwise, values, ways)


def _value(node: Expression, values: dict[str, float]) -> float:
    match node:
        case Number(value):
            return value
        case Name(name):
            return values[name]
        case Operation(sign, left, right):
            result: float = _ARITHMETIC[sign](_value(left, values), _value(right, values))
            return result
