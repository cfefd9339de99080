"""A plot with its words: what any panel does, whatever it draws."""

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QContextMenuEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QLabel
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer, seen
from tuner.window.plots.extent import Extent
from tuner.window.plots.panel import Panel
from tuner.window.plots.ticks import Tick
from tuner.window.shown import Shown
from tuner.window.theme import Theme

WHOLE = (Extent(0.0, 100.0), Extent(-1.0, 1.0))


class Plain(Panel[Shown]):
    """Draws nothing in fixed ranges, notes what it was asked, and reads the point itself."""

    def __init__(self, theme: Theme) -> None:
        self.asked: list[str] = []
        super().__init__("Plain", theme)

    def draw(self, shown: Shown) -> None:
        """Note it, and show the whole."""
        del shown
        self.asked.append("draw")
        self.set_ranges(*WHOLE)
        self.divide("s")

    def redraw(self) -> None:
        """Note it."""
        self.asked.append("redraw")

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the whole."""
        return WHOLE

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Read the point itself."""
        return (x, y), f"at {x:.0f} s: {y:.1f}"

    def step(self, steps: int) -> tuple[float, float] | None:
        """Go by seconds from 50 s, nowhere to the left."""
        return (50.0 + steps, 0.5) if steps > 0 else None


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> Plain:
    """Return a panel that shows an answer, in sight."""
    panel = Plain(theme)
    seen(panel, qtbot)
    panel.show(answer(1.0))
    QApplication.processEvents()
    panel.asked.clear()
    return panel


def labels(panel: Panel[Shown]) -> list[str]:
    """Return the words around the plot that are in sight."""
    return [label.text() for label in panel.widget.findChildren(QLabel) if label.isVisible() and label.text()]


def test_before_the_first_answer_there_are_words(theme: Theme, qtbot: QtBot) -> None:
    """It says that it computes, or why it cannot; the plot comes with the answer."""
    panel = Plain(theme)
    seen(panel, qtbot)
    assert labels(panel) == ["Plain", "Computing the first answer…"]
    panel.say_empty("the loop has no gain")
    assert labels(panel) == ["Plain", "the loop has no gain"]
    assert not panel.view.isVisible()
    panel.show(answer(1.0))
    assert labels(panel) == ["Plain"]
    assert panel.view.isVisible()


def test_an_answer_without_curves_is_words(panel: Plain) -> None:
    """In their place, until there are curves again; nothing of the earlier answer is drawn any more."""
    panel.show_empty("none")
    assert not panel.view.isVisible()
    assert (panel._empty.text(), panel._missed.text()) == ("none", "")
    panel.hold(held=False)
    assert panel.asked == []
    panel.show(answer(1.0))
    assert panel.view.isVisible()
    assert not panel._empty.isVisible()


def test_words_stand_above_the_plot(panel: Plain, theme: Theme) -> None:
    """The axis and what is missed, in the colour of what is lost only when something is; a screen reader hears both."""
    panel.set_words("temperature, degC", "overshoot 12 % > 8 %", bad=True)
    (missed,) = (label for label in panel.widget.findChildren(QLabel) if label.text().startswith("overshoot"))
    assert missed.palette().color(missed.foregroundRole()) == theme.colour("lost_word")
    assert panel.widget.accessibleDescription() == "temperature, degC. overshoot 12 % > 8 %"
    panel.set_words("temperature, degC", "the limit here is met", bad=False)
    assert missed.palette().color(missed.foregroundRole()) == theme.colour("quiet")


def test_a_closer_look_outlasts_answers(panel: Plain) -> None:
    """Turning the wheel looks closer; answers leave that alone until a double click shows the whole again."""
    assert panel.ranges() == WHOLE
    box = panel.view.getPlotItem().getViewBox()
    box.setRange(xRange=(10.0, 20.0), yRange=(0.0, 0.5), padding=0.0)
    box.sigRangeChangedManually.emit([True, True])
    assert panel.asked == ["redraw"]
    panel.show(answer(1.1))
    assert panel.ranges()[0] == Extent(10.0, 20.0)
    centre = panel.view.viewport().rect().center()
    QTest.mouseDClick(panel.view.viewport(), Qt.MouseButton.LeftButton, pos=centre)
    assert panel.ranges() == WHOLE


