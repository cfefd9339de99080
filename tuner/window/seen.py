"""Whether a page is in sight, told when that changes."""

from PySide6.QtCore import Signal
from PySide6.QtGui import QHideEvent, QShowEvent
from PySide6.QtWidgets import QWidget


class Seen(QWidget):
    """A widget that tells when it comes in sight and when it goes."""

    seen = Signal(bool)

    def showEvent(self, event: QShowEvent) -> None:
        """Tell that it is in sight."""
        super().showEvent(event)
        self.seen.emit(True)

    def hideEvent(self, event: QHideEvent) -> None:
        """Tell that it is not."""
        super().hideEvent(event)
        self.seen.emit(False)
