"""The Python packages that the project file asks for."""

import tomllib
from pathlib import Path


def requirements(root: Path, testing: bool) -> list[str]:
    """Return the requirement lines of the project, those of its tests too when testing."""
    project = tomllib.loads((root / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    lines: list[str] = list(project["dependencies"])
    return lines + list(project["optional-dependencies"]["test"]) if testing else lines
