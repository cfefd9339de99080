"""Reading the rulers: one question where mouse or keys rest, and only the last one's answer."""

from collections.abc import Iterator

import pytest
from pytestqt.qtbot import QtBot

from tests.window.made_up_footing import Reasons
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rulers.painting import Reading, ReasonRequest, reading_by
from tuner.window.rulers.panel import RulerPanel
from tuner.window.rulers.reader import REST, RulerReader


@pytest.fixture
def reasons() -> Reasons:
    """Return what gives reasons and notes for which places."""
    return Reasons()


@pytest.fixture
def worker(reasons: Reasons) -> Beside[ReasonRequest]:
    """Return a worker that answers at once."""
    return Beside(reading_by(reasons), synchronous=True)


@pytest.fixture
def reads(document: Document, panel: RulerPanel, worker: Beside[ReasonRequest]) -> Iterator[RulerReader]:
    """Return the reader of the panel."""
    panel.setFocus()
    reads = RulerReader(document, panel, worker)
    yield reads
    reads.close()


@pytest.mark.usefixtures("reads")
def test_only_where_the_mouse_rests_is_asked(panel: RulerPanel, reasons: Reasons, qtbot: QtBot) -> None:
    """A mouse that moves along asks nothing until it rests, then for that one place."""
    for value in (1.0, 2.0, 3.0):
        panel.rulers["kp"].slider.pointed.emit(value)
    assert reasons.asked == []
    qtbot.waitUntil(lambda: bool(reasons.asked))
    assert reasons.asked == [{"kp": 3.0}]
    assert panel.line.text() == "kp 3 %/degC  soft  made up: soft with {'kp': 3.0}"


@pytest.mark.usefixtures("reads")
def test_an_answer_for_another_place_is_dropped(
    panel: RulerPanel, worker: Beside[ReasonRequest], document: Document
) -> None:
    """What comes for a place already left is not shown."""
    panel.rulers["kp"].slider.pointed.emit(3.0)
    before = panel.line.text()
    worker.answered.emit(Reading(0, document.sheet, "kp", 1.0, 0, "all limits met"))
    assert panel.line.text() == before


@pytest.mark.usefixtures("reads")
def test_a_change_of_the_sheet_is_read_anew(
    panel: RulerPanel, reasons: Reasons, document: Document, qtbot: QtBot
) -> None:
    """The sentence of the sheet before goes at once, and the same place is asked for again."""
    panel.rulers["kp"].slider.pointed.emit(3.0)
    qtbot.waitUntil(lambda: len(reasons.asked) == 1)
    document.change_value("ki", 0.2)
    assert "made up" not in panel.line.text()
    qtbot.waitUntil(lambda: len(reasons.asked) == 2)


@pytest.mark.usefixtures("reads")
def test_nothing_is_asked_where_nobody_looks(panel: RulerPanel, reasons: Reasons, qtbot: QtBot) -> None:
    """Once mouse and keys are gone, the question that was about to be asked is not."""
    slider = panel.rulers["kp"].slider
    slider.pointed.emit(3.0)
    slider.left.emit()
    qtbot.wait(3 * REST)
    assert reasons.asked == []


@pytest.mark.usefixtures("reads")
def test_the_keys_read_the_present_value(
    panel: RulerPanel, reasons: Reasons, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A ruler that gets the focus is read where it stands."""
    monkeypatch.setattr(panel.rulers["ki"].slider, "hasFocus", lambda: True)
    panel.rulers["ki"].slider.focused.emit()
    qtbot.waitUntil(lambda: reasons.asked == [{"ki": 0.05}])
