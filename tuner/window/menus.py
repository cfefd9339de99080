"""The menus: one table of what can be done, its keys, and who does it."""

from collections.abc import Callable, Iterable
from functools import partial
from typing import Any

from PySide6.QtCore import QPoint
from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QMenu

from tuner.model.measures import BY_NAME
from tuner.session.document import Document
from tuner.window.commands import Commands
from tuner.window.main_window import MainWindow
from tuner.window.pages import Page
from tuner.window.pictures import Pictured
from tuner.window.plots.panel import Panel
from tuner.window.sheet_files import SheetFiles, recent, samples
from tuner.window.shown import FamilyView
from tuner.window.theme import CHOICES

_FAMILY_WORDS: dict[FamilyView, str] = {
    "both": "&Band and curves",
    "band": "B&and alone",
    "curves": "&Curves alone",
    "none": "&Not shown",
}
_THEME_WORDS = {"desktop": "&Follow the desktop", "light": "&Light", "dark": "&Dark"}


class Menus:
    """Fills the menu bar of a window, and keeps what it says in step with the document."""

    def __init__(self, window: MainWindow, files: SheetFiles, commands: Commands) -> None:
        self._window, self._files, self._commands = window, files, commands
        self._document: Document = window.document
        self.actions: dict[str, QAction] = {}
        self._fill_file()
        self._fill_edit()
        self._fill_tuning()
        self._fill_view()
        self._fill_help()
        self._document.listen(self.refresh)
        for page in window.pages.pages.values():
            self.serve(page)
        window.pages.made.connect(self.serve)
        self.refresh()

    def serve(self, page: Page) -> None:
        """Open the menus of the plots of a page, if it has any."""
        if (wanted := getattr(page, "menu_wanted", None)) is not None:
            wanted.connect(self.plot_menu)

    def refresh(self) -> None:
        """Say what can be undone, and grey what cannot be done now."""
        document, actions = self._document, self.actions
        _say(actions["undo"], "&Undo", document.undo_label)
        _say(actions["redo"], "&Redo", document.redo_label)
        has_found = document.sheet.controller.as_found is not None
        actions["restore as found"].setEnabled(has_found)
        actions["drop all"].setEnabled(bool(document.kept))
        self._restore.setEnabled(bool(document.kept))
        actions["revert"].setEnabled(document.sheet != document.opened)

    # Menus ------------------------------------------------------------------------------------------------------

    def _fill_file(self) -> None:
        menu = self._menu("&File")
        files, commands = self._files, self._commands
        self._add(menu, "open", "&Open…", files.open, QKeySequence.StandardKey.Open)
        self._filled(menu.addMenu("Open &recent"), self._list_recent)
        self._filled(menu.addMenu("Sam&ple plants"), self._list_samples)
        menu.addSeparator()
        self._add(menu, "save", "&Save", files.save, QKeySequence.StandardKey.Save)
        self._add(menu, "save as", "Save &as…", files.save_as, "Ctrl+Shift+S")
        menu.addSeparator()
        self._add(menu, "deliver", "&Deliver…", commands.deliver, "Ctrl+D")
        self._filled(menu.addMenu("Save p&icture of"), lambda menu: self._list_plots(menu, commands.save_picture))
        self._filled(menu.addMenu("&Copy picture of"), lambda menu: self._list_plots(menu, commands.copy_picture))
        menu.addSeparator()
        self._add(menu, "quit", "&Quit", self._window.close, "Ctrl+Q")

    def _fill_edit(self) -> None:
        menu = self._menu("&Edit")
        self._add(menu, "undo", "&Undo", self._document.undo, QKeySequence.StandardKey.Undo)
        self._add(menu, "redo", "&Redo", self._document.redo, "Ctrl+Shift+Z", "Ctrl+Y")
        menu.addSeparator()
        self._add(menu, "revert", "Re&vert to the sheet as opened", self._document.revert)

    def _fill_tuning(self) -> None:
        menu, document = self._menu("&Tuning"), self._document
        self._add(menu, "keep", "&Keep tuning", document.keep, "Ctrl+K")
        self._restore = menu.addMenu("&Go back to")
        self._filled(self._restore, self._list_kept)
        self._add(menu, "drop all", "&Drop kept tunings", self._commands.drop_kept, "Ctrl+Shift+K")
        menu.addSeparator()
        self._add(menu, "restore initial", "Controller as &opened", document.restore_initial, "Ctrl+Shift+O")
        self._add(menu, "restore as found", "Controller as &found on site", document.restore_as_found, "Ctrl+Shift+F")
        self._add(menu, "note as found", "&Note the present controller as found", document.note_as_found)

    def _fill_view(self) -> None:
        menu, window = self._menu("&View"), self._window
        group = QActionGroup(window)
        for index, name in enumerate(("", *window.plots.panels)):
            words = f"{name} alone" if name else "All &four plots"
            action = self._add(menu, f"plot {name}", words, partial(self._show_plot, name), f"Alt+{index}")
            _radio(action, group, checked=not name)
        menu.addSeparator()
        self._fill_pages(menu)
        menu.addSeparator()
        self._add(menu, "look at worst", "Look at the worst &plant", window.look_at_worst, "Ctrl+L")
        self._add(menu, "look at nominal", "Look at the &nominal plant", partial(window.look_at, ""), "Ctrl+Shift+L")
        self._filled(menu.addMenu("Look at the plant &worst for"), self._list_worst)
        self._fill_family(menu.addMenu("&Family on the plots"))
        menu.addSeparator()
        shown = self._add(menu, "diagram", "Loop &diagram", self._show_diagram, "Ctrl+Shift+D")
        shown.setCheckable(True)
        menu.aboutToShow.connect(lambda: shown.setChecked(not window.diagram.isHidden()))
        self._add(menu, "whole", "&Whole range of the plots", window.pages.show_whole, "Ctrl+0")
        menu.addSeparator()
        self._add(menu, "to editor", "Go to the &editor", lambda: _focus(window.editors), "Ctrl+1")
        self._add(menu, "to rulers", "Go to the &rulers", lambda: _focus(window.rulers), "Ctrl+2")
        self._add(menu, "to limits", "Go to the &limits", window.ribbon.focus, "Ctrl+3")
        self._add(menu, "to diagram", "Go to the loop dia&gram", lambda: _focus(window.diagram), "Ctrl+4")
        menu.addSeparator()
        self._fill_theme(menu.addMenu("&Theme"))

    def _fill_pages(self, menu: QMenu) -> None:
        """Offer the pages, and keep the mark at the one in sight, however it was chosen."""
        group, pages = QActionGroup(self._window), self._window.pages
        for index, name in enumerate(pages.names):
            choose = partial(pages.choose, name)
            action = self._add(menu, f"page {name}", f"{name} page", choose, f"Ctrl+Alt+{index + 1}")
            _radio(action, group, checked=name == pages.page.name)
        pages.chosen.connect(lambda name: self.actions[f"page {name}"].setChecked(True))

    def _show_diagram(self) -> None:
        """Show the loop diagram if it is hidden, else hide it."""
        self._window.show_diagram(shown=self._window.diagram.isHidden())

    def _show_plot(self, name: str) -> None:
        """Show one plot of the trial alone, or all; the page of the trial comes in sight for it."""
        self._window.pages.choose(self._window.plots.name)
        self._window.plots.show_alone(name)

    def _fill_family(self, menu: QMenu) -> None:
        group, window = QActionGroup(self._window), self._window
        for view, words in _FAMILY_WORDS.items():
            action = self._add(menu, f"family {view}", words, partial(window.show_family, view))
            _radio(action, group, checked=view == window.family_view)

    def _fill_theme(self, menu: QMenu) -> None:
        group, theme = QActionGroup(self._window), self._window.theme
        for choice in CHOICES:
            action = self._add(menu, f"theme {choice}", _THEME_WORDS[choice], partial(theme.choose, choice))
            _radio(action, group, checked=choice == theme.choice)

    def _fill_help(self) -> None:
        menu = self._menu("&Help")
        self._add(menu, "about", "&About Trimwright, and cautions", self._commands.about, "F1")

    # Lists that are made when they open -------------------------------------------------------------------------

    def _list_recent(self, menu: QMenu) -> None:
        self._list(menu, [(_plain(path.name), partial(self._files.open_path, path)) for path in recent()])

    def _list_samples(self, menu: QMenu) -> None:
        self._list(menu, [(_plain(title), partial(self._files.open_sample, path)) for title, path in samples()])

    def _list_plots(self, menu: QMenu, act: Callable[[Pictured], None]) -> None:
        panels = self._window.pages.page.panels
        self._list(menu, [(name, partial(act, panel)) for name, panel in panels.items()])

    def _list_worst(self, menu: QMenu) -> None:
        """List the plants by the limits that they are worst for."""
        entries: list[tuple[str, Callable[[], object]]] = []
        if (shown := self._window.shown) is not None:
            for limit in shown.assessment.limits:
                words = f"{BY_NAME[limit.measure].label}: {shown.assessment.drift_of(limit.plant)}"
                entries.append((_plain(words), partial(self._window.look_at, limit.plant)))
        self._list(menu, entries)

    def _list_kept(self, menu: QMenu) -> None:
        kept = self._document.kept
        self._list(menu, [(f"{k.name}: {_plain(k.label)}", partial(self._document.restore, k.name)) for k in kept])

    def _list(self, menu: QMenu, entries: Iterable[tuple[str, Callable[[], object]]]) -> None:
        menu.clear()
        for words, act in entries:
            menu.addAction(words).triggered.connect(lambda _checked=False, act=act: act())
        if menu.isEmpty():
            menu.addAction("none yet").setEnabled(False)

    def plot_menu(self, panel: Panel[Any], at: QPoint) -> None:
        """Open the menu of one plot where it was asked for."""
        menu, commands = QMenu(self._window), self._commands
        self._list(
            menu,
            [
                ("Save picture…", partial(commands.save_picture, panel)),
                ("Copy picture", partial(commands.copy_picture, panel)),
                ("Whole range", panel.show_whole),
            ],
        )
        menu.popup(at)

    # Making -----------------------------------------------------------------------------------------------------

    def _menu(self, words: str) -> QMenu:
        return self._window.menuBar().addMenu(words)

    def _filled(self, menu: QMenu, fill: Callable[[QMenu], None]) -> None:
        menu.aboutToShow.connect(lambda: fill(menu))

    def _add(
        self, menu: QMenu, name: str, words: str, act: Callable[[], object], *keys: QKeySequence.StandardKey | str
    ) -> QAction:
        action = menu.addAction(words)
        action.setShortcuts([QKeySequence(key) for key in keys])
        action.triggered.connect(lambda _checked=False: act())
        self.actions[name] = action
        return action


def _say(action: QAction, verb: str, what: str | None) -> None:
    """Name what an action would do, and grey it when there is nothing."""
    action.setEnabled(what is not None)
    action.setText(f"{verb}: {_plain(what[:1].lower() + what[1:])}" if what else verb)


def _radio(action: QAction, group: QActionGroup, *, checked: bool) -> None:
    action.setCheckable(True)
    action.setChecked(checked)
    group.addAction(action)


def _plain(words: str) -> str:
    """Return words in which an ampersand is no key of the menu."""
    return words.replace("&", "&&")


def _focus(widget: object) -> None:
    from PySide6.QtCore import Qt
    from PySide6.QtWidgets import QWidget

    if isinstance(widget, QWidget):
        parts = [part for part in widget.findChildren(QWidget) if part.focusPolicy() & Qt.FocusPolicy.TabFocus]
        seen = [part for part in parts if part.isVisible()]
        if seen:
            seen[0].setFocus(Qt.FocusReason.ShortcutFocusReason)
