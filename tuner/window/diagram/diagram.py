"""The loop diagram: it shows what the document holds and what was found at the signals, and says what was pressed."""

from collections.abc import Callable, Mapping
from functools import partial

from PySide6.QtCore import QPoint, QPointF, QRectF, Qt, Signal
from PySide6.QtGui import QPainter, QPaintEvent, QPen, QPolygonF, QResizeEvent
from PySide6.QtWidgets import QMenu, QWidget

from tuner.errors import TrimwrightError
from tuner.session.blocks import Block, blocks
from tuner.session.document import Document
from tuner.window.diagram.layout import COMPACT, FULL, Layout, Wire, laid_out
from tuner.window.diagram.parts import BlockPart, Part, SwitchPart
from tuner.window.diagram.words import SignalWords, signal_words
from tuner.window.shown import Shown
from tuner.window.theme import Theme

_ASIDE = 6.0
"""How much farther a part is that lies aside of the way of an arrow key."""
_FEEDBACK = ("sensor", "measurement_filter", "lead_lag", "notch")
_SIGNS = {"sum": ("+", "+"), "disturbance": ("+", "+"), "behind": ("+", "+")}


class LoopDiagram(QWidget):
    """The loop of a document, drawn across the window.

    A press on a block asks for its editors, on a plus puts the block in; a switch opens its path or closes it.
    """

    page_wanted = Signal(str, str)
    """The page of editors of a block that was pressed, and the key of the block."""
    refused = Signal(str)
    """Why something that was asked for cannot be."""

    def __init__(self, document: Document, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document, self._theme = document, theme
        self._shown: Shown | None = None
        self._chosen, self._is_compact = "", False
        self.setAccessibleName("Loop diagram")
        found = blocks(document.sheet)
        self.parts: dict[str, Part] = {}
        for key in ("switch_forward", *found, "switch_back"):
            self.parts[key] = self._switch(key) if key.startswith("switch") else self._part(found[key])
        self._layout = laid_out(1.0, float(FULL), (), measured=False)
        self.setFixedHeight(FULL)
        theme.changed.connect(self.update)
        self.refresh()
        self.destroyed.connect(document.listen(self.refresh))

    # What is shown ----------------------------------------------------------------------------------------------

    def show_values(self, shown: Shown) -> None:
        """Show what was found at the signals; an answer without a verdict has no worst plant and changes nothing."""
        if shown.whole:
            self._shown = shown
            self._describe()
            self.update()

    def refresh(self) -> None:
        """Show what the document holds."""
        found = self._found()
        law = self._document.sheet.controller
        forward = found["feedforward"].there or found["disturbance_feedforward"].there
        for key, part in self.parts.items():
            if isinstance(part, BlockPart):
                idle = key in _FEEDBACK and not law.feedback
                part.show_block(found[key], chosen=key == self._chosen, idle=idle)
        self._switch_of("switch_back").show_closed(closed=law.feedback)
        self._switch_of("switch_forward").show_closed(closed=forward)
        self._switch_of("switch_forward").setVisible(self._document.has_feedforward)
        self._arrange()

    def choose(self, key: str) -> None:
        """Mark the block whose editors are in sight, '' for none."""
        self._chosen = key
        self.refresh()

    def be_compact(self, *, compact: bool) -> None:
        """Take less room, without the values at the signals."""
        if compact != self._is_compact:
            self._is_compact = compact
            self.setFixedHeight(COMPACT if compact else FULL)

    @property
    def words(self) -> Mapping[str, SignalWords]:
        """What is written at the signals."""
        fits = self._shown is not None and self._shown.sheet.loop == self._document.sheet.loop
        return signal_words(self._document.sheet, self._shown if fits and not self._is_compact else None)

    def _found(self) -> Mapping[str, Block]:
        return blocks(self._document.sheet)

    def _describe(self) -> None:
        self.setAccessibleDescription(". ".join(one.sentence() for one in self.words.values()))

    # What is pressed --------------------------------------------------------------------------------------------

    def _part(self, block: Block) -> BlockPart:
        part = BlockPart(block, self._theme, self)
        part.clicked.connect(partial(self._pressed, part))
        part.removal_wanted.connect(partial(self._put, part, there=False))
        part.menu_wanted.connect(partial(self._open_menu, part))
        part.went.connect(partial(self._go, part))
        return part

    def _switch(self, key: str) -> SwitchPart:
        forward = key == "switch_forward"
        part = SwitchPart("Feedforward" if forward else "Feedback", self._theme, self)
        part.clicked.connect(self._switch_forward if forward else self._document.switch_feedback)
        part.went.connect(partial(self._go, part))
        return part

    def _switch_of(self, key: str) -> SwitchPart:
        part = self.parts[key]
        assert isinstance(part, SwitchPart)  # noqa: S101 - two of the keys are of switches
        return part

    def _pressed(self, part: BlockPart) -> None:
        if part.block.there:
            self.page_wanted.emit(part.block.page, part.block.key)
        else:
            self._put(part, there=True)

    def _put(self, part: BlockPart, *, there: bool) -> None:
        """Put a block in and ask for its editors, or take it out."""
        block = part.block
        if self._try(partial(self._document.put_block, block, there=there)) and there:
            self.page_wanted.emit(block.page, block.key)

    def _switch_forward(self) -> None:
        self._try(self._document.switch_feedforward)

    def _try(self, act: Callable[[], None]) -> bool:
        try:
            act()
        except TrimwrightError as refusal:
            self.refused.emit(str(refusal))
            return False
        return True

    def _open_menu(self, part: BlockPart, at: QPoint) -> None:
        menu = self.menu_of(part)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        menu.popup(at)

    def menu_of(self, part: BlockPart) -> QMenu:
        """Return the menu of a block: what can be done with it."""
        menu = QMenu(self)
        if part.block.there:
            menu.addAction("Edit", partial(self._pressed, part))
            if part.block.may_go:
                menu.addAction("Remove", partial(self._put, part, there=False))
        else:
            menu.addAction("Add", partial(self._put, part, there=True))
        return menu

    def _go(self, part: Part, direction: QPointF) -> None:
        """Give the keyboard to the nearest part in a direction."""
        here = QRectF(part.geometry()).center()
        found: list[tuple[float, Part]] = []
        for other in self.parts.values():
            way = QRectF(other.geometry()).center() - here
            along = QPointF.dotProduct(way, direction)
            aside = abs(way.x() * direction.y()) + abs(way.y() * direction.x())
            if other is not part and other.isVisible() and along > 1.0:
                found.append((along + _ASIDE * aside, other))
        if found:
            min(found, key=lambda one: one[0])[1].setFocus(Qt.FocusReason.OtherFocusReason)

    # Drawing ----------------------------------------------------------------------------------------------------

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Lay everything out for another size."""
        super().resizeEvent(event)
        self._arrange()

    def _arrange(self) -> None:
        found = self._found()
        there = [key for key, block in found.items() if block.there]
        self._layout = laid_out(float(self.width()), float(self.height()), there, measured=found["path"].there)
        for key, part in self.parts.items():
            box = self._layout.boxes[key]
            part.setGeometry(
                round(box.x - box.width / 2), round(box.y - box.height / 2), round(box.width), round(box.height)
            )
        self.parts["path"].setVisible(found["path"].there)
        self.update()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw wires, junctions and words; the blocks draw themselves."""
        del event
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for wire in self._layout.wires:
            self._paint_wire(painter, wire)
        self._paint_junctions(painter, self._layout)
        self._paint_words(painter, self._layout)

    def _paint_wire(self, painter: QPainter, wire: Wire) -> None:
        law = self._document.sheet.controller
        absent = wire.path == "absent" or (wire.path == "feedback" and not law.feedback)
        colour = self._theme.colour("line" if absent else "quiet")
        painter.setPen(QPen(colour, 1.2, Qt.PenStyle.DashLine if absent else Qt.PenStyle.SolidLine))
        painter.setBrush(Qt.BrushStyle.NoBrush)
        points = [QPointF(*point) for point in wire.points]
        painter.drawPolyline(QPolygonF(points))
        if wire.arrow:
            _paint_arrow(painter, points[-2], points[-1])

    def _paint_junctions(self, painter: QPainter, layout: Layout) -> None:
        painter.setPen(QPen(self._theme.colour("quiet"), 1.2))
        painter.setFont(self._theme.font("small"))
        for name, at in layout.sums.items():
            painter.setBrush(self._theme.colour("field"))
            painter.drawEllipse(QPointF(*at), layout.radius, layout.radius)
            left, upper = _SIGNS[name]
            painter.drawText(QPointF(at[0] - layout.radius - 9.0, at[1] - 4.0), left)
            painter.drawText(QPointF(at[0] + 4.0, at[1] - layout.radius - 2.0), upper)
        law = layout.boxes["law"]
        painter.drawText(QPointF(law.x + 5.0, law.y + law.height / 2 + 11.0), "\u2212")
        painter.setBrush(self._theme.colour("quiet"))
        for at in layout.branches:
            painter.drawEllipse(QPointF(*at), 2.5, 2.5)

    def _paint_words(self, painter: QPainter, layout: Layout) -> None:
        words = self.words
        (rx, ry), (ux, uy), (dx, dy), (yx, yy) = (layout.anchors[key] for key in ("r", "u", "d", "y"))
        beyond = 12.0 + max(layout.boxes["plant"].x + 60.0, layout.sums.get("behind", (0.0, 0.0))[0])
        self._write(painter, (rx, ry - 6.0), words["r"].letter, "ink")
        self._write(painter, (ux, uy - 6.0), words["u"].letter, "ink", centred=True)
        self._write(painter, (dx, dy - 6.0), _joined(words["d"]), "disturbance_word", centred=True)
        self._write(painter, (yx + 10.0, yy - 6.0), _joined(words["y"]), "ink")
        for line, said in enumerate(words["u"].values):
            self._write(painter, (ux, uy + 13.0 + 12.0 * line), said, "quiet", centred=True)
        for said in words["d"].values:
            self._write(painter, (beyond, dy + 4.0), said, "quiet")
        for said in words["y"].values:
            self._write(painter, (yx + 10.0, yy + 13.0), said, "quiet")

    def _write(
        self, painter: QPainter, at: tuple[float, float], words: str, role: str, *, centred: bool = False
    ) -> None:
        """Write words from a place on, or about it, within the diagram."""
        painter.setFont(self._theme.font("small"))
        painter.setPen(self._theme.colour(role))
        width = painter.fontMetrics().horizontalAdvance(words)
        start = min(at[0] - width / 2 if centred else at[0], self.width() - width - 4.0)
        painter.drawText(QPointF(max(start, 4.0), at[1]), words)


def _joined(words: SignalWords) -> str:
    return f"{words.letter}  {words.name}" if words.name else words.letter


def _paint_arrow(painter: QPainter, before: QPointF, tip: QPointF) -> None:
    way = tip - before
    length = (way.x() ** 2 + way.y() ** 2) ** 0.5 or 1.0
    along = QPointF(way.x() / length, way.y() / length)
    across = QPointF(-along.y(), along.x())
    painter.save()
    painter.setBrush(painter.pen().color())
    painter.setPen(Qt.PenStyle.NoPen)
    painter.drawPolygon(QPolygonF([tip, tip - along * 7.0 + across * 3.0, tip - along * 7.0 - across * 3.0]))
    painter.restore()
