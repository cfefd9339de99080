"""The pages of the blocks that the table of parameters describes whole."""

from collections.abc import Sequence
from typing import ClassVar

from PySide6.QtWidgets import QHBoxLayout, QPushButton, QWidget

from tuner.model.controller import Feedforward
from tuner.model.parameters import Parameter, find, in_section
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.session.fields import first_notch, with_feedforward, with_notch
from tuner.session.tunings import in_words
from tuner.window.editors.field import FaultLine, Note, Page, heading
from tuner.window.editors.intake import Words
from tuner.window.editors.parameter_field import ParameterField, parameter_field
from tuner.window.editors.segments import Segments
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme


class TablePage(Page):
    """A page of fields in groups, each a table of the sheet."""

    def __init__(self, document: Document, theme: Theme, groups: Sequence[tuple[str, str]]) -> None:
        super().__init__()
        self._document, self._theme = document, theme
        for title, section in groups:
            self.add_fields(title, in_section(section))

    def add_fields(self, title: str, parameters: Sequence[Parameter]) -> None:
        """Put a group of fields under the last one."""
        if title:
            self.add(heading(self._theme, title))
        for parameter in parameters:
            field = parameter_field(self._document, parameter, self._theme)
            self.add(field, field)


def loop_page(document: Document, theme: Theme) -> Page:
    """Return the page of the loop: its title, its time unit and its two signals."""
    groups = (("", "loop"), ("Controlled signal", "loop.controlled"), ("Manipulated signal", "loop.manipulated"))
    return TablePage(document, theme, groups)


class ControllerPage(TablePage):
    """The page of the controller: all that has no ruler."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, ())
        plain = [one for one in in_section("controller") if not one.ruler and one.name != "form"]
        self.add_fields("", plain)
        self.add_fields("Measurement filter", in_section("controller.measurement_filter"))
        self.disturbance_path = DisturbancePath(document, theme)
        for part in (NotchGroup(document, theme), ReferenceFeedforward(document, theme), self.disturbance_path):
            self.add(part, part)
        found = AsFound(document, theme)
        self.add(found, found)


class Group(Page):
    """A group of fields within a page, with a heading and no margins of its own."""

    def __init__(self, document: Document, theme: Theme, title: str) -> None:
        super().__init__()
        self._document, self._theme = document, theme
        self.column.setContentsMargins(0, 0, 0, 0)
        self.add(heading(theme, title))


class OptionalGroup(Group):
    """A group whose fields are there only while its block is."""

    def __init__(self, document: Document, theme: Theme, title: str, words: Sequence[str]) -> None:
        super().__init__(document, theme, title)
        self._fields: dict[str, ParameterField] = {}
        self.switch = Segments(words, theme, self.choose)
        self.switch.setAccessibleName(title)
        self.fault = FaultLine(theme)
        self.add(self.switch)
        self.add(self.fault)

    def choose(self, word: str) -> None:
        """Have the block that a word of the switch stands for, or none."""
        raise NotImplementedError

    def try_edit(self, sheet: Sheet, label: str) -> None:
        """Show another sheet, or say under the switch why it is refused."""
        self.fault.attempt(lambda: self._document.edit(sheet, label=label))

    def show_fields(self, parameters: Sequence[Parameter], *, anew: bool) -> None:
        """Have the fields of these parameters, and no others."""
        wanted = {parameter.path: parameter for parameter in parameters}
        for path in [path for path in self._fields if path not in wanted]:
            field = self._fields.pop(path)
            field.hide()
            field.deleteLater()
        for path, parameter in wanted.items():
            if path not in self._fields:
                self._fields[path] = parameter_field(self._document, parameter, self._theme)
                self.column.insertWidget(self.column.count() - 1, self._fields[path])
                self._fields[path].setVisible(True)
            self._fields[path].refresh(anew=anew)


class NotchGroup(OptionalGroup):
    """The notch, there or not."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Notch", ("none", "notch"))

    def refresh(self, *, anew: bool) -> None:
        """Show the notch of the document."""
        notch = self._document.sheet.controller.notch
        self.switch.show_choice("none" if notch is None else "notch")
        self.show_fields(in_section("controller.notch") if notch else (), anew=anew)

    def choose(self, word: str) -> None:
        """Add a notch, or remove it."""
        sheet = self._document.sheet
        notch = first_notch(sheet) if word == "notch" else None
        self.try_edit(with_notch(sheet, notch), "Add a notch" if notch else "Remove the notch")


class ReferenceFeedforward(OptionalGroup):
    """The feedforward of the reference: none, or of one of the kinds in the table, with that kind's number."""

    _NUMBER: ClassVar = {"static": "gain", "inverse": "filter_time"}

    def __init__(self, document: Document, theme: Theme) -> None:
        words = ("none", *find("controller.feedforward.kind").choices)
        super().__init__(document, theme, "Feedforward of the reference", words)

    def refresh(self, *, anew: bool) -> None:
        """Show the feedforward of the document."""
        present: Feedforward | None = self._document.sheet.controller.feedforward
        self.switch.show_choice(present.kind if present else "none")
        self.show_fields([find(f"controller.feedforward.{self._NUMBER[present.kind]}")] if present else [], anew=anew)

    def choose(self, word: str) -> None:
        """Have feedforward of a kind, or none."""
        self.try_edit(with_feedforward(self._document.sheet, word), f"Set the feedforward to {word}")


class DisturbancePath(Group):
    """The measured disturbance's own path to the output, a formula; empty for none."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Feedforward of a measured disturbance")
        parameter = find("controller.disturbance_feedforward.expression")
        self.text: TypedText[str] = TypedText(theme, self._held(), Words(str.strip, str), self._take, lines=2)
        self.text.setPlaceholderText("none")
        self.text.setAccessibleName("path of the measured disturbance")
        self.text.setToolTip(f"{parameter.sentence} Empty: none.")
        self.text.intake.path = parameter.path
        self.text.intake.left.connect(document.release)
        self.fault = FaultLine(theme)
        self.text.intake.faulted.connect(self.fault.say)
        self.add(self.text)
        self.add(self.fault)

    def refresh(self, *, anew: bool) -> None:
        """Show the path of the document."""
        self.text.intake.show_value(self._held(), anew=anew)

    def _held(self) -> str:
        path = self._document.sheet.controller.disturbance_feedforward
        return path.expression if path else ""

    def _take(self, formula: str) -> None:
        self._document.change_disturbance_path(formula, merge_key="disturbance path")


class AsFound(Group):
    """The gains met on site: taken from the present ones, restored, or forgotten."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "As found")
        self.gains = Note(theme)
        self.note = QPushButton("Note present")
        self.note.setToolTip("Note the present gains as those met on site")
        self.restore = QPushButton("Restore")
        self.forget = QPushButton("Forget")
        self.note.clicked.connect(document.note_as_found)
        self.restore.clicked.connect(document.restore_as_found)
        self.forget.clicked.connect(document.forget_as_found)
        row = QWidget()
        layout = QHBoxLayout(row)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(4)
        for button in (self.note, self.restore, self.forget):
            layout.addWidget(button)
        layout.addStretch(1)
        self.add(self.gains)
        self.add(row)

    def refresh(self, *, anew: bool) -> None:
        """Show the gains as found."""
        del anew
        found = self._document.sheet.controller.as_found
        words = f"{in_words(found)} ({found.form} form)" if found else "None noted."
        self.gains.say(words)
        for button in (self.restore, self.forget):
            button.setEnabled(found is not None)
