"""Write a sheet as TOML, changing of a person's text only what changed; loads tomlkit."""

import re
import tomllib
from collections.abc import MutableMapping
from dataclasses import dataclass, replace
from typing import Any, Final

import tomlkit
from tomlkit.exceptions import TOMLKitError
from tomlkit.items import Comment, InlineTable, Integer, Item, Key, Table, Whitespace

from tuner.files.plain import Inherited, Leaf, Tree, Value, tree
from tuner.files.schema import PERCENT
from tuner.model.parameters import GAIN_KEYS
from tuner.model.plant import PhysicsPlant
from tuner.model.sheet import Sheet

_Written = MutableMapping[str, Any]
"""A table of a TOML document, of whatever kind."""

_INLINE: Final = re.compile(r"^(loop\.(controlled|manipulated)|plant\.parameters\..*)$", re.DOTALL)
"""Paths of the tables that are written within a line."""

_LARGEST_WHOLE: Final = 1e15
"""Whole numbers up to here are written without a point."""


def fresh(sheet: Sheet) -> str:
    """Return a sheet as a new text."""
    document = tomlkit.document()
    _merge(document, tree(sheet), _Place())
    return document.as_string()


def merged(sheet: Sheet, text: str, *, inline: bool = False) -> str | None:
    """Return a text changed so that it says this sheet; None when it is no TOML.

    With `inline`, new tables are written within a line, as they must among dotted keys.
    """
    try:
        document = tomlkit.parse(_with_gains_renamed(text, sheet))
        _merge(document, tree(sheet), _Place(inline=inline, ordered=_ordered(sheet)))
        return document.as_string()
    except (TOMLKitError, ValueError, RecursionError):
        return None


def _ordered(sheet: Sheet) -> tuple[str, ...]:
    """Return the tables whose order has a meaning; a physical model has its parameters in an order of its own."""
    return ("limits",) if isinstance(sheet.plant, PhysicsPlant) else ("limits", "plant.parameters")


@dataclass(frozen=True, slots=True)
class _Place:
    """Where a table or value stands, as a dotted path, and whether new tables there are written within a line."""

    path: str = ""
    inline: bool = False
    ordered: tuple[str, ...] = ()

    def at(self, name: str) -> "_Place":
        path = f"{self.path}.{name}".lstrip(".")
        return replace(self, path=path, inline=self.inline or _INLINE.match(path) is not None)


def _merge(table: _Written, wanted: Tree, place: _Place) -> None:
    """Make a table say what is wanted, in the wanted order where order has a meaning."""
    for name in [name for name in table if name not in wanted]:
        _take_out(table, name)
    for name, node in wanted.items():
        _put(table, name, node, place.at(name))
    if place.path in place.ordered:
        _put_in_order(table, [name for name in wanted if name in table])


def _put(table: _Written, name: str, node: Leaf | Inherited | Tree, place: _Place) -> None:
    if isinstance(node, Leaf):
        _put_value(table, name, node)
    elif isinstance(node, Inherited):
        if table.get(name):
            _put(table, name, node.table, place)
    elif not isinstance(table.get(name), MutableMapping):
        _put_table(table, name, node, place)
    else:
        _merge(table[name], node, place)


def _put_value(table: _Written, name: str, leaf: Leaf) -> None:
    if name not in table:
        if leaf.value is not None and leaf.value != leaf.implied:
            _add(table, name, _item(leaf.value))
    elif leaf.value is None:
        _take_out(table, name)
    elif isinstance(table[name], MutableMapping):
        del table[name]
        _put_value(table, name, leaf)
    elif not _same(leaf.value, _unwrapped(table[name])):
        table[name] = _in_style_of(leaf.value, table[name])


def _put_table(table: _Written, name: str, wanted: Tree, place: _Place) -> None:
    """Write a table that was not there; a plant parameter that was a mere number stays one if it can."""
    value = wanted.get("value")
    if name in table and isinstance(value, Leaf) and not _beyond_value(wanted):
        _put_value(table, name, value)
    elif name in table and isinstance(value, Leaf):
        table[name] = _new_table(wanted, place)
    elif name in table:
        del table[name]
        _put_table(table, name, wanted, place)
    elif _needed(wanted) or name == "as_found":
        _add(table, name, _new_table(wanted, replace(place, inline=place.inline or isinstance(table, InlineTable))))


def _beyond_value(wanted: Tree) -> bool:
    """Tell whether a plant parameter has more to it than its value."""
    return _needed({name: node for name, node in wanted.items() if name != "value"})


def _needed(wanted: Tree) -> bool:
    """Tell whether a sheet without this table would say something else."""
    return any(_is_needed(node) for node in wanted.values())


def _is_needed(node: Leaf | Inherited | Tree) -> bool:
    if isinstance(node, Leaf):
        return node.value is not None and node.value != node.implied
    return not isinstance(node, Inherited) and _needed(node)


def _new_table(wanted: Tree, place: _Place) -> Item:
    if place.path.startswith("plant.parameters.") and not _beyond_value(wanted):
        value = wanted["value"]
        return _item(value.value if isinstance(value, Leaf) else None)
    table = tomlkit.inline_table() if place.inline else tomlkit.table()
    for name, node in wanted.items():
        if isinstance(node, Leaf) and node.shown and node.value is not None:
            table.append(name, _plain(node.value))
        else:
            _put(table, name, node, place.at(name))
    return table


