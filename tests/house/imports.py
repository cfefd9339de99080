"""The rule on imports: which room may import what, read from the source text."""

import ast
import sys
from collections.abc import Iterator
from dataclasses import dataclass

ROOMS = (
    "errors", "places", "model", "law", "kernels", "files", "simulate", "measure", "judge", "assess", "footing",
    "compare", "identify", "suggest", "deliver", "rehearse", "session", "cli", "window",
)  # fmt: skip
"""From the top down; a room imports only from rooms above it."""

DOORS = {
    "numba": "kernels",
    "control": "simulate",
    "PySide6": "window",
    "shiboken6": "window",
    "pyqtgraph": "window",
    "contourpy": "window",
    "jsonschema": "files",
    "tomlkit": "files",
    "lark": "files",
    "rich": "cli",
    "platformdirs": "places",
}
"""The one room that may import a library."""

EVERYWHERE = ("numpy", "scipy")
LAZY = ("scipy.signal", "scipy.stats", "matplotlib", "control")
"""Slow to load: imported inside the function that needs them, so that a start does not pay for them."""

ALONE = {"law": (), "kernels": ("law", "places"), "bootstrap": (), "__main__": ("bootstrap", "cli")}
"""Rooms that import from these rooms of ours alone, and no library but their own door's (kernels: numpy as well)."""


@dataclass(frozen=True, slots=True)
class Import:
    """One import statement: the module it names, its line, and whether loading the file runs it."""

    module: str
    line: int
    at_load: bool


def breaches(module: str, source: str) -> list[str]:
    """Return a sentence with the cure for each import in the source that the rule forbids.

    Parameters
    ----------
    module
        The dotted name of the module, such as ``tuner.judge.verdict``; a package's is that of its ``__init__``.
    source
        Its text.
    """
    room = room_of(module)
    if room not in (*ROOMS, *ALONE, ""):
        return [f"{module}: the room {room!r} has no rank; give it its place in ROOMS of tests/house/imports.py."]
    found = ((statement, _fault(room, statement)) for statement in imports(module, source))
    return [f"{module}, line {statement.line}: {fault}" for statement, fault in found if fault]


def room_of(module: str) -> str:
    """Return the room of a module, empty for the package itself."""
    name = f"{module}.".split(".")[1]
    return "" if name == "__init__" else name


def imports(module: str, source: str) -> Iterator[Import]:
    """Yield every import of the source: inside functions, for the type checker, and by ``import_module`` too."""
    tree = ast.parse(source)
    lazy = {id(node) for outer in ast.walk(tree) if _is_put_off(outer) for node in ast.walk(outer)}
    for node in ast.walk(tree):
        for name in _modules(module, node):
            yield Import(name, node.lineno, id(node) not in lazy)  # type: ignore[attr-defined]  # imports have lines


def window_modules(module: str, source: str) -> set[str]:
    """Return the modules of the window that a module imports."""
    return {found.module for found in imports(module, source) if room_of(found.module) == "window"}


def _is_put_off(node: ast.AST) -> bool:
    """Tell whether what is inside runs later than the loading of the file, or never."""
    is_function = isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda)
    return is_function or (isinstance(node, ast.If) and "TYPE_CHECKING" in ast.unparse(node.test))


def _modules(module: str, node: ast.AST) -> list[str]:
    """Return the modules that a node imports; from our package the room, not the package, is what is meant."""
    if isinstance(node, ast.Import):
        return [alias.name for alias in node.names]
    if isinstance(node, ast.ImportFrom):
        base = _absolute(module, node)
        return [f"{base}.{alias.name}" for alias in node.names] if base in ("tuner", "scipy") else [base]
    return _called(node)


def _absolute(module: str, node: ast.ImportFrom) -> str:
    """Return the absolute name of the module in ``from .x import y``."""
    if not node.level:
        return node.module or ""
    parent = module.split(".")[: -node.level]
    return ".".join([*parent, *([node.module] if node.module else [])])


def _called(node: ast.AST) -> list[str]:
    """Return the module in a call such as ``import_module("numba")``."""
    if not isinstance(node, ast.Call) or not node.args or not isinstance(node.args[0], ast.Constant):
        return []
    name = ast.unparse(node.func).rpartition(".")[2]
    return [str(node.args[0].value)] if name in ("import_module", "__import__") else []


def _fault(room: str, statement: Import) -> str | None:
    """Return what is wrong with an import, and the cure; None if nothing is."""
    top = statement.module.partition(".")[0]
    if top == "tuner":
        return _fault_of_ours(room, room_of(statement.module), statement)
    return None if top in sys.stdlib_module_names else _fault_of_library(room, top, statement)


def _fault_of_ours(room: str, target: str, statement: Import) -> str | None:
    if target == room or target not in (*ROOMS, *ALONE):
        return None  # itself, or a name of the package such as its version
    if room in ALONE:
        return None if target in ALONE[room] else _only(room, ALONE[room], target)
    if room == "":
        return _at_load(statement, f"the package itself loads {target}; import it inside a function.")
    if {room, target} == {"cli", "window"}:
        return _fault_between(room, statement)
    return _fault_of_rank(room, target)


def _fault_of_rank(room: str, target: str) -> str | None:
    if target not in ROOMS:
        return f"{room} imports {target}, which belongs to the two commands alone; leave it to them."
    if ROOMS.index(target) > ROOMS.index(room):
        return f"{room} imports from {target}, a room below it; move what both need up, or hand it in as an argument."
    return None


def _at_load(statement: Import, fault: str) -> str | None:
    return fault if statement.at_load else None


def _only(room: str, allowed: tuple[str, ...], target: str) -> str:
    names = " and ".join(allowed) or "nothing of ours"
    return f"{room} imports {target}, but may import {names}; hand in what it needs as an argument."


def _fault_between(room: str, statement: Import) -> str | None:
    """Let the command line open the window, through one door and only when it is asked to."""
    if room == "window":
        return "the window imports from cli; move what both need into a room above."
    return _at_load(statement, "cli loads the window at its start; import it inside the function that opens it.")


def _fault_of_library(room: str, top: str, statement: Import) -> str | None:
    door, name = DOORS.get(top), room or "the package itself"
    if door is None and top not in (*EVERYWHERE, "matplotlib"):
        return f"{top} is no library of this project; do without it, or declare it here and in pyproject.toml."
    if door not in (None, room):
        return f"{name} imports {top}, whose one door is {door}; ask {door} for what you need of it."
    if room in ("", *ALONE) and door is None and (room, top) != ("kernels", "numpy"):
        return f"{name} imports {top}, but must do with the standard library; hand in what it needs."
    if any(f"{statement.module}.".startswith(f"{slow}.") for slow in LAZY):
        return _at_load(statement, f"{statement.module} is slow to load; import it inside the function that needs it.")
    return None
