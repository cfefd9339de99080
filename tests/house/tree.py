"""The files of the project: what is handed on, not what a run leaves behind."""

from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
TOP = (
    "README.md",
    "DEVELOPERS.md",
    "pyproject.toml",
    ".gitignore",
    ".ci",
    "tuner",
    "resources",
    "sample_plants",
    "tests",
)
LEFT_BEHIND = ("__pycache__",)


def files(pattern: str = "*") -> list[Path]:
    """Return the files of the project whose name fits a pattern."""
    tops = [ROOT / name for name in TOP]
    found = [top for top in tops if top.is_file() and top.match(pattern)]
    found += [file for top in tops if top.is_dir() for file in top.rglob(pattern) if file.is_file()]
    return sorted(file for file in found if not set(LEFT_BEHIND) & set(file.parts))


def name_of(file: Path) -> str:
    """Return a file's path from the root of the checkout."""
    return file.relative_to(ROOT).as_posix()
