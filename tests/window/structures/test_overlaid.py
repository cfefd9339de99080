"""The plots of the page: a curve, a name and a ground for each structure."""

from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window.structures.loops import PLANT, compared
from tuner.judge.overlay import Level, Overlay
from tuner.window.structures.overlaid import ROLES, OverlaidPanel, overlaid_panels
from tuner.window.theme import Theme


@pytest.fixture
def panels(theme: Theme, qtbot: QtBot) -> tuple[OverlaidPanel, ...]:
    """Return the plots in sight."""
    made = overlaid_panels(theme)
    for panel in made:
        qtbot.addWidget(panel.widget)
        panel.widget.resize(500, 300)
        panel.widget.show()
    QApplication.processEvents()
    return made


def show(panels: tuple[OverlaidPanel, ...], plant: str = PLANT) -> None:
    """Show a comparison in all of them."""
    for panel in panels:
        panel.show(compared(plant))
    QApplication.processEvents()


def test_every_structure_has_its_curve(panels: tuple[OverlaidPanel, ...]) -> None:
    """In its colour, and it is the nominal plant's."""
    show(panels)
    reference = panels[0]
    for one, found in compared().judged:
        trace = found.nominal.traces.reference
        curve = reference.curves[one.structure.kind]
        assert np.interp(20.0, curve.xData, curve.yData) == pytest.approx(np.interp(20.0, trace.t, trace.y), abs=0.05)


def test_the_ground_covers_the_family(panels: tuple[OverlaidPanel, ...]) -> None:
    """Feedforward alone spreads by a fifth of the step, feedback with an integral hardly."""
    show(panels)
    box = panels[0].grounds["feedforward"].boundingRect()
    highest = max(float(found.traces.reference.y.max()) for found in compared().judged[0][1].members)
    assert highest < box.bottom() < 1.1 * highest
    settled = {kind: one.family[:, -1] for kind, one in panels[0].drawn.items()}
    assert np.ptp(settled["feedforward"]) == pytest.approx(2.0, abs=0.05)
    assert np.ptp(settled["feedback"]) < 0.05


def test_names_stand_beside_the_curves(panels: tuple[OverlaidPanel, ...]) -> None:
    """In the colours of words, each where its curve runs."""
    show(panels)
    for panel in panels:
        named = {word.text: word.role for word in panel.marks.words}
        assert (
            named.items()
            >= {
                "feedforward alone": "feedforward_word",
                "feedback alone": "feedback_word",
                "both": "nominal_word",
            }.items()
        )


def test_the_pointer_reads_all_of_them(panels: tuple[OverlaidPanel, ...]) -> None:
    """Values with units at its time, and the point of the curve nearest to it."""
    show(panels)
    found = panels[1].read(39.0, 6.0)
    assert found is not None
    (at, value), said = found
    assert at == 39.0
    assert value == pytest.approx(6.0, abs=0.05)
    assert said.startswith("at 39 s: feedforward alone 5.9")
    assert " degC, both " in said
    assert panels[1].read(-1.0, 0.0) is None


def test_the_keyboard_moves_the_pointer(panels: tuple[OverlaidPanel, ...]) -> None:
    """By hundredths of what is seen, and not beyond the end."""
    assert panels[0].step(1) is None
    show(panels)
    assert panels[0].step(1) == (0.0, 0.0)
    QTest.keyClick(panels[0].view, Qt.Key.Key_Right)
    QTest.keyClick(panels[0].view, Qt.Key.Key_Right)
    assert panels[0].marks.pointer is not None
    assert panels[0].marks.pointer[0] == pytest.approx(0.408)
    assert panels[0].step(500) == (40.0, 0.0)


def test_what_runs_away_does_not_flatten_the_rest(panels: tuple[OverlaidPanel, ...]) -> None:
    """The range is that of the structures that are stable, a span beyond at most."""
    show(panels, "0.1 gain/(s (0.2 s + 1))")
    low, high = panels[1].ranges()[1].low, panels[1].ranges()[1].high
    there = compared("0.1 gain/(s (0.2 s + 1))").judged
    peak = max(float(np.abs(found.nominal.traces.disturbance.y).max()) for one, found in there if one.can_destabilise)
    assert high - low < 6.0 * peak
    wild = next(found for one, found in there if not one.can_destabilise)
    assert float(wild.nominal.traces.disturbance.y.max()) > 5.0 * peak


def test_a_structure_that_is_refused_has_no_curve(panels: tuple[OverlaidPanel, ...]) -> None:
    """Nor a name; one shown before is gone."""
    show(panels)
    show(panels, "gain s/(s + 1)^2")
    assert {kind: bool(len(curve.xData)) for kind, curve in panels[0].curves.items()} == {
        "feedforward": False,
        "feedback": True,
        "both": False,
    }
    assert "both" not in {word.text for word in panels[0].marks.words}


def test_a_range_far_away_neither_flattens_the_effort_nor_is_named(panels: tuple[OverlaidPanel, ...]) -> None:
    """Of a valve from 0 to 100 % that moves a little only what moves is shown; a limit in sight has its words."""
    far = replace(compared(), overlay=Overlay(levels=(Level("effort", "", "limit 100 %", 60.0, "below"),)))
    panels[2].show(far)
    assert panels[2].ranges()[1].high < 40.0
    assert "limit 100 %" not in {word.text for word in panels[2].marks.words}
    near = replace(far, overlay=Overlay(levels=(Level("effort", "", "limit 42 %", 2.0, "below"),)))
    panels[2].show(near)
    assert "limit 42 %" in {word.text for word in panels[2].marks.words}


def test_axes_are_said_with_units(panels: tuple[OverlaidPanel, ...]) -> None:
    """Of the controlled signal, and of the manipulated one for the effort."""
    show(panels)
    said = [panel.widget.accessibleDescription() for panel in panels]
    assert [words.partition(".")[0] for words in said] == ["Temperature, degC", "Temperature, degC", "Steam, %"]


def test_stale_curves_are_paler(panels: tuple[OverlaidPanel, ...], theme: Theme) -> None:
    """And in their own colours, in either shade, when they are true again."""
    show(panels)
    pen = panels[0].curves["both"].opts["pen"]
    assert pen.color() == theme.colour("nominal")
    panels[0].show_stale()
    assert panels[0].curves["both"].opts["pen"].color().alphaF() < 0.6
    theme.choose("dark")
    panels[0].dress()
    panels[0].show(compared())
    for kind, role in ROLES.items():
        assert panels[0].curves[kind].opts["pen"].color() == theme.colour(role)


def test_a_loop_that_is_left_is_forgotten(panels: tuple[OverlaidPanel, ...]) -> None:
    """Ranges begin anew."""
    show(panels)
    panels[0].forget()
    panels[0].show_empty("nothing yet")
    assert panels[0].ask() is None
    assert panels[0].read(1.0, 0.0) is None
