"""A recording as a file, piece by piece, so that whoever saves it can go on meanwhile."""

from collections.abc import Iterator
from pathlib import Path

import numpy as np

from tuner.files.records import RecordWriter, Rows
from tuner.model.loop import Loop
from tuner.model.record import Units
from tuner.rehearse.recording import Piece, Recorder


def units_of(loop: Loop) -> Units:
    """Return the units of a loop's records."""
    return Units(loop.time_unit, loop.controlled.unit, loop.manipulated.unit)


def save(recorder: Recorder, path: Path, loop: Loop) -> Iterator[int]:
    """Write a recording to a file, yielding how many samples are written after each piece.

    Raises
    ------
    SheetError
        When the file cannot be written.
    """
    written = 0
    with RecordWriter(path, units_of(loop)) as writer:
        for piece in recorder.pieces():
            writer.add(rows_of(piece))
            written += len(piece.t)
            yield written


def rows_of(piece: Piece) -> Rows:
    """Return a piece as lines of a record; every event stands at the first sample at or after its time."""
    events: dict[int, str] = {}
    for event in piece.events:
        place = min(int(np.searchsorted(piece.t, event.time)), len(piece.t) - 1)
        events[place] = f"{events[place]}; {event.words}" if place in events else event.words
    return Rows(piece.t, piece.reference, piece.measurement, piece.effort, piece.disturbance, piece.manual, events)
