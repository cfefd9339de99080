"""Tuning sheets: read with every fault at once, and written with everything kept that a person wrote."""

import os
import re
import tomllib
from collections.abc import Iterator
from contextlib import suppress
from errno import EISDIR
from pathlib import Path
from typing import Any, BinaryIO, Final

from tuner.errors import Fault, SheetError
from tuner.files import words
from tuner.model.sheet import Sheet

LARGEST: Final = 1_000_000
"""Bytes that a sheet may have."""

VERSION: Final = 1
"""Version of the format that is read and written."""


def parse(text: str, file: str = "") -> Sheet:
    """Return the sheet that a text holds.

    Parameters
    ----------
    text : str
        TOML.
    file : str
        Name of the file, said before each fault.

    Raises
    ------
    SheetError
        With every fault found.
    """
    written = tables(text, file)
    version = written.get("sheet")
    if isinstance(version, int) and version > VERSION:
        expected = f"{VERSION}, the newest format that this version of Trimwright reads"
        raise SheetError([Fault("sheet", expected, words.found(version))], file)
    from tuner.files.checking import check

    try:
        checked = check(written)
    except RecursionError:  # dotted keys nest tables deeper than the TOML reader itself ever goes
        raise SheetError([_TOO_DEEP], file) from None
    if checked.faults or checked.sheet is None:
        raise SheetError(checked.faults, file)
    return checked.sheet


def tables(text: str, file: str, what: str = "a tuning sheet") -> dict[str, Any]:
    """Return the tables of TOML; `what` it should hold, and `file`, are for faults.

    Raises
    ------
    SheetError
        When it is empty or no TOML.
    """
    if not text.strip():
        raise SheetError([Fault("", what, "an empty file")], file)
    try:
        found = tomllib.loads(text)
        repr(found)  # fails for an integer like 0xfff..., of more digits than Python spells out
    except (ValueError, RecursionError) as error:
        raise SheetError([_syntax_fault(text, error)], file) from None
    return found


_SYNTAX: Final = {
    "Expected '='": "'=' after the key",
    "Invalid statement": "a key, a [table] or a comment",
    "Invalid initial character for a key part": "a key",
    "Expected newline or end of document after a statement": "the end of the line after the value",
    "Expected ']' at the end of a table declaration": "']' after the name of the table",
    "Expected ']]'": "']]' after the name of the table",
    "Cannot declare": "each table once",
    "Cannot overwrite a value": "each key once",
    "Duplicate inline table key": "each key once",
    "Cannot mutate immutable namespace": "each table once",
    "Cannot redefine namespace": "each table once",
    "Unclosed array": "',' or ']' in the array",
    "Unclosed inline table": "',' or '}' in the table",
    "Unterminated string": "the quote that ends the text",
    "Expected \"'": "the quote that ends the text",
    "Unescaped": "a known character after the backslash",
    "Invalid value": 'a value: a number, a "text", true, false, an [array] or a { table }',
    "Invalid date": "a date that exists",
    "Invalid hex value": "a character code of hexadecimal digits",
    "Escaped character": "the code of a character that exists",
    "Found invalid character": "a character that may stand in a line",
    "Illegal character": "a character that may stand in a line",
}
"""What was expected, by the beginning of the TOML reader's message."""

_TOO_DEEP: Final = Fault("", "TOML that can be read", "numbers too long or tables nested too deep")

_PLACE: Final = re.compile(r"\(at (?:line (\d+), column (\d+)|end of document)\)$")


def _syntax_fault(text: str, error: Exception) -> Fault:
    """Say in words where a text stops being TOML."""
    place = _PLACE.search(str(error))
    if place is None:
        return _TOO_DEEP
    expected = next((wanted for start, wanted in _SYNTAX.items() if str(error).startswith(start)), "TOML")
    if place[1] is None:
        return Fault("at the end", expected, "the end of the file")
    line = text.split("\n")[int(place[1]) - 1]
    return Fault(f"line {place[1]}, column {place[2]}", expected, words.quoted(line.strip()))


