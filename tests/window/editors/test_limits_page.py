"""The page of the limits: added, changed, removed, refused, and judged."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.typing import choose, enter
from tuner.assess import assess
from tuner.model.measures import MEASURES
from tuner.session.document import Document
from tuner.window.editors.limits_page import LimitsPage
from tuner.window.theme import Theme


@pytest.fixture
def page(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[LimitsPage]:
    """Return the page of the wash bath's limits, in sight, following the document."""
    page = LimitsPage(document, theme)
    qtbot.addWidget(page)
    page.resize(320, 600)
    stop = document.listen(lambda: page.refresh(anew=False))
    page.refresh(anew=True)
    page.show()
    yield page
    stop()
    page.hide()


@pytest.mark.parametrize("measure", [measure for measure in MEASURES if measure.name != "overshoot"])
def test_any_measure_can_be_limited(page: LimitsPage, document: Document, measure: object) -> None:
    """Each measure not yet limited is offered with its definition, gets a line, and is undone."""
    from tuner.model.measures import Measure

    assert isinstance(measure, Measure)
    index = page.adder.findText(measure.label)
    assert page.adder.itemData(index, Qt.ItemDataRole.ToolTipRole) == measure.sentence
    choose(page.adder, measure.label)
    enter(page.rows[measure.name].line, "0.5")
    assert document.sheet.limits == (("overshoot", 8.0), (measure.name, 0.5))
    assert page.rows[measure.name].definition.text() == measure.sentence
    assert page.rows[measure.name].sense.text() == ("at least" if measure.at_least else "at most")
    assert page.adder.findText(measure.label) == -1
    document.undo()
    document.undo()
    assert document.sheet == wash_bath()
    assert list(page.rows) == ["overshoot"]


def test_a_limit_is_changed_in_place(page: LimitsPage, document: Document) -> None:
    """Another number, with its unit or without."""
    enter(page.rows["overshoot"].line, "12,5 %")
    assert document.sheet.limits == (("overshoot", 12.5),)


def test_a_limit_is_removed(page: LimitsPage, document: Document) -> None:
    """The button at the end of a line removes it; undo brings it back."""
    page.rows["overshoot"].remove.click()
    assert document.sheet.limits == ()
    assert page.rows == {}
    document.undo()
    assert page.rows["overshoot"].line.text() == "8"


def test_a_wrong_limit_says_why_in_place(page: LimitsPage, document: Document) -> None:
    """A negative bound is refused under its line, and stays as typed."""
    row = page.rows["overshoot"]
    enter(row.line, "-1")
    assert document.sheet == wash_bath()
    assert row.line.text() == "-1"
    assert row.fault.text() == 'Expected a number of at least 0, found "-1"'


def test_a_new_limit_begins_at_what_the_family_reaches(page: LimitsPage, document: Document) -> None:
    """With an assessment a new limit begins at the worst value of the family, two digits of it."""
    assessment = assess(document.sheet)
    page.show_assessment(assessment)
    choose(page.adder, "max sensitivity")
    worst = assessment.worst["max_sensitivity"].value
    assert worst is not None
    assert dict(document.sheet.limits)["max_sensitivity"] == pytest.approx(worst, rel=0.05)


def test_the_standing_is_said_in_words(page: LimitsPage, document: Document) -> None:
    """Each line says whether it is met, by which value of which plant; not for a limit that was not judged yet."""
    assessment = assess(document.sheet)
    page.show_assessment(assessment)
    (result,) = assessment.limits
    words = page.rows["overshoot"].standing.text()
    assert words.startswith("Met: worst" if result.met else "Missed: worst")
    assert result.plant in words
    enter(page.rows["overshoot"].line, "12")
    assert page.rows["overshoot"].standing.isHidden()
