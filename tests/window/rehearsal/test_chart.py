"""The strip chart: the newest at the right, limits in sight, words that read it."""

from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.rehearse.rehearsal import Rehearsal
from tuner.window.rehearsal.chart import Chart, Scene
from tuner.window.rehearsal.ring import Ring
from tuner.window.theme import Theme


@pytest.fixture
def chart(qtbot: QtBot, theme: Theme) -> Iterator[Chart]:
    """Return a chart in sight."""
    chart = Chart(theme)
    qtbot.addWidget(chart.widget)
    chart.widget.resize(700, 500)
    chart.widget.show()
    QApplication.processEvents()
    yield chart
    chart.widget.hide()


def scene(samples: int, *, noise: bool = False, reference: float = 80.0) -> Scene:
    """Return what there is to show of the made-up loop some samples after a step."""
    rehearsal = Rehearsal(made_up.sheet())
    ring = Ring(240.0, rehearsal.sample_time)
    rehearsal.set_reference(reference)
    ring.add(rehearsal.advance(samples))
    return Scene(rehearsal.sheet, rehearsal.time, 240.0, ring.signals(), noise)


def test_the_newest_is_at_the_right(chart: Chart) -> None:
    """The time axis ends within a pixel of now, and is as long as the trial."""
    chart.show(scene(1000))
    QApplication.processEvents()
    chart.show(scene(1000))
    for panel in chart.panels:
        x, _ = panel.ranges()
        assert 0.0 <= x.high - 500.0 <= 240.0 / panel.columns()
        assert x.span == pytest.approx(240.0)


def test_the_limits_of_the_effort_are_in_sight(chart: Chart) -> None:
    """With their values, and the ground beyond them hatched."""
    chart.show(scene(100))
    _, y = chart.effort.ranges()
    assert y.low < 0.0
    assert y.high > 100.0
    assert [words.text for words in chart.effort.marks.words] == ["low 0 %", "high 100 %"]
    assert all(area.hatched for area in chart.effort.ground.areas)


def test_the_newest_values_are_said(chart: Chart) -> None:
    """Output and reference with their units; the measurement only while it is noisy."""
    shown = scene(400)
    chart.show(shown)
    y, u = shown.signals.y[-1], shown.signals.u[-1]
    assert chart.output.now_in_words(shown) == f"Web temperature {y:.2f} degC, reference 80.00"
    assert chart.effort.now_in_words(shown) == f"Heater power {u:.2f} %"
    assert chart.output.now_in_words(replace(shown, noise=True)).endswith(" (grey)")


def test_the_pointer_reads_the_curve(chart: Chart) -> None:
    """At a time in sight the value there; elsewhere nothing; the keyboard begins at the newest."""
    shown = scene(400)
    chart.show(shown)
    found = chart.output.read(100.0, 0.0)
    assert found is not None
    at = int(np.searchsorted(shown.signals.t, 100.0))
    assert found[0] == pytest.approx((100.0, float(shown.signals.y[at])))
    assert found[1].startswith("at 100 s: ")
    assert chart.output.read(-5.0, 0.0) is None
    step = chart.output.step(-1)
    assert step is not None
    assert step[0] == pytest.approx(200.0 - 2.4)


def test_what_a_limit_holds_is_drawn_over(chart: Chart) -> None:
    """A step that saturates the effort is said and marked; a small one is not."""
    chart.show(held := scene(5, reference=100.0))
    assert held.signals.limited[-1]
    assert chart.effort.now_in_words(held).endswith(", held by a limit")
    assert chart.effort.second.xData is not None
    assert len(chart.effort.second.xData)
    chart.show(scene(400, reference=72.1))
    assert not len(chart.effort.second.xData)


def test_the_height_does_not_jump(chart: Chart) -> None:
    """It widens at once, and narrows only when hardly anything of it is used."""
    chart.show(scene(300, reference=92.0))
    _, wide = chart.output.ranges()
    chart.show(scene(300, reference=84.0))
    assert chart.output.ranges()[1] == wide
    chart.show(scene(300, reference=72.5))
    assert chart.output.ranges()[1].span < wide.span / 2.0


def test_a_curve_that_runs_away_does_not_flatten_what_was_before(chart: Chart) -> None:
    """The plot follows it to its range and half of that beyond; without a range to thirty steps from rest."""
    shown = scene(400)
    shown.signals.y[-3:] = 1e300
    chart.show(shown)
    assert chart.output.ranges()[1].high == pytest.approx(225.0, rel=0.1)
    controlled = replace(shown.sheet.loop.controlled, low=None, high=None)
    free = replace(shown.sheet, loop=replace(shown.sheet.loop, controlled=controlled))
    chart.forget()
    chart.show(replace(shown, sheet=free))
    assert chart.output.ranges()[1].high == pytest.approx(72.0 + 150.0, rel=0.1)


def test_forgotten_and_empty(chart: Chart) -> None:
    """Without a loop it says why; with the next one it begins anew."""
    chart.show(scene(100))
    chart.forget()
    chart.say_empty("Not yet.")
    assert chart.output.empty_words == "Not yet."
    assert chart.output.read(10.0, 0.0) is None
    chart.show(scene(0))
    assert chart.output.now_in_words(scene(0)) == ""
