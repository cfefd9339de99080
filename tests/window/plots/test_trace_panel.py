"""The plots over time draw what the traces hold, with the marks over them, and never slow down on wild ones."""

from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QPointF, Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer, outline, seen
from tuner.judge.assessment import Assessment, MemberResult
from tuner.model.controller import Controller
from tuner.model.sheet import Trial
from tuner.simulate.traces import Trace, Traces
from tuner.window.plots.marks import Words
from tuner.window.plots.trace_panel import DisturbancePanel, EffortPanel, ReferencePanel, TracePanel
from tuner.window.shown import Shown
from tuner.window.theme import Theme

NAMES = {ReferencePanel: "Reference step", DisturbancePanel: "Disturbance", EffortPanel: "Effort"}


@pytest.fixture
def reference(theme: Theme, qtbot: QtBot) -> ReferencePanel:
    """Return the plot of the reference step."""
    panel = ReferencePanel("Reference step", theme)
    seen(panel, qtbot)
    return panel


@pytest.fixture
def effort(theme: Theme, qtbot: QtBot) -> EffortPanel:
    """Return the plot of the effort."""
    panel = EffortPanel("Effort", theme)
    seen(panel, qtbot)
    return panel


def test_the_nominal_curve_is_the_trace(reference: ReferencePanel) -> None:
    """Every point drawn is a point of the trace, from the first to the last, peak included."""
    shown = answer(2.2)
    reference.show(shown)
    trace = shown.assessment.nominal.traces.reference
    x, y = reference.nominal.getData()
    assert (x[0], x[-1]) == (trace.t[0], trace.t[-1])
    assert np.array_equal(y, trace.y[np.searchsorted(trace.t, x)])
    assert y.max() == trace.y.max()


def test_the_family_is_one_item(reference: ReferencePanel) -> None:
    """All members but the nominal one are drawn, in one item whose connect array breaks between them."""
    reference.show(answer(2.2))
    assert np.count_nonzero(reference.family.opts["connect"] == 0) == 24


def test_strokes_have_the_numbers_of_the_overlay(reference: ReferencePanel) -> None:
    """Bands and levels are drawn where the overlay has them."""
    shown = answer(2.2)
    reference.show(shown)
    heights = {stroke.y0 for stroke in reference.marks.strokes}
    for level in (level for level in shown.overlay.levels if level.plot == "reference"):
        assert level.value in heights
    for band in (band for band in shown.overlay.bands if band.plot == "reference"):
        assert {band.low, band.high} <= heights


def test_kept_tunings_run_behind(reference: ReferencePanel) -> None:
    """Each kept tuning has its curve, in grey, below the nominal one, with its letter where it runs."""
    reference.show(answer(2.2, kept=(1.0, 3.0)))
    drawn = [curve for curve in reference.kept if curve.xData.size]
    assert len(drawn) == 2
    assert all(curve.zValue() < reference.nominal.zValue() for curve in drawn)
    assert {"A", "B"} <= {words.text for words in reference.marks.words}
    reference.show(answer(2.2))
    assert not any(curve.xData.size for curve in reference.kept)


def test_a_first_answer_keeps_the_family_of_the_last(reference: ReferencePanel) -> None:
    """The quick answer moves the nominal curve and leaves the family and the words until the whole one comes."""
    reference.show(answer(1.5))
    family, said = reference.family.yData.copy(), reference.widget.accessibleDescription()
    before = reference.nominal.yData.copy()
    reference.show(answer(1.6, whole=False))
    assert np.array_equal(reference.family.yData, family)
    assert reference.widget.accessibleDescription() == said
    assert not np.array_equal(reference.nominal.yData, before)


def test_what_is_missed_is_said(reference: ReferencePanel) -> None:
    """The words beside the plot are the callouts that belong to it."""
    shown = answer(2.2)
    reference.show(shown)
    said = [callout.sentence for callout in shown.overlay.callouts if callout.plot == "reference"]
    assert said
    assert "; ".join(said) in reference.widget.accessibleDescription()


def test_axes_carry_units(reference: ReferencePanel, effort: EffortPanel) -> None:
    """The vertical axis has its unit in words, the horizontal one behind its last number."""
    for panel, unit in ((reference, "degC"), (effort, "%")):
        panel.show(answer(1.0))
        assert unit in panel.widget.accessibleDescription()
        (bottom,) = panel.view.getPlotItem().getAxis("bottom")._tickLevels
        assert bottom[-1][1] == "240 s"


