"""The pole map shows the poles of the whole family, the slow ones to scale, and what the limits leave them."""

from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QPointF, Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer, outline, seen
from tuner.judge.assessment import WorstCase
from tuner.window.plots.pole_panel import PolePanel, pole_words
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> PolePanel:
    """Return the pole map."""
    made = PolePanel("Pole map", theme)
    seen(made, qtbot)
    return made


def test_every_pole_of_the_family_is_drawn(panel: PolePanel) -> None:
    """The nominal poles and, apart from them, those of all other members."""
    shown = answer(2.0)
    panel.show(shown)
    x, y = panel.nominal.getData()
    assert np.array_equal(x + 1j * y, shown.assessment.nominal.poles)
    assert panel.family.getData()[0].size == sum(m.poles.size for m in shown.assessment.members[1:])


def test_slow_poles_set_the_scale(panel: PolePanel) -> None:
    """A pole many times faster lies beyond the edge, and that is said."""
    shown = answer(1.0)
    fast = replace(shown.assessment.nominal, poles=np.append(shown.assessment.nominal.poles, -400.0 + 0.0j))
    members = (fast, *shown.assessment.members[1:])
    panel.show(replace(shown, assessment=replace(shown.assessment, members=members)))
    across, _ = panel.ranges()
    assert across.low > -10.0
    assert any("further left" in words.text for words in panel.marks.words)


def test_an_unstable_pole_is_in_sight(panel: PolePanel) -> None:
    """Whatever is right of the axis is shown there, over the hatched half."""
    shown = answer(4.5)
    panel.show(shown)
    across, upwards = panel.ranges()
    worst = shown.assessment.nominal.poles[0]
    assert across.low < worst.real < across.high
    assert upwards.low < worst.imag < upwards.high
    assert any(area.hatched for area in panel.ground.areas)


def test_limits_are_drawn_where_the_overlay_has_them(panel: PolePanel) -> None:
    """The settling boundary at its real part, the wedge by its slope."""
    shown = answer(2.0)
    panel.show(shown)
    assert shown.overlay.boundary is not None
    assert shown.overlay.boundary.real in {stroke.x0 for stroke in panel.marks.strokes}
    assert any(stroke.measure == "damping" for stroke in panel.marks.strokes)


def test_a_first_answer_moves_only_the_nominal_poles(panel: PolePanel) -> None:
    """Until the whole family is known, its last poles stay."""
    panel.show(answer(2.0))
    before = panel.family.getData()[0].copy()
    panel.show(answer(2.5, whole=False))
    assert np.array_equal(panel.family.getData()[0], before)


def test_a_first_answer_may_have_the_poles_of_the_family(panel: PolePanel) -> None:
    """It moves them all and the ring of the least damped pair, so that no pole keeps another's number."""
    panel.show(answer(1.0))
    first, whole = outline(3.0, number=2)
    panel.show(first)
    family = np.concatenate([member.poles for member in first.assessment.members[1:]])
    assert np.array_equal(panel.family.getData()[0], family.real)
    ringed, named = panel.least.getData()[0].copy(), [words.text for words in panel.marks.words]
    assert set(ringed) < set(family.real)
    panel.show(whole)
    assert np.array_equal(panel.least.getData()[0], ringed)
    assert [words.text for words in panel.marks.words] == named


def test_the_least_damped_pair_is_ringed_and_named(panel: PolePanel) -> None:
    """The pair of the whole family, with its damping and its plant, which can be pressed."""
    shown = answer(2.0)
    panel.show(shown)
    worst = shown.assessment.worst["damping"]
    (member,) = (one for one in shown.assessment.members if one.name == worst.plant)
    x, y = panel.least.getData()
    assert set(x + 1j * y) == {pole for pole in member.poles if pole.imag}
    (words,) = (words for words in panel.marks.words if words.plant)
    assert (words.text, words.plant) == (f"least damping {worst.value:.3g}: gain +15 %", worst.plant)


def test_the_least_damped_pair_of_the_plant_looked_at_has_no_name_to_press(panel: PolePanel) -> None:
    """It is in sight already."""
    shown = answer(2.0)
    seen_from = shown.assessment.seen_from(shown.assessment.worst["damping"].plant)
    panel.show(replace(shown, assessment=seen_from))
    (words,) = (words for words in panel.marks.words if words.text.startswith("least damping"))
    assert words.plant == ""
    assert ":" not in words.text


