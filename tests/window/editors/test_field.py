"""Fields and pages: labels, units, sentences on faults, and what is in sight."""

import pytest
from PySide6.QtWidgets import QLabel, QLineEdit, QScrollArea
from pytestqt.qtbot import QtBot

from tests.window.editors.finding import typed_field
from tests.window.editors.typing import enter
from tuner.errors import Fault, LoopError, SheetError
from tuner.window.editors.field import LABEL_WIDTH, UNIT_WIDTH, FaultLine, Field, Note, Page, heading
from tuner.window.editors.panel import EditorPanel
from tuner.window.theme import Theme


@pytest.mark.parametrize(
    ("said", "shown"),
    [
        ("expected a number", "Expected a number"),
        ("plant.expression: expected a formula", "plant.expression: expected a formula"),
        ("no such plant", "No such plant"),
    ],
)
def test_a_fault_is_a_sentence(qtbot: QtBot, theme: Theme, said: str, shown: str) -> None:
    """It begins with a capital, unless it begins with the key of a sheet, which is quoted as it is."""
    line = FaultLine(theme)
    qtbot.addWidget(line)
    line.say(said)
    assert line.text() == shown
    assert not line.isHidden()
    line.say("")
    assert line.isHidden()


def test_an_attempt_says_why_it_failed(qtbot: QtBot, theme: Theme) -> None:
    """A refusal is said without the path it stands beside; the next success takes the sentence away."""
    line = FaultLine(theme)
    qtbot.addWidget(line)

    def refuse() -> None:
        raise SheetError([Fault("trial.duration", "a number above 0", "0")])

    def break_down() -> None:
        raise LoopError("there is no such loop")

    assert not line.attempt(refuse, "trial.duration")
    assert line.text() == "Expected a number above 0, found 0"
    assert not line.attempt(break_down)
    assert line.text() == "There is no such loop"
    assert line.attempt(lambda: None)
    assert line.isHidden()


def test_a_fault_has_the_colour_of_what_is_lost(qtbot: QtBot, theme: Theme) -> None:
    """In both shades, as they change."""
    line = FaultLine(theme)
    qtbot.addWidget(line)
    for shade in ("light", "dark"):
        theme.choose(shade)
        line.ensurePolished()
        assert line.palette().color(line.foregroundRole()) == theme.colour("lost_word")


def test_a_note_takes_no_room_while_it_says_nothing(qtbot: QtBot, theme: Theme) -> None:
    """Shown with words, hidden without."""
    note = Note(theme)
    qtbot.addWidget(note)
    assert note.isHidden()
    note.say("Not converted.")
    assert (note.text(), note.isHidden()) == ("Not converted.", False)
    note.say("")
    assert note.isHidden()


def test_a_heading_is_strong(theme: Theme) -> None:
    """It stands out by its weight, not by another size."""
    label = heading(theme, "Notch")
    assert label.font().weight() > theme.font().weight()
    assert label.font().pixelSize() == theme.font().pixelSize()


def test_a_field_explains_its_control(qtbot: QtBot, theme: Theme) -> None:
    """The label leads to the control and names it; the sentence is shown on hovering anywhere."""
    line = QLineEdit()
    field = Field(theme, "lag", "Time constant of the valve.", line)
    qtbot.addWidget(field)
    (label,) = (label for label in field.findChildren(QLabel) if label.text() == "lag")
    assert label.buddy() is line
    assert line.accessibleName() == "lag"
    assert field.toolTip() == "Time constant of the valve."


def test_a_control_below_its_label_has_the_whole_width(qtbot: QtBot, theme: Theme) -> None:
    """Above or before it: the label never takes room from a control that needs it."""
    fields = [Field(theme, "zeros", "", QLineEdit(), above=above) for above in (False, True)]
    for field in fields:
        qtbot.addWidget(field)
        field.resize(300, 60)
        field.show()
    beside, below = (field.control.width() for field in fields)
    assert below == 300
    assert beside == 300 - LABEL_WIDTH - UNIT_WIDTH - 2 * 4


def test_a_long_unit_is_said_whole_on_hovering(qtbot: QtBot, theme: Theme) -> None:
    """A unit wider than its place is shortened there, and whole in its tip; a short one needs none."""
    field = Field(theme, "rate", "", QLineEdit())
    qtbot.addWidget(field)
    field.resize(300, 30)
    field.show()
    field.unit.setText("m^3/(s bar) per hour")
    assert field.unit.toolTip() == "m^3/(s bar) per hour"
    field.unit.setText("s")
    assert field.unit.toolTip() == ""


class Counter:
    """A part that notes how it was refreshed."""

    def __init__(self) -> None:
        self.refreshed: list[bool] = []

    def refresh(self, *, anew: bool) -> None:
        """Note it."""
        self.refreshed.append(anew)


def test_a_page_refreshes_its_parts(qtbot: QtBot) -> None:
    """Every part hears of it, in which way, in the order in which they stand."""
    page, parts = Page(), (Counter(), Counter())
    qtbot.addWidget(page)
    labels = [QLabel("one"), QLabel("two"), QLabel("three")]
    page.add(labels[0], parts[0])
    page.add(labels[1])
    page.add(labels[2], parts[1])
    page.refresh(anew=False)
    page.refresh(anew=True)
    assert [part.refreshed for part in parts] == [[False, True]] * 2
    page.resize(200, 200)
    page.show()
    tops = [label.y() for label in labels]
    assert tops == sorted(set(tops))


def test_a_fault_below_the_edge_comes_in_sight(panel: EditorPanel, qtbot: QtBot) -> None:
    """Where the page is longer than the window, it scrolls until the sentence is read."""
    panel.resize(320, 300)
    field = typed_field(panel, "Loop", "loop.manipulated.rate")
    enter(field.line, "fast")
    (area,) = (area for area in panel.findChildren(QScrollArea) if area.isVisible())

    def in_sight() -> bool:
        where = field.fault.mapTo(area.viewport(), field.fault.rect().bottomLeft())
        return field.fault.height() > 0 and area.viewport().rect().contains(where)

    qtbot.waitUntil(in_sight, timeout=2000)
    assert field.line.typed() == "fast"