def _add(table: _Written, name: str, item: Item) -> None:
    """Add a key after the last one of its table, before the blank lines and comments that lead to the next table."""
    leading = _loosened(_end_of(table))
    table[name] = item
    _end_of(table).extend(leading)


_Body = list[tuple[Key | None, Item]]


def _end_of(table: _Written) -> _Body:
    """Return what the last line of a table stands in: its own lines, or those of the table that it ends with."""
    body: _Body = table.value.body if isinstance(table, Table) else []
    return _end_of(body[-1][1]) if body and isinstance(body[-1][1], Table) else body


def _loosened(body: _Body) -> _Body:
    """Take blank lines and comments off the end of a table, and return them."""
    first = len(body)
    while first and isinstance(body[first - 1][1], Whitespace | Comment):
        first -= 1
    leading = body[first:]
    del body[first:]
    return leading


def _take_out(table: _Written, name: str) -> None:
    """Remove a key; of a table that ends in comments on lines of their own, which may lead on, only the keys.

    An empty table says nothing and may stay.
    """
    inner = table[name]
    if isinstance(inner, Table) and (not inner or _ends_in_comment(inner)):
        for key in list(inner):
            inner.remove(key)
    else:
        del table[name]


def _ends_in_comment(table: Table) -> bool:
    items = [item for _, item in table.value.body if not isinstance(item, Whitespace)]
    return bool(items) and isinstance(items[-1], Comment)


def _put_in_order(table: _Written, names: list[str]) -> None:
    if [name for name in table if name in names] == names:
        return
    items = {name: table[name] for name in names}
    for name in names:
        del table[name]
    for name, item in items.items():
        table[name] = item


def _unwrapped(item: Any) -> Any:  # noqa: ANN401 - a value of a TOML file
    return item.unwrap() if isinstance(item, Item) else item


def _same(value: Value, written: Any) -> bool:  # noqa: ANN401 - a value of a TOML file
    """Tell whether what is written means this value, however it is spelt."""
    if isinstance(value, bool) or isinstance(written, bool):
        return value is written
    if isinstance(value, list):
        return isinstance(written, list) and _same_items(value, written)
    if isinstance(value, str) and isinstance(written, str) and re.match(PERCENT, value) and re.match(PERCENT, written):
        return float(value.replace("%", "")) == float(written.replace("%", ""))
    return bool(value == written)


def _same_items(values: list[Value], written: list[Any]) -> bool:
    pairs = zip(values, written, strict=False)
    return len(values) == len(written) and all(_same(value, item) or [value, 0] == item for value, item in pairs)


def _in_style_of(value: Value, written: Any) -> Any:  # noqa: ANN401 - a value of a TOML file
    """Return a value to write over another, whole numbers without a point only where there was none."""
    if isinstance(value, float) and not isinstance(written, Integer) and not isinstance(written, str | list):
        return value
    return _plain(value)


def _plain(value: Value) -> Any:  # noqa: ANN401 - a value of a TOML file
    if isinstance(value, list):
        return [_plain(item) for item in value]
    if isinstance(value, float) and value.is_integer() and abs(value) < _LARGEST_WHOLE:
        return int(value)
    return value


def _item(value: Value) -> Item:
    item: Item = tomlkit.item(_plain(value))
    return item


def _with_gains_renamed(text: str, sheet: Sheet) -> str:
    """Return a text in which the gains of another form have got the names of the sheet's, each in its place."""
    controllers = {"controller": sheet.controller, "controller.as_found": sheet.controller.as_found}
    form = "parallel"
    for path, controller in controllers.items():
        written = _at(tomllib.loads(text), path)
        form = written.get("form", form)
        if controller is not None and form in GAIN_KEYS and form != controller.form:
            for old, new in zip(GAIN_KEYS[form], GAIN_KEYS[controller.form], strict=True):
                text = _renamed(text, path, old, new)
    return text


def _at(tables: Any, path: str) -> dict[str, Any]:  # noqa: ANN401 - what a TOML file holds
    for name in path.split("."):
        tables = tables.get(name, {}) if isinstance(tables, dict) else {}
    return tables if isinstance(tables, dict) else {}


def _renamed(text: str, path: str, old: str, new: str) -> str:
    """Return the text with one key of a table renamed where it stands, or unchanged when it does not stand alone."""
    header = re.escape(path).replace(r"\.", r"\s*\.\s*")
    line = re.compile(
        rf"(^[ \t]*\[\s*{header}\s*\](?:(?!^[ \t]*\[).)*?^[ \t]*){old}(?=[ \t]*=)", re.MULTILINE | re.DOTALL
    )
    candidate = line.sub(rf"\g<1>{new}", text, count=1)
    wanted = tomllib.loads(text)
    table = _at(wanted, path)
    if old == new or old not in table or new in table:
        return text
    table[new] = table.pop(old)
    try:
        return candidate if tomllib.loads(candidate) == wanted else text
    except tomllib.TOMLDecodeError:
        return text
