"""The window: puts the views in their places, sends every change to the worker, and its answers to the views."""

from collections.abc import Callable, Mapping, Sequence
from pathlib import Path
from types import MappingProxyType

from PySide6.QtCore import QByteArray, Qt, QTimer, Signal
from PySide6.QtGui import QCloseEvent, QDragEnterEvent, QDropEvent, QKeyEvent, QResizeEvent
from PySide6.QtWidgets import QMainWindow, QScrollArea, QSplitter, QVBoxLayout, QWidget

from tuner.judge.wording import shortfall
from tuner.model.family import NOMINAL
from tuner.session.document import Document
from tuner.session.tunings import beside
from tuner.window.diagram.diagram import LoopDiagram
from tuner.window.editors.panel import EditorPanel
from tuner.window.elided import ElidedLabel
from tuner.window.frequency.page import FrequencyPage
from tuner.window.memory import Memory
from tuner.window.pages import Page, Pages
from tuner.window.plot_grid import PlotGrid
from tuner.window.ribbon import Ribbon
from tuner.window.rulers.panel import RulerPanel
from tuner.window.shown import Failure, FamilyView, Request, Shown
from tuner.window.theme import Theme
from tuner.window.worker import Assessor

SMALLEST = (960, 600)
_EDITOR_WIDTH = 272
_RULERS_HEIGHT, _LOW_RULERS_HEIGHT = 208, 128
_PAINTING = 1
"""Milliseconds after an answer when it has been painted: Qt paints before it looks at its clock."""
ROOMY = 780
"""Height, pixels, from which the loop diagram has room for what was found at its signals."""
LATE = 150
"""Milliseconds without a verdict on the present tuning after which the last one is shown paler."""
_PATIENCE = 2_000
"""Milliseconds after which a wait for the first answer is explained."""
_COMPILING = "Compiling for this machine, once; the next start is quick."
_ASSESSING = "The loop is still being assessed; try again in a moment."


