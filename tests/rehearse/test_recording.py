"""What is kept of a rehearsal: every sample to the bit, every event at its sample, no memory."""

import numpy as np
import pytest

from tests.rehearse.loops import oven
from tuner.rehearse import recording
from tuner.rehearse.recording import Recorder
from tuner.rehearse.rehearsal import Rehearsal


def test_every_sample_comes_back(monkeypatch: pytest.MonkeyPatch) -> None:
    """In pieces, in order, to the bit, with the flags."""
    monkeypatch.setattr(recording, "_PIECE", 7)
    rehearsal, recorder = Rehearsal(oven()), Recorder()
    rehearsal.set_reference(90.0)
    strips = [rehearsal.advance(count) for count in (5, 0, 12, 3)]
    for strip in strips:
        recorder.add(strip)
    pieces = list(recorder.pieces())
    assert [len(piece.t) for piece in pieces] == [7, 7, 6]
    for kept, name in (("reference", "r"), ("measurement", "ym"), ("effort", "u"), ("limited", "limited"), ("t", "t")):
        found = np.concatenate([getattr(piece, kept) for piece in pieces])
        assert np.array_equal(found, np.concatenate([getattr(strip, name) for strip in strips]))
    recorder.close()


def test_events_stand_with_their_sample(monkeypatch: pytest.MonkeyPatch) -> None:
    """Each in the piece of the sample that it takes hold at; what comes after the last sample with that."""
    monkeypatch.setattr(recording, "_PIECE", 4)
    rehearsal, recorder = Rehearsal(oven()), Recorder()
    recorder.note(0.0, "begin")
    recorder.add(rehearsal.advance(8))
    recorder.note(2.0, "kp 3 to 5")
    recorder.note(4.0, "after the end")
    first, second = recorder.pieces()
    assert [event.words for event in first.events] == ["begin"]
    assert [event.words for event in second.events] == ["kp 3 to 5", "after the end"]
    recorder.close()


def test_it_is_full_some_time(monkeypatch: pytest.MonkeyPatch) -> None:
    """More than it may keep is not kept, and it says so."""
    monkeypatch.setattr(recording, "MOST_SAMPLES", 10)
    rehearsal, recorder = Rehearsal(oven()), Recorder()
    recorder.add(rehearsal.advance(8))
    assert not recorder.full
    recorder.add(rehearsal.advance(8))
    assert (recorder.samples, recorder.full) == (10, True)
    recorder.close()


def test_an_empty_one_has_no_pieces() -> None:
    """Nothing happened."""
    recorder = Recorder()
    assert list(recorder.pieces()) == []
    recorder.close()
