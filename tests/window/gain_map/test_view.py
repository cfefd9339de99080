"""The map shows classes where they are, and keys nudge the gains."""

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest

from tests.window.gain_map.hand import at, hover
from tests.window.gain_map.made_up_map import LOST_FROM, SOFT_FROM
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.session.document import Document
from tuner.window.gain_map.drawn import STAGES
from tuner.window.gain_map.page import GainMapPage
from tuner.window.palette import palette
from tuner.window.theme import Theme


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


def test_it_is_described(page: GainMapPage) -> None:
    """Assistive technology hears the gains, their class and what the keys do."""
    assert page.view.accessibleName() == "Gain map"
    said = page.view.accessibleDescription()
    assert said.startswith("kp 2 %/degC, ki 0.05 %/(degC s). firm there.")
    assert "Arrows" in said


def test_as_found_is_marked(page: GainMapPage, document: Document) -> None:
    """The gains met on site have their name on the map, the present ones have none."""
    document.note_as_found()
    QTest.keyClick(page.view, Qt.Key.Key_Right)
    assert "as found" in [spot.name for spot in page.view.scene().spots]


def test_the_pointer_is_told_in_round_numbers(page: GainMapPage) -> None:
    """The place under the mouse has as few digits as a pixel is wide; outside of the map there is none."""
    hover(page, at(page, 5.0, 0.2))
    assert page.view.place is not None
    assert page.view.place[0] == pytest.approx(5.0, rel=0.02)
    assert len(f"{page.view.place[0]:g}") <= 4
    hover(page, QPoint(2, 2))
    assert page.view.place is None


def test_the_dark_look_has_its_own_colours(page: GainMapPage, theme: Theme) -> None:
    """A change of the look repaints the areas."""
    theme.choose("dark")
    image = page.view.grab().toImage()
    middle = at(page, 4.0, 0.3)
    near = [image.pixelColor(middle + QPoint(x, y)).name() for x in range(8) for y in range(8)]
    assert max(set(near), key=near.count) == palette("dark").colours["soft"]
