"""The ribbon says the verdict and every limit: in words, by sign and by colour."""

from dataclasses import replace

import pytest
from PySide6.QtGui import QImage
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.judge.assessment import WorstCase
from tuner.model.measures import MEASURES
from tuner.window.chip import Chip
from tuner.window.earlier import Earlier
from tuner.window.ribbon import Ribbon, rows, verdict_words
from tuner.window.shown import Request, Shown
from tuner.window.theme import Theme
from tuner.window.worker import Assessing


def shown(kp: float, **changes: object) -> Shown:
    """Return the answer for a made-up loop."""
    return Assessing(made_up.sketch, made_up.glance, made_up.draw).whole(Request(1, made_up.sheet(kp, **changes)))


@pytest.fixture
def ribbon(theme: Theme, qtbot: QtBot) -> Ribbon:
    """Return a ribbon."""
    made = Ribbon(theme)
    qtbot.addWidget(made.widget)
    return made


def test_every_limit_has_a_chip_in_order(ribbon: Ribbon) -> None:
    """One chip for each limit; fewer limits, fewer chips."""
    ribbon.show(shown(1.0))
    assert [chip.words.measure for chip in ribbon.chips] == [
        "overshoot",
        "settling time",
        "max sensitivity",
        "damping",
    ]
    ribbon.show(shown(1.0, limits=(("overshoot", 8.0),)))
    assert [chip.words.measure for chip in ribbon.chips] == ["overshoot"]


@pytest.mark.parametrize(
    ("kp", "verdict"), [(2.2, "4 of 4 limits missed"), (4.2, "Unstable")], ids=["missed", "unstable"]
)
def test_the_verdict_is_a_word(ribbon: Ribbon, kp: float, verdict: str) -> None:
    """The verdict stands in words beside its sign, and a screen reader gets it."""
    ribbon.show(shown(kp))
    assert ribbon.verdict.text() == verdict
    assert ribbon.widget.accessibleName().startswith(f"Verdict: {verdict}.")


def test_an_unstable_loop_is_said_at_length(ribbon: Ribbon) -> None:
    """The whole sentence on how it runs away, and what brings it back."""
    answer = shown(4.2)
    ribbon.show(answer)
    assert answer.assessment.instability is not None
    assert ribbon.detail.text() == answer.assessment.instability.sentence


def test_met_limits_are_counted() -> None:
    """All met, one met, and none set each have their words."""
    loose = (("overshoot", 99.0), ("settling_time", 999.0))
    assert verdict_words(shown(1.0, limits=loose).assessment)[0] == "All 2 limits met"
    assert verdict_words(shown(1.0, limits=loose[:1]).assessment)[0] == "The limit is met"
    assert verdict_words(shown(1.0, limits=()).assessment)[0] == "Stable, no limits set"


def test_a_loop_that_cannot_be_computed_says_why(ribbon: Ribbon) -> None:
    """The sentence stands where the verdict was explained; the chips stay."""
    ribbon.show(shown(1.0))
    ribbon.fail("the loop has no gain: kp is 0")
    assert ribbon.verdict.text() == "not computed"
    assert ribbon.detail.text() == "the loop has no gain: kp is 0"
    assert len(ribbon.chips) == 4


def test_a_tip_defines_the_measure(ribbon: Ribbon) -> None:
    """The tip holds the definition, the worst plant and the nominal value."""
    ribbon.show(shown(2.2))
    tip = ribbon.chips[1].toolTip()
    assert "Time after which the output stays in the settling band." in tip
    assert "Worst at gain" in tip
    assert "Nominal plant:" in tip


def test_chips_are_reached_by_keyboard(ribbon: Ribbon, qtbot: QtBot) -> None:
    """`focus` goes to the first chip, which a screen reader reads whole."""
    ribbon.show(shown(2.2))
    with qtbot.waitActive(ribbon.widget):
        ribbon.widget.show()
        ribbon.widget.activateWindow()
    ribbon.focus()
    chip = QApplication.focusWidget()
    assert isinstance(chip, Chip)
    assert chip.accessibleName().startswith("overshoot")
    assert "missed" in chip.accessibleName()


def test_chips_wrap_and_then_scroll(ribbon: Ribbon) -> None:
    """In a narrow window eight chips take two rows and scroll; in a wide one they take one."""
    limits = tuple((name, 1.0) for name in ("overshoot", "settling_time", "max_sensitivity", "damping") * 2)
    ribbon.widget.resize(2400, 100)
    ribbon.widget.show()
    ribbon.show(shown(2.2, limits=limits))
    QApplication.processEvents()
    one_row = ribbon.chips[0].height() + 1
    assert {chip.y() for chip in ribbon.chips} == {0}
    ribbon.widget.resize(720, 100)
    QApplication.processEvents()
    assert len({chip.y() for chip in ribbon.chips}) > 2
    assert one_row < ribbon._scroll.height() < 3 * one_row


