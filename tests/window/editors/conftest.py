"""A document and a look for the tests, and the editors over them."""

from collections.abc import Iterator

import pytest
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tuner.session.document import Document
from tuner.window.editors import build_editors
from tuner.window.editors.panel import EditorPanel
from tuner.window.editors.plant_page import PlantPage
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
def panel(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[EditorPanel]:
    """Return the editors of the wash bath, in sight."""
    panel = build_editors(document, theme)
    qtbot.addWidget(panel)
    panel.resize(320, 700)
    panel.show()
    yield panel
    panel.hide()


@pytest.fixture
def plant_page(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[PlantPage]:
    """Return the page of the wash bath's plant, in sight, following the document."""
    page = PlantPage(document, theme)
    qtbot.addWidget(page)
    page.resize(320, 600)
    stop = document.listen(lambda: page.refresh(anew=False))
    page.refresh(anew=True)
    page.show()
    yield page
    stop()
    page.hide()
