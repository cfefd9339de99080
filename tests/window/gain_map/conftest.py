"""A document, a made-up map and the page over them."""

from collections.abc import Iterator

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up, made_up_footing
from tests.window.gain_map.made_up_map import Mapping
from tuner.session.document import Document
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.page import GainMapPage
from tuner.window.theme import Theme


@pytest.fixture
def document() -> Document:
    """Return the made-up loop, opened."""
    return Document(made_up.sheet())


@pytest.fixture
def mapping() -> Mapping:
    """Return what makes the maps."""
    return Mapping()


@pytest.fixture
def reasons() -> made_up_footing.Reasons:
    """Return what gives reasons."""
    return made_up_footing.Reasons()


@pytest.fixture
def page(
    qtbot: QtBot, document: Document, theme: Theme, mapping: Mapping, reasons: made_up_footing.Reasons
) -> Iterator[GainMapPage]:
    """Return the page in sight, awake, answering at once."""
    page = build_gain_map(document, theme, mapping, reasons, synchronous=True)
    qtbot.addWidget(page.widget)
    page.widget.resize(900, 600)
    page.widget.show()
    QApplication.processEvents()
    page.show_stale()
    yield page
    page.close()
    page.widget.hide()
