"""A line of words is shortened where there is no room, and then said whole in its tip."""

from pytestqt.qtbot import QtBot

from tuner.window.elided import ElidedLabel, RoleLabel
from tuner.window.theme import Theme

SENTENCE = "settling time 96 s > 90 s at gain 1.04, delay 6"


def test_the_tip_holds_what_was_cut(qtbot: QtBot) -> None:
    """Narrow, it has a tip; wide, it has none; it never asks for width."""
    label = ElidedLabel(SENTENCE)
    qtbot.addWidget(label)
    label.resize(80, 20)
    label.show()
    assert label.toolTip() == SENTENCE
    label.resize(900, 20)
    assert label.toolTip() == ""
    assert label.minimumSizeHint().width() == 0


def test_words_with_signs_of_markup_stay_words(qtbot: QtBot) -> None:
    """What a person typed is never taken for markup."""
    label = ElidedLabel("<b>A & B</b>")
    qtbot.addWidget(label)
    label.setText("<b>C</b>")
    assert label.text() == "<b>C</b>"


def test_a_role_gives_the_colour(theme: Theme, qtbot: QtBot) -> None:
    """Another role, another colour, in each shade."""
    label = RoleLabel(theme)
    qtbot.addWidget(label)
    label.set_role("lost_word")
    assert label.styleSheet() == f"color: {theme.palette.colours['lost_word']}"
    theme.choose("dark")
    label.dress()
    assert label.styleSheet() == f"color: {theme.palette.colours['lost_word']}"
