"""Where everything stands, wide and narrow."""

import pytest
from PySide6.QtCore import QPoint
from PySide6.QtWidgets import QApplication, QScrollArea

from tests.window.rehearsal.test_page import loop
from tuner.rehearse.wording import CAUTION
from tuner.window.elided import ElidedLabel
from tuner.window.rehearsal.page import RehearsalPage


def test_record_and_demonstration_move_where_there_is_room(page: RehearsalPage) -> None:
    """In the row of a wide page, in the column of a narrow one, in sight either way."""
    for width, parent in ((1000, page.bar), (640, page.hand.parentWidget())):
        page.widget.resize(width, 700)
        QApplication.processEvents()
        assert page.bar.apart.parentWidget() is parent
        assert page.bar.play.isVisible()


@pytest.mark.parametrize("size", [(640, 280), (1300, 700)], ids=str)
def test_nothing_lies_over_anything_else(page: RehearsalPage, size: tuple[int, int]) -> None:
    """Row, chart, column and words each have their own room, both plots of the chart as well."""
    page.widget.resize(*size)
    QApplication.processEvents()
    (column,) = page.widget.findChildren(QScrollArea)
    upper, lower = (panel.widget for panel in page.chart.panels)
    parts = [page.bar, upper, lower, column, page.told, page.stability, page.state]
    frames = [part.rect().translated(part.mapTo(page.widget, QPoint(0, 0))) for part in parts]
    for index, frame in enumerate(frames):
        assert page.widget.rect().contains(frame)
        assert not any(frame.intersects(other) for other in frames[index + 1 :])
    assert page.bar.stop.isVisible()
    assert loop(page).time == 0.0


def test_the_caution_is_said_once(page: RehearsalPage) -> None:
    """In one line, whatever happens."""
    assert [one.text() for one in page.widget.findChildren(ElidedLabel)].count(CAUTION) == 1
