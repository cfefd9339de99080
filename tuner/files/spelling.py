"""How the names and powers of a formula are spelt."""

from typing import Final

SUPERSCRIPTS: Final = "⁰¹²³⁴⁵⁶⁷⁸⁹"
"""Digits that raise to a power; they are no part of a name."""

NAME: Final = rf"(?![{SUPERSCRIPTS}])[^\W\d_](?:(?![{SUPERSCRIPTS}])\w)*"
"""What a name looks like: letters of any alphabet, digits and _, a letter first."""
