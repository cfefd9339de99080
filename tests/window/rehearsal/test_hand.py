"""The column of the hand shows a loop and says what is wanted."""

from dataclasses import replace

from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.model.demonstration import SetEffort, SetMode, SetReference
from tuner.model.loop import Manipulated
from tuner.rehearse.rehearsal import Rehearsal
from tuner.window.rehearsal.hand import Hand
from tuner.window.theme import Theme


def test_it_takes_units_and_sizes_from_the_sheet(qtbot: QtBot, theme: Theme) -> None:
    """The reference begins at rest, the disturbance with the trial's size, each with its unit."""
    hand = Hand(theme)
    qtbot.addWidget(hand)
    hand.show_sheet(made_up.sheet())
    assert (hand.reference.value, hand.reference.unit.text()) == (72.0, "degC")
    assert (hand.amount.value, hand.amount.unit.text()) == (10.0, "%")
    assert hand.over.unit.text() == "s"


def test_the_slider_goes_from_limit_to_limit(qtbot: QtBot, theme: Theme) -> None:
    """Without limits it reaches five disturbances to either side of rest."""
    hand = Hand(theme)
    qtbot.addWidget(hand)
    wanted: list[object] = []
    hand.wanted.connect(wanted.append)
    hand.show_sheet(made_up.sheet())
    hand.slider.setValue(1000)
    free = made_up.sheet()
    free = replace(free, loop=replace(free.loop, manipulated=Manipulated("Heater power", "%", resting=40.0)))
    hand.show_sheet(free)
    hand.slider.setValue(0)
    assert wanted == [SetEffort(100.0), SetEffort(-10.0)]


def test_the_effort_is_followed_until_the_hand_takes_it(qtbot: QtBot, theme: Theme) -> None:
    """In automatic the slider is where the law is, so that by hand it begins there."""
    hand = Hand(theme)
    qtbot.addWidget(hand)
    rehearsal = Rehearsal(made_up.sheet())
    hand.show_sheet(rehearsal.sheet)
    rehearsal.set_reference(80.0)
    rehearsal.advance(30)
    hand.show_rehearsal(rehearsal)
    hand.show_effort(rehearsal)
    assert hand.slider.value() == round(10.0 * rehearsal.effort)
    assert not hand.slider.isEnabled()
    rehearsal.to_manual()
    hand.show_rehearsal(rehearsal)
    assert hand.slider.isEnabled()
    rehearsal.set_manual(20.0)
    hand.show_effort(rehearsal)
    assert (hand.slider.value(), hand.effort.value) == (200, 20.0)


def test_without_a_loop_nothing_can_be_done(qtbot: QtBot, theme: Theme) -> None:
    """The column is greyed."""
    hand = Hand(theme)
    qtbot.addWidget(hand)
    hand.show_rehearsal(None)
    assert not hand.isEnabled()


def test_what_is_wanted_are_deeds(qtbot: QtBot, theme: Theme) -> None:
    """A step without a time, a ramp with one, and the mode."""
    hand = Hand(theme)
    qtbot.addWidget(hand)
    hand.show_sheet(made_up.sheet())
    wanted: list[object] = []
    hand.wanted.connect(wanted.append)
    hand.reference.more.click()
    hand.over.show_value(20.0, "s")
    hand.reference.less.click()
    hand.mode.buttons["Manual"].click()
    assert wanted == [SetReference(77.0), SetReference(72.0, 20.0), SetMode("manual")]
