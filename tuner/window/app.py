"""Opens the window; the one entry of this room."""

import sys
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Protocol

from PySide6.QtCore import Qt, QTimer
from PySide6.QtGui import QCloseEvent, QIcon
from PySide6.QtWidgets import QApplication

from tuner.compare.tuning_table import Column, Tuning, TuningTable
from tuner.errors import TrimwrightError
from tuner.footing.apart import Apart
from tuner.judge.assessment import Assessment
from tuner.judge.overlay import Overlay
from tuner.model.sheet import Sheet
from tuner.places import keep_compiled_kernels, resources, sample_plants
from tuner.session.document import Document
from tuner.window import faults, memory
from tuner.window.asking import Asking
from tuner.window.beside import Beside, Stop
from tuner.window.commands import Commands
from tuner.window.earlier import EarlierTunings, answering_by
from tuner.window.editors import build_editors
from tuner.window.ending import leave
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.page import GainMapPage
from tuner.window.keeping import Keeping
from tuner.window.main_window import MainWindow
from tuner.window.menus import Menus
from tuner.window.pages import Page
from tuner.window.rulers import Footing, build_rulers, keep_painted
from tuner.window.sheet_files import SheetFiles
from tuner.window.shown import Sketched
from tuner.window.theme import CHOICES, Theme
from tuner.window.worker import Assessor

if TYPE_CHECKING:  # these roads are loaded when they are first taken
    from tuner.compare.comparison import Comparison
    from tuner.footing.reason import Reason

_FIRST_SIZE = (1440, 900)
_EXAMPLE = "heater.toml"
_SWITCH = 0.001
"""Seconds after which a thread that computes lets go of the interpreter; Python's own 5 ms can be seen."""


class Closing(Protocol):
    """What has work of its own to end."""

    def close(self) -> None:
        """Ask no more, and end the worker."""


@dataclass(frozen=True, slots=True)
class Wiring:
    """What a window is wired to; it lives as long as this does."""

    menus: Menus
    files: SheetFiles
    keeping: Keeping
    footing: Footing | None = None
    gain_map: GainMapPage | None = None
    apart: tuple[Apart, ...] = ()
    others: tuple[Closing, ...] = ()


def open_window(path: Path | None) -> int:
    """Open the window on a tuning sheet, or on the built-in example, and run until it is closed.

    Returns the exit status.

    Raises
    ------
    SheetError
        With every fault of the file, before any window is shown.
    """
    keep_compiled_kernels()
    document = opened(path)
    application = QApplication.instance() or QApplication(sys.argv[:1])
    if not isinstance(application, QApplication):
        raise TrimwrightError("a program without windows runs in this process already")
    window, wiring = built(application, document)
    watch_for_faults(window)
    window.show()
    window.start()
    QTimer.singleShot(0, wiring.keeping.offer_left_behind)
    status = application.exec()
    leave(status)
    return status


def opened(path: Path | None) -> Document:
    """Return the document of a sheet; a sample that comes with the program becomes a new sheet, without a file."""
    source = path or sample_plants() / _EXAMPLE
    if source.resolve().parent != sample_plants().resolve():
        return Document.from_file(source)
    from tuner.files import sheet as files

    return Document(files.read(source), None, source.read_text(encoding="utf-8"))


def built(application: QApplication, document: Document, asking: Asking | None = None) -> tuple[MainWindow, Wiring]:
    """Return the window of a document, wired and dressed, not shown yet, standing where it stood before."""
    sys.setswitchinterval(_SWITCH)
    remembered = memory.recall()
    theme = Theme(next((choice for choice in CHOICES if choice == remembered.theme), "desktop"))
    theme.dress(application)
    application.setApplicationName("Trimwright")
    application.setWindowIcon(QIcon(str(resources() / "icons" / "trimwright.svg")))
    assessor, rulers = Assessor(_sketch, _glance, _draw), build_rulers(document, theme)
    apart = Apart(), Apart()
    footing = keep_painted(document, rulers, apart[0].paint_rulers, _reason_at)
    gain_map = build_gain_map(document, theme, apart[1].paint_map, _reason_at)
    editors = build_editors(document, theme)
    window = MainWindow(document, theme, assessor, editors, rulers, (gain_map,), _later(document, theme))
    window.resize(*_FIRST_SIZE)
    window.restore_layout(remembered)
    earlier = EarlierTunings(document, window.ribbon.show_earlier, Beside(answering_by(_judged)))
    assessor.answered.connect(earlier.start, Qt.ConnectionType.SingleShotConnection)
    for worker in (*apart, assessor, footing.painted, footing.reader, gain_map, earlier):
        application.aboutToQuit.connect(worker.close)
    assessor.answered.connect(apart[0].start, Qt.ConnectionType.SingleShotConnection)
    return window, wire(window, asking or Asking(window), footing, gain_map, apart, (earlier,))


