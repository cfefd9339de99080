"""The window sends every change to the worker and shows every answer everywhere."""

import threading
from pathlib import Path
from typing import Any

import pytest
from PySide6 import __version_info__
from PySide6.QtCore import QMimeData, QPoint, QPointF, Qt, QUrl
from PySide6.QtGui import QDragEnterEvent, QDropEvent
from PySide6.QtWidgets import QApplication, QWidget
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tests.window.windows import Answers, opened
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window import main_window
from tuner.window.plot_grid import POLES, REFERENCE

pytestmark = pytest.mark.usefixtures("qtbot")


def test_a_change_is_assessed_and_shown() -> None:
    """Another gain, another verdict and another curve."""
    with opened() as (window, _):
        before = window.plots.panels[REFERENCE].shown
        window.document.change_value("kp", 4.2)
        assert window.ribbon.verdict.text() == "Unstable"
        assert window.plots.panels[REFERENCE].shown is not before
        window.document.undo()
        assert window.ribbon.verdict.text() == "1 of 4 limits missed"


def test_the_controller_as_found_is_drawn_beside_the_present_one() -> None:
    """Its curve has its name, once there is another present tuning, and goes when it is forgotten."""
    with opened() as (window, _):
        panel = window.plots.panels[REFERENCE]
        window.document.note_as_found()
        assert "as found" not in [word.text for word in panel.marks.words]
        window.document.change_value("kp", 1.0)
        window.document.keep()
        window.document.change_value("kp", 1.5)
        assert {"as found", "A"} <= {word.text for word in panel.marks.words}
        window.document.forget_as_found()
        assert "as found" not in [word.text for word in panel.marks.words]


def test_what_changes_nothing_is_not_assessed_again() -> None:
    """Saving, or a release of a drag, asks for no answer."""
    count: list[int] = []

    def judge(sheet: Sheet, size: int) -> Assessment:
        count.append(size)
        return made_up.judge(sheet, size)

    with opened(judge=judge) as (window, _):
        asked = len(count)
        window.document.release()
        window.ask()
        assert len(count) == asked


def test_a_loop_that_cannot_be_computed_leaves_the_last_curves() -> None:
    """The sentence is in the ribbon, the curves are grey, and the next good sheet puts both right."""
    with opened() as (window, _):
        window.document.change_value("kp", 0.0)
        assert window.ribbon.detail.text() == "the loop has no gain: kp is 0"
        assert window.plots.panels[REFERENCE].stale
        assert window.why_no_verdict() == "the loop has no gain: kp is 0"
        window.document.change_value("kp", 1.0)
        assert not window.plots.panels[REFERENCE].stale


def test_a_first_sheet_that_cannot_be_computed_says_so_in_the_plots() -> None:
    """With nothing to show, each plot holds the sentence."""
    with opened(made_up_document(0.0)) as (window, _):
        panel = window.plots.panels[POLES]
        assert not panel.view.isVisible()
        assert panel._empty.text() == "the loop has no gain: kp is 0"


def test_notes_stand_at_the_foot() -> None:
    """The notes of the assessment, one after the other."""
    with opened() as (window, _):
        assert "made-up loop" in window.notes.text()


def test_a_fault_of_the_program_stays_in_sight() -> None:
    """It stands before the notes, and the next answer does not wipe it away; another sheet does."""
    with opened() as (window, _):
        window.say_fault("A fault of the program.")
        window.document.change_value("kp", 1.0)
        assert window.notes.text().startswith("A fault of the program.  ")
        window.document.start(made_up.sheet(1.5))
        assert "A fault" not in window.notes.text()


def test_another_sheet_starts_with_its_own_ranges() -> None:
    """A closer look and a wide range belong to the loop they were taken on."""
    with opened(made_up_document(3.5)) as (window, _):
        panel = window.plots.panels[REFERENCE]
        box = panel.view.getPlotItem().getViewBox()
        box.setRange(xRange=(10.0, 20.0), yRange=(1.0, 2.0), padding=0.0)
        box.sigRangeChangedManually.emit([True, True])
        window.document.start(made_up.sheet(0.5))
        across, upwards = panel.ranges()
        assert across.high == 240.0
        assert upwards.high < 8.0


def test_answers_on_a_loop_that_was_left_are_not_shown() -> None:
    """What was asked before another sheet was opened is dropped when it comes."""
    with opened() as (window, _):
        old = window.shown
        window.document.start(made_up.sheet(0.5))
        new = window.shown
        assert old is not None
        window.assessor.answered.emit(old)
        assert window.shown is new


def test_the_title_names_loop_and_file() -> None:
    """Loop, file and program; a mark while something is unsaved."""
    with opened() as (window, _):
        assert window.windowTitle() == "Ink drier: not saved yet[*] - Trimwright"
        assert not window.isWindowModified()
        window.document.change_value("kp", 1.0)
        assert window.isWindowModified()


def test_closing_with_work_in_flight_waits_for_it(qtbot: QtBot) -> None:
    """The window closes although an assessment is on its way; its thread has ended then."""
    busy = threading.Event()

    def judge(sheet: Sheet, size: int) -> Assessment:
        busy.set()
        threading.Event().wait(0.2)
        return made_up.judge(sheet, size)

    with opened(judge=judge, synchronous=False) as (window, _):
        window.start()
        qtbot.waitUntil(busy.is_set)
        assert window.close()
        assert window.assessor._thread is not None
        assert window.assessor._thread.isFinished()


