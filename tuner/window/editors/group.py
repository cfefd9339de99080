"""Groups of fields within a page of editors: those of a block are there only while the block is."""

from collections.abc import Sequence

from tuner.model.parameters import Parameter
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.editors.field import FaultLine, Page, heading
from tuner.window.editors.parameter_field import ParameterField, parameter_field
from tuner.window.editors.segments import Segments
from tuner.window.theme import Theme


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
