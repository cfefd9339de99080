"""The order in which Tab goes from one control to the next: as they are laid out, whenever they were made."""

from collections.abc import Iterator

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLayout, QWidget


def stops(layout: QLayout) -> Iterator[QWidget]:
    """Go over what can have the focus within a layout, in its order."""
    for item in filter(None, map(layout.itemAt, range(layout.count()))):
        widget, inside = item.widget(), item.layout()
        if widget is not None and widget.focusPolicy() != Qt.FocusPolicy.NoFocus:
            yield widget
            continue
        inside = widget.layout() if widget is not None else inside
        if inside is not None:
            yield from stops(inside)


def order_tabs(first: QWidget, layout: QLayout) -> None:
    """Let Tab go from `first` through all that is in a layout."""
    for stop in stops(layout):
        QWidget.setTabOrder(first, stop)
        first = stop
