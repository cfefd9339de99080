"""The theme file: both shades name the same roles, and words read on every ground they stand on."""

import pytest

from tuner.window.palette import Shade, contrast, palette, sizes

SHADES: tuple[Shade, ...] = ("light", "dark")


def test_contrast_has_its_published_ends() -> None:
    """Black on white is 21, a colour on itself 1, and #767676 on white is the well-known 4.54 (WCAG 2.2)."""
    assert contrast("#000000", "#ffffff") == pytest.approx(21.0)
    assert contrast("#0072b2", "#0072b2") == 1.0
    assert contrast("#ffffff", "#767676") == pytest.approx(4.54, abs=0.005)


def test_both_shades_name_the_same_roles() -> None:
    """What one shade can paint, the other can."""
    assert list(palette("light").colours) == list(palette("dark").colours)


@pytest.mark.parametrize("shade", SHADES)
def test_words_read_at_four_and_a_half_to_one(shade: Shade) -> None:
    """Every colour of words against page, field and hover reaches 4.5."""
    colours = palette(shade).colours
    words = ["ink", "quiet", *(role for role in colours if role.endswith("_word"))]
    poor = [
        (word, ground, round(contrast(colours[word], colours[ground]), 2))
        for word in words
        for ground in ("page", "field", "hover", "limit_zone", "band")
        if contrast(colours[word], colours[ground]) < 4.5
    ]
    assert poor == []


@pytest.mark.parametrize("shade", SHADES)
def test_words_on_an_accent_read(shade: Shade) -> None:
    """The default button's words reach 4.5 on its ground."""
    colours = palette(shade).colours
    assert contrast(colours["on_accent"], colours["nominal_word"]) >= 4.5


@pytest.mark.parametrize("shade", SHADES)
@pytest.mark.parametrize("role", ["nominal", "disturbance", "firm", "lost"])
def test_curves_stand_out_from_the_page(shade: Shade, role: str) -> None:
    """A curve that carries meaning reaches 3 : 1 against the page, as WCAG 2.2 asks of graphics."""
    colours = palette(shade).colours
    assert contrast(colours[role], colours["page"]) >= 3.0


def test_sizes_are_three_and_keep_to_a_grid_of_four() -> None:
    """Three sizes of text, each larger than the last, and a grid of four pixels."""
    assert sizes().small < sizes().body < sizes().title
    assert sizes().grid == 4
