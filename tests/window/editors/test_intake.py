"""What is being typed: when it is taken, kept, refused and brought back, whatever widget it is typed in."""

import pytest
from pytestqt.qtbot import QtBot

from tuner.errors import Fault, LoopError, SheetError
from tuner.session import typed
from tuner.window.editors.intake import PAUSE, Intake, Words


class Slate:
    """A place to type without any widget."""

    def __init__(self) -> None:
        self.text, self.visible, self.focus = "", True, False

    def typed(self) -> str:
        """Return the text."""
        return self.text

    def write(self, text: str) -> None:
        """Replace the text."""
        self.text = text

    def isVisible(self) -> bool:  # noqa: N802 # Qt's name
        """Return what the test says."""
        return self.visible

    def hasFocus(self) -> bool:  # noqa: N802 # Qt's name
        """Return what the test says."""
        return self.focus


class Desk:
    """An intake over a slate that shows 1; it notes what was taken and said, and refuses 13."""

    def __init__(self) -> None:
        self.slate = Slate()
        self.taken: list[float] = []
        self.said: list[str] = []
        self.intake: Intake[float] = Intake(self.slate, 1.0, Words(typed.number, typed.shown), self._take)
        self.intake.faulted.connect(self.said.append)

    def type(self, text: str, *, live: bool = True) -> None:
        """Type a text."""
        self.slate.text = text
        self.intake.on_typed(live=live)

    def _take(self, value: float) -> None:
        if value == 13.0:
            raise LoopError("not that one")
        self.taken.append(value)


@pytest.fixture
def desk(qtbot: QtBot) -> Desk:
    """Return a desk; asking for `qtbot` makes sure that there are timers."""
    del qtbot
    return Desk()


def test_the_first_value_is_written(desk: Desk) -> None:
    """It is shown, and nothing waits."""
    assert (desk.slate.text, desk.intake.value, desk.intake.pending) == ("1", 1.0, False)


def test_what_is_typed_waits_until_it_is_taken(desk: Desk) -> None:
    """Typed text is pending; taken it is the value, and the text stays as typed."""
    desk.type("2,50")
    assert (desk.intake.pending, desk.intake.value, desk.taken) == (True, 1.0, [])
    assert desk.intake.commit()
    assert (desk.intake.pending, desk.intake.value, desk.taken) == (False, 2.5, [2.5])
    assert desk.slate.text == "2,50"


def test_the_same_value_is_not_taken_twice(desk: Desk) -> None:
    """Another spelling of the value held changes nothing, and is tidied on leaving."""
    desk.type("1.0")
    desk.intake.leave()
    assert (desk.taken, desk.slate.text) == ([], "1")


def test_a_refused_value_is_not_held(desk: Desk) -> None:
    """The value before it stays, the text too, and the reason is said once more for every try."""
    desk.type("13")
    assert not desk.intake.commit()
    assert (desk.intake.value, desk.slate.text, desk.intake.sentence) == (1.0, "13", "not that one")
    assert desk.intake.pending
    assert desk.intake.fault is not None


def test_the_best_value_can_be_read_though_not_taken(desk: Desk) -> None:
    """What waits counts where it can be read, whatever it was refused for; else the last value."""
    assert desk.intake.best() == 1.0
    desk.type("13")
    desk.intake.commit()
    assert desk.intake.best() == 13.0
    desk.type("many")
    assert desk.intake.best() == 1.0


def test_leaving_is_told_even_when_nothing_was_taken(desk: Desk) -> None:
    """The end of an edit is told with text that is wrong as well, which stays."""
    left: list[str] = []
    desk.intake.left.connect(lambda: left.append(desk.slate.text))
    desk.type("2,5")
    desk.intake.leave()
    desk.type("2..5")
    desk.intake.leave()
    assert left == ["2.5", "2..5"]


def test_a_pause_takes_only_what_is_in_sight(desk: Desk, qtbot: QtBot) -> None:
    """Text on a page that was left waits there."""
    desk.slate.visible = False
    desk.type("2")
    qtbot.wait(2 * PAUSE)
    assert (desk.taken, desk.intake.pending) == ([], True)
    desk.slate.visible = True
    desk.type("2")
    qtbot.waitUntil(lambda: desk.taken == [2.0], timeout=10 * PAUSE)


def test_restoring_forgets_a_pause_that_was_running(desk: Desk, qtbot: QtBot) -> None:
    """Text brought back is not taken a moment later."""
    desk.type("2")
    desk.intake.restore()
    qtbot.wait(2 * PAUSE)
    assert (desk.taken, desk.slate.text) == ([], "1")


def test_the_path_beside_it_is_left_out(qtbot: QtBot) -> None:
    """A fault of the key it stands for is said without that key, one of another key with it."""
    del qtbot
    faults = [Fault("actuator.lag", "a number of at least 0", "-1"), Fault("trial.duration", "more", "less")]

    def refuse(_value: float) -> None:
        raise SheetError(faults)

    slate = Slate()
    intake = Intake(slate, 1.0, Words(typed.number, typed.shown), refuse)
    intake.path = "actuator.lag"
    slate.text = "2"
    intake.on_typed(live=False)
    assert not intake.commit()
    assert intake.sentence.splitlines() == [
        "expected a number of at least 0, found -1",
        "trial.duration: expected more, found less",
    ]


@pytest.mark.parametrize(("focus", "text"), [(True, "1.00"), (False, "1")])
def test_an_old_value_tidies_the_text_only_without_the_focus(desk: Desk, *, focus: bool, text: str) -> None:
    """The value held, shown again, leaves the spelling alone under the hand."""
    desk.slate.focus, desk.slate.text = focus, "1.00"
    desk.intake.show_value(1.0)
    assert desk.slate.text == text


def test_what_is_said_is_unsaid_once(desk: Desk) -> None:
    """The empty sentence comes once when it is right again, not with every value."""
    desk.type("x")
    desk.intake.commit()
    for text in ("2", "3"):
        desk.type(text)
        desk.intake.commit()
    assert desk.said == ['expected a number, found "x"', ""]
