"""What the window remembers survives the run, and a broken file is as on the first day."""

from pathlib import Path

import pytest

from tuner.window.memory import Memory, recall, remember


def test_what_is_remembered_comes_back() -> None:
    """The next run finds what this one left."""
    assert recall() == Memory()
    remember(Memory(geometry="QQ==", theme="dark"))
    assert recall() == Memory(geometry="QQ==", theme="dark")


@pytest.mark.parametrize("text", ["", "[1]", "nonsense", '{"theme": 3, "other": "x"}'])
def test_a_broken_file_is_as_on_the_first_day(own_home: Path, text: str) -> None:
    """Whatever stands in the file, the window opens."""
    remember(Memory(theme="dark"))
    (file,) = own_home.rglob("window.json")
    file.write_text(text, encoding="utf-8")
    assert recall() == Memory()