class MainWindow(QMainWindow):
    """The whole window of one document.

    Parameters
    ----------
    document : Document
        What is open.
    theme : Theme
        The look.
    assessor : Assessor
        Answers what the document asks; the window closes it when it closes.
    editors, rulers : QWidget
        The views that the hand works on.
    more_pages : sequence of Page
        Pages of the plot area that the hand works on too.
    later_pages : mapping of str to callable
        Further ones, made when they are first chosen.
    """

    dropped = Signal(object)
    """Path of a file dropped on the window."""
    closing = Signal(object)
    """The `QCloseEvent`, to be ignored by whoever has a reason."""

    def __init__(  # noqa: PLR0913, PLR0917 - what a window is made of
        self,
        document: Document,
        theme: Theme,
        assessor: Assessor,
        editors: EditorPanel,
        rulers: RulerPanel,
        more_pages: Sequence[Page] = (),
        later_pages: Mapping[str, Callable[[], Page]] = MappingProxyType({}),
    ) -> None:
        super().__init__()
        self.document, self.theme, self.assessor = document, theme, assessor
        self.editors, self.rulers = editors, rulers
        self.ribbon, self.plots, self.notes = Ribbon(theme), PlotGrid(theme), ElidedLabel()
        self.diagram = LoopDiagram(document, theme)
        self.frequency = FrequencyPage(theme)
        self.pages = Pages(theme, (self.plots, self.frequency, *more_pages), later_pages)
        self.shown: Shown | None = None
        self.looked_at = ""
        self.family_view: FamilyView = "both"
        self._asked = self._first = 0
        self._is_divided = False
        self._generation = document.generation
        self._fault = ""
        self._requested: object = None
        self._why = _ASSESSING
        self._late = QTimer(self, singleShot=True, interval=LATE)
        self._late.timeout.connect(self.ribbon.wait)
        self.setMinimumSize(*SMALLEST)
        self.setAcceptDrops(True)
        self._arrange()
        self._connect()
        self._show_name()

    # What happens -----------------------------------------------------------------------------------------------

    def start(self) -> None:
        """Ask for the first answer, once the window has been painted."""
        self.editors.blocks.setFocus()
        QTimer.singleShot(0, self.ask)
        QTimer.singleShot(_PATIENCE, self._explain_wait)

    def _explain_wait(self) -> None:
        """Say why the first answer takes so long, if it does."""
        if self.shown is None and self._why == _ASSESSING:
            self.pages.say_empty(_COMPILING)

    def closeEvent(self, event: QCloseEvent) -> None:
        """Let others object, else end the worker and wait for it."""
        event.accept()
        self.closing.emit(event)
        if event.isAccepted():
            self._late.stop()
            self._stop_listening()
            self.assessor.close()

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:
        """Take files."""
        if event.mimeData().hasUrls():
            event.acceptProposedAction()

    def dropEvent(self, event: QDropEvent) -> None:
        """Say which file was dropped."""
        for url in event.mimeData().urls()[:1]:
            self.dropped.emit(Path(url.toLocalFile()))

    def _document_changed(self) -> None:
        self._show_name()
        self.ask()

    def ask(self) -> None:
        """Ask for an answer, unless what decides it has not changed since the last one was asked for."""
        document, wants_frequency = self.document, self.pages.page.wants_frequency
        beside_it = beside(document.sheet.controller, document.kept)
        wanted = (document.sheet, beside_it, wants_frequency, self.looked_at, self.family_view)
        anew = self.document.generation != self._generation
        if wanted == self._requested and not anew:
            return
        self._requested = wanted
        self._asked += 1
        if not self._late.isActive():
            self._late.start()
        if anew:
            self._leave_loop()
        self._why = _ASSESSING
        self.assessor.submit(Request(self._asked, *wanted))

    def _answered(self, shown: Shown) -> None:
        """Show an answer: one without a verdict only in the plots, one on a loop that was left nowhere."""
        if shown.number < self._first:
            return
        self.shown = shown
        self.pages.show(shown.as_seen())
        self.pages.say_looked_at(shown.assessment.drift_of(shown.looked_at) if shown.looked_at else "")
        if shown.whole:
            self._lose_sight(shown)
            self._verdict_came(shown.number)
            self.ribbon.show(shown)
            self.diagram.show_values(shown)
            self.editors.show(shown.assessment)
            self._say_notes(shown.assessment.notes)
        else:
            QTimer.singleShot(_PAINTING, self.assessor.go_on)

    def _verdict_came(self, number: int) -> None:
        """Wait no more for a verdict, or for a newer one from now on."""
        self._late.stop()
        if number < self._asked:
            self._late.start()

    def look_at(self, plant: str) -> None:
        """Show a plant of the family in the place of the nominal one, by its name; '' for the nominal one."""
        self.looked_at = "" if plant == NOMINAL else plant
        self.ask()

    def _lose_sight(self, shown: Shown) -> None:
        """Look at the nominal plant from now on when the family has the plant no longer that was looked at."""
        if shown.number == self._asked and not shown.looked_at:
            self.looked_at = ""

    def show_family(self, view: FamilyView) -> None:
        """Choose how the plots show the family."""
        self.family_view = view
        self.ask()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Go back to the nominal plant by Escape, wherever nothing else takes it."""
        if event.key() == Qt.Key.Key_Escape and self.looked_at:
            self.look_at(NOMINAL)
        else:
            super().keyPressEvent(event)

    def look_at_worst(self) -> None:
        """Show the plant that misses a limit by most, or comes nearest to missing one."""
        if self.shown is not None and self.shown.assessment.limits:
            self.look_at(max(self.shown.assessment.limits, key=shortfall).plant)

    def _leave_loop(self) -> None:
        """Forget the loop that was open before: its answers on the way are not shown any more."""
        self._generation, self._first = self.document.generation, self._asked
        self._fault = self.looked_at = ""
        self.pages.forget()

    def _failed(self, failure: Failure) -> None:
        """Say why there is no answer; the last curves stay, greyed."""
        if failure.number < self._asked:
            return
        self._why = failure.sentence
        self._late.stop()
        self.ribbon.fail(failure.sentence)
        self.pages.show_stale()
        self.pages.say_empty(failure.sentence)

    def why_no_verdict(self) -> str:
        """Return why there is no verdict on the sheet as it is now."""
        return self._why

    def say_fault(self, sentence: str) -> None:
        """Say what went wrong in the program itself, before the notes, for as long as this loop is open."""
        self._fault = sentence
        self._say_notes(self.shown.assessment.notes if self.shown else ())

    def _say_notes(self, notes: tuple[str, ...]) -> None:
        self.notes.setText("  ".join((self._fault, *notes) if self._fault else notes))

    def _show_name(self) -> None:
        self.ribbon.title.setText(self.document.sheet.loop.title)
        path = self.document.path
        name = path.name if path else "not saved yet"
        self.setWindowTitle(f"{self.document.sheet.loop.title}: {name}[*] - Trimwright")
        self.setWindowFilePath(str(path or ""))
        self.setWindowModified(self.document.dirty)

    # Layout -----------------------------------------------------------------------------------------------------

    def _arrange(self) -> None:
        self.across = _splitter(Qt.Orientation.Horizontal, self.editors, self.pages.widget)
        self.across.setStretchFactor(1, 1)
        self.across.setSizes([_EDITOR_WIDTH, 1000])
        self.upwards = _splitter(Qt.Orientation.Vertical, self.across, _with_line(self.rulers))
        self.upwards.setStretchFactor(0, 1)
        self.upwards.setSizes([1000, _RULERS_HEIGHT])
        self.upwards.splitterMoved.connect(self._divided_by_hand)
        self.notes.setProperty("voice", "quiet")
        self.notes.setAccessibleName("Notes")
        self.notes.setContentsMargins(12, 4, 12, 4)
        self.notes.setFont(self.theme.font("small"))
        whole = QWidget()
        column = QVBoxLayout(whole)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self.ribbon.widget)
        column.addWidget(self.diagram)
        column.addWidget(self.upwards, 1)
        column.addWidget(self.notes)
        self.setCentralWidget(whole)

    def _connect(self) -> None:
        self._stop_listening = self.document.listen(self._document_changed)
        self.assessor.answered.connect(self._answered)
        self.assessor.failed.connect(self._failed)
        self.rulers.dragging_started.connect(lambda: self.pages.hold(True))
        self.rulers.dragging_finished.connect(lambda: self.pages.hold(False))
        self.pages.chosen.connect(lambda _name: self.ask())
        self.pages.nominal_wanted.connect(lambda: self.look_at(""))
        self.ribbon.plant_wanted.connect(self.look_at)
        self.diagram.page_wanted.connect(self._show_editors)
        self.diagram.refused.connect(self.say_fault)
        self.editors.block_chosen.connect(lambda _page: self.diagram.choose(""))
        self.plots.plant_wanted.connect(self.look_at)
        self.frequency.plant_wanted.connect(self.look_at)

    def _show_editors(self, page: str, block: str) -> None:
        """Show the editors of a block that was pressed in the diagram, and mark it there."""
        self.editors.select(page)
        self.diagram.choose(block)

    def show_diagram(self, *, shown: bool) -> None:
        """Show the loop diagram, or leave its room to the plots."""
        self.diagram.setVisible(shown)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Give the diagram less room in a low window."""
        super().resizeEvent(event)
        low = event.size().height() < ROOMY
        self.diagram.be_compact(compact=low)
        if not self._is_divided:
            self.upwards.setSizes([event.size().height(), _LOW_RULERS_HEIGHT if low else _RULERS_HEIGHT])

    def _divided_by_hand(self) -> None:
        """Leave the room as it was divided, however high the window is from now on."""
        self._is_divided = True

    def layout_memory(self) -> Memory:
        """Return how the window stands and how its room is divided."""
        states = {name: _text(splitter.saveState()) for name, splitter in self._splitters().items()}
        return Memory(
            geometry=_text(self.saveGeometry()),
            theme=self.theme.choice,
            page=self.pages.page.name,
            diagram="hidden" if self.diagram.isHidden() else "shown",
            **states,
        )

    def restore_layout(self, memory: Memory) -> None:
        """Stand and divide the room as remembered."""
        if memory.geometry:
            self.restoreGeometry(_bytes(memory.geometry))
        for name, splitter in self._splitters().items():
            if state := getattr(memory, name):
                splitter.restoreState(_bytes(state))
                self._is_divided = True
        self.pages.begin_with(memory.page)
        self.show_diagram(shown=memory.diagram != "hidden")

    def _splitters(self) -> dict[str, QSplitter]:
        plots = self.plots
        return {
            "upwards": self.upwards,
            "across": self.across,
            "columns": plots.widget,
            "left": plots.left,
            "right": plots.right,
        }


def _splitter(orientation: Qt.Orientation, *parts: QWidget) -> QSplitter:
    splitter = QSplitter(orientation)
    splitter.setChildrenCollapsible(False)
    splitter.setHandleWidth(4)
    for part in parts:
        splitter.addWidget(part)
    return splitter


def _with_line(rulers: RulerPanel) -> QWidget:
    """Return the rulers, to be scrolled where there is no room, with the line that reads them always in sight."""
    whole = QWidget()
    column = QVBoxLayout(whole)
    column.setContentsMargins(0, 0, 0, 0)
    column.setSpacing(0)
    column.addWidget(_scrolled(rulers), 1)
    column.addWidget(rulers.line)
    return whole


def _scrolled(part: QWidget) -> QScrollArea:
    area = QScrollArea()
    area.setWidgetResizable(True)
    area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
    area.setFocusPolicy(Qt.FocusPolicy.NoFocus)
    area.setWidget(part)
    return area


def _text(state: QByteArray) -> str:
    return bytes(state.toBase64().data()).decode("ascii")


def _bytes(text: str) -> QByteArray:
    return QByteArray.fromBase64(text.encode("ascii"))
