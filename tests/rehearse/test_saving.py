"""A recording becomes a file that is read back to the bit, with what was done at its sample."""

from pathlib import Path

import numpy as np
import pytest

from tests.rehearse.loops import oven
from tuner.files.records import read
from tuner.model.record import Units
from tuner.rehearse import recording
from tuner.rehearse.recording import Recorder
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.saving import save


def test_a_saved_recording_comes_back(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Every number to the bit, the mode, the units, and both events of one sample in its line."""
    monkeypatch.setattr(recording, "_PIECE", 4)
    rehearsal, recorder = Rehearsal(oven()), Recorder()
    rehearsal.set_noise(True)
    rehearsal.set_reference(80.0)
    recorder.note(0.0, "noise on")
    recorder.note(0.0, "reference 80 degC")
    first = rehearsal.advance(6)
    rehearsal.to_manual()
    recorder.note(rehearsal.time, "manual mode")
    second = rehearsal.advance(4)
    recorder.add(first)
    recorder.add(second)

    assert list(save(recorder, tmp_path / "oven.csv", rehearsal.sheet.loop)) == [4, 8, 10]

    record = read(tmp_path / "oven.csv")
    assert record.units == Units("s", "degC", "%")
    assert np.array_equal(record.measurement, np.append(first.ym, second.ym))
    assert np.array_equal(record.effort, np.append(first.u, second.u))
    assert record.manual.tolist() == [False] * 6 + [True] * 4
    assert [(place, words) for place, words in enumerate(record.events) if words] == [
        (0, "noise on; reference 80 degC"),
        (6, "manual mode"),
    ]
    recorder.close()
