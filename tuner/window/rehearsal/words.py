"""What the page of the rehearsal says."""

from typing import TYPE_CHECKING

from tuner.judge.wording import minus, quantity
from tuner.rehearse.pacing import Pacer
from tuner.rehearse.script import Played

if TYPE_CHECKING:
    from tuner.rehearse.rehearsal import Rehearsal

PREPARING = "The loop is made ready; the first time on a machine that takes a while."
AT_REST = "The loop is at rest. Run lets time go by; it goes on while another page is in sight."


def progress(rehearsal: "Rehearsal", pacer: Pacer, *, running: bool) -> str:
    """Say how far it is, and how fast it goes where that is not what was asked for."""
    time = f"{rehearsal.time:.1f} {rehearsal.sheet.loop.time_unit}"
    if not running:
        return f"{time}, paused." if rehearsal.time else AT_REST
    if not pacer.behind:
        return f"{time}, at {pacer.speed:g} times real time."
    reached = quantity(pacer.achieved, "", 2)
    return f"{time}, at {reached} times real time: no more on this computer, which leaves no sample out."


def stability(rehearsal: "Rehearsal") -> tuple[str, bool]:
    """Return what is said of the stability of the loop, and whether that is bad."""
    growth = rehearsal.growth()
    if growth is None:
        word = "by hand" if rehearsal.mode == "manual" else "in automatic"
        return f"Stable {word}, with the plant as it is.", False
    if rehearsal.mode == "manual" and growth.predicted <= 1.0:
        return "By hand this plant does not come back to rest by itself.", False
    return minus(growth.sentence), True


def played_words(played: Played, time_unit: str) -> str:
    """Return what was done and what is said of it, with its time."""
    said = "  ".join(filter(None, (played.say, f"({played.words})" if played.words else "")))
    return minus(f"{quantity(played.time, time_unit)}: {said}")
