"""Paint for the rulers: what a change left true is not computed again."""

from dataclasses import replace

import pytest

from tests.window import made_up, made_up_footing
from tuner.errors import LoopError
from tuner.footing.classes import SOFT, Overtaken, Track
from tuner.model.sheet import Sheet
from tuner.session.ruler_range import RulerRange, notches
from tuner.window.rulers.painting import Painter, Painting, PaintRequest, ReasonRequest, reading_by, without

SPAN = RulerRange(0.1, 100.0, has_off=True)
NAMES = ("kp", "ki", "kd")


def request(number: int, sheet: Sheet, span: RulerRange = SPAN) -> PaintRequest:
    """Return a request for three rulers."""
    return PaintRequest(number, sheet, tuple(Track(name, notches(span)) for name in NAMES))


def never() -> bool:
    """Say that nothing newer came."""
    return False


def test_all_rulers_are_painted_at_first() -> None:
    """The first request asks for every track, and its painting bears its number and sheet."""
    paint = made_up_footing.Painting()
    painting = Painter(paint).answer(request(3, made_up.sheet()), never)
    assert paint.asked == [(2.0, NAMES)]
    assert (painting.number, painting.sheet, tuple(painting.tracks)) == (3, made_up.sheet(), NAMES)


def test_the_ruler_that_moved_keeps_its_paint() -> None:
    """While kp moves, only the others are asked for; when ki moves next, kp's is asked for again."""
    paint = made_up_footing.Painting()
    painter = Painter(paint)
    sheet = made_up.sheet(1.0)
    first = painter.answer(request(1, sheet), never)
    for number, kp in ((2, 1.5), (3, 3.0)):
        painting = painter.answer(request(number, made_up.sheet(kp)), never)
        assert paint.asked[-1] == (kp, ("ki", "kd"))
        assert painting.tracks["kp"] is first.tracks["kp"]
    moved = replace(made_up.sheet(3.0), controller=made_up.sheet(3.0).controller.with_value("ki", 0.2))
    painter.answer(request(4, moved), never)
    assert paint.asked[-1] == (3.0, ("kp", "kd"))
    painter.answer(request(5, moved), never)
    assert len(paint.asked) == 4


def test_another_range_or_loop_is_painted_anew() -> None:
    """A wider ruler, other limits, another plant: nothing is taken over."""
    paint = made_up_footing.Painting()
    painter = Painter(paint)
    painter.answer(request(1, made_up.sheet()), never)
    painter.answer(request(2, made_up.sheet(), RulerRange(0.01, 100.0, has_off=True)), never)
    painter.answer(request(3, made_up.sheet(limits=()), RulerRange(0.01, 100.0, has_off=True)), never)
    assert [names for _, names in paint.asked] == [NAMES, NAMES, NAMES]


def test_work_that_was_overtaken_is_not_taken_over() -> None:
    """What was stopped leaves the painting before as the last one."""
    paint = made_up_footing.Painting()
    painter = Painter(paint)
    painter.answer(request(1, made_up.sheet(1.0)), never)
    other = made_up.sheet(1.0, limits=())
    with pytest.raises(Overtaken):
        painter.answer(request(2, other), lambda: True)
    painter.answer(request(3, other), never)
    assert [names for _, names in paint.asked] == [NAMES, NAMES, NAMES]


def test_a_painting_holds_for_sheets_that_differ_in_that_gain_alone() -> None:
    """As-found gains do not matter to the footing; any other gain does; a ruler without paint holds nowhere."""
    painting = Painter(made_up_footing.Painting()).answer(request(1, made_up.sheet(1.0)), never)
    other = made_up.sheet(1.3)
    assert painting.holds("kp", other)
    assert not painting.holds("ki", other)
    assert painting.holds("kp", replace(other, controller=replace(other.controller, as_found=other.controller)))
    assert not painting.holds("b", other)
    assert not Painting(1, other).holds("kp", other)


def test_a_loop_that_cannot_be_computed_is_said_so() -> None:
    """The fault goes through to whoever asked."""

    def refuse(*_args: object, **_named: object) -> tuple[()]:
        raise LoopError("the loop has no gain")

    with pytest.raises(LoopError, match="the loop has no gain"):
        Painter(refuse).answer(request(1, made_up.sheet()), never)


def test_a_place_is_read() -> None:
    """The reason is asked for at the place, an absent value as 0, and comes back with the names of the request."""
    reasons = made_up_footing.Reasons()
    read = reading_by(reasons)
    reading = read(ReasonRequest(4, made_up.sheet(), "kp", 3.0), never)
    assert (reading.number, reading.name, reading.value, reading.grade) == (4, "kp", 3.0, SOFT)
    assert reading.sentence == "made up: soft with {'kp': 3.0}"
    read(ReasonRequest(5, made_up.sheet(), "windup_time", None), never)
    assert reasons.asked == [{"kp": 3.0}, {"windup_time": 0.0}]


def test_a_sheet_without_a_time_that_is_never_0_has_none() -> None:
    """A wind-up time left out is absent, so that the sheet can still be computed; a gain left out is 0."""
    assert without(made_up.sheet(), "windup_time").controller.windup_time is None
    assert without(made_up.sheet(), "kp").controller.gain_1 == 0.0
