"""Everything can be done from the menus and by keys, and what cannot be done now is grey."""

from collections import Counter
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QAction
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QMenu
from pytestqt.qtbot import QtBot

from tests.window.test_sheet_files import GOOD
from tests.window.windows import Answers, opened
from tuner.window.main_window import MainWindow
from tuner.window.plot_grid import EFFORT, REFERENCE
from tuner.window.plots.trace_panel import ReferencePanel

pytestmark = pytest.mark.usefixtures("qtbot")


def test_no_key_means_two_things() -> None:
    """Every shortcut belongs to one action."""
    with opened() as (_, wiring):
        keys = Counter(key.toString() for action in wiring.menus.actions.values() for key in action.shortcuts())
        assert [key for key, count in keys.items() if count > 1] == []


def test_undo_and_redo_say_what(qtbot: QtBot) -> None:
    """They name the step, and are grey without one; the keys work."""
    with opened() as (window, wiring):
        undo, redo = wiring.menus.actions["undo"], wiring.menus.actions["redo"]
        assert not undo.isEnabled()
        window.document.change_value("kp", 3.0)
        assert undo.text() == "&Undo: set kp"
        _active(window, qtbot)
        QTest.keyClick(window, Qt.Key.Key_Z, Qt.KeyboardModifier.ControlModifier)
        assert window.document.sheet.controller.gain_1 == 2.0
        assert not undo.isEnabled()
        assert redo.text() == "&Redo: set kp"
        QTest.keyClick(window, Qt.Key.Key_Y, Qt.KeyboardModifier.ControlModifier)
        assert window.document.sheet.controller.gain_1 == 3.0


def test_tunings_are_kept_restored_and_dropped() -> None:
    """Keep, change, go back to what was kept, drop; each as an action of the menu."""
    with opened() as (window, wiring):
        actions = wiring.menus.actions
        assert not actions["drop all"].isEnabled()
        actions["keep"].trigger()
        window.document.change_value("kp", 3.0)
        assert window.shown is not None
        assert [kept.name for kept in window.shown.kept] == ["A"]
        (back,) = _entries(wiring.menus._restore)
        assert back.text() == "A: kp 2, ki 0.05, kd 4"
        back.trigger()
        assert window.document.sheet.controller.gain_1 == 2.0
        actions["drop all"].trigger()
        assert window.document.kept == ()


def test_samples_and_recent_files_are_listed(tmp_path: Path) -> None:
    """A sample is opened from its title; a file opened once is listed by its name."""
    with opened(asking=Answers(open=_good(tmp_path))) as (window, wiring):
        wiring.menus.actions["open"].trigger()
        assert window.document.path == tmp_path / "drier.toml"
        recent, plants = (_submenu(window, name) for name in ("Open &recent", "Sam&ple plants"))
        assert [entry.text() for entry in _entries(recent)] == ["drier.toml"]
        entries = {entry.text(): entry for entry in _entries(plants)}
        entries["Product heater outlet"].trigger()
        assert window.document.sheet.loop.title == "Product heater outlet"


def test_an_empty_list_says_so() -> None:
    """No recent files: one grey entry."""
    with opened() as (window, _):
        (entry,) = _entries(_submenu(window, "Open &recent"))
        assert entry.text() == "none yet"
        assert not entry.isEnabled()


def test_the_theme_is_chosen_and_the_views_follow() -> None:
    """Dark at once, in the plots too, and the chosen entry is ticked."""
    with opened() as (window, wiring):
        wiring.menus.actions["theme dark"].trigger()
        assert window.theme.palette.shade == "dark"
        background = window.plots.panels[REFERENCE].view.backgroundBrush().color()
        assert background == window.theme.colour("page")
        assert wiring.menus.actions["theme dark"].isChecked()
        assert not wiring.menus.actions["theme light"].isChecked()


def test_the_keyboard_reaches_editor_rulers_and_limits(qtbot: QtBot) -> None:
    """Ctrl+1, Ctrl+2 and Ctrl+3 take the focus there."""
    with opened() as (window, _):
        _active(window, qtbot)
        places = (window.editors, window.rulers, window.ribbon.widget)
        for key, place in zip((Qt.Key.Key_1, Qt.Key.Key_2, Qt.Key.Key_3), places, strict=True):
            QTest.keyClick(window, key, Qt.KeyboardModifier.ControlModifier)
            focus = QApplication.focusWidget()
            assert focus is not None
            assert place.isAncestorOf(focus)