def test_a_chip_grows_with_its_words(ribbon: Ribbon) -> None:
    """When a limit turns unstable, its longer word is not cut."""
    ribbon.widget.resize(1600, 100)
    ribbon.widget.show()
    ribbon.show(shown(1.0))
    QApplication.processEvents()
    ribbon.show(shown(made_up.EDGE * 1.2))
    QApplication.processEvents()

    assert [chip.width() for chip in ribbon.chips] == [chip.sizeHint().width() for chip in ribbon.chips]


def test_the_shade_is_taken_over(ribbon: Ribbon, theme: Theme) -> None:
    """A chip painted light and the same chip painted dark differ in their ground."""
    ribbon.show(shown(2.2))
    ribbon.widget.show()
    light = ribbon.chips[0].grab().toImage()
    theme.choose("dark")
    assert ribbon.verdict.styleSheet() == f"color: {theme.palette.colours['lost_word']}"
    assert ribbon.chips[0].grab().toImage() != light


def test_numbers_of_an_earlier_tuning_are_paler(ribbon: Ribbon, theme: Theme) -> None:
    """While the verdict is awaited, which is said; the next one brings them back."""
    ribbon.show(shown(1.0))
    (chip, *_) = ribbon.chips
    now = chip.grab().toImage()
    ribbon.wait()
    assert ribbon.verdict.text() == "assessing…"
    assert ribbon.detail.text() == "the numbers are those of an earlier tuning"
    pale = chip.grab().toImage()
    page = theme.colour("page").lightness()

    def farthest(image: QImage) -> int:
        places = [(x, y) for x in range(image.width()) for y in range(image.height())]
        return max(abs(image.pixelColor(x, y).lightness() - page) for x, y in places)

    assert farthest(pale) < 0.7 * farthest(now)
    ribbon.show(shown(1.0))
    assert ribbon.chips[0].grab().toImage() == now
    assert ribbon.detail.text() != "the numbers are those of an earlier tuning"


def found(name: str = "as found", value: float = 120.0) -> Earlier:
    """Return an earlier tuning with one value for every measure."""
    return Earlier(name, {measure.name: WorstCase(value, "gain +15 %") for measure in MEASURES})


def with_found() -> Shown:
    """Return the answer for a made-up loop with a controller as found."""
    controller = made_up.sheet(1.0).controller
    return shown(1.0, controller=replace(controller, as_found=controller))


def test_earlier_values_stand_quietly_beside_the_present_ones(ribbon: Ribbon) -> None:
    """Room is kept for those as found from the start, so that no chip moves when they come; tip and name have all."""
    ribbon.widget.resize(1400, 100)
    ribbon.widget.show()
    ribbon.show(with_found())
    QApplication.processEvents()
    chip = ribbon.chips[1]
    places, before = [one.geometry() for one in ribbon.chips], chip.grab().toImage()
    ribbon.show_earlier((found(value=2.0),))
    QApplication.processEvents()
    assert [one.geometry() for one in ribbon.chips] == places
    assert chip.grab().toImage() != before
    ribbon.show_earlier((found(), found("A", 130.0)))
    assert [one.short for one in chip.words.earlier] == ["found 120 s", "A 130 s"]
    assert chip.accessibleName().endswith(", found 120 s, A 130 s")
    assert chip.toolTip().endswith("\nAs found: 120 s at gain +15 %.\nTuning A: 130 s at gain +15 %.")
    ribbon.show_earlier(())
    assert chip.words.earlier == ()


def test_earlier_values_may_come_first(ribbon: Ribbon) -> None:
    """Before the first verdict they wait for it."""
    ribbon.show_earlier((Earlier("as found", {"overshoot": WorstCase(3.0, "nominal")}),))
    assert ribbon.chips == []
    ribbon.show(with_found())
    assert [one.short for one in ribbon.chips[0].words.earlier] == ["found 3 %"]
    assert ribbon.chips[1].words.earlier == ()


def test_the_ribbon_does_not_grow_in_height_for_earlier_values(ribbon: Ribbon) -> None:
    """Where the wider chips would take another row they stay as they are, and get their room back in a wider window."""
    ribbon.show(with_found())
    narrow = sum(chip.width_with(roomy=False) + 8 for chip in ribbon.chips)
    for width, roomy in ((narrow + 320, False), (narrow + 900, True), (narrow + 320, False)):
        ribbon.widget.resize(width, 100)
        ribbon.widget.show()
        QApplication.processEvents()
        assert [chip.is_roomy for chip in ribbon.chips] == [roomy] * 4
        assert {chip.y() for chip in ribbon.chips} == {0}


def test_without_a_controller_as_found_no_room_is_kept(ribbon: Ribbon) -> None:
    """The chips are as narrow as their own words."""
    ribbon.widget.resize(1400, 100)
    ribbon.widget.show()
    ribbon.show(shown(1.0))
    QApplication.processEvents()
    assert not any(chip.is_roomy for chip in ribbon.chips)
    ribbon.show(with_found())
    assert all(chip.is_roomy for chip in ribbon.chips)


def test_rows_of_chips() -> None:
    """As many as fit beside one another with a gap of 8; one that is wider than the room has a row of its own."""
    assert rows([100, 100, 100], 316) == 1
    assert rows([100, 100, 100], 315) == 2
    assert rows([500, 100], 300) == 2
    assert rows([], 300) == 1