def test_another_loop_begins_with_the_whole(panel: Plain) -> None:
    """Ranges looked at by hand belong to the loop before."""
    box = panel.view.getPlotItem().getViewBox()
    box.setRange(xRange=(10.0, 20.0), yRange=(0.0, 0.5), padding=0.0)
    box.sigRangeChangedManually.emit([True, True])
    panel.forget()
    panel.show(answer(1.1))
    assert panel.ranges() == WHOLE


def test_a_hand_off_the_ruler_draws_once_more(panel: Plain) -> None:
    """While it is held nothing is drawn anew for that; letting go does."""
    panel.hold(True)
    assert (panel.held, panel.asked) == (True, [])
    panel.hold(False)
    assert (panel.held, panel.asked) == (False, ["draw"])


def test_another_size_divides_anew(panel: Plain) -> None:
    """A wider plot has more numbers on its axis, and a narrow one fewer; none is drawn twice for nothing."""
    counts = []
    for width in (320, 1200):
        panel.widget.resize(width, 400)
        QApplication.processEvents()
        counts.append(len(panel.ground.columns))
    assert 2 <= counts[0] < counts[1]
    assert "draw" in panel.asked


def test_the_unit_stands_behind_the_last_number(panel: Plain) -> None:
    """The horizontal axis says its unit once; the grid lies at the numbers of both axes."""
    panel.set_ticks([Tick(0.0, "0"), Tick(50.0, "50")], [Tick(0.5, "0.5")], "min")
    item = panel.view.getPlotItem()
    assert item.getAxis("bottom")._tickLevels == [[(0.0, "0"), (50.0, "50 min")]]
    assert item.getAxis("left")._tickLevels == [[(0.5, "0.5")]]
    assert (panel.ground.columns, panel.ground.rows) == ((0.0, 50.0), (0.5,))


def test_the_mouse_reads_where_it_points(panel: Plain) -> None:
    """Over the plot the reading stands in place of the axis; beside it and after it left, the axis does."""
    panel.set_words("temperature, degC", "the limit here is met", bad=False)
    box = panel.view.getPlotItem().getViewBox()
    scene = panel.view.scene()
    scene.sigMouseMoved.emit(box.mapViewToScene(QPointF(40.0, 0.5)))
    assert "at 40 s: 0.5" in labels(panel)
    assert "temperature, degC" not in labels(panel)
    assert panel.view.accessibleDescription() == "at 40 s: 0.5"
    scene.sigMouseMoved.emit(QPointF(-5.0, -5.0))
    assert "temperature, degC" in labels(panel)
    assert panel.marks.pointer is None


def test_keys_move_the_pointer(panel: Plain) -> None:
    """An arrow is one step, a page ten; where there is nowhere to go it stays; Escape and leaving let go of it."""
    for key, at in ((Qt.Key.Key_Right, 51.0), (Qt.Key.Key_PageUp, 60.0), (Qt.Key.Key_Left, 60.0)):
        QTest.keyClick(panel.view, key)
        assert panel.marks.pointer == (at, 0.5)
    QTest.keyClick(panel.view, Qt.Key.Key_Escape)
    assert panel.marks.pointer is None


def test_a_right_click_asks_for_the_menu(panel: Plain) -> None:
    """Where on the screen, so that the menu stands there."""
    heard: list[QPoint] = []
    panel.menu_wanted.connect(heard.append)
    event = QContextMenuEvent(QContextMenuEvent.Reason.Mouse, QPoint(30, 40), QPoint(130, 140))
    QApplication.sendEvent(panel.view.viewport(), event)
    assert heard == [QPoint(130, 140)]


def test_a_stale_picture_is_drawn_as_one(panel: Plain) -> None:
    """After a failure the panel knows that its curves belong to an earlier sheet; the next answer makes them fresh."""
    panel.show_stale()
    assert (panel.stale, panel.asked) == (True, ["redraw"])
    panel.show(answer(1.0))
    assert not panel.stale


def test_the_page_has_the_colour_of_the_theme(panel: Plain, theme: Theme) -> None:
    """Dressed anew after a change of shade, the plot's ground and the words on what is missed follow."""
    panel.set_words("", "missed", bad=True)
    for shade in ("dark", "light"):
        theme.choose(shade)
        panel.dress()
        assert panel.view.backgroundBrush().color() == theme.colour("page")
        (missed,) = (label for label in panel.widget.findChildren(QLabel) if label.text() == "missed")
        assert missed.palette().color(missed.foregroundRole()) == theme.colour("lost_word")
