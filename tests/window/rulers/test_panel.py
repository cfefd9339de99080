"""The rulers of a document, moved and typed."""

import numpy as np
import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QColor
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tests.window.rulers.hands import drag, type_in
from tuner.footing.classes import FIRM, SOFT, painted
from tuner.session.document import Document
from tuner.window.rulers import build_rulers
from tuner.window.rulers.face import TRACK_TOP
from tuner.window.rulers.painting import Painting, Reading
from tuner.window.rulers.panel import TWO_COLUMNS, Place, RulerPanel
from tuner.window.theme import Theme


def test_there_is_a_ruler_for_every_parameter_of_the_form(panel: RulerPanel, document: Document) -> None:
    """The rulers are those that the table of parameters gives for the form, and follow it."""
    assert list(panel.rulers) == ["kp", "ki", "kd", "filter_time", "b", "c", "windup_time"]
    weight = panel.rulers["b"]
    document.set_form("standard")
    assert list(panel.rulers) == ["kc", "ti", "td", "filter_time", "b", "c", "windup_time"]
    assert panel.rulers["b"] is weight


def test_a_drag_is_one_step_and_tells_of_the_hand(panel: RulerPanel, document: Document) -> None:
    """A drag changes the gain all along, is undone whole, and starts and finishes once."""
    heard: list[str] = []
    panel.dragging_started.connect(lambda: heard.append("started"))
    panel.dragging_finished.connect(lambda: heard.append("finished"))
    values: list[float] = []
    document.listen(lambda: values.append(document.sheet.controller.gain_1))
    drag(panel.rulers["kp"], 3.0, 20.0)
    assert heard == ["started", "finished"]
    assert len(set(values)) >= 4
    assert document.sheet.controller.gain_1 == pytest.approx(20.0, rel=0.02)
    assert panel.rulers["kp"].box.text() == f"{document.sheet.controller.gain_1:g}"
    document.undo()
    assert document.sheet == wash_bath()


@pytest.mark.parametrize(
    ("name", "text", "sentence"),
    [
        (
            "kp",
            "-2",
            'kp is never negative; for a plant whose output falls with the effort, choose the action "direct"',
        ),
        ("kp", "fast", 'expected a number of at least 0, found "fast"'),
        ("windup_time", "0", 'expected a number above 0, found "0"'),
        ("filter_time", "2 min", 'expected the unit s or nothing behind the number, found "min"'),
    ],
)
def test_refused_text_stays_with_a_sentence(
    panel: RulerPanel, document: Document, name: str, text: str, sentence: str
) -> None:
    """What cannot be taken stays in the box, says why under it, and the loop stays as it is; Escape reverts."""
    ruler = panel.rulers[name]
    before = ruler.box.text()
    type_in(ruler, text)
    assert document.sheet == wash_bath()
    assert ruler.box.text() == text
    assert panel.fault_in_sight() == sentence
    QTest.keyClick(ruler.box, Qt.Key.Key_Escape)
    assert ruler.box.text() == before
    assert panel.fault_in_sight() == ""


def test_refused_text_outlives_other_changes(panel: RulerPanel) -> None:
    """What was typed wrong in one box stays while another ruler is moved."""
    type_in(panel.rulers["ki"], "0.0.5")
    drag(panel.rulers["kp"], 3.0, 5.0)
    assert panel.rulers["ki"].box.text() == "0.0.5"


def test_another_sheet_forgets_what_was_typed(panel: RulerPanel, document: Document) -> None:
    """Text typed for one sheet does not stand in the next one's box."""
    type_in(panel.rulers["ki"], "0.0.5")
    document.start(wash_bath(), TEXT)
    assert panel.rulers["ki"].box.text() == "0.05"
    assert panel.fault_in_sight() == ""


