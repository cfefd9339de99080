"""One piece of work beside the main thread, with an end that can be waited for."""

import logging
from collections.abc import Callable

from PySide6.QtCore import QObject, QThread, Signal

_log = logging.getLogger(__name__)


class Task(QThread):
    """Runs a function once; `done` brings its result, `refused` its exception, both on the main thread."""

    done = Signal(object)
    refused = Signal(object)

    def __init__(self, work: Callable[[], object], parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._work = work

    def run(self) -> None:
        """Run the function and tell how it ended."""
        try:
            result = self._work()
        except Exception as fault:  # whoever waits for the result must hear of every end
            _log.info("A task ended with %r.", fault)
            self.refused.emit(fault)
        else:
            self.done.emit(result)
