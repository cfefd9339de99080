"""A field typed in a line, or in several."""

import pytest
from pytestqt.qtbot import QtBot

from tests.window.editors.typing import enter
from tuner.errors import LoopError
from tuner.window.editors.intake import Words
from tuner.window.editors.line_field import Caption, LineField, Source
from tuner.window.editors.typed_line import TypedLine
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme


class Shelf:
    """Holds one text; it refuses an empty one."""

    def __init__(self) -> None:
        self.held = "wide"

    def take(self, text: str) -> None:
        """Hold another text."""
        if not text:
            raise LoopError("something must be held")
        self.held = text

    def field(self, theme: Theme, lines: int = 1) -> LineField[str]:
        """Return a field over the shelf."""
        source = Source(lambda: self.held, Words(str, str), self.take)
        return LineField(theme, Caption("what", "What is held.", "shelf.what"), source, lines=lines)


@pytest.fixture
def shelf() -> Shelf:
    """Return a shelf."""
    return Shelf()


@pytest.mark.parametrize(("lines", "kind"), [(1, TypedLine), (3, TypedText)])
def test_it_takes_and_says_what_is_wrong(qtbot: QtBot, theme: Theme, shelf: Shelf, lines: int, kind: type) -> None:
    """In one line or several: typed text is taken, refused text stays with the reason under it."""
    field = shelf.field(theme, lines)
    qtbot.addWidget(field)
    field.show()
    assert isinstance(field.line, kind)
    assert field.line.typed() == "wide"
    enter(field.line, "narrow")
    assert shelf.held == "narrow"
    enter(field.line, "")
    assert (shelf.held, field.line.typed()) == ("narrow", "")
    assert (field.fault.text(), field.fault.isVisible()) == ("Something must be held", True)


def test_it_shows_what_is_held(qtbot: QtBot, theme: Theme, shelf: Shelf) -> None:
    """A change from elsewhere is shown, wrong text and its sentence gone."""
    field = shelf.field(theme)
    qtbot.addWidget(field)
    enter(field.line, "")
    shelf.held = "high"
    field.refresh(anew=False)
    assert (field.line.typed(), field.fault.isHidden()) == ("high", True)


def test_several_lines_are_higher(qtbot: QtBot, theme: Theme, shelf: Shelf) -> None:
    """Three lines of text are in sight at once."""
    low, high = shelf.field(theme), shelf.field(theme, 3)
    for field in (low, high):
        qtbot.addWidget(field)
        field.show()
    spacing = high.line.fontMetrics().lineSpacing()
    assert low.line.height() < 3 * spacing <= high.line.height()
