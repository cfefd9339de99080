"""What the window remembers from one run to the next: its place, how its room was divided, its theme and its page."""

import json
from dataclasses import asdict, dataclass, fields
from pathlib import Path

from tuner import places
from tuner.session.storage import write_whole


@dataclass(frozen=True, slots=True)
class Memory:
    """What is remembered; what Qt says of its own layout is kept as text of base 64.

    Parameters
    ----------
    geometry, upwards, across, columns, left, right : str
        Place of the window, and states of its splitters.
    theme : str
        The choice of theme.
    page : str
        The page of the plot area that was in sight.
    diagram : str
        Whether the loop diagram was 'shown' or 'hidden'.
    """

    geometry: str = ""
    upwards: str = ""
    across: str = ""
    columns: str = ""
    left: str = ""
    right: str = ""
    theme: str = "desktop"
    page: str = ""
    diagram: str = "shown"


def recall() -> Memory:
    """Return what was remembered; what cannot be read is as on the first day."""
    try:
        told = json.loads(_file().read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return Memory()
    names = {field.name for field in fields(Memory)}
    sound = isinstance(told, dict)
    return Memory(
        **{key: value for key, value in told.items() if key in names and isinstance(value, str)} if sound else {}
    )


def remember(memory: Memory) -> None:
    """Keep this for the next run."""
    write_whole(_file(), json.dumps(asdict(memory), indent=1))


def _file() -> Path:
    return places.settings() / "window.json"
