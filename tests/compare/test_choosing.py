"""The feedforward of a comparison: the sheet's own, or the first of the inverse and the static gain that exists."""

import pytest

from tests.compare.loops import mash
from tuner.compare import choosing
from tuner.compare.choosing import choose_feedforward, with_feedforward
from tuner.errors import LoopError
from tuner.model.controller import Feedforward
from tuner.simulate.linear import Linear


def test_the_sheets_own_comes_first() -> None:
    """What the sheet has is what is compared, said with its number and unit."""
    static = mash(more='[controller.feedforward]\nkind = "static"\ngain = 0.5\n')
    chosen = choose_feedforward(static)
    assert chosen.feedforward == static.controller.feedforward
    assert chosen.sentence == "Feedforward as in the sheet: a static gain of 0.5 %/degC."


def test_the_inverse_is_chosen_where_there_is_none() -> None:
    """With lags of a fiftieth of the trial, which is said."""
    chosen = choose_feedforward(mash())
    assert chosen.feedforward == Feedforward("inverse", filter_time=0.8)
    assert chosen.sentence == (
        "The sheet has no feedforward; this is the inverse of the nominal plant with lags of 0.8 s."
    )


def test_the_static_gain_is_next(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where the inverse is refused it is 1/G(0), with the reason."""

    def refuse(_process: Linear, _time: float) -> Linear:
        raise LoopError("there is none today")

    monkeypatch.setattr(choosing, "inverse", refuse)
    chosen = choose_feedforward(mash())
    assert chosen.feedforward == Feedforward("static", gain=0.5)
    assert chosen.sentence == (
        "The sheet has no feedforward; this is a static gain of 0.5 %/degC, for there is none today."
    )


def test_a_plant_that_answers_no_steady_effort_has_none() -> None:
    """A zero at the origin leaves neither, with the reason."""
    chosen = choose_feedforward(mash("gain s/(s + 1)^2"))
    assert chosen.feedforward is None
    assert chosen.sentence == (
        "There is no feedforward to compare with: a plant with a zero at the origin has no inverse: no steady effort "
        "holds its output."
    )


def test_a_sheet_takes_another_feedforward() -> None:
    """Only that changes."""
    sheet = mash()
    given = with_feedforward(sheet, Feedforward("static", gain=1.0))
    assert given.controller.feedforward == Feedforward("static", gain=1.0)
    assert with_feedforward(given, None) == sheet
