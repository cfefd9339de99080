"""How a table shares its width among its columns."""

from tuner.window.editors.columns import GAP, Columns, Widths, columns_for

SHORT = Widths(name=40, value=56, unit=50, spread=60)
LONG = Widths(name=120, value=70, unit=90, spread=56)


def test_what_fits_stands_in_one_line() -> None:
    """The boxes get what the widest needs, the names all that is left."""
    room = 300
    columns = columns_for([SHORT, Widths(90, 60, 56, 56)], room)
    assert columns == Columns(Widths(room - 60 - 56 - 60 - 3 * GAP, 60, 56, 60), stacked=False)


def test_the_last_pixel_decides() -> None:
    """A table stands in one line exactly down to the width that it needs."""
    need = LONG.name + LONG.value + LONG.unit + LONG.spread + 3 * GAP
    assert not columns_for([LONG], need).stacked
    assert columns_for([LONG], need - 1).stacked


def test_stacked_boxes_share_the_whole_width() -> None:
    """Under their names the boxes share what is left over alike, and fill the width to a pixel or two."""
    room = 284
    widths = columns_for([SHORT, LONG], room).widths
    assert widths.name == 0
    assert widths.value - 70 == widths.unit - 90 == widths.spread - 60 > 0
    assert room - 2 <= widths.value + widths.unit + widths.spread + 2 * GAP <= room


def test_too_little_room_keeps_the_shares() -> None:
    """Where not even the boxes fit they keep their needs, by which the layout shares out the shortage."""
    assert columns_for([LONG], 100) == Columns(Widths(0, 70, 90, 56), stacked=True)
