"""Tuning sheets as files: read whole or told why not, written whole or not at all."""

import os
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.files.told import edited, sentences
from tuner.errors import SheetError
from tuner.files.sheet import LARGEST, is_unchanged, parse, read, read_text, render, write
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread
from tuner.model.sheet import Actuator, Sensor, Trial

HEATER = Path(__file__).parent / "heater.toml"
TEXT = HEATER.read_text(encoding="utf-8")


def test_the_example_is_read() -> None:
    """Every number of the example arrives where it belongs; empty optional tables are as good as absent."""
    sheet = read(HEATER)
    assert sheet.loop == Loop(
        "Product heater outlet",
        "s",
        Signal("Outlet temperature", "degC", 0.0, 150.0, 72.0),
        Manipulated("Steam valve", "%", 0.0, 100.0, 40.0, 8.0),
    )
    assert sheet.plant == ExpressionPlant(
        "gain exp(-delay s) / ((lag s + 1)(tail s + 1))",
        (
            PlantParameter("gain", 0.9, "degC/%", Spread(0.9 - 0.135, 0.9 + 0.135, 15.0)),
            PlantParameter("delay", 4.0, "", Spread(3.0, 6.0)),
            PlantParameter("lag", 32.0),
            PlantParameter("tail", 6.0),
        ),
    )
    assert sheet.controller == Controller("parallel", 0.5, 3.0, 0.08, 6.0, 0.6, 1.0, 0.0, 12.0)
    assert sheet.trial == Trial(240.0, 5.0, 10.0)
    assert (sheet.actuator, sheet.sensor) == (Actuator(0.8), Sensor(1.5, 0.05, 0.1))
    assert sheet.limits == (("overshoot", 8.0), ("settling_time", 90.0), ("max_sensitivity", 1.7))


def test_signals_may_be_tables_of_their_own() -> None:
    """A signal in a table of its own says what one within the line says."""
    inline = 'controlled  = { name = "Outlet temperature", unit = "degC", low = 0, high = 150, resting = 72 }\n'
    assert inline in TEXT
    table = '[loop.controlled]\nname = "Outlet temperature"\nunit = "degC"\nlow = 0\nhigh = 150\nresting = 72\n'
    assert parse(TEXT.replace(inline, "").replace("[plant] ", f"{table}[plant] ")) == parse(TEXT)


@pytest.fixture
def said(tmp_path: Path) -> str:
    """Return the sheet's place in a folder of its own, as sentences name it."""
    return str(tmp_path / "loop.toml")


def told(path: str) -> str:
    """Return the one sentence about a file that cannot be used."""
    with pytest.raises(SheetError) as caught:
        read(Path(path))
    (sentence,) = caught.value.sentences()
    return sentence


def test_a_missing_file_is_told(said: str) -> None:
    """No file, one sentence."""
    assert told(said) == f"{said}: expected a file that can be read, found no such file"


def test_a_folder_is_told(tmp_path: Path) -> None:
    """A folder, one sentence."""
    assert told(str(tmp_path)) == f"{tmp_path}: expected a tuning sheet, found a folder"


