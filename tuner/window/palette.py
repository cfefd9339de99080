"""The colours and sizes of the window, read from the one theme file, and the contrast between two of them."""

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Literal

from tuner.places import resources

Shade = Literal["light", "dark"]


@dataclass(frozen=True, slots=True)
class Sizes:
    """Pixels at 100 % scaling: the three sizes of text, and the grid that every distance keeps to."""

    small: int
    body: int
    title: int
    grid: int


@dataclass(frozen=True, slots=True)
class Palette:
    """The colours of one shade by role, each as ``#rrggbb``."""

    shade: Shade
    colours: Mapping[str, str]


@cache
def palette(shade: Shade) -> Palette:
    """Return the colours of the theme file for a shade."""
    return Palette(shade, _theme_file()[shade])


@cache
def sizes() -> Sizes:
    """Return the sizes of the theme file."""
    return Sizes(**{name: int(value) for name, value in _theme_file()["sizes"].items()})


def contrast(one: str, other: str) -> float:
    """Return the contrast of two colours, 1 to 21, as the Web Content Accessibility Guidelines 2.2 define it."""
    lighter, darker = sorted((_luminance(one), _luminance(other)), reverse=True)
    return (lighter + 0.05) / (darker + 0.05)


def _luminance(colour: str) -> float:
    """Return the relative luminance of a colour, 0 to 1 (WCAG 2.2)."""
    red, green, blue = (_linear(int(colour[at : at + 2], 16) / 255.0) for at in (1, 3, 5))
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def _linear(channel: float) -> float:
    return channel / 12.92 if channel <= 0.04045 else float(((channel + 0.055) / 1.055) ** 2.4)


@cache
def _theme_file() -> dict[str, dict[str, str]]:
    return tomllib.loads((resources() / "theme.toml").read_text(encoding="utf-8"))
