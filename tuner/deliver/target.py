"""What a target of the delivery is: one language, its files, how they are written, how they are proved."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from string import Template

from tuner.deliver.excitation import Recording
from tuner.deliver.proof import Proof
from tuner.deliver.specification import Specification

_TEMPLATES = Path(__file__).parent / "templates"


@dataclass(frozen=True, slots=True)
class Target:
    """One language.

    Parameters
    ----------
    language : str
        What a person asks for.
    files : tuple of str
        Names of the files it makes.
    write : callable
        Returns the text of every file.
    prove : callable
        Runs the files that lie in a folder against a recording; may use a second folder to work in.
    """

    language: str
    files: tuple[str, ...]
    write: Callable[[Specification], Mapping[str, str]]
    prove: Callable[[Path, Path, Specification, Recording], tuple[Proof, ...]]


def fill(name: str, **texts: str) -> str:
    """Return a template of this room with its places filled."""
    return Template(template(name)).substitute(texts)


def template(name: str) -> str:
    """Return the text of a template of this room."""
    return (_TEMPLATES / f"{name}.template").read_text(encoding="utf-8")
