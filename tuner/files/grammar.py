"""The grammar of plant formulas, and the tree that each of its rules builds; loads lark."""

from dataclasses import dataclass
from functools import cache
from math import isfinite, pi
from typing import Final

from lark import Lark, Token, Transformer

from tuner.files import words
from tuner.files.spelling import NAME, SUPERSCRIPTS
from tuner.model.formula import Exponential, Name, Negative, Node, Number, Power, Product, Quotient, SquareRoot, Sum

_PLAIN_DIGITS: Final = str.maketrans(SUPERSCRIPTS + "⁻", "0123456789-")

# A product without a sign has no number on its right: "1.2.3" and "2 3" are slips, not products.
_GRAMMAR: Final = rf"""
    ?start: sum
    sum: chain (added | subtracted)*
    added: PLUS chain -> last
    subtracted: MINUS chain -> signed
    chain: run (times | over)*
    times: TIMES run -> last
    over: OVER run
    run: factor named_power*
    ?factor: (PLUS | MINUS) factor -> signed
           | number RAISED exponent -> power
           | number SUPERSCRIPT -> superscript
           | number
           | named_power
    ?named_power: named RAISED exponent -> power
                | named SUPERSCRIPT -> superscript
                | EULER RAISED exponent -> euler
                | named
    ?exponent: (PLUS | MINUS) exponent -> signed
             | number RAISED exponent -> power
             | number
             | named_power
             | "{{" sum "}}"
    ?named: name | bracket | exponential | root
    number: NUMBER
    name: NAME
    ?bracket: "(" sum ")" | "[" sum "]"
    exponential: EXP bracket
    root: SQRT bracket

    EXP: "exp"
    SQRT: "sqrt"
    PLUS: "+"
    MINUS: /[-\u2013\u2212]/
    TIMES: /[*\u00b7\u00d7\u22c5]/
    OVER: /[\/\u00f7\u2215]/
    RAISED.1: /\^|\*\*/
    SUPERSCRIPT: /⁻?[{SUPERSCRIPTS}]+/
    EULER.2: /e(?=\s*(?:\^|\*\*)\s*[(\[{{])/
    NUMBER: /(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?/
    NAME: /{NAME}/
    %ignore /\s+/
"""


class RefusedError(Exception):
    """Carries out of the builder, which does not know the text, where it goes wrong, what was expected and found."""

    def __init__(self, position: int, expected: str, found: str) -> None:
        super().__init__(position, expected, found)
        self.position = position
        self.expected = expected
        self.found = found


@cache
def parser() -> Lark:
    """Return the parser, made at first use."""
    return Lark(_GRAMMAR, parser="lalr", transformer=_Builder(), maybe_placeholders=False)


@dataclass(frozen=True, slots=True)
class _Run:
    """Factors side by side without a sign; the sign before them, if it divides, is at `divided_at`."""

    factors: list[Node]
    divided_at: int | None = None


class _Builder(Transformer[Token, Node]):
    """Each method builds the node of the grammar's rule of that name."""

    def number(self, children: list[Token]) -> Node:
        return _number(children[0], str(children[0]))

    def name(self, children: list[Token]) -> Node:
        return Number(pi) if children[0] in ("pi", "π") else Name(str(children[0]), _start(children[0]))

    def exponential(self, children: tuple[Token, Node]) -> Node:
        return Exponential(children[1], _start(children[0]))

    def euler(self, children: tuple[Token, Token, Node]) -> Node:
        return Exponential(children[2], _start(children[0]))

    def root(self, children: tuple[Token, Node]) -> Node:
        return SquareRoot(children[1], _start(children[0]))

    def power(self, children: tuple[Node, Token, Node]) -> Node:
        base, sign, exponent = children
        if isinstance(base, Name) and base.name == "e":
            raise RefusedError(sign.end_pos or 0, "an opening bracket around the exponent of e", "none")
        return Power(base, exponent, _start(sign))

    def superscript(self, children: tuple[Node, Token]) -> Node:
        base, raised = children
        return self.power((base, raised, _number(raised, raised.translate(_PLAIN_DIGITS))))

    def signed(self, children: tuple[Token, Node]) -> Node:
        sign, node = children
        return node if sign.type == "PLUS" else _negative(node)

    def last(self, children: tuple[Token, Node | _Run]) -> Node | _Run:
        return children[1]

    def run(self, children: list[Node]) -> _Run:
        return _Run(children)

    def over(self, children: tuple[Token, _Run]) -> _Run:
        return _Run(children[1].factors, _start(children[0]))

    def chain(self, children: list[_Run]) -> Node:
        value = _product(children[0].factors)
        for run in children[1:]:
            value = _product([value, *run.factors]) if run.divided_at is None else _over(value, run, run.divided_at)
        return value

    def sum(self, children: list[Node]) -> Node:
        return Sum(tuple(children)) if len(children) > 1 else children[0]


def _start(token: Token) -> int:
    return token.start_pos or 0


def _number(token: Token, digits: str) -> Number:
    value = float(digits)
    if not isfinite(value):
        raise RefusedError(_start(token), "a number that is not too large to compute with", words.quoted(token))
    return Number(value)


def _negative(node: Node) -> Node:
    return node.of if isinstance(node, Negative) else Negative(node)


def _product(factors: list[Node]) -> Node:
    """Return one product of all, flat on its left side, which is the side that grows."""
    first, *rest = factors
    flat = first.factors if isinstance(first, Product) else (first,)
    return Product((*flat, *rest)) if rest else first


def _over(value: Node, run: _Run, position: int) -> Node:
    """Divide by the first factor of a run; the others must be exponentials, which count as numerator."""
    under, *beside = run.factors
    if not all(_is_exponential(node) for node in beside):
        raise RefusedError(
            position,
            "brackets around all that '/' divides by, or a sign between the factors after it",
            "a product without a sign, which could be meant either way",
        )
    return _product([Quotient(value, under), *beside])


def _is_exponential(node: Node) -> bool:
    return isinstance(node, Exponential) or (isinstance(node, Power) and isinstance(node.base, Exponential))