def read(path: Path) -> Sheet:
    """Return the sheet in a file.

    Raises
    ------
    SheetError
        With every fault found, or with the reason why the file cannot be read.
    """
    return parse(read_text(path), str(path))


def read_text(path: Path, what: str = "a tuning sheet") -> str:
    """Return the text of a sheet's file, which `render` and `write` take to keep what a person wrote.

    `what` the file should hold is for faults.

    Raises
    ------
    SheetError
        When the file is missing, a folder, unreadable, too large or not text.
    """
    try:
        if path.is_dir():
            raise SheetError([Fault("", what, "a folder")], str(path))
        with path.open("rb") as file:
            return read_stream(file, str(path))
    except OSError as error:
        raise SheetError([Fault("", "a file that can be read", reason(error))], str(path)) from None


def read_stream(stream: BinaryIO, file: str) -> str:
    """Return the text of a sheet that comes as bytes; `file` is its name in faults.

    Raises
    ------
    SheetError
        When it is too large or not text.
    """
    data = stream.read(LARGEST + 1)
    if len(data) > LARGEST:
        raise SheetError([Fault("", f"at most {LARGEST:,} bytes", "more")], file)
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise SheetError([Fault("", "text in UTF-8", f"byte {error.start + 1}, which is none")], file) from None


def reason(error: OSError) -> str:
    """Say in words why a file cannot be opened, read or written."""
    if isinstance(error, FileNotFoundError):
        return "no such file"
    return "no permission" if isinstance(error, PermissionError) else (error.strerror or "an error").lower()


def render(sheet: Sheet, original_text: str = "") -> str:
    """Return the text of a sheet.

    Parameters
    ----------
    sheet : Sheet
        What the text is to say.
    original_text : str
        The text that it came from: its comments, order, blank lines and the spelling of every untouched key are kept.

    Returns
    -------
    str
        TOML that `parse` makes the same sheet of.
    """
    texts: list[str] = []
    for text in _texts(sheet, original_text):
        texts.append(text)
        if _says(text, sheet):
            return text
    return texts[0]  # of a sheet with faults, which no text can say


def _texts(sheet: Sheet, original_text: str) -> Iterator[str]:
    """Yield ways to write a sheet, from the one that keeps most of a person's text to a new one."""
    from tuner.files.rendering import fresh, merged

    for inline in (False, True) if original_text.strip() else ():
        text = merged(sheet, original_text, inline=inline)
        if text is not None:
            yield text
    yield fresh(sheet)


def _says(text: str, sheet: Sheet) -> bool:
    try:
        return parse(text) == sheet
    except SheetError:
        return False


def write(path: Path, sheet: Sheet, original_text: str = "") -> None:
    """Write a sheet to a file, which either gets the whole new text or stays as it was.

    Raises
    ------
    SheetError
        When the file cannot be written.
    """
    path = path.resolve()
    data = render(sheet, original_text).encode()
    beside = path.with_name(f".{path.name}.{os.getpid()}.new")
    try:
        _check_writable(path)
        _write_whole(beside, data, path.stat().st_mode if path.exists() else None)
        beside.replace(path)
    except OSError as error:
        raise SheetError([Fault("", "a file that can be written", reason(error))], str(path)) from None
    finally:
        with suppress(OSError):  # there is none when it could not be made, whatever stood in the way
            beside.unlink()


def _check_writable(path: Path) -> None:
    if path.is_dir():
        raise IsADirectoryError(EISDIR, "a folder")
    if path.exists() and not os.access(path, os.W_OK):
        raise PermissionError


def _write_whole(path: Path, data: bytes, mode: int | None) -> None:
    with path.open("xb") as file:
        file.write(data)
        file.flush()
        os.fsync(file.fileno())
    if mode is not None:
        path.chmod(mode)


def is_unchanged(path: Path, text: str) -> bool:
    """Tell whether a file still holds the text that was read from it."""
    try:
        return read_text(path) == text
    except SheetError:
        return False
