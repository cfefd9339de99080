"""The gain map page: what it asks for, what it shows, and what the hand on it does to the document."""

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up, made_up_footing
from tests.window.gain_map.made_up_map import LOST_FROM, SOFT_FROM, Mapping
from tests.window.windows import opened
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.session.document import Document
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.drawn import STAGES
from tuner.window.gain_map.page import GainMapPage
from tuner.window.gain_map.question import Values
from tuner.window.palette import palette
from tuner.window.theme import Theme


def at(page: GainMapPage, kp: float, ki: float) -> QPoint:
    """Return where a tuning is on the map."""
    return page.view.point((kp, ki)).toPoint()


def hover(page: GainMapPage, place: QPoint) -> None:
    """Move the mouse over the map, no button down."""
    none, modifier = Qt.MouseButton.NoButton, Qt.KeyboardModifier.NoModifier
    where = page.view.mapToGlobal(place)
    event = QMouseEvent(QMouseEvent.Type.MouseMove, QPointF(place), QPointF(where), none, none, modifier)
    QApplication.sendEvent(page.view, event)


def test_it_becomes_finer_while_nothing_changes(page: GainMapPage, mapping: Mapping) -> None:
    """Coarse first, then finer; the last one has more values close to the present gains."""
    assert [count - 1 for count in mapping.counts[:2]] == list(STAGES[:2])
    assert mapping.counts[2] - 1 > STAGES[2]
    assert len(mapping.counts) == 3
    assert page.drawn.whole


@pytest.mark.parametrize(("kp", "role"), [(0.5, "firm"), (4.0, "soft"), (40.0, "lost")])
def test_classes_have_the_colours_of_the_rulers(page: GainMapPage, kp: float, role: str) -> None:
    """Away from lines and marks most pixels are of the class's colour."""
    image = page.view.grab().toImage()
    middle = at(page, kp, 0.3)
    near = [image.pixelColor(middle + QPoint(x, y)).name() for x in range(8) for y in range(8)]
    assert max(set(near), key=near.count) == palette("light").colours[role]


@pytest.mark.parametrize(("edge", "below", "above"), [(SOFT_FROM, FIRM, SOFT), (LOST_FROM, SOFT, LOST)])
def test_edges_are_drawn_where_they_are(page: GainMapPage, edge: float, below: int, above: int) -> None:
    """A step of the finest grid to either side of an edge the class is that side's."""
    step = 1000.0 ** (1.0 / (STAGES[-1] - 1))
    assert page.view.grade_at((edge / step, 0.2)) == below
    assert page.view.grade_at((edge * step, 0.2)) == above


