"""Fields made from the table of parameters: one small class for each kind of value."""

from collections.abc import Callable
from dataclasses import replace

from PySide6.QtWidgets import QCheckBox

from tuner.model.parameters import Kind, Parameter
from tuner.model.plant import Spread
from tuner.session import typed
from tuner.session.document import Document
from tuner.session.fields import unit_of, value_at, with_value_at
from tuner.session.typed import Bounds
from tuner.window.editors.field import Field
from tuner.window.editors.intake import Words
from tuner.window.editors.line_field import Caption, LineField, Source
from tuner.window.editors.segments import Segments
from tuner.window.theme import Theme

LONG_TEXTS = ("loop.story",)
"""Texts of a sentence or more, which have the whole width and some lines."""


class NumberField(LineField[float | None]):
    """A number of the table, typed; empty stands for its default, which may be none."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme) -> None:
        self._document, self._parameter = document, parameter
        self.path = parameter.path
        super().__init__(theme, _caption(parameter), Source(self._held, Words(self._read, typed.shown), self._take))
        self.intake.left.connect(document.release)
        if _may_be_none(parameter):
            self.line.setPlaceholderText("none")

    def refresh(self, *, anew: bool) -> None:
        """Show what the document holds."""
        super().refresh(anew=anew)
        self.unit.setText(_unit(self._parameter, self._document))

    def _held(self) -> float | None:
        value: float | None = value_at(self._document.sheet, self._parameter.path)
        return None if value == 0.0 and _zero_is_none(self._parameter) else value

    def _read(self, text: str) -> float | None:
        if not text.strip() and _may_be_none(self._parameter):
            return None
        if not text.strip() and not self._parameter.required:
            return _default(self._parameter)
        value = typed.number(text, Bounds.of(self._parameter), _unit(self._parameter, self._document))
        return int(value) if self._parameter.kind is Kind.INTEGER else value

    def _take(self, value: float | None) -> None:
        path = self._parameter.path
        held = 0.0 if value is None and _zero_is_none(self._parameter) else value
        changed = with_value_at(self._document.sheet, path, held)
        self._document.edit(changed, label=f"Set {_label(self._parameter)}", merge_key=path)


class TextField(LineField[str]):
    """A text of the table."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme) -> None:
        self._document, self._parameter = document, parameter
        self.path = parameter.path
        caption = replace(_caption(parameter), above=parameter.path in LONG_TEXTS)
        source = Source(self._held, Words(_one_line, str), self._take)
        super().__init__(theme, caption, source, lines=3 if caption.above else 1)
        self.intake.left.connect(document.release)
        self.unit.hide()

    def _held(self) -> str:
        return str(value_at(self._document.sheet, self._parameter.path))

    def _take(self, value: str) -> None:
        path = self._parameter.path
        changed = with_value_at(self._document.sheet, path, value)
        self._document.edit(changed, label=f"Set {_label(self._parameter)}", merge_key=path)


class ChoiceField(Field):
    """One of the few words that the table allows."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme) -> None:
        self._document, self._parameter = document, parameter
        self.path = parameter.path
        self.segments = Segments(parameter.choices, theme, self._choose)
        super().__init__(theme, _label(parameter), parameter.sentence, self.segments)
        self.unit.hide()

    def refresh(self, *, anew: bool) -> None:
        """Show what the document holds."""
        del anew
        self.segments.show_choice(str(value_at(self._document.sheet, self._parameter.path)))

    def _choose(self, word: str) -> None:
        changed = with_value_at(self._document.sheet, self.path, word)
        label = f"Set {_label(self._parameter)}"
        self.fault.attempt(lambda: self._document.edit(changed, label=label), self.path)
        self.refresh(anew=False)


class FlagField(Field):
    """A true or false of the table."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme) -> None:
        self._document, self._parameter = document, parameter
        self.path = parameter.path
        self.box = QCheckBox()
        super().__init__(theme, _label(parameter), parameter.sentence, self.box)
        self.box.clicked.connect(self._choose)

    def refresh(self, *, anew: bool) -> None:
        """Show what the document holds."""
        del anew
        held = bool(value_at(self._document.sheet, self._parameter.path))
        self.box.setChecked(held)
        self.box.setText("on" if held else "off")

    def _choose(self, checked: bool) -> None:  # as Qt hands it over
        changed = with_value_at(self._document.sheet, self.path, checked)
        label = f"Set {_label(self._parameter)}"
        self.fault.attempt(lambda: self._document.edit(changed, label=label), self.path)
        self.refresh(anew=False)


class SpreadField(LineField[Spread | None]):
    """How far the lag of the same block may drift, typed; empty stands for not at all."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme) -> None:
        self._document, self._parameter = document, parameter
        self.path = parameter.path
        words = Words(self._read, typed.shown_spread)
        super().__init__(theme, _caption(parameter), Source(self._held, words, self._take))
        self.intake.left.connect(document.release)
        self.line.setPlaceholderText("none")
        self.unit.hide()

    def _held(self) -> Spread | None:
        spread: Spread | None = value_at(self._document.sheet, self._parameter.path)
        return spread

    def _read(self, text: str) -> Spread | None:
        lag: float = value_at(self._document.sheet, f"{self._parameter.section}.lag")
        found = typed.spread(text, lag)
        if found is not None and lag <= 0.0:
            raise typed.TypedError("expected a lag above 0 before its spread, found none")
        if found is not None and found.low <= 0.0:
            raise typed.TypedError(f"expected a range of lags above 0, found {typed.shown(found.low)} at its lower end")
        return found

    def _take(self, value: Spread | None) -> None:
        path = self._parameter.path
        changed = with_value_at(self._document.sheet, path, value)
        self._document.edit(changed, label=f"Set {self._parameter.section} spread", merge_key=path)


ParameterField = NumberField | TextField | ChoiceField | FlagField | SpreadField

BY_KIND: dict[Kind, Callable[[Document, Parameter, Theme], ParameterField]] = {
    Kind.NUMBER: NumberField,
    Kind.INTEGER: NumberField,
    Kind.TEXT: TextField,
    Kind.CHOICE: ChoiceField,
    Kind.FLAG: FlagField,
    Kind.SPREAD: SpreadField,
}

"""The field of each kind of value."""


def parameter_field(document: Document, parameter: Parameter, theme: Theme) -> ParameterField:
    """Return the field of a parameter, of the kind that the table says."""
    field = BY_KIND[parameter.kind](document, parameter, theme)
    field.control.setAccessibleName(parameter.path.replace(".", " ").replace("_", " "))
    field.refresh(anew=True)
    return field


def _label(parameter: Parameter) -> str:
    return parameter.name.replace("_", " ")


def _one_line(text: str) -> str:
    """Return a text without the line breaks that a paste may bring."""
    return " ".join(text.splitlines())


def _caption(parameter: Parameter) -> Caption:
    return Caption(_label(parameter), parameter.sentence, parameter.path)


def _unit(parameter: Parameter, document: Document) -> str:
    return unit_of(parameter, document.sheet)


def _default(parameter: Parameter) -> float | None:
    default = parameter.default
    return default if isinstance(default, int | float) else None


def _may_be_none(parameter: Parameter) -> bool:
    return (not parameter.required and parameter.default is None) or _zero_is_none(parameter)


def _zero_is_none(parameter: Parameter) -> bool:
    """Tell whether an absent block is held as 0: the measurement filter."""
    return parameter.path == "controller.measurement_filter.time"
