"""Open the window as the program does, and say on the output when it was first painted and when it first answered."""

import sys
from pathlib import Path

from PySide6.QtCore import QEvent, QObject, QTimer
from PySide6.QtWidgets import QApplication

from tuner.places import keep_compiled_kernels


class _FirstPaint(QObject):
    """Says when a part of a window has been painted for the first time."""

    def __init__(self) -> None:
        super().__init__()
        self.said = False

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Say so once the paint event is over; let everything pass."""
        if event.type() == QEvent.Type.Paint and not self.said:
            self.said = True
            QTimer.singleShot(0, lambda: _say("painted"))
        return super().eventFilter(watched, event)


def main() -> None:
    """Do what `tuner.window.app.open_window` does, and end after the first answer."""
    keep_compiled_kernels()
    from tuner.window.app import built, opened

    document = opened(Path(sys.argv[1]) if len(sys.argv) > 1 else None)
    application = QApplication(sys.argv[:1])
    window, wiring = built(application, document)
    watch = _FirstPaint()
    window.plots.widget.installEventFilter(watch)
    window.ribbon.widget.installEventFilter(watch)
    window.assessor.answered.connect(lambda _: QTimer.singleShot(0, application.quit))
    window.show()
    window.start()
    application.exec()
    _say("answered")
    wiring.keeping.end()
    for worker in (*wiring.apart, *wiring.others, window.assessor):
        worker.close()


def _say(word: str) -> None:
    sys.stdout.write(word + "\n")
    sys.stdout.flush()


if __name__ == "__main__":
    main()
