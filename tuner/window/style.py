"""The style sheet and the palette of Qt, made from our colours: flat, one background, hairlines only where needed."""

from PySide6.QtGui import QColor, QPalette

from tuner.places import resources
from tuner.window.palette import Palette, sizes

_SHEET = """
QWidget {{ background: {page}; color: {ink}; }}
QWidget[voice="quiet"] {{ color: {quiet}; }}
QMainWindow::separator {{ background: {line}; width: 1px; height: 1px; }}
QSplitter::handle {{ background: {page}; }}
QSplitter::handle:hover, QSplitter::handle:focus {{ background: {line}; }}
QToolTip {{ background: {field}; color: {ink}; border: 1px solid {line}; padding: {step}px; }}
QMenuBar {{ background: {page}; padding: 0 {step}px; }}
QMenuBar::item {{ padding: {step}px {step2}px; background: transparent; }}
QMenuBar::item:selected, QMenu::item:selected {{ background: {hover}; }}
QMenu {{ background: {field}; border: 1px solid {line}; padding: {step}px 0; }}
QMenu::item {{ padding: {step}px {step6}px; background: transparent; }}
QMenu::item:disabled, QMenuBar::item:disabled {{ color: {kept_word}; }}
QMenu::separator {{ height: 1px; background: {line}; margin: {step}px 0; }}
QLineEdit, QPlainTextEdit, QTextEdit, QListWidget, QAbstractSpinBox, QComboBox {{
    background: {field}; border: 1px solid {line}; border-radius: 2px; padding: 2px {step}px;
    selection-background-color: {nominal_word}; selection-color: {on_accent}; }}
QLineEdit:focus, QPlainTextEdit:focus, QTextEdit:focus, QListWidget:focus, QAbstractSpinBox:focus, QComboBox:focus {{
    border: 1px solid {nominal}; }}
QComboBox::drop-down {{ border: 0; width: {step4}px; }}
QComboBox QAbstractItemView {{ background: {field}; border: 1px solid {line};
    selection-background-color: {hover}; selection-color: {ink}; }}
QPushButton, QToolButton {{ background: {field}; border: 1px solid {line}; border-radius: 2px;
    padding: {step}px {step3}px; }}
QToolButton {{ padding: 2px {step}px; }}
QPushButton:hover, QToolButton:hover {{ background: {hover}; }}
QPushButton:focus, QToolButton:focus {{ border: 1px solid {nominal}; }}
QPushButton:default {{ background: {nominal_word}; color: {on_accent}; border: 1px solid {nominal_word}; }}
QPushButton:disabled, QToolButton:disabled {{ color: {kept_word}; background: {page}; border: 1px solid {line}; }}
QCheckBox {{ spacing: {step2}px; }}
QCheckBox::indicator {{ width: 12px; height: 12px; background: {field};
    border: 1px solid {quiet}; border-radius: 2px; }}
QCheckBox::indicator:focus {{ border: 1px solid {nominal}; }}
QCheckBox::indicator:checked {{ background: {nominal_word}; border: 1px solid {nominal_word}; image: url("{tick}"); }}
QCheckBox::indicator:disabled {{ border: 1px solid {line}; }}
QScrollArea {{ border: 0; }}
QScrollBar:vertical {{ background: {page}; width: {step2}px; margin: 0; }}
QScrollBar:horizontal {{ background: {page}; height: {step2}px; margin: 0; }}
QScrollBar::handle {{ background: {line}; border-radius: 2px; min-height: {step6}px; min-width: {step6}px; }}
QScrollBar::handle:hover {{ background: {kept}; }}
QScrollBar::add-line, QScrollBar::sub-line {{ width: 0; height: 0; }}
QScrollBar::add-page, QScrollBar::sub-page {{ background: transparent; }}
QStatusBar {{ background: {page}; color: {quiet}; }}
QStatusBar::item {{ border: 0; }}
"""


def style_sheet(palette: Palette) -> str:
    """Return the style sheet of the whole application in a palette."""
    grid = sizes().grid
    steps = {"step": grid} | {f"step{count}": count * grid for count in (2, 3, 4, 6)}
    tick = (resources() / "icons" / f"tick_{palette.shade}.svg").as_posix()
    return _SHEET.format(**palette.colours, **steps, tick=tick)


def qt_palette(palette: Palette) -> QPalette:
    """Return Qt's own palette in our colours, for what the style draws by itself."""
    role = QPalette.ColorRole
    pairs = {
        role.Window: "page",
        role.WindowText: "ink",
        role.Base: "field",
        role.AlternateBase: "hover",
        role.Text: "ink",
        role.PlaceholderText: "quiet",
        role.Button: "page",
        role.ButtonText: "ink",
        role.ToolTipBase: "field",
        role.ToolTipText: "ink",
        role.Highlight: "nominal_word",
        role.HighlightedText: "on_accent",
        role.Link: "nominal_word",
    }
    made = QPalette()
    for where, name in pairs.items():
        made.setColor(where, QColor(palette.colours[name]))
    for where in (role.Text, role.WindowText, role.ButtonText):
        made.setColor(QPalette.ColorGroup.Disabled, where, QColor(palette.colours["kept_word"]))
    return made
