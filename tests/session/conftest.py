"""Folders of their own for the tests of the session, so that nobody's settings are touched."""

from pathlib import Path

import pytest

from tests.session.sheets import TEXT
from tuner import places


@pytest.fixture(autouse=True)
def own_places(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Let settings and cache lie in the test's own folder."""
    monkeypatch.setattr(places, "settings", lambda: tmp_path / "settings")
    monkeypatch.setattr(places, "cache", lambda: tmp_path / "cache")
    return tmp_path


@pytest.fixture
def file(tmp_path: Path) -> Path:
    """Return a tuning sheet's file."""
    path = tmp_path / "wash_bath.toml"
    path.write_text(TEXT, encoding="utf-8")
    return path
