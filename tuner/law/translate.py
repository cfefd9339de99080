"""Functions of the law as a small checked tree, from which every printer writes its own language.

The subset: assignment to one name, if/else, comparison, `and`, addition, subtraction, multiplication, floating-point
number, name, and one return at the end. Anything else is refused, so that no printer can meet it.
"""

import ast
import inspect
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from math import isfinite
from textwrap import dedent
from typing import Any


class SubsetError(ValueError):
    """Text of the law that other languages could not say in the same way."""


@dataclass(frozen=True, slots=True)
class Number:
    """A floating-point number."""

    value: float


@dataclass(frozen=True, slots=True)
class Name:
    """An argument or a local."""

    name: str


@dataclass(frozen=True, slots=True)
class Operation:
    """An operation on two numbers: `operator` is +, - or *."""

    operator: str
    left: "Expression"
    right: "Expression"


Expression = Number | Name | Operation


@dataclass(frozen=True, slots=True)
class Comparison:
    """A comparison of two numbers: `operator` is <, >, <=, >=, == or !=."""

    operator: str
    left: Expression
    right: Expression


@dataclass(frozen=True, slots=True)
class Assignment:
    """A name that takes a value; `note` is the comment above it."""

    target: str
    value: Expression
    note: str = ""


@dataclass(frozen=True, slots=True)
class Choice:
    """What is done when all the comparisons hold, and what otherwise; `note` is the comment above it."""

    conditions: tuple[Comparison, ...]
    then: tuple["Statement", ...]
    otherwise: tuple["Statement", ...]
    note: str = ""


Statement = Assignment | Choice


@dataclass(frozen=True, slots=True)
class Routine:
    """A function of the law: what it takes, what it does, and the expressions it returns."""

    name: str
    arguments: tuple[str, ...]
    body: tuple[Statement, ...]
    results: tuple[Expression, ...]

    @property
    def locals(self) -> tuple[str, ...]:
        """Names that are assigned but are no arguments, in the order of their first assignment."""
        return tuple(name for name in dict.fromkeys(assigned(self.body)) if name not in self.arguments)


_OPERATORS: dict[type[ast.operator], str] = {ast.Add: "+", ast.Sub: "-", ast.Mult: "*"}
_COMPARISONS: dict[type[ast.cmpop], str] = {
    ast.Lt: "<",
    ast.Gt: ">",
    ast.LtE: "<=",
    ast.GtE: ">=",
    ast.Eq: "==",
    ast.NotEq: "!=",
}


def read(function: Callable[..., Any], constant: Iterable[str] = ()) -> Routine:
    """Read a plain function into the checked tree.

    Parameters
    ----------
    function : callable
        A function of the law; its source must be at hand.
    constant : iterable of str
        Arguments that it may not assign to.

    Raises
    ------
    SubsetError
        When something lies outside the subset, or a name is read before it has a value on every path; the text of
        the offender is in the sentence.
    """
    return parse(dedent(inspect.getsource(function)), constant)


def parse(source: str, constant: Iterable[str] = ()) -> Routine:
    """Read the source text of one function into the checked tree, as `read` does."""
    (function,) = ast.parse(source).body
    if not isinstance(function, ast.FunctionDef):
        raise SubsetError(f"expected one function, found: {source.strip().splitlines()[0]}")
    return _Reader(source, function.name, frozenset(constant)).routine(function)


def assigned(statements: Iterable[Statement]) -> list[str]:
    """Return the names that statements assign to, in order, repeated where they are assigned again."""
    names: list[str] = []
    for statement in statements:
        match statement:
            case Assignment(target):
                names.append(target)
            case Choice(_, then, otherwise):
                names += assigned((*then, *otherwise))
    return names


def used(node: Statement | Comparison | Expression) -> set[str]:
    """Return every name that a node reads or assigns."""
    match node:
        case Name(name):
            return {name}
        case Number():
            return set()
        case Operation(_, left, right) | Comparison(_, left, right):
            return used(left) | used(right)
        case Assignment(target, value):
            return {target} | used(value)
        case Choice(conditions, then, otherwise):
            return set().union(*(used(below) for below in (*conditions, *then, *otherwise)))


