"""A field whose value is typed in a line or a few lines."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Generic, TypeVar

from tuner.window.editors.field import Field
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme

Value = TypeVar("Value")


@dataclass(frozen=True, slots=True)
class Source(Generic[Value]):
    """Where a field's value comes from, how it is written, and who takes another one."""

    held: Callable[[], Value]
    words: Words[Value]
    take: Callable[[Value], None]


@dataclass(frozen=True, slots=True)
class Caption:
    """What a field is called, what it is in one sentence, its path in the sheet, and whether it stands above."""

    label: str
    sentence: str
    path: str = ""
    above: bool = False


class LineField(Field, Generic[Value]):
    """A field typed in one line, or in several when `lines` is more than one."""

    def __init__(self, theme: Theme, caption: Caption, source: Source[Value], *, lines: int = 1) -> None:
        self._source = source
        held, words, take = source.held(), source.words, source.take
        line = TypedLine(theme, held, words, take) if lines == 1 else TypedText(theme, held, words, take, lines=lines)
        super().__init__(theme, caption.label, caption.sentence, line, above=caption.above)
        self.line = line
        self.intake = line.intake
        self.intake.path = caption.path
        self.intake.faulted.connect(self.fault.say)

    def refresh(self, *, anew: bool) -> None:
        """Show what is held."""
        self.intake.show_value(self._source.held(), anew=anew)
