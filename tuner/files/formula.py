"""Read a plant formula: ordinary mathematics in s, with named parameters and implicit products."""

import re
from typing import TYPE_CHECKING, Final

from tuner.errors import FormulaError
from tuner.files.spelling import NAME
from tuner.model.formula import Node, children

if TYPE_CHECKING:
    from lark.exceptions import UnexpectedInput

LONGEST: Final = 10_000
"""Characters that a formula may have."""

DEEPEST: Final = 100
"""Levels to which the parts of a formula may be nested."""

RESERVED: Final = ("s", "exp", "sqrt", "pi", "π")
"""Names with a meaning of their own, which no parameter may take."""

_CLOSING: Final = {"(": ")", "[": "]", "{": "}"}


def parse(text: str) -> Node:
    """Return the tree of a formula.

    Explicit ``*`` and ``/`` run from left to right. A product without a sign to the right of ``/`` could be meant
    either way and is refused, but for factors exp(...), which there count as numerator.

    Raises
    ------
    FormulaError
        With the position, what was expected there and what was found.
    """
    from lark.exceptions import UnexpectedInput

    from tuner.files.grammar import RefusedError, parser

    _check_size(text)
    _check_brackets(text)
    try:
        # The grammar's transformer makes a node where the library's type says a tree.
        node: Node = parser().parse(text)  # type: ignore[assignment]
    except UnexpectedInput as error:
        raise _unexpected(text, error) from None
    except RefusedError as refusal:
        raise FormulaError(text, refusal.position, refusal.expected, refusal.found) from None
    if _is_deep(node):
        raise _too_deep(text, 0)
    return node


def is_name(text: str) -> bool:
    """Tell whether a formula can use this text as the name of a parameter."""
    return text not in RESERVED and re.fullmatch(NAME, text) is not None


def _check_size(text: str) -> None:
    if not text.strip():
        raise FormulaError(text, 0, "a formula in s", "nothing")
    if len(text) > LONGEST:
        raise FormulaError(text, LONGEST, f"at most {LONGEST:,} characters", f"{len(text):,}")


def _check_brackets(text: str) -> None:
    """Refuse brackets that do not match; a bracket that is never closed is told where it opens."""
    opened: list[int] = []
    for position, character in enumerate(text):
        if character in _CLOSING:
            opened.append(position)
        elif character in _CLOSING.values():
            _close(text, position, opened)
        if len(opened) > DEEPEST:
            raise _too_deep(text, position)
    if opened:
        closing = _CLOSING[text[opened[-1]]]
        raise FormulaError(text, opened[-1], f"a '{closing}' that closes this '{text[opened[-1]]}'", "none")


def _close(text: str, position: int, opened: list[int]) -> None:
    found = text[position]
    if not opened:
        raise FormulaError(text, position, "an opening bracket before this one", f"'{found}' alone")
    start = opened.pop()
    if _CLOSING[text[start]] != found:
        expected = f"'{_CLOSING[text[start]]}' for the '{text[start]}' at character {start + 1}"
        raise FormulaError(text, position, expected, f"'{found}'")


def _too_deep(text: str, position: int) -> FormulaError:
    return FormulaError(text, position, f"parts nested at most {DEEPEST} deep", "deeper ones")


def _is_deep(node: Node) -> bool:
    """Tell whether a tree is too deep for those who walk it; itself it walks level by level."""
    level: list[Node] = [node]
    for _ in range(DEEPEST):
        level = [below for node in level for below in children(node)]
        if not level:
            return False
    return True


def _unexpected(text: str, error: "UnexpectedInput") -> FormulaError:
    from lark.exceptions import UnexpectedCharacters, UnexpectedToken

    if isinstance(error, UnexpectedCharacters):
        position: int | None = error.pos_in_stream
        found, allowed = f"'{error.char}'", error.allowed or set()
    elif isinstance(error, UnexpectedToken) and error.token.type != "$END":
        position = error.token.start_pos
        found, allowed = f"'{error.token}'", error.accepts or set()
    else:
        position = len(text)
        found, allowed = "the end of the formula", getattr(error, "accepts", None) or set()
    return FormulaError(text, position or 0, _expected(text, position or 0, allowed), found)


def _expected(text: str, position: int, terminals: set[str]) -> str:
    """Say in words what the grammar would have taken."""
    if "NUMBER" in terminals:
        return "a number, a name or an opening bracket"
    if "PLUS" not in terminals:
        return "an opening bracket"
    if text[position : position + 1] == "," and text[position - 1].isdigit():
        return "an operator such as + or *, or a point as the decimal sign"
    opened = _opened_before(text, position)
    end = f"'{opened}'" if opened else "the end of the formula"
    return f"an operator such as + or *, or {end}"


def _opened_before(text: str, position: int) -> str:
    """Return the bracket that would close the innermost one open at a position, empty when none is."""
    opened: list[str] = []
    for character in text[:position]:
        if character in _CLOSING:
            opened.append(_CLOSING[character])
        elif character in _CLOSING.values():
            opened.pop()
    return opened[-1] if opened else ""
