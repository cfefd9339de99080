"""The look of the window: which shade holds, its colours and its typeface, told to everyone when it changes."""

from functools import cache
from typing import Literal, get_args

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtGui import QColor, QFont, QFontDatabase, QGuiApplication
from PySide6.QtWidgets import QApplication

from tuner.places import resources
from tuner.window.palette import Palette, Shade, palette, sizes
from tuner.window.style import qt_palette, style_sheet

Choice = Literal["desktop", "light", "dark"]
Size = Literal["small", "body", "title"]

CHOICES: tuple[Choice, ...] = get_args(Choice)
FAMILIES = ("Inter", "DejaVu Sans")
"""The typeface that comes with the program, and what stands in for it."""


class Theme(QObject):
    """The look that holds now; `changed` is sent when another one does.

    Whoever paints asks for colours by role when it paints, or again after `changed`.
    """

    changed = Signal()

    def __init__(self, choice: Choice = "desktop") -> None:
        super().__init__()
        self._choice: Choice = choice
        _add_typeface()
        QGuiApplication.styleHints().colorSchemeChanged.connect(self._desktop_changed)
        self._shade = self._wanted()

    @property
    def choice(self) -> Choice:
        """What was chosen: the desktop's shade, or one of the two."""
        return self._choice

    @property
    def palette(self) -> Palette:
        """The colours that hold now."""
        return palette(self._shade)

    def choose(self, choice: Choice) -> None:
        """Follow the desktop, or stay light or dark."""
        self._choice = choice
        self._refresh()

    def colour(self, role: str) -> QColor:
        """Return the colour of a role of ``resources/theme.toml``."""
        return QColor(self.palette.colours[role])

    def font(self, size: Size = "body", *, strong: bool = False) -> QFont:
        """Return the typeface in one of the three sizes, its figures all of one width."""
        return QFont(typeface(size, strong=strong))

    def dress(self, application: QApplication) -> None:
        """Give the whole application the look that holds now."""
        application.setFont(self.font())
        application.setPalette(qt_palette(self.palette))
        application.setStyleSheet(style_sheet(self.palette))

    def _wanted(self) -> Shade:
        if self._choice != "desktop":
            return self._choice
        return desktop_shade()

    def _desktop_changed(self) -> None:
        self._refresh()

    def _refresh(self) -> None:
        wanted = self._wanted()
        if wanted == self._shade:
            return
        self._shade = wanted
        if isinstance(application := QApplication.instance(), QApplication):
            self.dress(application)
        self.changed.emit()


def desktop_shade() -> Shade:
    """Return the shade of the desktop; light where it has none."""
    return "dark" if QGuiApplication.styleHints().colorScheme() == Qt.ColorScheme.Dark else "light"


@cache
def typeface(size: Size, *, strong: bool = False) -> QFont:
    """Return the one typeface in a size, with tabular figures; to be copied before it is altered."""
    font = QFont()
    font.setFamilies(list(FAMILIES))
    font.setPixelSize(getattr(sizes(), size))
    font.setWeight(QFont.Weight.DemiBold if strong else QFont.Weight.Normal)
    font.setFeature(QFont.Tag("tnum"), 1)
    return font


def _add_typeface() -> None:
    """Load the fonts that come with the program, once; without them the next of `FAMILIES` stands in."""
    if FAMILIES[0] in QFontDatabase.families():
        return
    for file in sorted((resources() / "fonts").glob("*.otf")):
        QFontDatabase.addApplicationFont(str(file))
