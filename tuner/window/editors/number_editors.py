"""The plant as plain numbers: coefficients, zeros and poles, or the matrices of a state space."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any, cast

from tuner.errors import TrimwrightError
from tuner.model.drifts import nominal_numbers, parameters_of
from tuner.model.plant import CoefficientPlant, PlantParameter, StateSpacePlant, ZeroPolePlant
from tuner.session import typed
from tuner.session.document import Document
from tuner.session.plant_forms import PlantForm, start
from tuner.session.typed import NOT_NEGATIVE
from tuner.window.editors.field import Page
from tuner.window.editors.intake import Words
from tuner.window.editors.line_field import Caption, LineField, Source
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme

NumberPlant = CoefficientPlant | ZeroPolePlant | StateSpacePlant


@dataclass(frozen=True, slots=True)
class Entry:
    """One attribute of a plant to be typed: its name, what it is, how it is written, and how much room it needs."""

    name: str
    sentence: str
    words: Words[Any]
    lines: int = 1
    long: bool = True


_SPREAD, _DRIFTING = "spread", "parameters"
"""What the spread is called here, and in the plant."""


class NumberEditor(Page):
    """Typed numbers that only together make a plant, and how far each of them may drift.

    A text that makes none yet waits, and is taken together with the one that completes it: a longer numerator with
    its denominator, a larger matrix with its columns.
    """

    def __init__(self, document: Document, theme: Theme, form: PlantForm, entries: tuple[Entry, ...]) -> None:
        super().__init__()
        self._document = document
        self._first = cast(NumberPlant, start(form))
        self.fields: dict[str, LineField[Any]] = {}
        spread: Words[Any] = Words(self._read_spread, typed.shown_drifts)
        for entry in (*entries, Entry(_SPREAD, _SENTENCE, spread, lines=3)):
            field = self._field(theme, entry)
            self.fields[entry.name] = field
            self.add(field, field)

    def refresh(self, *, anew: bool) -> None:
        """Show the numbers of the document."""
        super().refresh(anew=anew)
        if "dead_time" in self.fields:
            self.fields["dead_time"].unit.setText(self._document.sheet.loop.time_unit)

    def _field(self, theme: Theme, entry: Entry) -> LineField[Any]:
        source = Source(self._holder(entry), entry.words, self._taker(entry.name))
        caption = Caption(entry.name.replace("_", " "), entry.sentence, f"plant.{entry.name}", entry.long)
        field = LineField(theme, caption, source, lines=entry.lines)
        field.intake.left.connect(self._document.release)
        if isinstance(field.line, TypedText):
            field.line.take_rows()
        field.unit.setVisible(entry is _DEAD_TIME)
        return field

    def _plant(self) -> NumberPlant:
        plant = self._document.sheet.plant
        return plant if isinstance(plant, type(self._first)) else self._first

    def _holder(self, entry: Entry) -> Callable[[], Any]:
        if entry.name == _SPREAD:
            return lambda: parameters_of(self._plant())
        return lambda: getattr(self._plant(), entry.name)

    def _read_spread(self, text: str) -> tuple[PlantParameter, ...]:
        return typed.drifts(text, nominal_numbers(self._plant()))

    def _taker(self, name: str) -> Callable[[Any], None]:
        return lambda value: self._take(name, value)

    def _take(self, name: str, value: object) -> None:
        """Make a plant of this value and all that waits; of this value alone when that fails."""
        waiting = {other: field.intake.best() for other, field in self.fields.items() if field.intake.pending}
        try:
            self._change(waiting | {name: value}, name)
        except TrimwrightError:
            if waiting.keys() <= {name}:
                raise
            self._change_alone(name, value, waiting)

    def _change_alone(self, name: str, value: object, waiting: dict[str, Any]) -> None:
        try:
            self._change({name: value}, name)
        except TrimwrightError:
            self._change(waiting | {name: value}, name)

    def _change(self, values: dict[str, Any], name: str) -> None:
        plant = replace(self._plant(), **{_DRIFTING if one == _SPREAD else one: value for one, value in values.items()})
        self._document.change_plant(plant, label=f"Set the {name.replace('_', ' ')}", merge_key=f"plant {name}")


_SENTENCE = 'How far numbers may drift, one a line: "gain 15 %", "dead time 3 to 6", "pole 1 10 %".'


def _number(text: str) -> float:
    return typed.number(text)


def _time(text: str) -> float:
    return typed.number(text, NOT_NEGATIVE) if text.strip() else 0.0


_LIST: Words[Any] = Words(typed.numbers, typed.shown_numbers)
_ROOTS: Words[Any] = Words(typed.complex_numbers, typed.shown_complex_numbers)
_NUMBER: Words[Any] = Words(_number, typed.shown)
_MATRIX: Words[Any] = Words(typed.rows, typed.shown_rows)
_DEAD_TIME = Entry("dead_time", "Time before the plant answers at all.", Words(_time, typed.shown), long=False)


def coefficient_editor(document: Document, theme: Theme) -> NumberEditor:
    """Return the editor of numerator and denominator."""
    entries = (
        Entry("numerator", "Coefficients of the numerator, highest power of s first.", _LIST),
        Entry("denominator", "Coefficients of the denominator, highest power of s first.", _LIST),
        _DEAD_TIME,
    )
    return NumberEditor(document, theme, "coefficients", entries)


def zero_pole_editor(document: Document, theme: Theme) -> NumberEditor:
    """Return the editor of zeros, poles and gain."""
    entries = (
        Entry("zeros", 'Zeros, parted by semicolons; "-1 ± 2j" is a pair.', _ROOTS),
        Entry("poles", 'Poles, parted by semicolons; "-1 ± 2j" is a pair.', _ROOTS),
        Entry("gain", "Factor before (s - zero) ... / ((s - pole) ...).", _NUMBER, long=False),
        _DEAD_TIME,
    )
    return NumberEditor(document, theme, "zeros and poles", entries)


def state_space_editor(document: Document, theme: Theme) -> NumberEditor:
    """Return the editor of the matrices."""
    entries = (
        Entry("a", "System matrix: x' = a x + b u, one row a line.", _MATRIX, lines=4),
        Entry("b", "Input column.", _LIST),
        Entry("c", "Output row: y = c x + d u.", _LIST),
        Entry("d", "Direct term.", _NUMBER, long=False),
        _DEAD_TIME,
    )
    return NumberEditor(document, theme, "state space", entries)
