"""The style sheet and Qt's own palette say our colours, all of them, in both shades."""

import re
from pathlib import Path

import pytest
from PySide6.QtGui import QColor, QPalette
from PySide6.QtWidgets import QCheckBox, QLabel, QLineEdit, QVBoxLayout, QWidget
from pytestqt.qtbot import QtBot

from tuner.window.palette import Shade, palette, sizes
from tuner.window.style import qt_palette, style_sheet

SHADES: tuple[Shade, ...] = ("light", "dark")


@pytest.mark.parametrize("shade", SHADES)
def test_every_colour_is_one_of_the_theme(shade: Shade) -> None:
    """The sheet has no colour of its own, and nothing left to be filled in."""
    sheet = style_sheet(palette(shade))
    named = set(re.findall(r"#[0-9a-fA-F]{3,8}\b", sheet))
    assert named
    assert named <= set(palette(shade).colours.values())
    assert not re.search(r"\{\w+\}", sheet)


@pytest.mark.parametrize("shade", SHADES)
def test_the_tick_is_a_picture_that_is_there(shade: Shade) -> None:
    """The mark of a ticked box comes from a file of the program, one for each shade."""
    (file,) = re.findall(r'url\("(.+?)"\)', style_sheet(palette(shade)))
    assert Path(file).is_file()
    assert shade in Path(file).name


def test_distances_keep_to_the_grid() -> None:
    """Paddings and widths are multiples of the grid, but for hairlines, corners and the thin edge of a line."""
    distances = {int(number) for number in re.findall(r"(\d+)px", style_sheet(palette("light")))}
    assert sizes().grid in distances
    assert {distance for distance in distances if distance % sizes().grid} <= {1, 2}


@pytest.mark.parametrize("shade", SHADES)
def test_widgets_are_painted_in_these_colours(qtbot: QtBot, shade: Shade) -> None:
    """A window is the page, a line to type into the field; quiet words are quiet."""
    ground = QWidget()
    qtbot.addWidget(ground)
    ground.setStyleSheet(style_sheet(palette(shade)))
    line, quiet, box = QLineEdit(), QLabel("quiet"), QCheckBox("on")
    quiet.setProperty("voice", "quiet")
    column = QVBoxLayout(ground)
    for part in (line, quiet, box):
        column.addWidget(part)
    ground.resize(200, 120)
    ground.show()
    image = ground.grab().toImage()
    colours = {role: QColor(colour) for role, colour in palette(shade).colours.items()}
    assert image.pixelColor(2, 2) == colours["page"]
    assert image.pixelColor(line.geometry().center()) == colours["field"]
    assert quiet.palette().color(quiet.foregroundRole()) == colours["quiet"]
    assert box.palette().color(box.foregroundRole()) == colours["ink"]


@pytest.mark.parametrize("shade", SHADES)
def test_the_palette_of_qt_is_ours(shade: Shade) -> None:
    """What the style draws by itself has the colours of the theme, and disabled words are pale."""
    made, colours = qt_palette(palette(shade)), palette(shade).colours
    role, group = QPalette.ColorRole, QPalette.ColorGroup
    said = {
        role.Window: "page",
        role.WindowText: "ink",
        role.Base: "field",
        role.Text: "ink",
        role.PlaceholderText: "quiet",
        role.ToolTipText: "ink",
        role.Highlight: "nominal_word",
        role.HighlightedText: "on_accent",
    }
    assert {where: made.color(where).name() for where in said} == {where: colours[name] for where, name in said.items()}
    assert made.color(group.Disabled, role.Text).name() == colours["kept_word"]
