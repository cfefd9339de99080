"""A page tells when it comes in sight and when it goes."""

from PySide6.QtWidgets import QStackedWidget, QWidget
from pytestqt.qtbot import QtBot

from tuner.window.seen import Seen


def test_a_page_of_a_stack_tells_when_it_is_seen(qtbot: QtBot) -> None:
    """Shown when it is turned to in a window that is seen, hidden when another is."""
    stack, page = QStackedWidget(), Seen()
    told: list[bool] = []
    qtbot.addWidget(stack)
    stack.addWidget(QWidget())
    stack.addWidget(page)
    stack.show()
    page.seen.connect(told.append)
    stack.setCurrentIndex(1)
    stack.setCurrentIndex(0)
    assert told == [True, False]
    stack.hide()
