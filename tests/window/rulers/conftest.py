"""A document and a look for the tests, and the rulers over them."""

from collections.abc import Iterator

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tuner.session.document import Document
from tuner.window.rulers import build_rulers
from tuner.window.rulers.panel import RulerPanel
from tuner.window.theme import Theme


@pytest.fixture
def document() -> Document:
    """Return the wash bath, opened."""
    return Document(wash_bath(), None, TEXT)


@pytest.fixture
def theme(qtbot: QtBot) -> Theme:
    """Return the light look; asking for `qtbot` makes sure that there is an application."""
    del qtbot
    return Theme("light")


@pytest.fixture
def panel(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[RulerPanel]:
    """Return the panel of the wash bath, in sight."""
    panel = build_rulers(document, theme)
    qtbot.addWidget(panel)
    panel.resize(900, 360)
    panel.show()
    QApplication.processEvents()
    yield panel
    panel.hide()