def test_numbers_are_absolute(reference: ReferencePanel) -> None:
    """The axis counts from the resting point: deviation 0 is written 72."""
    reference.show(answer(1.0))
    (left,) = reference.view.getPlotItem().getAxis("left")._tickLevels
    assert (0.0, "72") in [(round(at, 9), text) for at, text in left]


def test_nothing_jumps_while_a_ruler_is_held(reference: ReferencePanel) -> None:
    """Held, the range only widens; let go, it narrows."""
    reference.show(answer(3.4))
    wide = reference.ranges()[1]
    reference.hold(True)
    reference.show(answer(0.5))
    assert reference.ranges()[1] == wide
    reference.hold(False)
    assert reference.ranges()[1].span < wide.span


def test_a_closer_look_stays(reference: ReferencePanel) -> None:
    """Ranges chosen by hand outlast new answers, until the whole plot is asked for."""
    reference.show(answer(2.0))
    whole = reference.ranges()
    box = reference.view.getPlotItem().getViewBox()
    box.setRange(xRange=(10.0, 20.0), yRange=(1.0, 2.0), padding=0.0)
    box.sigRangeChangedManually.emit([True, True])
    reference.show(answer(2.1))
    assert reference.ranges()[0].span == pytest.approx(10.0)
    reference.show_whole()
    assert reference.ranges()[0] == whole[0]


def test_the_pointer_reads_the_nominal_curve(reference: ReferencePanel) -> None:
    """Time and value with their units, absolute; nothing before the step or after the end."""
    shown = answer(1.0)
    reference.show(shown)
    trace = shown.assessment.nominal.traces.reference
    found = reference.read(float(trace.t[400]), 0.0)
    assert found is not None
    assert found[0] == pytest.approx((trace.t[400], trace.y[400]))
    assert found[1].startswith("at 50 s: 7")
    assert found[1].endswith("degC")
    assert reference.read(-1.0, 0.0) is None
    assert reference.read(241.0, 0.0) is None


def test_the_keyboard_moves_the_pointer(reference: ReferencePanel) -> None:
    """Right and page keys move the reading in time, Escape lets go of it; a screen reader hears it."""
    reference.show(answer(1.0))
    QTest.keyClick(reference.view, Qt.Key.Key_Right)
    assert reference.marks.pointer is not None
    assert reference.marks.pointer[0] == 0.0
    QTest.keyClick(reference.view, Qt.Key.Key_PageUp)
    assert reference.marks.pointer[0] == pytest.approx(0.1 * reference.ranges()[0].span)
    assert reference.view.accessibleDescription().startswith("at 24.5 s:")
    QTest.keyClick(reference.view, Qt.Key.Key_Escape)
    assert reference.marks.pointer is None


def test_stale_curves_are_grey(reference: ReferencePanel, theme: Theme) -> None:
    """After a failure the last curve stays, in the colour of what is kept."""
    reference.show(answer(2.0))
    assert reference.nominal.opts["pen"].color() == theme.colour("nominal")
    reference.show_stale()
    assert reference.nominal.opts["pen"].color() == theme.colour("kept")
    reference.show(answer(2.0))
    assert reference.nominal.opts["pen"].color() == theme.colour("nominal")


def test_a_change_of_theme_recolours_what_is_shown(reference: ReferencePanel, theme: Theme) -> None:
    """Dark has its own blue."""
    reference.show(answer(2.0))
    theme.choose("dark")
    reference.dress()
    assert reference.nominal.opts["pen"].color() == theme.colour("nominal")


@pytest.mark.parametrize("kind", list(NAMES), ids=list(NAMES.values()))
def test_a_runaway_stays_near_the_picture(kind: type[TracePanel], theme: Theme, qtbot: QtBot) -> None:
    """Whatever a trace holds, infinities too, what is drawn is finite, near, and thinned to the width of the plot."""
    panel = kind(NAMES[kind], theme)
    seen(panel, qtbot)
    panel.show(_wild(answer(4.5)))
    low, high = (panel.ranges()[1].grown(1.0).low, panel.ranges()[1].grown(1.0).high)
    for curve in (panel.nominal, panel.family, panel.band):
        assert np.isfinite(curve.yData).all()
        assert low <= curve.yData.min() <= curve.yData.max() <= high
    assert panel.nominal.xData.size <= 2 * panel.columns() + 2
    assert panel.family.xData.size <= 24 * 302
    assert not panel.widget.grab().isNull()


