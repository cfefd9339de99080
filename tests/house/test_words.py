"""The files of the project speak of the project alone: no machine, no registry, no example that is not ours."""

import re

import pytest

from tests.house.tree import files, name_of

# Each needle has a tilde in it, taken out before the search, so that this file does not hold what it looks for.
NEEDLES = {
    "a folder of one machine": (r"(?<![\w.])/wo~rk/", r"(?<![\w.])/ro~ot\b", r"/t~mp/(?:brief|bash)"),
    "the address of a package registry": (
        r"py~pi\.org",
        r"python~hosted\.org",
        r"npm~js\.(?:org|com)",
        r"deb\.deb~ian\.org",
        r"ana~conda\.org",
        r"crates~\.io",
        r"proxy\.go~lang",
    ),
    "a document that is not part of the project": (
        r"\bdesign~\.md",
        r"\bfindings~-\w+",
        r"\breferences~\.md",
        r"\bcontract~\.md",
    ),
    "an example that is not ours": (
        r"cruise~[- ]control",
        r"\bca~rs?\b",
        r"wind~[- ]gusts?",
        r"road~[- ]grades?",
        r"play~ground",
    ),
    "a word about how the project came to be": (
        r"\blec~tures?\b",
        r"\bchat~bots?\b",
        r"language~ models?",
        r"\bissue~ #?\d",
    ),
}


def found_in(text: str) -> list[str]:
    """Return what a text should not hold, each with its line."""
    return [
        f"line {text.count(chr(10), 0, match.start()) + 1} holds {what}: {match.group()!r}"
        for what, patterns in NEEDLES.items()
        for pattern in patterns
        for match in re.finditer(_whole(pattern), text, re.IGNORECASE)
    ]


def _whole(split: str) -> str:
    return split.replace("~", "")


def test_no_file_holds_a_word_that_does_not_belong() -> None:
    """Every text file of the project, whatever its kind, is free of them."""
    texts = ((name_of(file), file.read_text(encoding="utf-8", errors="ignore")) for file in files())
    found = [f"{name}, {fault}" for name, text in texts for fault in found_in(text)]
    assert not found, "\n".join(found)


@pytest.mark.parametrize(
    "split",
    [
        "see /wo~rk/main",
        "from py~pi.org",
        "as in desi~gn.md",
        "a cruise~ control",
        "Two Ca~rs",
        "a lec~ture",
        "issue~ 4",
    ],
)
def test_the_search_finds_each_kind(split: str) -> None:
    """A line of each kind is found, with its number."""
    (fault,) = found_in(f"fine\n{_whole(split)}\n")
    assert fault.startswith("line 2 holds ")


@pytest.mark.parametrize("text", ["network/peers", "a cart", "carry", "/rooted", "the designed margin", "swinging"])
def test_the_search_leaves_other_words_alone(text: str) -> None:
    """A word that only contains one of them is no fault."""
    assert found_in(text) == []
