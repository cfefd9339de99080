"""Unsaved work outlives the run that made it."""

import pytest

from tests.window import made_up
from tests.window.windows import Answers
from tuner.session.autosave import left_behind
from tuner.session.document import Document
from tuner.window.keeping import Keeping

pytestmark = pytest.mark.usefixtures("qtbot")


def _crashed(kp: float) -> None:
    """Leave work behind, as a run that ends without a word does."""
    document = Document(made_up.sheet())
    document.change_value("kp", kp)
    keeping = Keeping(document, Answers())
    keeping.keep()
    keeping._timer.stop()
    import os

    os.close(keeping._autosave._lock)


def test_a_proper_end_leaves_nothing_behind() -> None:
    """What was saved or given up on purpose does not come back."""
    document = Document(made_up.sheet())
    document.change_value("kp", 3.0)
    keeping = Keeping(document, Answers())
    keeping.keep()
    keeping.end()
    assert left_behind() == ()


@pytest.mark.parametrize(
    ("answer", "kp", "left"),
    [("restore", 3.3, 0), ("drop", 2.0, 0), ("later", 2.0, 1)],
    ids=["restore", "drop", "later"],
)
def test_work_left_behind_is_offered(answer: str, kp: float, left: int) -> None:
    """It is brought back, unsaved as it was; dropped; or kept for the next start."""
    _crashed(3.3)
    document = Document(made_up.sheet())
    asking = Answers(**{"left behind": answer})
    keeping = Keeping(document, asking)
    keeping.offer_left_behind()
    assert asking.name == "Ink drier"
    assert document.sheet.controller.gain_1 == kp
    assert document.dirty is (answer == "restore")
    assert len(left_behind()) == left
    keeping.end()


def test_nothing_left_behind_asks_nothing() -> None:
    """A first start has no question."""
    asking = Answers()
    keeping = Keeping(Document(made_up.sheet()), asking)
    keeping.offer_left_behind()
    assert asking.asked == []
    keeping.end()
