"""The map is asked for coarse first, the newest question wins, and only what is in sight is computed."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.window import made_up_footing
from tests.window.gain_map.made_up_map import Mapping
from tuner.session.document import Document
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.drawn import STAGES
from tuner.window.gain_map.page import GainMapPage
from tuner.window.theme import Theme


def test_it_becomes_finer_while_nothing_changes(page: GainMapPage, mapping: Mapping) -> None:
    """Coarse first, then finer; the last one has more values close to the present gains."""
    assert [count - 1 for count in mapping.counts[:2]] == list(STAGES[:2])
    assert mapping.counts[2] - 1 > STAGES[2]
    assert len(mapping.counts) == 3
    assert page.drawn.whole


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


def test_a_refusal_is_said(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """A loop that cannot be computed has no map, but a sentence; a change brings the map again."""
    mapping.refusal = "the loop has no gain"
    document.change_value("kd", 5.0)
    assert page.view.answer is None
    assert page.view.scene().sentence == "the loop has no gain"
    mapping.refusal = ""
    document.change_value("kd", 6.0)
    assert page.view.answer is not None


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


def test_contours_of_another_measure_are_not_shown(page: GainMapPage) -> None:
    """Once another measure is chosen the lines of the one before are gone, although the classes stay."""
    before = page.view.answer
    page.drawn.activate(False)
    page.choosers.measure.setCurrentIndex(page.choosers.measure.findData("settling_time"))
    page.choosers.changed.emit()
    assert before is not None
    assert before.contours != ()
    assert page.view.answer is not None
    assert page.view.answer.map is before.map
    assert page.view.answer.contours == ()
    page.drawn.activate(True)
    assert page.view.answer.contours != ()
    assert page.view.scene().unit == "s"
