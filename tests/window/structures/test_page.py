"""The page of structures: when it computes, and what becomes of it when the loop is left or cannot be computed."""

from collections.abc import Iterator
from dataclasses import replace

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.compare.loops import mash
from tests.window.structures.loops import compare
from tests.window.windows import opened
from tuner.compare.comparison import Comparison
from tuner.errors import LoopError
from tuner.judge.overlay import overlay
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Stop
from tuner.window.structures import build_structures
from tuner.window.structures.page import COMPARING, StructuresPage
from tuner.window.theme import Theme


class Comparing:
    """Compares by the true road, and counts."""

    def __init__(self) -> None:
        self.asked: list[Sheet] = []
        self.refusal = ""

    def __call__(self, sheet: Sheet, *, stop: Stop) -> tuple[Comparison, ...]:
        """Return the comparisons of a sheet, or refuse."""
        self.asked.append(sheet)
        if self.refusal:
            raise LoopError(self.refusal)
        return compare(sheet, stop=stop)


@pytest.fixture
def document() -> Document:
    """Return a small loop, opened."""
    return Document(mash())


@pytest.fixture
def comparing() -> Comparing:
    """Return what compares."""
    return Comparing()


@pytest.fixture
def page(qtbot: QtBot, document: Document, theme: Theme, comparing: Comparing) -> Iterator[StructuresPage]:
    """Return the page in sight, awake, answering at once."""
    page = build_structures(document, theme, comparing, overlay, synchronous=True)
    qtbot.addWidget(page.widget)
    page.widget.resize(900, 600)
    page.widget.show()
    QApplication.processEvents()
    assert comparing.asked == []
    page.show_stale()
    yield page
    page.close()
    page.widget.hide()


def test_it_computes_once_the_window_has_its_first_answer(page: StructuresPage, comparing: Comparing) -> None:
    """Then once for each change of the loop, and not for the controller as found."""
    assert len(comparing.asked) == 1
    assert page.compared is not None
    assert page.table.words.rowCount() > 8


def test_it_follows_the_document(page: StructuresPage, document: Document, comparing: Comparing) -> None:
    """A gain is a new comparison; noting the controller as found is none."""
    document.change_value("kp", 1.0)
    assert len(comparing.asked) == 2
    assert page.compared is not None
    assert page.compared.sheet.controller.gain_1 == 1.0
    document.note_as_found()
    assert len(comparing.asked) == 2


def test_out_of_sight_nothing_is_computed(page: StructuresPage, document: Document, comparing: Comparing) -> None:
    """What changed meanwhile is compared once the page comes in sight."""
    page.widget.hide()
    document.change_value("kp", 1.0)
    document.change_value("kp", 3.0)
    assert len(comparing.asked) == 1
    page.widget.show()
    assert [sheet.controller.gain_1 for sheet in comparing.asked] == [2.0, 3.0]


def test_a_refusal_is_said_and_the_last_curves_grey(
    page: StructuresPage, document: Document, comparing: Comparing
) -> None:
    """In the line above; the next answer takes their place."""
    comparing.refusal = "the plant cannot be computed today"
    document.change_value("kp", 1.0)
    assert page.line.text() == comparing.refusal
    assert page.plots[0].stale
    assert page.table.words.pale
    comparing.refusal = ""
    document.change_value("kp", 1.5)
    assert not page.plots[0].stale
    assert not page.table.words.pale
    assert page.line.text().startswith("The sheet has no feedforward; ")


def test_another_loop_begins_empty(page: StructuresPage, document: Document) -> None:
    """What was shown of the loop before is gone, and the new one is compared."""
    page.widget.hide()
    document.start(replace(mash("gain/(3 s + 1)"), limits=()))
    page.forget()
    assert page.compared is None
    assert page.table.words.rowCount() == 0
    page.say_empty(COMPARING)
    page.widget.show()
    assert page.compared is not None
    assert page.compared.sheet == document.sheet


def test_a_loop_with_nothing_to_compare_says_so(page: StructuresPage, document: Document) -> None:
    """Neither gains nor a feedforward: no curves, and the table has the reasons."""
    bare = mash("gain s/(s + 1)^2")
    document.start(replace(bare, controller=replace(bare.controller, gain_1=0.0, gain_2=0.0)))
    assert page.plots[0].shown is None
    assert page.table.words.index(0, 0).data() == "not compared"


def test_pictures_can_be_had(page: StructuresPage) -> None:
    """Of the whole page and of each plot."""
    assert list(page.panels) == ["Structures", "Reference step", "Disturbance", "Effort"]


def test_plots_hold_still_under_a_hand_and_can_be_shown_whole(page: StructuresPage, document: Document) -> None:
    """Ranges do not narrow while a ruler is held, and do when it is let go."""
    page.hold(True)
    before = page.plots[0].ranges()[1]
    document.change_values({"kp": 0.2, "ki": 0.02})
    assert page.plots[0].ranges()[1] == before
    page.hold(False)
    assert page.plots[0].ranges()[1].span < before.span
    page.plots[2].view.getPlotItem().getViewBox().setRange(xRange=(0.0, 1.0), padding=0.0)
    page.show_whole()
    assert page.plots[2].ranges()[0].high == pytest.approx(40.0)


def test_it_follows_the_theme(page: StructuresPage, theme: Theme) -> None:
    """Every plot takes the other shade."""
    theme.choose("dark")
    assert page.plots[0].curves["both"].opts["pen"].color() == theme.colour("nominal")


def test_the_window_has_it(qtbot: QtBot) -> None:
    """It is a page of the window, computed when its word is chosen."""
    with opened(Document(mash())) as (window, _wiring):
        window.pages.choose("Structures")
        page = window.pages.page
        assert isinstance(page, StructuresPage)
        qtbot.waitUntil(lambda: page.compared is not None)


def test_its_plots_have_the_menus_of_plots(page: StructuresPage, qtbot: QtBot) -> None:
    """Each asks for the one of its own."""
    with qtbot.waitSignal(page.menu_wanted) as asked:
        page.plots[1].menu_wanted.emit(page.widget.pos())
    assert asked.args == [page.plots[1], page.widget.pos()]
