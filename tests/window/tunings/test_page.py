"""The page of tunings: what it follows, and when it computes."""

from collections.abc import Iterator

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.compare.loops import mash
from tests.window.tunings.loops import AS_FOUND, compare
from tests.window.windows import opened
from tuner.compare.tuning_table import Tuning, TuningTable
from tuner.errors import LoopError
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Stop
from tuner.window.theme import Theme
from tuner.window.tunings import build_tunings
from tuner.window.tunings.page import COMPARING, TuningsPage
from tuner.window.tunings.words import ALONE


class Comparing:
    """Compares by the true road, and remembers what it was asked."""

    def __init__(self) -> None:
        self.asked: list[tuple[str, ...]] = []
        self.refusal = ""

    def __call__(self, sheet: Sheet, kept: tuple[Tuning, ...], *, stop: Stop) -> TuningTable:
        """Return the table of a sheet, or refuse."""
        self.asked.append(tuple(tuning.name for tuning in kept))
        if self.refusal:
            raise LoopError(self.refusal)
        return compare(sheet, kept, stop=stop)


@pytest.fixture
def document() -> Document:
    """Return a small loop with a controller as found, opened."""
    return Document(mash(more=AS_FOUND))


@pytest.fixture
def comparing() -> Comparing:
    """Return what compares."""
    return Comparing()


@pytest.fixture
def page(qtbot: QtBot, document: Document, theme: Theme, comparing: Comparing) -> Iterator[TuningsPage]:
    """Return the page in sight, awake, answering at once."""
    page = build_tunings(document, theme, comparing, synchronous=True)
    qtbot.addWidget(page.widget)
    page.widget.resize(900, 600)
    page.widget.show()
    QApplication.processEvents()
    assert comparing.asked == []
    assert page.line.text() == COMPARING
    page.show_stale()
    yield page
    page.close()
    page.widget.hide()


def test_tunings_that_are_kept_become_columns(page: TuningsPage, document: Document, comparing: Comparing) -> None:
    """As they are kept and dropped, and as the present gains move."""
    document.keep()
    document.change_value("kp", 1.5)
    assert comparing.asked == [(), ("A",), ("A",)]
    assert page.table.words.columnCount() == 3
    document.drop("A")
    assert page.table.words.columnCount() == 2
    document.forget_as_found()
    assert page.line.text() == ALONE


def test_out_of_sight_nothing_is_computed(page: TuningsPage, document: Document, comparing: Comparing) -> None:
    """What changed meanwhile is compared once the page comes in sight."""
    page.widget.hide()
    document.keep()
    document.keep()
    assert len(comparing.asked) == 1
    page.widget.show()
    assert comparing.asked == [(), ("A", "B")]


def test_a_refusal_is_said_and_the_last_table_pale(page: TuningsPage, document: Document, comparing: Comparing) -> None:
    """Until there is an answer again."""
    comparing.refusal = "nothing can be computed today"
    document.change_value("kp", 1.0)
    assert page.line.text() == comparing.refusal
    assert page.table.words.pale
    comparing.refusal = ""
    document.change_value("kp", 1.5)
    assert not page.table.words.pale


def test_another_loop_begins_empty(page: TuningsPage, document: Document) -> None:
    """What was shown of the loop before is gone, and the new one is compared when it is seen."""
    page.widget.hide()
    document.start(mash("gain/(3 s + 1)"))
    page.forget()
    assert page.compared is None
    assert page.table.words.rowCount() == 0
    page.widget.show()
    assert page.compared is not None
    assert page.compared.sheet == document.sheet


def test_a_picture_can_be_had(page: TuningsPage) -> None:
    """Of the page; it always is whole, whatever hand is on a ruler."""
    assert list(page.panels) == ["Tunings"]
    page.show_whole()
    page.hold(True)
    assert page.compared is not None


def test_the_window_has_it(qtbot: QtBot) -> None:
    """It is a page of the window, computed when its word is chosen."""
    with opened(Document(mash(more=AS_FOUND))) as (window, _wiring):
        window.pages.choose("Tunings")
        page = window.pages.page
        assert isinstance(page, TuningsPage)
        qtbot.waitUntil(lambda: page.compared is not None)
        assert page.line.text().startswith("As left is better than as found in ")
