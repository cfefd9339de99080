"""Targets and their templates."""

import pytest

from tests.deliver.samples import specification
from tuner.deliver.target import fill, template
from tuner.deliver.targets import targets


@pytest.mark.parametrize("language", sorted(targets()))
def test_targets_write_the_files_they_name(language: str) -> None:
    """The table's names are the files, and no place of a template stays unfilled."""
    target = targets()[language]
    assert target.language == language
    texts = target.write(specification())
    assert tuple(texts) == target.files
    assert not [name for name, text in texts.items() if "${" in text]


def test_a_place_without_text_is_an_error() -> None:
    """A template cannot be delivered half filled."""
    assert "${head}" in template("controller.h")
    with pytest.raises(KeyError):
        fill("controller.h", head="")