def test_fast_pens(reference: ReferencePanel) -> None:
    """Every curve is one pixel wide, solid and opaque; a wider smoothed one takes a hundred times longer to ring."""
    reference.show(answer(2.0, kept=(1.0,)))
    for curve in (reference.nominal, reference.family, reference.limited, *reference.kept):
        pen = curve.opts["pen"]
        assert pen.style() == Qt.PenStyle.SolidLine
        assert pen.color().alpha() == 255
        assert pen.widthF() == 1.0
    assert not reference.family.opts["antialias"]


def test_a_sampled_effort_is_a_staircase(effort: EffortPanel) -> None:
    """The effort holds from sample to sample."""
    shown = answer(1.0)
    effort.show(shown)
    lines = effort.lines(shown)
    trace = shown.assessment.nominal.traces.reference
    assert np.array_equal(lines.nominal.t[1::2][:-1], trace.t[trace.sample_index][1:])
    assert np.array_equal(lines.nominal.values[::2], trace.u[trace.sample_index])


def test_a_continuous_effort_is_a_curve(effort: EffortPanel) -> None:
    """Without samples the effort is drawn as it runs."""
    shown = answer(1.0, controller=Controller(gain_1=1.0))
    trace = shown.assessment.nominal.traces.reference
    assert np.array_equal(effort.lines(shown).nominal.t, trace.t)


def test_where_a_limit_holds_the_effort_is_marked(effort: EffortPanel) -> None:
    """Each sample at a limit is marked up to the next, with the riser between two; a long stretch is named."""
    shown = answer(3.9)
    trace = shown.assessment.nominal.traces.reference
    limited = np.zeros_like(trace.limited)
    limited[[3, 4, -1]] = True
    marked = _with_reference(shown, replace(trace, limited=limited))
    pieces = effort.lines(marked).limited
    assert pieces is not None
    samples = trace.t[trace.sample_index]
    (joined,) = np.nonzero(pieces.connect)
    assert list(joined) == [6, 7, 8, 2 * samples.size - 2]
    assert list(pieces.t[joined]) == [samples[3], samples[4], samples[4], samples[-1]]
    effort.show(marked)
    assert np.count_nonzero(effort.limited.opts["connect"]) == 4
    assert "at a limit" not in {words.text for words in effort.marks.words}
    limited[:100] = True
    effort.show(_with_reference(shown, replace(trace, limited=limited)))
    assert "at a limit" in {words.text for words in effort.marks.words}
    assert effort.lines(answer(0.5)).limited is None


def test_both_runs_are_named(effort: EffortPanel) -> None:
    """The effort of each run is labelled where it runs; without a disturbance there is one run."""
    effort.show(answer(1.0))
    assert {"reference run", "disturbance run"} <= {words.text for words in effort.marks.words}
    effort.show(answer(1.0, trial=Trial(240.0, 5.0, 0.0)))
    assert "disturbance run" not in {words.text for words in effort.marks.words}


def test_a_plant_without_spread_has_no_family(reference: ReferencePanel) -> None:
    """One plant, one curve, no band."""
    shown = answer(1.0)
    alone = replace(shown, assessment=replace(shown.assessment, members=shown.assessment.members[:1]))
    reference.show(alone)
    assert reference.family.xData.size == 0
    assert reference.band.xData.size == 0


def test_it_is_empty_in_words_at_first(reference: ReferencePanel) -> None:
    """Before the first answer it says what it waits for, or why it waits."""
    assert not reference.view.isVisible()
    reference.say_empty("the loop has no gain")
    assert reference._empty.text() == "the loop has no gain"
    reference.show(answer(1.0))
    assert reference.view.isVisible()
    assert not reference._empty.isVisible()


def test_the_worst_plant_is_drawn_and_named_where_it_runs(reference: ReferencePanel, theme: Theme) -> None:
    """In the colour of limits; a quick first answer leaves it where it was."""
    reference.show(answer(3.0))
    assert reference.worst.xData.size
    assert reference.worst.opts["pen"].color() == theme.colour("limit")
    (words,) = (words for words in reference.marks.words if words.plant)
    assert words.text.startswith("worst overshoot: gain +15 %")
    before = reference.worst.yData.copy()
    reference.show(answer(3.05, whole=False))
    assert np.array_equal(reference.worst.yData, before)


