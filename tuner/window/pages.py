"""The pages of the plot area: their words in a row, one of them in sight; only that one draws."""

from collections.abc import Callable, Mapping, Sequence
from types import MappingProxyType
from typing import Protocol

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtWidgets import QHBoxLayout, QPushButton, QStackedWidget, QVBoxLayout, QWidget

from tuner.window.editors.segments import Segments
from tuner.window.elided import ElidedLabel
from tuner.window.pictures import Pictured
from tuner.window.shown import Shown
from tuner.window.theme import Theme


class Page(Protocol):
    """What fills the plot area while its word is chosen."""

    name: str
    wants_frequency: bool
    """Whether the response over frequency has to be computed for it."""

    @property
    def panels(self) -> Mapping[str, Pictured]:
        """What pictures can be had of, by name."""
        ...

    @property
    def widget(self) -> QWidget:
        """What is put in the plot area."""
        ...

    def show(self, shown: Shown) -> None:
        """Show an answer."""

    def show_stale(self) -> None:
        """Grey what is shown: it belongs to an earlier sheet."""

    def show_whole(self) -> None:
        """Forget what was looked at more closely."""

    def forget(self) -> None:
        """Forget what is shown: what comes next is another loop."""

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show."""

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler."""


class Pages(QObject):
    """All pages; `show` hands an answer to the one in sight, the others get the newest when they come in sight.

    Parameters
    ----------
    pages : sequence of Page
        Those that are there from the start, the first one in sight.
    later : mapping of str to callable
        Those that are made when they are first chosen, by their names: a window is painted sooner without them.
    """

    chosen = Signal(str)
    """The name of the page that came in sight."""
    made = Signal(object)
    """A page that is there from now on."""
    nominal_wanted = Signal()
    """The nominal plant is to be looked at again."""

    def __init__(
        self, theme: Theme, pages: Sequence[Page], later: Mapping[str, Callable[[], Page]] = MappingProxyType({})
    ) -> None:
        super().__init__()
        self.pages = {page.name: page for page in pages}
        self._later = dict(later)
        self.names = (*self.pages, *self._later)
        self._shown: Shown | None = None
        self._stale = False
        self.words = Segments(self.names, theme, self.choose)
        self.words.setAccessibleName("page")
        self.stack = QStackedWidget()
        for page in pages:
            self.stack.addWidget(page.widget)
        self.looked_at, self.back = (
            ElidedLabel("", Qt.AlignmentFlag.AlignRight),
            QPushButton("Back to the nominal plant"),
        )
        self.back.clicked.connect(self.nominal_wanted)
        room = self.back.sizePolicy()
        room.setRetainSizeWhenHidden(True)
        self.back.setSizePolicy(room)
        self.widget = self._arranged()
        self.say_looked_at("")
        self._name = pages[0].name
        self.words.show_choice(self._name)

    @property
    def page(self) -> Page:
        """The page in sight."""
        return self.pages[self._name]

    def begin_with(self, name: str) -> None:
        """Have a page in sight from the start; the first one where there is none of that name."""
        if name in self.names:
            self._have(name)
            self._name = name
            self.words.show_choice(name)
            self.stack.setCurrentWidget(self.page.widget)

    def _have(self, name: str) -> None:
        """Make a page that is chosen for the first time."""
        if name in self._later:
            page = self._later.pop(name)()
            self.pages[name] = page
            self.stack.addWidget(page.widget)
            self.made.emit(page)

    def choose(self, name: str) -> None:
        """Bring a page in sight."""
        if name == self._name or name not in self.names:
            return
        self.begin_with(name)
        if self._shown is not None:
            self.page.show(self._shown)
            if self._stale:
                self.page.show_stale()
        self.chosen.emit(name)

    def show(self, shown: Shown) -> None:
        """Show an answer on the page in sight."""
        self._shown, self._stale = shown, False
        self.page.show(shown)

    def say_looked_at(self, plant: str) -> None:
        """Say which plant the plots show in the place of the nominal one; '' for none."""
        self.looked_at.setText(f"Looking at the plant with {plant}" if plant else "")
        self.looked_at.setVisible(bool(plant))
        self.back.setVisible(bool(plant))

    def show_stale(self) -> None:
        """Grey what is shown."""
        self._stale = True
        self.page.show_stale()

    def show_whole(self) -> None:
        """Show the page in sight whole again."""
        self.page.show_whole()

    def forget(self) -> None:
        """Forget the loop that is left, on every page."""
        self._shown = None
        for page in self.pages.values():
            page.forget()

    def say_empty(self, sentence: str) -> None:
        """Say on every page why it is empty."""
        for page in self.pages.values():
            page.say_empty(sentence)

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler."""
        for page in self.pages.values():
            page.hold(held)

    def _arranged(self) -> QWidget:
        whole, row = QWidget(), QHBoxLayout()
        row.setContentsMargins(8, 0, 8, 0)
        row.addWidget(self.words)
        row.addSpacing(12)
        row.addWidget(self.looked_at, 1)
        row.addSpacing(12)
        row.addWidget(self.back)
        column = QVBoxLayout(whole)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addLayout(row)
        column.addWidget(self.stack, 1)
        return whole
