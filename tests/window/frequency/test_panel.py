"""A plot over frequency: its axis, what it reads, and the worst of the family in words."""

import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer
from tests.window.plots.answers import seen
from tuner.window.frequency.bode import MagnitudePanel
from tuner.window.frequency.panel import decades, missed_of, worst_words
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> MagnitudePanel:
    """Return one such plot with an answer."""
    made = MagnitudePanel("Bode magnitude", theme)
    seen(made, qtbot)
    made.show(answer())
    return made


@pytest.mark.parametrize(
    ("low", "high", "count", "said"),
    [
        (-2.0, 0.0, 12, ["0.01", "0.02", "0.05", "0.1", "0.2", "0.5", "1"]),
        (-2.0, 0.0, 4, ["0.01", "0.1", "1"]),
        (-4.0, 4.0, 4, ["0.0001", "0.01", "1", "100", "10000"]),
    ],
)
def test_decades_are_divided_as_finely_as_there_is_room(low: float, high: float, count: int, said: list[str]) -> None:
    """Twos and fives where they fit, else decades, else every other one."""
    assert [tick.text for tick in decades(low, high, count)] == said


def test_the_pointer_reads_the_loop(panel: MagnitudePanel) -> None:
    """Frequency, size, phase and both sensitivities, with units; nothing outside of what is known."""
    found = panel.read(-1.0, 0.0)
    assert found is not None
    assert float(found[1].split()[1]) == pytest.approx(0.1, rel=0.02)
    assert "rad/s: L " in found[1]
    assert " dB, " in found[1]
    assert "|S|" in found[1]
    assert panel.read(9.0, 0.0) is None


def test_the_worst_margin_is_told_with_its_plant() -> None:
    """In words with the value."""
    shown = answer()
    worst = shown.assessment.worst["gain_margin"]
    assert worst_words(shown, ("gain_margin",)) == f"; gain margin at worst {worst.value:.3g} with {worst.plant}"


def test_limits_here_are_counted() -> None:
    """Those of the measures of this plot."""
    assert missed_of(answer(), ("gain_margin",)) == ("the limit here is met", False)
    assert missed_of(answer(), ("phase_margin",)) == ("nothing here is on the acceptance sheet", False)


def test_the_family_stays_until_a_whole_answer_comes(panel: MagnitudePanel) -> None:
    """A quick answer moves the plant's own curve alone."""
    before = panel._families[0].getData()
    panel.show(answer(whole=False))
    after = panel._families[0].getData()
    assert (before[1] == after[1]).all()
    assert before[0].size > 0


def test_keys_walk_along_the_frequencies(panel: MagnitudePanel) -> None:
    """A step is a hundredth of what is seen."""
    panel.view.stepped.emit(10)
    first = panel.marks.pointer
    panel.view.stepped.emit(10)
    assert first is not None
    assert panel.marks.pointer is not None
    assert panel.marks.pointer[0] > first[0]