def test_pressing_the_name_of_a_plant_asks_for_it(reference: ReferencePanel) -> None:
    """A hand over the name, and a press there, mean its plant; elsewhere they mean none."""
    reference.show(answer(3.0))
    reference.view.grab()
    (words,) = (words for words in reference.marks.words if words.plant)
    wanted: list[str] = []
    reference.plant_wanted.connect(wanted.append)
    place = _place_of(reference, words)
    for at in (QPointF(place), QPointF(2.0, 2.0)):
        QTest.mouseMove(reference.view.viewport(), at.toPoint())
        QTest.mouseClick(reference.view.viewport(), Qt.MouseButton.LeftButton, pos=at.toPoint())
    assert wanted == [words.plant]


def test_the_family_is_shown_as_chosen(reference: ReferencePanel) -> None:
    """Band and curves, one of them, or neither; then the height is that of the plant alone."""
    shown = answer(3.0)
    found = []
    for view in ("both", "band", "curves", "none"):
        reference.show(replace(shown, family_view=view))
        found.append((bool(reference.band.xData.size), bool(reference.family.xData.size)))
    assert found == [(True, True), (True, False), (False, True), (False, False)]


def test_the_effort_has_its_band_and_its_worst_plant(effort: EffortPanel) -> None:
    """As the output has."""
    effort.show(answer(3.0))
    assert effort.band.xData.size
    assert effort.worst.xData.size
    assert effort.second.xData.size


def test_ranges_wait_for_the_whole_answer(reference: ReferencePanel) -> None:
    """After the hand is off, a quick answer beside an old family narrows nothing, the whole one all."""
    reference.show(answer(3.4))
    wide = reference.ranges()[1]
    reference.show(answer(0.5, whole=False))
    assert reference.ranges()[1] == wide
    reference.show(answer(0.5))
    assert reference.ranges()[1].span < wide.span


def _place_of(panel: TracePanel, words: Words) -> QPointF:
    """Return the middle of words that stand in a plot, in its pixels."""
    place = panel.marks.deviceTransform(panel.view.viewportTransform())
    placed = panel.marks._placed(place, place.mapRect(panel.marks.boundingRect()))
    (box,) = (box for word, box in placed if word == words)
    return QPointF(0.5 * (box.left + box.right), 0.5 * (box.top + box.bottom))


def _with_reference(shown: Shown, trace: Trace) -> Shown:
    nominal = shown.assessment.nominal
    traces = replace(nominal.traces, reference=trace)
    members = (replace(nominal, traces=traces), *shown.assessment.members[1:])
    return replace(shown, assessment=replace(shown.assessment, members=members))


def _wild(shown: Shown) -> Shown:
    """Return an answer whose traces grow beyond all bounds, with infinities and gaps."""

    def worse(member: MemberResult) -> MemberResult:
        reference, disturbance = member.traces.reference, member.traces.disturbance
        grow = np.exp(np.minimum(reference.t * 3.0, 700.0)) * np.sin(reference.t)
        grow[-3:] = np.inf, np.nan, -np.inf
        traces = Traces(replace(reference, y=grow, u=grow), replace(disturbance, y=-grow, u=grow))
        return replace(member, traces=traces)

    wild: Assessment = replace(shown.assessment, members=tuple(worse(member) for member in shown.assessment.members))
    return replace(shown, assessment=wild)


def test_a_first_answer_brings_the_curves_of_the_family(reference: ReferencePanel) -> None:
    """Where it has them; what then follows draws them no second time."""
    reference.show(answer(1.0))
    old = reference.family.getData()[1].copy()
    first, whole = outline(3.0, number=2)
    reference.show(first)
    drawn = reference.family.getData()[1]
    assert not np.array_equal(drawn, old)
    reference.show(whole)
    assert reference.family.getData()[1] is drawn


def test_what_follows_is_drawn_where_it_says_something_new(reference: ReferencePanel) -> None:
    """Another worst plant, or a name that was not there; not the same picture twice while a ruler is held."""
    reference.held = True
    redrawn: list[int] = []
    reference.redraw = lambda: redrawn.append(1)  # type: ignore[method-assign]
    counts = []
    for number in (2, 3):
        first, whole = outline(3.0, number=number)
        reference.show(first)
        redrawn.clear()
        reference.show(whole)
        counts.append(len(redrawn))
    assert counts == [1, 0]  # the first time its worst plant got its name
