"""A flow layout fills rows from the left and needs as much height as its rows."""

from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from tuner.window.flow import FlowLayout


def _flow(qtbot: QtBot, count: int) -> tuple[QWidget, FlowLayout]:
    host = QWidget()
    qtbot.addWidget(host)
    flow = FlowLayout(host, spacing=8)
    for _ in range(count):
        part = QWidget()
        part.setFixedSize(100, 20)
        flow.addWidget(part)
    return host, flow


def test_height_follows_width(qtbot: QtBot) -> None:
    """Three parts of 100 with gaps of 8 need 316 for one row, else two rows, else three."""
    _, flow = _flow(qtbot, 3)
    assert [flow.heightForWidth(width) for width in (316, 315, 100)] == [20, 44, 68]
    assert flow.hasHeightForWidth()


def test_parts_are_placed_in_rows(qtbot: QtBot) -> None:
    """The third of three begins a second row when two fit."""
    host, flow = _flow(qtbot, 3)
    host.resize(220, 100)
    host.show()
    places = [flow.itemAt(index).geometry().topLeft().toTuple() for index in range(3)]  # type: ignore[union-attr]  # three there
    assert places == [(0, 0), (108, 0), (0, 24)]


def test_a_part_can_be_dropped(qtbot: QtBot) -> None:
    """What is dropped takes no room any more."""
    _, flow = _flow(qtbot, 2)
    item = flow.itemAt(0)
    assert item is not None
    part = item.widget()
    assert part is not None
    flow.drop(part)
    assert flow.count() == 1
    assert flow.itemAt(5) is None
    assert flow.takeAt(5) is None