def test_a_dropped_file_is_told(qtbot: QtBot, tmp_path: Path) -> None:
    """A file is taken, its path is told; text is not taken."""
    with opened() as (window, wiring):
        window.dropped.disconnect(wiring.files.open_path)
        with qtbot.waitSignal(window.dropped) as dropped:
            _drop(window, QUrl.fromLocalFile(str(tmp_path / "a.toml")))
        assert dropped.args is not None
        assert dropped.args[0] == tmp_path / "a.toml"
        words = QMimeData()
        words.setText("kp = 3")
        event = _entering(words)
        window.dragEnterEvent(event)
        assert not event.isAccepted()


def test_ranges_are_held_while_a_ruler_is() -> None:
    """The plots know when a hand is on a ruler."""
    with opened() as (window, _):
        window.rulers.dragging_started.emit()
        assert all(panel.held for panel in window.plots.panels.values())
        window.rulers.dragging_finished.emit()
        assert not any(panel.held for panel in window.plots.panels.values())


@pytest.mark.parametrize("size", [(1024, 640), (1600, 1000), (2560, 1440)], ids=str)
def test_every_part_has_room(size: tuple[int, int]) -> None:
    """From the smallest to the largest, the plots have at least 100 by 60 pixels and lie inside the window."""
    with opened() as (window, _):
        window.resize(*size)
        QApplication.processEvents()
        assert window.size().toTuple() == size
        for panel in window.plots.panels.values():
            box = panel.view.getPlotItem().getViewBox()
            assert box.width() > 100.0
            assert box.height() > 60.0
        for part in (window.editors, window.rulers, window.notes, window.ribbon.widget):
            corner = part.mapTo(window, QPoint(0, 0))
            assert corner.x() >= 0
            assert corner.y() < size[1]


def test_everything_that_takes_the_keyboard_has_a_name() -> None:
    """A screen reader finds a name, or a label, for each part that can be reached by Tab."""
    with opened() as (window, _):
        nameless = [_place(part) for part in _reached(window) if not _name(part)]
        assert nameless == []


def test_the_layout_comes_back() -> None:
    """Size and the division of the room survive."""
    with opened() as (window, _):
        window.upwards.setSizes([500, 260])
        remembered = window.layout_memory()
    with opened() as (other, _):
        other.restore_layout(remembered)
        assert other.upwards.sizes()[1] == 260


def test_the_page_in_sight_comes_back() -> None:
    """The next window begins with it, and asks for what it needs in its first question."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        remembered = window.layout_memory()
    with opened() as (other, _):
        other.restore_layout(remembered)
        assert other.pages.page is other.frequency
        assert other.pages.stack.currentWidget() is other.frequency.widget
        other.ask()
        assert other.shown is not None
        assert other.shown.frequency is not None


def test_one_plot_can_have_all_the_room() -> None:
    """Alone, it is the only one in sight; all four come back."""
    with opened() as (window, _):
        window.plots.show_alone(POLES)
        shown = [name for name, panel in window.plots.panels.items() if panel.widget.isVisible()]
        assert shown == [POLES]
        window.plots.show_alone("")
        assert all(panel.widget.isVisible() for panel in window.plots.panels.values())


def test_the_window_may_be_kept_from_closing() -> None:
    """Whoever objects keeps it open, and its worker at work."""
    with opened(asking=Answers(unsaved="cancel")) as (window, _):
        window.document.change_value("kp", 1.0)
        assert not window.close()
        window.document.change_value("kp", 4.2)
        assert window.ribbon.verdict.text() == "Unstable"


def made_up_document(kp: float) -> Document:
    """Return a document of a made-up loop."""
    return Document(made_up.sheet(kp))


def _entering(data: QMimeData) -> QDragEnterEvent:
    action, button, key = Qt.DropAction.CopyAction, Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier
    # PySide6 6.12 deprecates whole pixels, which are all that the versions before it take.
    place: Any = QPointF(10.0, 10.0) if __version_info__ >= (6, 12) else QPoint(10, 10)
    return QDragEnterEvent(place, action, data, button, key)


def _drop(window: QWidget, url: QUrl) -> None:
    data = QMimeData()
    data.setUrls([url])
    event = _entering(data)
    window.dragEnterEvent(event)
    assert event.isAccepted()
    action, button, key = Qt.DropAction.CopyAction, Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier
    window.dropEvent(QDropEvent(QPointF(10.0, 10.0), action, data, button, key))


def _reached(window: QWidget) -> list[QWidget]:
    return [
        part
        for part in window.findChildren(QWidget)
        if part.focusPolicy() & Qt.FocusPolicy.TabFocus and part.isVisibleTo(window) and part.isEnabled()
    ]


def _place(part: QWidget) -> str:
    parent = part.parentWidget()
    return f"{type(part).__name__} {part.objectName()} in {type(parent).__name__}"


def _name(part: QWidget) -> str:
    return part.accessibleName() or getattr(part, "text", lambda: "")()


def test_a_verdict_that_takes_long_makes_the_last_one_paler(qtbot: QtBot, monkeypatch: pytest.MonkeyPatch) -> None:
    """Until it is there; nothing pales while answers keep up."""
    monkeypatch.setattr(main_window, "LATE", 20)
    go = threading.Event()

    def judge(sheet: Sheet, size: int) -> Assessment:
        assert size == 1 or go.wait(20.0)
        return made_up.judge(sheet, size)

    go.set()
    with opened(judge=judge, synchronous=False) as (window, _):
        window.start()
        qtbot.waitUntil(lambda: window.ribbon.verdict.text() == "1 of 4 limits missed")
        go.clear()
        window.document.change_value("kp", 1.0)
        qtbot.waitUntil(lambda: window.ribbon.verdict.text() == "assessing…")
        assert window.ribbon.chips[0].is_late
        go.set()
        qtbot.waitUntil(lambda: window.ribbon.verdict.text() not in ("assessing…", "1 of 4 limits missed"))
        assert not window.ribbon.chips[0].is_late
        assert not window._late.isActive()
