"""The column of editors: a list of the blocks, and the page of the chosen one."""

from collections.abc import Callable, Iterator, Mapping

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QResizeEvent, QShowEvent
from PySide6.QtWidgets import QFrame, QListView, QListWidget, QScrollArea, QStackedWidget, QVBoxLayout, QWidget

from tuner.judge.assessment import Assessment
from tuner.session.document import Document
from tuner.window.editors.block_pages import ControllerPage, TablePage, loop_page
from tuner.window.editors.feedforward_page import DisturbancePath, FeedforwardPage
from tuner.window.editors.field import Page
from tuner.window.editors.filters_page import FiltersPage
from tuner.window.editors.limits_page import LimitsPage
from tuner.window.editors.plant_page import PlantPage
from tuner.window.tab_order import order_tabs
from tuner.window.theme import Theme

WIDTH = 320


class EditorPages(Mapping[str, Page]):
    """The pages by the names of their blocks, each made when it is first asked for.

    Parameters
    ----------
    makers : mapping of str to callable
        What makes each, in the order of the list.
    stack : QStackedWidget
        Where they are put, each in an area that scrolls.
    """

    def __init__(self, makers: Mapping[str, Callable[[], Page]], stack: QStackedWidget) -> None:
        self._makers, self._stack = makers, stack
        self.made: dict[str, Page] = {}
        self._areas: dict[str, QScrollArea] = {}

    def __getitem__(self, name: str) -> Page:
        """Return a page; it is made now if nobody has asked for it before."""
        if name not in self.made:
            self.made[name] = self._makers[name]()
            self._areas[name] = _scrolled(self.made[name])
            self._stack.addWidget(self._areas[name])
        return self.made[name]

    def __iter__(self) -> Iterator[str]:
        """Return the names in their order."""
        return iter(self._makers)

    def __len__(self) -> int:
        """Return how many there are."""
        return len(self._makers)

    def area_of(self, name: str) -> QScrollArea:
        """Return the area in which a page scrolls."""
        self[name]
        return self._areas[name]


def _makers(document: Document, theme: Theme, plant: PlantPage, limits: LimitsPage) -> Mapping[str, Callable[[], Page]]:
    return {
        "Loop": lambda: loop_page(document, theme),
        "Plant": lambda: plant,
        "Actuator": lambda: TablePage(document, theme, (("", "actuator"),)),
        "Sensor": lambda: TablePage(document, theme, (("", "sensor"),)),
        "Controller": lambda: ControllerPage(document, theme),
        "Feedforward": lambda: FeedforwardPage(document, theme),
        "Filters": lambda: FiltersPage(document, theme),
        "Trial": lambda: TablePage(document, theme, (("", "trial"),)),
        "Limits": lambda: limits,
    }


class EditorPanel(QWidget):
    """The editors of all blocks, one in sight; `block_chosen` tells which."""

    block_chosen = Signal(str)

    def __init__(self, document: Document, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document, self._theme = document, theme
        self._generation = document.generation
        self.limits = LimitsPage(document, theme)
        self.plant = PlantPage(document, theme)
        self._stack = QStackedWidget()
        self.pages = EditorPages(_makers(document, theme, self.plant, self.limits), self._stack)
        self.blocks = self._block_list()
        column = QVBoxLayout(self)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(4)
        column.addWidget(self.blocks)
        column.addWidget(self._stack, 1)
        self.blocks.currentTextChanged.connect(self._on_block)
        self.setMinimumWidth(WIDTH - 20)
        theme.changed.connect(self._dress)
        self._dress()
        self.select("Plant")
        self.destroyed.connect(document.listen(self.refresh))

    @property
    def disturbance_path(self) -> DisturbancePath:
        """Where the path of a measured disturbance is typed."""
        page = self.pages["Feedforward"]
        assert isinstance(page, FeedforwardPage)  # noqa: S101 - so it is made
        return page.disturbance_path

    @property
    def block(self) -> str:
        """The name of the block whose page is in sight."""
        return self.blocks.currentItem().text()

    def select(self, block_name: str) -> None:
        """Show the page of a block, named as in the list; small letters will do.

        Raises
        ------
        KeyError
            When there is no such block.
        """
        names = {name.lower(): index for index, name in enumerate(self.pages)}
        self.blocks.setCurrentRow(names[block_name.lower()])

    def refresh(self) -> None:
        """Show what the document holds on the page in sight; the others follow when they come in sight."""
        anew = self._generation != self._document.generation
        self._generation = self._document.generation
        if anew:
            for page in self.pages.made.values():
                page.refresh(anew=True)
        else:
            self.pages[self.block].refresh(anew=False)
        self.pages[self.block].settle()

    def show(self, assessment: Assessment | None = None) -> None:
        """Show an assessment: how the family stands to each limit."""
        if assessment is None:
            super().show()
        else:
            self.limits.show_assessment(assessment)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Lay the page out for another width at once."""
        super().resizeEvent(event)
        self.pages[self.block].settle()

    def showEvent(self, event: QShowEvent) -> None:
        """Lay the page out before it is seen for the first time."""
        super().showEvent(event)
        self.pages[self.block].settle()

    def focusNextPrevChild(self, forward: bool) -> bool:  # as Qt calls it
        """Let Tab go through the page as it is laid out now, whatever was put between since."""
        order_tabs(self.blocks, self.pages[self.block].column)
        return super().focusNextPrevChild(forward)

    def _block_list(self) -> QListWidget:
        """Return the list of the blocks, flowing like words in three lines."""
        blocks = QListWidget()
        blocks.setFlow(QListView.Flow.LeftToRight)
        blocks.setWrapping(True)
        blocks.setResizeMode(QListView.ResizeMode.Adjust)
        blocks.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        blocks.setVerticalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        blocks.setAccessibleName("blocks of the loop")
        blocks.addItems(list(self.pages))
        blocks.setFixedHeight(88)
        return blocks

    def _on_block(self, name: str) -> None:
        self._stack.setCurrentWidget(self.pages.area_of(name))
        self.pages[name].refresh(anew=False)
        self.pages[self.block].settle()
        self.block_chosen.emit(name)

    def _dress(self) -> None:
        colours = self._theme.palette.colours
        self.blocks.setStyleSheet(
            f"QListWidget {{ background: {colours['page']}; border: 0; padding: 0 4px; outline: 0; }}"
            f"QListWidget:focus {{ border: 0; }}"
            f"QListWidget::item {{ color: {colours['quiet']}; padding: 4px 8px; margin: 0; }}"
            f"QListWidget::item:hover {{ background: {colours['hover']}; }}"
            f"QListWidget::item:selected {{ color: {colours['ink']}; background: {colours['page']};"
            f" border-bottom: 2px solid {colours['nominal']}; }}"
            f"QListWidget::item:selected:focus {{ background: {colours['hover']}; }}"
        )


def _scrolled(page: Page) -> QScrollArea:
    area = QScrollArea()
    area.setFrameShape(QFrame.Shape.NoFrame)
    area.setWidgetResizable(True)
    area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
    area.setFocusPolicy(Qt.FocusPolicy.NoFocus)
    area.setWidget(page)
    return area
