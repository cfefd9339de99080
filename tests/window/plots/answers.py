"""Answers and panels for the tests of the plots."""

from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.session.tunings import KeptTuning
from tuner.window.plots.panel import Panel
from tuner.window.shown import Request, Shown
from tuner.window.worker import Assessing


def answer(kp: float = 2.0, *, whole: bool = True, kept: tuple[float, ...] = (), **changes: object) -> Shown:
    """Return the answer for a made-up loop, with kept tunings of these kp beside it."""
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw)
    tunings = tuple(
        KeptTuning("ABC"[index], f"kp {other}", made_up.sheet(other).controller) for index, other in enumerate(kept)
    )
    request = Request(1, made_up.sheet(kp, **changes), tunings)
    return assessing.whole(request) if whole else assessing.nominal(request)


def outline(kp: float = 2.0, *, number: int = 1, **changes: object) -> tuple[Shown, Shown]:
    """Return the first answer for a made-up loop, with the curves of its family, and the whole one that follows."""
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw)
    request = Request(number, made_up.sheet(kp, **changes))
    return assessing.outlined(request), assessing.whole(request)


def seen(panel: Panel[Shown], qtbot: QtBot, width: int = 640, height: int = 400) -> Panel[Shown]:
    """Show the widget of a panel at a size."""
    qtbot.addWidget(panel.widget)
    panel.widget.resize(width, height)
    panel.widget.show()
    return panel