def test_the_page_in_sight_is_marked() -> None:
    """However it was chosen: by the menu or by its word; a plot shown alone brings its page in sight."""
    with opened() as (window, wiring):
        actions = {name: wiring.menus.actions[f"page {name}"] for name in window.pages.pages}

        def marked() -> list[str]:
            return [name for name, action in actions.items() if action.isChecked()]

        assert marked() == ["Trial"]
        actions["Frequency"].trigger()
        assert (window.pages.page.name, marked()) == ("Frequency", ["Frequency"])
        window.pages.words.buttons["Gain map"].click()
        assert marked() == ["Gain map"]
        wiring.menus.actions[f"plot {EFFORT}"].trigger()
        assert (window.pages.page.name, marked()) == ("Trial", ["Trial"])


def test_a_plot_is_shown_alone_by_its_key(qtbot: QtBot) -> None:
    """Alt+3 gives the effort all the room, Alt+0 brings the four back."""
    with opened() as (window, _):
        _active(window, qtbot)
        QTest.keyClick(window, Qt.Key.Key_3, Qt.KeyboardModifier.AltModifier)
        assert [name for name, panel in window.plots.panels.items() if panel.widget.isVisible()] == [EFFORT]
        QTest.keyClick(window, Qt.Key.Key_0, Qt.KeyboardModifier.AltModifier)
        assert all(panel.widget.isVisible() for panel in window.plots.panels.values())


def test_pictures_are_offered_for_every_plot(tmp_path: Path) -> None:
    """Saved under the name asked for, which is suggested from loop and plot."""
    asking = Answers(picture=tmp_path / "plot.png", unsaved="discard")
    with opened(asking=asking) as (window, _):
        entries = {entry.text(): entry for entry in _entries(_submenu(window, "Save p&icture of"))}
        assert list(entries) == list(window.plots.panels)
        entries[EFFORT].trigger()
        assert (tmp_path / "plot.png").stat().st_size > 1000
        assert asking.suggested.name == "ink_drier_effort.png"


def test_a_picture_of_the_gain_map_is_offered_while_it_is_in_sight(tmp_path: Path) -> None:
    """It is named after loop and page."""
    asking = Answers(picture=tmp_path / "map.png", unsaved="discard")
    with opened(asking=asking) as (window, _):
        window.pages.choose("Gain map")
        (entry,) = _entries(_submenu(window, "Save p&icture of"))
        assert entry.text() == "Gain map"
        entry.trigger()
        assert (tmp_path / "map.png").stat().st_size > 1000
        assert asking.suggested.name == "ink_drier_gain_map.png"


def test_nothing_is_delivered_without_a_verdict() -> None:
    """A sheet that cannot be computed cannot be delivered, and it is said why."""
    asking = Answers(unsaved="discard")
    with opened(asking=asking) as (window, wiring):
        window.document.change_value("kp", 0.0)
        wiring.menus.actions["deliver"].trigger()
        assert asking.told == [
            ("Nothing to deliver yet", "This sheet has no verdict yet.", ["the loop has no gain: kp is 0"])
        ]


def _good(folder: Path) -> Path:
    path = folder / "drier.toml"
    path.write_text(GOOD, encoding="utf-8")
    return path


def _active(window: MainWindow, qtbot: QtBot) -> None:
    with qtbot.waitActive(window):
        window.activateWindow()


def _submenu(window: MainWindow, words: str) -> QMenu:
    return next(menu for menu in window.menuBar().findChildren(QMenu) if menu.title() == words)


def _entries(menu: QMenu) -> list[QAction]:
    menu.aboutToShow.emit()
    return menu.actions()


def test_the_family_on_the_plots_is_chosen_in_the_menu() -> None:
    """Each entry shows it another way, at once."""
    with opened() as (window, wiring):
        panel = window.plots.panels["Reference step"]
        assert isinstance(panel, ReferencePanel)
        for view, band in (("curves", False), ("band", True), ("none", False), ("both", True)):
            wiring.menus.actions[f"family {view}"].trigger()
            assert window.shown is not None
            assert window.shown.family_view == view
            assert bool(panel.band.xData.size) is band


def test_worst_plants_are_listed_by_their_limits() -> None:
    """One entry a limit; choosing it looks at the plant."""
    with opened() as (window, wiring):
        assert window.shown is not None
        limit = window.shown.assessment.limits[0]
        menu = QMenu()
        wiring.menus._list_worst(menu)
        assert len(menu.actions()) == len(window.shown.assessment.limits)
        first = menu.actions()[0]
        assert first.text() == f"overshoot: {window.shown.assessment.drift_of(limit.plant)}"
        first.trigger()
        assert window.shown.looked_at == limit.plant
