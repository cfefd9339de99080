"""What nobody foresaw: said in a sentence and written to a file, never swallowed, never the end of the window."""

import logging
import sys
import traceback
from collections.abc import Callable
from pathlib import Path
from types import TracebackType

from tuner import places

_log = logging.getLogger("tuner")

Say = Callable[[str], None]


def keep_log() -> Path:
    """Write what is logged at or above a warning into a file of the user's cache, and return it."""
    path = places.cache() / "faults.log"
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        handler: logging.Handler = logging.FileHandler(path, encoding="utf-8", delay=True)
    except OSError:
        handler = logging.StreamHandler()
    handler.setLevel(logging.WARNING)
    handler.setFormatter(logging.Formatter("%(asctime)s %(name)s: %(message)s"))
    _log.addHandler(handler)
    return path


def tell_faults(say: Say) -> None:
    """From now on, say and log every exception that nothing caught; Ctrl-C still ends the program."""

    def hook(kind: type[BaseException], fault: BaseException, trace: TracebackType | None) -> None:
        if issubclass(kind, KeyboardInterrupt):
            sys.__excepthook__(kind, fault, trace)
            return
        _log.error("%s", "".join(traceback.format_exception(kind, fault, trace)))
        sentence = sentence_on(fault)
        sys.stderr.write(f"{sentence}\n")
        say(sentence)

    sys.excepthook = hook


def sentence_on(fault: BaseException) -> str:
    """Return a sentence on a fault of the program."""
    return f"A fault of the program, {type(fault).__name__}: {fault}. Your sheet is still open; save it."
