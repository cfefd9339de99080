"""The ribbon says the verdict and every limit: in words, by sign and by colour."""

import pytest
from PySide6.QtGui import QImage
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.judge.assessment import LimitResult
from tuner.model.loop import Loop
from tuner.window.ribbon import Chip, ChipWords, Ribbon, chip_words, verdict_words
from tuner.window.shown import Request, Shown
from tuner.window.theme import Theme
from tuner.window.worker import Assessing

LOOP = Loop("x", "min")


def shown(kp: float, **changes: object) -> Shown:
    """Return the answer for a made-up loop."""
    return Assessing(made_up.sketch, made_up.glance, made_up.draw).whole(Request(1, made_up.sheet(kp, **changes)))


@pytest.fixture
def ribbon(theme: Theme, qtbot: QtBot) -> Ribbon:
    """Return a ribbon."""
    made = Ribbon(theme)
    qtbot.addWidget(made.widget)
    return made


def test_a_chip_has_value_limit_and_worst_plant() -> None:
    """Units on value and limit, the sense of the limit, and the plant in words."""
    result = LimitResult("settling_time", 90.0, 96.0, "gain 1.04", met=False)
    assert chip_words(result, LOOP, stable=True) == ChipWords(
        "settling time", "96 min", "≤ 90 min", "at gain 1.04", "missed"
    )


@pytest.mark.parametrize(
    ("result", "value", "limit", "standing"),
    [
        (LimitResult("gain_margin", 2.0, float("inf"), "nominal", met=True), "∞", "≥ 2", "met"),
        (LimitResult("overshoot", 8.0, 8.0004, "nominal", met=False), "8.0004 %", "≤ 8 %", "missed"),
        (LimitResult("settling_time", 8.0, None, "nominal", met=False), "—", "≤ 8 min", "unstable"),
        (LimitResult("peak_time", 8.0, None, "nominal", met=True), "none", "≤ 8 min", "met"),
        (LimitResult("damping", 0.5, -0.25, "nominal", met=False), "\u22120.25", "≥ 0.5", "missed"),
        (LimitResult("steady_state_error", 1.0, -2.0, "nominal", met=False), "2 %", "≤ 1 %", "missed"),
    ],
)
def test_values_are_said_honestly(result: LimitResult, value: str, limit: str, standing: str) -> None:
    """Infinity, nothing, signs and sizes, and enough figures to tell a value from its limit."""
    words = chip_words(result, LOOP, stable=False)
    assert (words.value, words.limit, words.standing) == (value, limit, standing)


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
