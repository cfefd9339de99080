"""A document and a look for the tests."""

import pytest
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tuner.session.document import Document
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
