"""What passes between the map and its workers: the classes over two gains, and the reason at one place."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Protocol

import numpy as np

from tuner.footing.classes import Track
from tuner.judge.wording import unit_of
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.contours import Contour, contours
from tuner.window.rulers.painting import ReasonAt, without

if TYPE_CHECKING:  # the map's road is loaded when it is first taken
    from tuner.footing.gain_map import GainMap


Values = tuple[float | None, float | None]
"""Values of the gains across and upwards; None for an absent one."""


@dataclass(frozen=True, slots=True)
class Question:
    """What a map is of; two equal ones have one map.

    Parameters
    ----------
    sheet : Sheet
        What is held, without the two gains.
    x, y : Axis
    measure : str
        Whose worst value is wanted too; empty for none.
    """

    sheet: Sheet
    x: Axis
    y: Axis
    measure: str

    @property
    def limit(self) -> float | None:
        """What the sheet allows the measure."""
        return dict(self.sheet.limits).get(self.measure)

    def has_axes_of(self, other: "Question | None") -> bool:
        """Tell whether a map of this fits on the axes of another."""
        return other is not None and (self.x, self.y) == (other.x, other.y)


def question_of(sheet: Sheet, x: Axis, y: Axis, measure: str) -> Question:
    """Return the question of a sheet; moving the two gains does not change it."""
    return Question(without(without(sheet, x.name), y.name), x, y, measure)


@dataclass(frozen=True, slots=True)
class MapRequest:
    """A question, and at how many places of each scale it is answered; the newest `number` wins.

    Close around `near`, the present gains, there are more places: what holds there may be smaller than the steps.
    """

    number: int
    question: Question
    count: int
    near: Values = (None, None)


@dataclass(frozen=True, slots=True, eq=False)
class MapAnswer:
    """The map of a request, and its contours in shares of both axes."""

    request: MapRequest
    map: "GainMap"
    contours: tuple[Contour, ...]

    @property
    def number(self) -> int:
        """That of the request."""
        return self.request.number

    @property
    def question(self) -> Question:
        """What it answers."""
        return self.request.question

    @property
    def unit(self) -> str:
        """That of the contours."""
        asked = self.question
        return unit_of(asked.measure, asked.sheet.loop) if asked.measure else ""

    def for_measure(self, measure: str) -> "MapAnswer":
        """Return what of it is true whichever measure was asked for: without contours if they are another's."""
        return self if measure == self.question.measure else replace(self, contours=())


class PaintMap(Protocol):
    """Finds the classes over two gains."""

    def __call__(self, sheet: Sheet, x: Track, y: Track, measure: str, *, stop: Stop) -> "GainMap":
        """Return the map; see `tuner.footing.gain_map.paint_map`."""
        ...


DrawMap = Callable[[MapRequest, Stop], MapAnswer]


def drawing_by(paint_map: PaintMap) -> DrawMap:
    """Return what answers requests for a map."""

    def draw(request: MapRequest, stop: Stop) -> MapAnswer:
        asked = request.question
        x, y = (axis.track(request.count, near) for axis, near in zip((asked.x, asked.y), request.near, strict=True))
        found = paint_map(asked.sheet, x, y, asked.measure, stop=stop)
        return MapAnswer(request, found, _contours(asked, found))

    return draw


def _contours(asked: Question, found: "GainMap") -> tuple[Contour, ...]:
    """Return the lines over the scales; off is no place on them."""
    if not asked.measure:
        return ()
    x, y = asked.x.shares(found.x.values), asked.y.shares(found.y.values)
    across, upwards = int(asked.x.span.has_off), int(asked.y.span.has_off)
    worst = np.abs(found.worst) if BY_NAME[asked.measure].by_size else found.worst
    return contours(worst[upwards:, across:], x[across:], y[upwards:], asked.limit)


@dataclass(frozen=True, slots=True)
class PlaceRequest:
    """A place on the map, by the values of its two gains."""

    number: int
    sheet: Sheet
    values: tuple[tuple[str, float | None], ...]


@dataclass(frozen=True, slots=True)
class PlaceReading:
    """What holds at a place on the map, and why."""

    number: int
    grade: int
    sentence: str


ReadPlace = Callable[[PlaceRequest, Stop], PlaceReading]


def reading_by(reason_at: ReasonAt) -> ReadPlace:
    """Return what answers requests for the reason at a place."""

    def read(request: PlaceRequest, _stop: Stop) -> PlaceReading:
        changes: Mapping[str, float] = {name: value or 0.0 for name, value in request.values}
        found = reason_at(request.sheet, changes)
        return PlaceReading(request.number, found.grade, found.sentence)

    return read