def _colours(panel: RulerPanel) -> dict[str, QColor]:
    """Return the colour of the tracks of kp and ki, a quarter from the left."""
    sliders = {name: panel.rulers[name].slider for name in ("kp", "ki")}
    return {
        name: slider.grab().toImage().pixelColor(slider.width() // 4, TRACK_TOP + 4) for name, slider in sliders.items()
    }


def _painting(panel: RulerPanel, document: Document, *names: str) -> Painting:
    """Return a painting in which some rulers are firm, and the others are missing."""
    tracks = {track.name: track for track in panel.tracks() if track.name in names}
    firm = {name: painted(track, np.full(len(track.values), FIRM, np.int8), ()) for name, track in tracks.items()}
    return Painting(1, document.sheet, firm)


def test_a_ruler_is_painted_by_its_own_classes(panel: RulerPanel, document: Document, theme: Theme) -> None:
    """What was found along one ruler paints its track and no other's, until it is taken away."""
    panel.paint(_painting(panel, document, "kp"))
    assert _colours(panel) == {"kp": theme.colour("firm"), "ki": theme.colour("line")}
    panel.unpaint()
    assert set(map(QColor.name, _colours(panel).values())) == {theme.colour("line").name()}


def test_only_untrue_paint_fades(panel: RulerPanel, document: Document, theme: Theme) -> None:
    """After kp moved, its own ruler is as true as before, since the others are held; theirs fade."""
    painting = _painting(panel, document, "kp", "ki")
    panel.paint(painting)
    document.change_value("kp", 9.0)
    panel.paint(painting, document.sheet)
    colours = _colours(panel)
    assert colours["kp"] == theme.colour("firm")
    assert colours["ki"] not in (theme.colour("firm"), theme.colour("line"))


def test_the_tracks_are_those_of_the_rulers(panel: RulerPanel) -> None:
    """What is asked for is named like the rulers, from end to end of each, the off notch as 0."""
    tracks = {track.name: track.values for track in panel.tracks()}
    assert list(tracks) == list(panel.rulers)
    assert (tracks["kp"][0], tracks["kp"][1], tracks["kp"][-1]) == (0.0, 0.1, 100.0)
    assert min(len(values) for values in tracks.values()) >= 64


def test_the_line_reads_where_the_mouse_points(panel: RulerPanel, document: Document) -> None:
    """The place pointed at goes before the ruler with the focus; with neither the line explains the patterns."""
    legend = panel.line.text()
    panel.paint(_painting(panel, document, "kp"))
    panel.rulers["kp"].slider.pointed.emit(4.2)
    assert panel.place == Place("kp", 4.2)
    panel.show_reading(Reading(1, document.sheet, "kp", 4.2, SOFT, "overshoot 9 % > 8 %"))
    assert panel.line.text() == "kp 4.2 %/degC  soft  overshoot 9 % > 8 %"
    panel.show_reading(None)
    assert panel.line.text() == "kp 4.2 %/degC  firm"
    panel.rulers["ki"].slider.pointed.emit(0.5)
    panel.show_reading(None)
    assert panel.line.text() == "ki 0.5 %/(degC s)  not known yet"
    panel.rulers["ki"].slider.left.emit()
    panel.show_reading(None)
    assert panel.line.text() == legend


def test_the_line_reads_where_the_keys_are(panel: RulerPanel, monkeypatch: pytest.MonkeyPatch) -> None:
    """With nothing pointed at, the place is the value of the ruler that has the focus."""
    monkeypatch.setattr(panel.rulers["windup_time"].slider, "hasFocus", lambda: True)
    assert panel.place == Place("windup_time", 20.0)


def test_the_line_says_why_nothing_is_painted(panel: RulerPanel) -> None:
    """A loop that cannot be computed leaves the rulers grey and the reason in words."""
    panel.unpaint("the loop has no gain")
    assert panel.line.text() == "the loop has no gain"


@pytest.mark.parametrize(("width", "columns"), [(TWO_COLUMNS + 200, 2), (600, 1)])
def test_the_width_decides_on_the_columns(panel: RulerPanel, width: int, columns: int) -> None:
    """In a wide window gains and the rest stand side by side, in a narrow one under one another."""
    panel.resize(width, 400)
    QApplication.processEvents()
    lefts = {ruler.x() for ruler in panel.rulers.values()}
    assert len(lefts) == columns


def test_a_panel_that_is_gone_hears_nothing(document: Document, theme: Theme) -> None:
    """After a panel is deleted the document changes without it."""
    panel = build_rulers(document, theme)
    panel.deleteLater()
    QApplication.sendPostedEvents()
    QApplication.processEvents()
    document.change_value("kp", 5.0)
    assert document.sheet.controller.gain_1 == 5.0


def test_tab_goes_through_the_rulers_in_their_order(panel: RulerPanel, document: Document, qtbot: QtBot) -> None:
    """From the switch of the forms to slider and box of each, also when another form has brought new ones."""
    document.set_form("standard")
    first = panel.form.segments.buttons["standard"]
    first.setFocus()
    qtbot.waitUntil(first.hasFocus)
    walked = []
    for _ in range(8):
        QTest.keyClick(panel, Qt.Key.Key_Tab)
        focused = QApplication.focusWidget()
        assert focused is not None
        walked.append(focused.accessibleName())
    names = ("kc", "ti", "td", "filter_time")
    assert walked == [f"{name} {what}" for name in names for what in ("ruler", "value")]
