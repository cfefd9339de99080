"""What the menus do beyond the document's own deeds: dialogs and pictures."""

from pathlib import Path

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QDialog

from tuner.errors import TrimwrightError
from tuner.window.asking import Asking
from tuner.window.cautions import AboutDialog
from tuner.window.deliver_dialog import DeliverDialog, Deliverer, real_deliverer
from tuner.window.main_window import MainWindow
from tuner.window.pictures import Pictured, copy_picture, save_picture
from tuner.window.sheet_files import suggested_name


class Commands:
    """Acts on a window."""

    def __init__(self, window: MainWindow, asking: Asking, deliverer: Deliverer | None = None) -> None:
        self._window, self._asking, self._deliverer = window, asking, deliverer

    def deliver(self) -> None:
        """Open the dialog of a delivery, for the sheet as it is now."""
        shown = self._window.shown
        if shown is None or not shown.whole or shown.sheet != self._window.document.sheet:
            self._asking.tell(
                "Nothing to deliver yet", "This sheet has no verdict yet.", [self._window.why_no_verdict()]
            )
            return
        deliverer = self._deliverer or real_deliverer()
        _open(DeliverDialog(shown, self._delivery_folder(), deliverer, self._window.theme, self._window))

    def save_picture(self, panel: Pictured) -> None:
        """Ask for a file and write the picture of a plot to it."""
        title = self._window.document.sheet.loop.title
        path = self._asking.picture_to_save(self._folder() / suggested_name(f"{title} {panel.name}", ".png"))
        if path is None:
            return
        try:
            save_picture(panel.widget, path)
        except TrimwrightError as refusal:
            self._asking.tell("No picture", "The picture was not saved.", [str(refusal)])

    def copy_picture(self, panel: Pictured) -> None:
        """Put the picture of a plot onto the clipboard."""
        copy_picture(panel.widget)

    def drop_kept(self) -> None:
        """Let every kept tuning go."""
        for tuning in self._window.document.kept:
            self._window.document.drop(tuning.name)

    def about(self) -> None:
        """Say what the program is, and the cautions."""
        _open(AboutDialog(self._window.theme, self._window))

    def _folder(self) -> Path:
        path = self._window.document.path
        return path.parent if path else Path.cwd()

    def _delivery_folder(self) -> Path:
        return self._folder() / suggested_name(f"{self._window.document.sheet.loop.title} delivery", "")


def _open(dialog: QDialog) -> None:
    """Show a dialog over its window, which goes on living beneath it, and let it go when it is closed."""
    dialog.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
    dialog.open()