def test_a_file_that_may_not_be_read_is_told(said: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """No permission, one sentence."""

    def refuse(*_: object) -> None:
        raise PermissionError

    monkeypatch.setattr(Path, "open", refuse)
    assert told(said) == f"{said}: expected a file that can be read, found no permission"


def test_a_file_that_is_not_text_is_told(said: str) -> None:
    """Bytes that are no UTF-8 are told with the first one's place."""
    Path(said).write_bytes(b"sheet = 1 # \xff")
    assert told(said) == f"{said}: expected text in UTF-8, found byte 13, which is none"


def test_a_large_file_is_told(said: str) -> None:
    """A file beyond the limit is told with the limit."""
    Path(said).write_bytes(b"#" * (LARGEST + 1))
    assert told(said) == f"{said}: expected at most 1,000,000 bytes, found more"


def test_an_empty_file_is_told(said: str) -> None:
    """An empty file, one sentence."""
    Path(said).touch()
    assert told(said) == f"{said}: expected a tuning sheet, found an empty file"


def test_a_mark_of_byte_order_is_no_fault(said: str) -> None:
    """A file saved with a byte order mark is read like any other."""
    Path(said).write_bytes(b"\xef\xbb\xbf" + TEXT.encode())
    assert read(Path(said)) == parse(TEXT)


def test_writing_keeps_text_and_permissions(said: str) -> None:
    """What is written over a file keeps its comments and who may read it."""
    path = Path(said)
    path.write_text(TEXT, encoding="utf-8")
    path.chmod(0o640)
    sheet = replace(parse(TEXT), trial=Trial(300.0, 5.0, 10.0))
    write(path, sheet, read_text(path))
    assert read_text(path) == TEXT.replace("duration = 240", "duration = 300")
    assert path.stat().st_mode & 0o777 == 0o640
    assert list(path.parent.iterdir()) == [path]


def test_a_new_file_is_as_open_as_any(said: str) -> None:
    """A file that was not there gets the permissions that every new file gets."""
    other = Path(said).with_name("other")
    other.touch()
    write(Path(said), parse(TEXT))
    assert Path(said).stat().st_mode == other.stat().st_mode
    assert read_text(Path(said)) == render(parse(TEXT))


def test_a_link_stays_a_link(said: str, tmp_path: Path) -> None:
    """Writing to a link writes the file that it points to."""
    link = tmp_path / "link.toml"
    Path(said).write_text(TEXT, encoding="utf-8")
    link.symlink_to(said)
    write(link, parse(TEXT))
    assert link.is_symlink()
    assert read(Path(said)) == parse(TEXT)


def test_a_failed_writing_leaves_the_file(said: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """When the disk is full the old file stays whole, nothing is left beside it, and the reason is told."""
    Path(said).write_text("as it was", encoding="utf-8")

    def refuse(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", refuse)
    with pytest.raises(SheetError, match="expected a file that can be written, found no space left on device"):
        write(Path(said), parse(TEXT))
    assert Path(said).read_text(encoding="utf-8") == "as it was"
    assert list(Path(said).parent.iterdir()) == [Path(said)]


def test_a_file_where_a_folder_should_be_is_told(said: str) -> None:
    """A path through a file is told like any other that cannot be written."""
    Path(said).touch()
    with pytest.raises(SheetError, match="expected a file that can be written, found not a directory"):
        write(Path(said) / "loop.toml", parse(TEXT))


def test_writing_to_a_folder_or_a_locked_file_is_told(
    said: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A folder and a file that may not be written are told, and stay."""
    with pytest.raises(SheetError, match="found a folder"):
        write(tmp_path, parse(TEXT))
    Path(said).write_text("as it was", encoding="utf-8")
    monkeypatch.setattr(os, "access", lambda *_: False)
    with pytest.raises(SheetError, match="found no permission"):
        write(Path(said), parse(TEXT))
    assert Path(said).read_text(encoding="utf-8") == "as it was"


def test_a_file_changed_by_another_is_noticed(said: str) -> None:
    """A file is unchanged while it holds the text that was read, and not when it is gone."""
    Path(said).write_text(TEXT, encoding="utf-8")
    assert is_unchanged(Path(said), TEXT)
    Path(said).write_text(TEXT + "\n", encoding="utf-8")
    assert not is_unchanged(Path(said), TEXT)
    Path(said).unlink()
    assert not is_unchanged(Path(said), TEXT)


def test_reading_loads_no_heavy_library() -> None:
    """Importing the reader loads neither its libraries nor scipy; reading a sheet loads no tomlkit."""
    code = "import sys; from tuner.files.sheet import parse; print(sorted({} & set(sys.modules)))"
    heavy = "{'lark', 'jsonschema', 'tomlkit', 'scipy', 'numpy'}"
    run = subprocess.run([sys.executable, "-c", code.replace("{}", heavy)], capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "[]"


SYNTAX = [
    ("kp 3.0", "line 2, column 4: expected '=' after the key, found 'kp 3.0'"),
    (
        "kp = ",
        'at the end: expected a value: a number, a "text", true, false, an [array] or a { table }, '
        "found the end of the file",
    ),
    ("kp = 3 4", "line 2, column 8: expected the end of the line after the value, found 'kp = 3 4'"),
    ("kp = 3\nkp = 4", "at the end: expected each key once, found the end of the file"),
    ("kp = 3\nkp = 4\n", "line 3, column 7: expected each key once, found 'kp = 4'"),
    ("kp = 'x", "at the end: expected the quote that ends the text, found the end of the file"),
    ("[a\nb = 2", "line 2, column 3: expected ']' after the name of the table, found '[a'"),
    ("[a]\n[a]", "line 3, column 3: expected each table once, found '[a]'"),
    ("a = [1, 2", "at the end: expected ',' or ']' in the array, found the end of the file"),
    ("a = 1e", "line 2, column 6: expected the end of the line after the value, found 'a = 1e'"),
    ("a = { b = 1", "at the end: expected ',' or '}' in the table, found the end of the file"),
    ("= 3", "line 2, column 1: expected a key, a [table] or a comment, found '= 3'"),
    (f"a = 1{'0' * 5000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (f"a = 0x{'f' * 4000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (f"a{'.a' * 3000} = 1", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (
        f"[limits]\na{'.a' * 900} = 1",
        "expected TOML that can be read, found numbers too long or tables nested too deep",
    ),
    ("# \u2028\nkp 3", "line 3, column 4: expected '=' after the key, found 'kp 3'"),
    (f"a = {'[' * 50000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
]


@pytest.mark.parametrize(("line", "said"), SYNTAX)
def test_a_text_that_is_no_toml_is_told_by_line_and_column(line: str, said: str) -> None:
    """Where the text stops being TOML is said in words, with the line as it stands."""
    assert sentences(f"sheet = 1\n{line}") == [said]


@pytest.mark.parametrize("text", ["", " \n\t\n"])
def test_an_empty_text_is_told(text: str) -> None:
    """A text with nothing in it gets one sentence rather than one for each key that is missing."""
    assert sentences(text) == ["expected a tuning sheet, found an empty file"]


def test_the_file_stands_before_each_sentence() -> None:
    """A sentence about a file begins with its name."""
    with pytest.raises(SheetError) as caught:
        parse(edited(("kp = 3.0", "kpp = 3.0"), ("overshoot = 8", "overshot = 8")), "loops/heater.toml")
    assert [said.partition(": ")[0] for said in caught.value.sentences()] == ["loops/heater.toml"] * 2


@pytest.mark.parametrize("version", ["2", "3000"])
def test_a_newer_format_is_told_alone(version: str) -> None:
    """A sheet of a later format gets one sentence, not one for each key that is new in it."""
    said = f"sheet: expected 1, the newest format that this version of Trimwright reads, found {version}"
    assert sentences(f"sheet = {version}\nnovelty = true") == [said]


lines = st.sampled_from([line for line in TEXT.splitlines() if line.strip()])
values = st.sampled_from(
    ["1", "-1", "nan", "true", "'x'", "[]", "[1, [2]]", "{ a = 1 }", "1979-05-27", "1e400", '"20 %"']
)


@st.composite
def broken_sheets(draw: st.DrawFn) -> str:
    """Draw the example with lines lost, doubled, moved, or with another value."""
    text = TEXT.splitlines()
    for _ in range(draw(st.integers(1, 4))):
        index = draw(st.integers(0, len(text) - 1))
        key, equals, _value = text[index].partition("=")
        choices = [
            [],
            [text[index]] * 2,
            [draw(lines)],
            [f"{key}{equals} {draw(values)}"],
            [draw(st.text(max_size=20))],
        ]
        text[index : index + 1] = draw(st.sampled_from(choices))
    return "\n".join(text)


@given(broken_sheets())
def test_a_broken_sheet_is_read_or_told(text: str) -> None:
    """Whatever happens to a sheet, it is read, or every fault has its sentence; nothing else escapes."""
    try:
        parse(text)
        told = ["expected nothing else"]
    except SheetError as error:
        told = error.sentences()
    assert told
    assert all("expected" in sentence and "\n" not in sentence for sentence in told)


@given(st.text(max_size=200))
def test_any_text_is_read_or_told(text: str) -> None:
    """No text makes anything but a sheet or sentences."""
    with pytest.raises(SheetError):
        parse(text)
