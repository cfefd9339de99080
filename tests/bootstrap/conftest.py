"""The fresh machine that the tests of the two commands run on."""

import sys
from pathlib import Path

import pytest

from tests.bootstrap.fake_machine import FakeMachine


@pytest.fixture
def machine(tmp_path: Path) -> FakeMachine:
    """Return a fresh machine; its tools are shell scripts and its libraries Linux's."""
    if sys.platform != "linux":
        pytest.skip("the fresh machine is a Debian one")
    return FakeMachine(tmp_path)
