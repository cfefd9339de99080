"""What counts as a name in a formula."""

import re

import pytest

from tuner.files.spelling import NAME


@pytest.mark.parametrize("text", ["gain", "T_1", "τ", "k2"])
def test_names(text: str) -> None:
    """Letters of any alphabet, digits and underscores make a name, a letter first."""
    assert re.fullmatch(NAME, text)


@pytest.mark.parametrize("text", ["2k", "_a", "x²", "²", ""])
def test_what_is_no_name(text: str) -> None:
    """A digit or an underscore cannot come first, and a raised digit is a power, not part of a name."""
    assert re.fullmatch(NAME, text) is None