@dataclass(frozen=True, slots=True)
class _Reader:
    """Reads one function; `known` below is the set of names that have a value on every path so far."""

    source: str
    function: str
    constant: frozenset[str]

    def routine(self, function: ast.FunctionDef) -> Routine:
        arguments = self._arguments(function)
        statements = function.body[1:] if ast.get_docstring(function) is not None else function.body
        if not statements or not isinstance(statements[-1], ast.Return):
            raise self._refusal(function, "a function without a return at its end")
        body, known = self._block(statements[:-1], set(arguments))
        return Routine(function.name, arguments, body, self._results(statements[-1], known))

    def _arguments(self, function: ast.FunctionDef) -> tuple[str, ...]:
        taken = function.args
        others = (*taken.posonlyargs, *taken.kwonlyargs, *taken.defaults, taken.vararg, taken.kwarg)
        if function.decorator_list or any(others):
            raise self._refusal(function, "a decorator, a default or an argument that is not plain")
        return tuple(argument.arg for argument in taken.args)

    def _results(self, node: ast.stmt, known: set[str]) -> tuple[Expression, ...]:
        if not isinstance(node, ast.Return) or node.value is None:
            raise self._refusal(node, "a return without a value")
        values = node.value.elts if isinstance(node.value, ast.Tuple) else [node.value]
        return tuple(self._expression(value, known) for value in values)

    def _block(self, nodes: Iterable[ast.stmt], known: set[str]) -> tuple[tuple[Statement, ...], set[str]]:
        statements: list[Statement] = []
        for node in nodes:
            statement, known = self._statement(node, known)
            statements.append(statement)
        return tuple(statements), known

    def _statement(self, node: ast.stmt, known: set[str]) -> tuple[Statement, set[str]]:
        if isinstance(node, ast.Assign):
            assignment = self._assignment(node, known)
            return assignment, known | {assignment.target}
        if not isinstance(node, ast.If):
            raise self._refusal(node, "this statement")
        conditions = self._conditions(node.test, known)
        then, after_then = self._block(node.body, known)
        otherwise, after_otherwise = self._block(node.orelse, known)
        return Choice(conditions, then, otherwise, self._note(node)), after_then & after_otherwise

    def _assignment(self, node: ast.Assign, known: set[str]) -> Assignment:
        target = node.targets[0]
        if len(node.targets) > 1 or not isinstance(target, ast.Name):
            raise self._refusal(node, "an assignment to anything but one name")
        if target.id in self.constant:
            raise self._refusal(node, "an assignment to a constant")
        return Assignment(target.id, self._expression(node.value, known), self._note(node))

    def _conditions(self, node: ast.expr, known: set[str]) -> tuple[Comparison, ...]:
        if isinstance(node, ast.BoolOp) and isinstance(node.op, ast.And):
            return tuple(found for value in node.values for found in self._conditions(value, known))
        if not isinstance(node, ast.Compare) or len(node.ops) > 1 or type(node.ops[0]) not in _COMPARISONS:
            raise self._refusal(node, "a condition that is not one comparison, or several joined by `and`")
        left, right = self._expression(node.left, known), self._expression(node.comparators[0], known)
        return (Comparison(_COMPARISONS[type(node.ops[0])], left, right),)

    def _expression(self, node: ast.expr, known: set[str]) -> Expression:
        match node:
            case ast.Constant(value=float(value)) if isfinite(value):
                return Number(value)
            case ast.Name(id=name):
                if name not in known:
                    raise self._refusal(node, "a name that has no value on every path")
                return Name(name)
            case ast.BinOp(left=left, op=op, right=right) if type(op) in _OPERATORS:
                return Operation(_OPERATORS[type(op)], self._expression(left, known), self._expression(right, known))
        raise self._refusal(node, "this expression")

    def _note(self, node: ast.stmt) -> str:
        """Return the comment on the lines right above a statement."""
        lines: list[str] = []
        for line in reversed(self.source.splitlines()[: node.lineno - 1]):
            if not line.strip().startswith("#"):
                break
            lines.insert(0, line.strip().lstrip("# "))
        return " ".join(lines)

    def _refusal(self, node: ast.stmt | ast.expr, what: str) -> SubsetError:
        text = (ast.get_source_segment(self.source, node) or "").splitlines()[0]
        return SubsetError(f"{self.function}, line {node.lineno}: {what} is outside the subset of the law: {text}")