def _later(document: Document, theme: Theme) -> Mapping[str, Callable[[], Page]]:
    """Return the pages that are made when they are first chosen."""

    def structures() -> Page:
        from tuner.window.structures import build_structures

        return build_structures(document, theme, _structures, _draw)

    def tunings() -> Page:
        from tuner.window.tunings import build_tunings

        return build_tunings(document, theme, _tunings)

    def rehearsal() -> Page:
        from tuner.window.rehearsal import build_rehearsal

        return build_rehearsal(document, theme)

    return {"Structures": structures, "Tunings": tunings, "Rehearsal": rehearsal}


def wire(  # noqa: PLR0913, PLR0917 - what a window is made of
    window: MainWindow,
    asking: Asking,
    footing: Footing | None = None,
    gain_map: GainMapPage | None = None,
    apart: tuple[Apart, ...] = (),
    others: tuple[Closing, ...] = (),
) -> Wiring:
    """Give a window its menus, its files, its footing, its gain map and its manners on closing."""
    files = SheetFiles(window.document, asking)
    keeping = Keeping(window.document, asking)
    menus = Menus(window, files, Commands(window, asking))
    window.dropped.connect(files.open_path)
    wiring = Wiring(menus, files, keeping, footing, gain_map, apart, others)
    for page in window.pages.pages.values():
        _attend(page, asking)
    window.pages.made.connect(lambda page: _attend(page, asking))
    window.closing.connect(lambda event: _close(window, wiring, event))
    if footing is not None:
        footing.painted.wake_after(window.assessor)
    return wiring


def _attend(page: Page, asking: Asking) -> None:
    """Give a page what it needs of the world outside the window, and end its work with the program."""
    if isinstance(application := QApplication.instance(), QApplication) and hasattr(page, "close"):
        application.aboutToQuit.connect(page.close)
    if page.name == "Rehearsal":
        from tuner.window.rehearsal.files import RehearsalFiles
        from tuner.window.rehearsal.page import RehearsalPage

        if isinstance(page, RehearsalPage):
            RehearsalFiles(page, asking)


def watch_for_faults(window: MainWindow) -> None:
    """From now on, say in the window whatever nothing caught, and log it."""
    log = faults.keep_log()
    faults.tell_faults(lambda sentence: QTimer.singleShot(0, lambda: window.say_fault(f"{sentence} See {log}.")))


def _close(window: MainWindow, wiring: Wiring, event: QCloseEvent) -> None:
    """Let the window close once nothing would be lost, and remember how it stood."""
    if not wiring.files.may_leave():
        event.ignore()
        return
    if not all(getattr(page, "guard", _agree)() for page in window.pages.pages.values()):
        event.ignore()
        return
    memory.remember(window.layout_memory())
    window.hide()  # what still works may take a moment to end
    wiring.keeping.end()
    for process in wiring.apart:
        process.close()
    if wiring.footing is not None:
        wiring.footing.close()
    if wiring.gain_map is not None:
        wiring.gain_map.close()
    for page in window.pages.pages.values():
        if hasattr(page, "close"):
            page.close()
    for other in wiring.others:
        other.close()


def _agree() -> bool:
    """Agree to the end of a page that would lose nothing."""
    return True


def _sketch(sheet: Sheet, size: int) -> Sketched:
    from tuner.assess import sketched

    return sketched(sheet, size)


def _glance(sheet: Sheet, plant: str) -> Assessment:
    from tuner.assess import glance

    return glance(sheet, plant)


def _reason_at(sheet: Sheet, changes: Mapping[str, float], /) -> "Reason":
    from tuner.footing.reason import reason_at

    return reason_at(sheet, changes)


def _structures(sheet: Sheet, *, stop: Stop) -> "tuple[Comparison, ...]":
    from tuner.compare.comparison import compare_structures

    return compare_structures(sheet, stop=stop)


def _tunings(sheet: Sheet, kept: tuple[Tuning, ...], *, stop: Stop) -> TuningTable:
    from tuner.compare.tunings import compare_tunings

    return compare_tunings(sheet, kept, stop=stop)


def _judged(sheet: Sheet, tuning: Tuning) -> Column:
    from tuner.compare.tunings import judged

    return judged(sheet, tuning)


def _draw(sheet: Sheet, assessment: Assessment) -> Overlay:
    from tuner.judge.overlay import overlay

    return overlay(sheet, assessment)