def test_nothing_is_ringed_where_nothing_rings(panel: PolePanel) -> None:
    """Real poles alone have a damping of 1."""
    panel.show(answer(0.2))
    assert panel.least.getData()[0].size == 0


def test_a_pair_out_of_sight_is_told_at_the_edge(panel: PolePanel) -> None:
    """So that the damping is not looked for among the poles in sight."""
    shown = answer(2.0)
    nominal = shown.assessment.nominal
    poles = np.append(nominal.poles, [-40.0 + 400.0j, -40.0 - 400.0j])
    least = replace(nominal, poles=poles, measures={**nominal.measures, "damping": 0.0995})
    found = replace(
        shown.assessment,
        members=(least, *shown.assessment.members[1:]),
        worst={**shown.assessment.worst, "damping": WorstCase(0.0995, "nominal")},
    )
    panel.show(replace(shown, assessment=found))
    (words,) = (words for words in panel.marks.words if words.text.startswith("least damping"))
    assert words.text == "least damping 0.0995, out of sight"
    across, upwards = panel.ranges()
    assert (words.x, words.y) == (across.low, upwards.high)


def test_a_family_that_is_not_wanted_is_not_drawn(panel: PolePanel) -> None:
    """The poles of the plant that is looked at stay."""
    panel.show(replace(answer(2.0), family_view="none"))
    assert panel.family.getData()[0].size == 0
    assert panel.nominal.getData()[0].size


def test_the_pointer_reads_a_pole(panel: PolePanel) -> None:
    """On a pole its numbers, away from any nothing."""
    shown = answer(2.0)
    panel.show(shown)
    pole = shown.assessment.nominal.poles[0]
    found = panel.read(pole.real, pole.imag)
    assert found is not None
    assert found[0] == (pole.real, pole.imag)
    assert panel.read(0.3 * pole.real, 0.0) is None


def test_the_cross_of_the_pointer_comes_and_goes(panel: PolePanel) -> None:
    """Pointing at a pole shows the mark and the readout; leaving takes both away."""
    shown = answer(2.0)
    panel.show(shown)
    pole = shown.assessment.nominal.poles[0]
    box = panel.view.getPlotItem().getViewBox()
    panel._pointed(box.mapViewToScene(QPointF(pole.real, pole.imag)))
    assert panel.marks.pointer == (pole.real, pole.imag)
    assert "damping" in panel._readout.text()
    panel._leave()
    assert panel.marks.pointer is None


def test_the_keyboard_goes_from_pole_to_pole(panel: PolePanel) -> None:
    """Right goes from the slowest pole to the next, and round; left goes back."""
    shown = answer(2.0)
    panel.show(shown)
    first, second = ((pole.real, pole.imag) for pole in shown.assessment.nominal.poles[:2])
    for key, pointer in ((Qt.Key.Key_Right, first), (Qt.Key.Key_Right, second), (Qt.Key.Key_Left, first)):
        QTest.keyClick(panel.view, key)
        assert panel.marks.pointer == pointer


@pytest.mark.parametrize(
    ("pole", "words"),
    [
        (-0.3 + 0.4j, "\u22120.3 ± 0.4j rad/s, period 15.7 s, damping 0.6"),
        (-2.0 + 0.0j, "\u22122 rad/s, damping 1"),
        (0.0 + 0.0j, "0 rad/s, damping 1"),
    ],
)
def test_poles_in_words(pole: complex, words: str) -> None:
    """Parts, period and damping ratio: 3-4-5 gives 0.6, and 2 pi / 0.4 gives 15.7 s."""
    assert pole_words(pole, "s") == words


def test_a_loop_without_poles_is_shown(panel: PolePanel) -> None:
    """A static plant under a static gain has none."""
    shown = answer(1.0)
    none = tuple(replace(member, poles=np.empty(0, dtype=complex)) for member in shown.assessment.members)
    panel.show(replace(shown, assessment=replace(shown.assessment, members=none)))
    assert panel.nominal.getData()[0].size == 0
    assert not panel.widget.grab().isNull()


def test_kept_tunings_have_their_poles_and_their_name(panel: PolePanel) -> None:
    """Grey crosses beside the present ones, the name at the slowest; gone with the tuning."""
    shown = answer(2.0, kept=(1.0,))
    panel.show(shown)
    x, y = panel.kept.getData()
    assert np.array_equal(x + 1j * y, shown.kept[0].member.poles)
    assert any(words.text == "A" for words in panel.marks.words)
    panel.show(answer(2.0))
    assert not panel.kept.getData()[0].size
    assert not any(words.text == "A" for words in panel.marks.words)
