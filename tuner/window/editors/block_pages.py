"""The pages of the blocks that the table of parameters describes whole."""

from collections.abc import Sequence

from PySide6.QtWidgets import QHBoxLayout, QPushButton, QWidget

from tuner.model.parameters import Parameter, in_section
from tuner.session.document import Document
from tuner.session.tunings import in_words
from tuner.window.editors.field import Note, Page, heading
from tuner.window.editors.group import Group
from tuner.window.editors.parameter_field import parameter_field
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
    """The page of the controller: all of the law that has no ruler, and the gains met on site."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, ())
        plain = [one for one in in_section("controller") if not one.ruler and one.name != "form"]
        self.add_fields("", plain)
        found = AsFound(document, theme)
        self.add(found, found)


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
