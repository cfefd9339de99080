"""The line under the map says what holds at the place looked at, and why once the hand rests."""

import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.window import made_up_footing
from tests.window.gain_map.hand import at, hover
from tuner.errors import LoopError
from tuner.window.gain_map.page import GainMapPage


def test_the_place_under_the_mouse_is_read(page: GainMapPage, reasons: made_up_footing.Reasons, qtbot: QtBot) -> None:
    """Both gains and the class at once; the reason once the mouse rests."""
    hover(page, at(page, 5.0, 0.2))
    assert page.line.text().startswith("kp ")
    assert "soft" in page.line.text()
    assert reasons.asked == []
    qtbot.waitUntil(lambda: "made up" in page.line.text())
    assert set(reasons.asked[-1]) == {"kp", "ki"}
    assert "%/degC" in page.line.text()
    hover(page, QPoint(2, 2))
    assert page.line.text().startswith("firm: ")


def test_a_place_that_cannot_be_computed_says_why(
    page: GainMapPage, reasons: made_up_footing.Reasons, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The refusal stands in the line instead of a reason."""

    def refuse(_self: object, _sheet: object, _changes: object) -> made_up_footing.Said:
        raise LoopError("the loop has no gain")

    monkeypatch.setattr(type(reasons), "__call__", refuse)
    hover(page, at(page, 5.0, 0.2))
    qtbot.waitUntil(lambda: "the loop has no gain" in page.line.text())
    assert "not known yet" in page.line.text()
