"""Say in words what was found in a sheet."""

from typing import Final

_LONGEST: Final = 40


def quoted(text: str) -> str:
    """Return a text in quotes, shortened, and with what cannot be printed made visible."""
    shown = text if len(text) <= _LONGEST else f"{text[: _LONGEST - 3]}..."
    return f"'{shown}'" if shown.isprintable() else repr(shown)


def found(value: object) -> str:
    """Say what a value of a TOML file is."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, int | float):
        return _number(value)
    if isinstance(value, str):
        return f"the text {quoted(value)}"
    if isinstance(value, list):
        return _array(value)
    return "a table" if isinstance(value, dict) else f"the date or time {value}"


def number(value: float) -> str:
    """Return a number with the digits that tell it from another one nearby."""
    return f"{value:.15g}"


def _number(value: float) -> str:
    # Python refuses to spell out an integer of thousands of digits, which a sheet can hold as 0xfff...
    return (
        str(value) if isinstance(value, float) or abs(value) < 10**_LONGEST else f"a number over {_LONGEST} digits long"
    )


def _array(value: list[object]) -> str:
    if not value:
        return "an empty array"
    return f"an array of {len(value)}" if len(value) > 1 else "an array of one"