def test_a_click_sets_both_gains_in_one_step(page: GainMapPage, document: Document) -> None:
    """Both gains are those under the pointer, round numbers, and one undo takes them back."""
    before = document.sheet
    QTest.mouseClick(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    controller = document.sheet.controller
    assert controller.gain_1 == pytest.approx(5.0, rel=0.02)
    assert controller.gain_2 == pytest.approx(0.2, rel=0.03)
    assert document.undo_label == "Set kp and ki"
    document.undo()
    assert document.sheet == before
    assert document.undo_label is None


def test_a_drag_is_one_step(page: GainMapPage, document: Document) -> None:
    """The gains follow live; releasing ends the step, and the next drag is another."""
    before, seen = document.sheet, []
    document.listen(lambda: seen.append(document.sheet.controller.gain_1))
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    for kp in (4.0, 3.0, 1.0):
        QTest.mouseMove(page.view, at(page, kp, 0.1))
        QApplication.processEvents()
    QTest.mouseRelease(page.view, Qt.MouseButton.LeftButton, pos=at(page, 1.0, 0.1))
    assert [round(kp, 1) for kp in seen] == [5.0, 4.0, 3.0, 1.0]
    document.undo()
    assert document.sheet == before


def test_escape_takes_a_drag_back(page: GainMapPage, document: Document) -> None:
    """The gains are those from before, and what the mouse does until it is released changes nothing."""
    before = document.sheet
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    QTest.keyClick(page.view, Qt.Key.Key_Escape)
    QTest.mouseRelease(page.view, Qt.MouseButton.LeftButton, pos=at(page, 3.0, 0.2))
    assert document.sheet == before
    assert document.undo_label is None


def test_escape_after_a_drag_that_came_back_undoes_nothing_else(page: GainMapPage, document: Document) -> None:
    """An earlier step stays when the drag has not moved anything."""
    QTest.mouseClick(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    before = document.sheet
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    QTest.keyClick(page.view, Qt.Key.Key_Escape)
    assert document.sheet == before


@pytest.mark.parametrize(
    ("key", "shift", "kp", "ki"),
    [
        (Qt.Key.Key_Right, False, 2.02, 0.05),
        (Qt.Key.Key_Left, True, 2.0 / 1.1, 0.05),
        (Qt.Key.Key_Up, False, 2.0, 0.0505),
        (Qt.Key.Key_Down, True, 2.0, 0.05 / 1.1),
    ],
)
def test_arrows_nudge(  # noqa: PLR0913, PLR0917 - a key and what it does
    page: GainMapPage, document: Document, key: Qt.Key, shift: bool, kp: float, ki: float
) -> None:
    """Across and upwards, by the fine step, with Shift by the coarse one."""
    modifier = Qt.KeyboardModifier.ShiftModifier if shift else Qt.KeyboardModifier.NoModifier
    QTest.keyClick(page.view, key, modifier)
    controller = document.sheet.controller
    assert (controller.gain_1, controller.gain_2) == pytest.approx((kp, ki), rel=1e-3)


@pytest.mark.usefixtures("page")
def test_moving_the_mapped_gains_leaves_the_map(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """The map stays true; only the mark moves, and what is close to it is looked at again once it went far."""
    asked = len(mapping.asked)
    QTest.keyClick(page.view, Qt.Key.Key_Right)
    assert len(mapping.asked) == asked
    document.change_values({"kp": 20.0, "ki": 0.2})
    assert mapping.counts[asked:] == [mapping.counts[2]]


def test_another_gain_asks_anew(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """A change of kd is asked for, coarse first; a hand on its ruler leaves it at that until it lets go."""
    page.hold(True)
    asked = len(mapping.asked)
    document.change_value("kd", 5.0)
    assert [count - 1 for count in mapping.counts[asked:]] == [STAGES[0]]
    page.hold(False)
    assert len(mapping.asked) == asked + 3


def test_out_of_sight_nothing_is_computed(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """A change while the page is hidden is asked for when it comes in sight."""
    page.widget.hide()
    asked = len(mapping.asked)
    document.change_value("kd", 5.0)
    assert len(mapping.asked) == asked
    page.widget.show()
    assert len(mapping.asked) == asked + 3


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


def test_any_two_gains(page: GainMapPage, mapping: Mapping) -> None:
    """Choosing another gain asks for it; choosing the other axis' gain swaps both."""
    choose(page, 1, "kd")
    assert mapping.asked[-1][1:3] == ("kp", "kd")
    choose(page, 0, "kd")
    assert mapping.asked[-1][1:3] == ("kd", "kp")


def choose(page: GainMapPage, which: int, name: str) -> None:
    """Choose a gain by hand."""
    box = (page.choosers.across, page.choosers.upwards)[which]
    box.setCurrentIndex(box.findData(name))
    box.activated.emit(box.currentIndex())


def test_another_form_brings_its_own_gains(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """The gains at the same places are mapped."""
    assert document.set_form("standard")
    assert mapping.asked[-1][1:3] == ("kc", "ti")
    assert page.view.axes[0].title == "kc, %/degC"


def test_the_measure_of_the_contours(page: GainMapPage, mapping: Mapping) -> None:
    """At first it is that of the first limit, whose line is drawn; none draws none."""
    assert mapping.asked[-1][3] == "overshoot"
    assert page.view.answer is not None
    assert [contour.level for contour in page.view.answer.contours if contour.is_limit] == [8.0]
    page.choosers.measure.setCurrentIndex(0)
    page.choosers.measure.activated.emit(0)
    assert mapping.asked[-1][3] == ""
    assert page.view.answer.contours == ()


def test_a_refusal_is_said(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """A loop that cannot be computed has no map, but a sentence; a change brings the map again."""
    mapping.refusal = "the loop has no gain"
    document.change_value("kd", 5.0)
    assert page.view.answer is None
    assert page.view.scene().sentence == "the loop has no gain"
    mapping.refusal = ""
    document.change_value("kd", 6.0)
    assert page.view.answer is not None


def test_another_loop_begins_without_a_map(page: GainMapPage, document: Document) -> None:
    """What was shown of the loop before is gone once the page is told to forget."""
    page.widget.hide()
    document.start(replace(made_up.sheet(kp=3.0), limits=()))
    page.forget()
    assert page.view.answer is None
    assert page.choosers.chosen_measure == "overshoot"


def test_as_found_is_marked(page: GainMapPage, document: Document) -> None:
    """The gains met on site have their name on the map, the present ones have none."""
    document.note_as_found()
    QTest.keyClick(page.view, Qt.Key.Key_Right)
    assert "as found" in [spot.name for spot in page.view.scene().spots]


def test_it_is_described(page: GainMapPage) -> None:
    """Assistive technology hears the gains, their class and what the keys do."""
    assert page.view.accessibleName() == "Gain map"
    said = page.view.accessibleDescription()
    assert said.startswith("kp 2 %/degC, ki 0.05 %/(degC s). firm there.")
    assert "Arrows" in said


def test_the_newest_wins(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """After a burst of changes the map is of the last sheet, few were computed, none in the main thread."""
    import threading

    mapping = Mapping()
    page = build_gain_map(document, theme, mapping, made_up_footing.Reasons())
    qtbot.addWidget(page.widget)
    page.widget.resize(700, 500)
    page.widget.show()
    page.show_stale()
    for step in range(100):
        document.change_value("kd", 4.0 + 0.01 * step)
    qtbot.waitUntil(lambda: page.drawn.whole)
    answer = page.view.answer
    assert answer is not None
    assert answer.question.sheet.controller.gain_3 == document.sheet.controller.gain_3
    assert threading.get_ident() not in mapping.threads
    page.close()
    page.widget.hide()


def test_the_window_has_it(qtbot: QtBot) -> None:
    """It is a page of the window, reached by its word, and closes with it."""
    mapping = Mapping()
    with opened(paint_map=mapping) as (window, wiring):
        assert wiring.gain_map is not None
        assert mapping.asked == []
        window.pages.choose("Gain map")
        qtbot.waitUntil(lambda: len(mapping.asked) == 3)


def test_the_true_map_of_a_small_loop(qtbot: QtBot, theme: Theme) -> None:
    """On a first-order loop the classes of the real road are those of the assessment at some places."""
    from tuner.assess import assess
    from tuner.files import sheet as files
    from tuner.footing.gain_map import paint_map
    from tuner.footing.reason import reason_at

    text = (Path(__file__).parent / "small.toml").read_text(encoding="utf-8")
    document = Document(files.parse(text))
    page = build_gain_map(
        document,
        theme,
        lambda sheet, x, y, measure, *, stop: paint_map(sheet, x, y, measure, stop=stop),
        reason_at,
        synchronous=True,
    )
    qtbot.addWidget(page.widget)
    page.widget.resize(600, 400)
    page.widget.show()
    page.show_stale()
    assert page.view.answer is not None
    found = page.view.answer.map
    grades = {"met": FIRM, "missed": SOFT, "unstable": LOST}
    for row, column in ((5, 5), (30, 40), (60, 60), (45, 20)):
        places: Values = (float(found.x.values[column]), float(found.y.values[row]))
        controller = document.sheet.controller.with_value("kp", places[0]).with_value("ki", places[1])
        verdict = assess(replace(document.sheet, controller=controller), 5).verdict
        assert found.classes[row, column] == grades[verdict]
        assert page.view.grade_at(places) == grades[verdict]
    assert set(found.classes.ravel().tolist()) == {FIRM, SOFT, LOST}
    page.close()
    page.widget.hide()
