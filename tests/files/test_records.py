"""Records as files: exact numbers, streams, and every fault in its sentence."""

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.errors import SheetError
from tuner.files import records
from tuner.files.records import RecordWriter, headings, parse, read, write, written
from tuner.model.record import Record, Units

UNITS = Units("s", "degC", "%")
HEADER = "time [s],reference [degC],measurement [degC],effort [%],disturbance [%],mode,event"


def record(numbers: list[float], events: tuple[str, ...] = ()) -> Record:
    """Return a record in which every column has the same numbers, one second apart."""
    values = np.array(numbers, dtype=np.float64)
    time = np.arange(len(values), dtype=np.float64)
    manual = np.arange(len(values)) % 2 > 0
    return Record(UNITS, time, values, values, values, values, manual, events or ("",) * len(values))


def faults(text: str) -> list[str]:
    """Return what is said of a record that cannot be used."""
    with pytest.raises(SheetError) as caught:
        parse(text.splitlines(keepends=True))
    return caught.value.sentences()


def test_the_first_line_names_columns_and_units() -> None:
    """Each column of numbers with its unit in brackets, a plain number as 1."""
    assert ",".join(headings(UNITS)) == HEADER
    assert headings(Units("min"))[:2] == ["time [min]", "reference [1]"]


@given(st.lists(st.floats(allow_nan=False, allow_infinity=False), min_size=1, max_size=20))
def test_numbers_come_back_exactly(tmp_path_factory: pytest.TempPathFactory, numbers: list[float]) -> None:
    """Whatever is written is read as the same numbers, to the bit."""
    path = tmp_path_factory.mktemp("record") / "r.csv"
    write(path, record(numbers))
    found = read(path)
    for column in (found.reference, found.measurement, found.effort, found.disturbance):
        assert column is not None
        assert column.tobytes() == np.array(numbers).tobytes()
    assert found.manual.tolist() == [bool(place % 2) for place in range(len(numbers))]


def test_events_of_any_text_come_back(tmp_path: Path) -> None:
    """Commas, quotes and letters of any alphabet survive, as do units."""
    events = ('reference "80", by hand', "", "Störung \u2212 5 %")
    write(tmp_path / "r.csv", record([1.0, 2.0, 3.0], events))
    found = read(tmp_path / "r.csv")
    assert (found.events, found.units, len(found)) == (events, UNITS, 3)


def test_a_stream_is_written_piece_by_piece(tmp_path: Path) -> None:
    """What is added in two pieces is one record, the event of each at its own place."""
    first, second = written(record([1.0, 2.0], ("", "step"))), written(record([3.0, 4.0, 5.0]))
    second.time[:] += 2.0
    with RecordWriter(tmp_path / "r.csv", UNITS) as writer:
        writer.add(first)
        writer.add(second)
    found = read(tmp_path / "r.csv")
    assert found.measurement.tolist() == [1.0, 2.0, 3.0, 4.0, 5.0]
    assert found.events == ("", "step", "", "", "")


def test_a_record_from_elsewhere_needs_three_columns() -> None:
    """Time, measurement and effort in any order; what is missing is told apart from zeros."""
    found = parse(["effort [%], Time [min] ,measurement\n", "40,0,1.5\n", "\n", "41,1,1.75\n"])
    assert found.time.tolist() == [0.0, 1.0]
    assert found.effort.tolist() == [40.0, 41.0]
    assert found.units == Units("min", "", "%")
    assert (found.reference, found.disturbance) == (None, None)
    assert not found.manual.any()
    assert found.events == ("", "")
    assert written(found).reference.tolist() == [0.0, 0.0]


def test_every_fault_of_a_record_is_told() -> None:
    """All of them at once, each with its line and its column."""
    text = f"{HEADER}\n0,1,2,x,0,automatic,\n1,1,,3,inf,manuel,\n1,1,2,3\n0.5,1,2,3,0,manual,\n"
    assert faults(text) == [
        "line 2, column 4 (effort): expected a finite number, found 'x'",
        "line 3, column 3 (measurement): expected a finite number, found nothing",
        "line 3, column 5 (disturbance): expected a finite number, found 'inf'",
        "line 3, column 6 (mode): expected manual or automatic, found 'manuel'; the nearest valid name is manual",
        "line 4: expected 7 values, one for each column of the first line, found 4",
        "line 5, column 1 (time): expected a time after 1, found 0.5",
    ]


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (
            "time [s],measurment [degC],effort [%],effort [%]\n0,0,0,0\n",
            [
                "line 1, column 2: expected one of time, reference, measurement, effort, disturbance, mode, event, "
                "found 'measurment [degC]'; the nearest valid name is measurement",
                "line 1, column 4: expected each column once, found effort again, which column 3 has",
                "line 1: expected a column named measurement, found none",
            ],
        ),
        (
            "time [s],reference [K],measurement [degC],effort [%]\n0,0,0,0\n",
            ["line 1: expected the unit of the measurement, [degC], for the reference, found [K]"],
        ),
        (f"{HEADER}\n", ["expected at least one sample below the first line, found none"]),
        (
            "",
            [
                "line 1: expected a column named time, found none",
                "line 1: expected a column named measurement, found none",
                "line 1: expected a column named effort, found none",
            ],
        ),
        (f'{HEADER}\n0,1,2,3,4,manual,"open\n', ["line 2: expected CSV, quotes closed, found unexpected end of data"]),
    ],
)
def test_what_is_said_of_the_whole(text: str, said: list[str]) -> None:
    """Columns that are unknown, double or missing, units at odds, no samples, quotes left open."""
    assert faults(text) == said


def test_many_faults_are_counted() -> None:
    """After a hundred the rest is a number."""
    said = faults(HEADER + "\n" + "".join(f"{time},1,2,x,0,manual,\n" for time in range(1300)))
    assert len(said) == 101
    assert said[-1] == "expected no further fault, found 1,200 more"


def test_more_samples_than_can_be_held_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    """The line is said at which there are too many."""
    monkeypatch.setattr(records, "MOST_SAMPLES", 2)
    text = HEADER + "\n" + "".join(f"{time},1,2,3,0,manual,\n" for time in range(4))
    assert faults(text) == ["line 4: expected at most 2 samples, found more"]


def test_files_that_cannot_be_used(tmp_path: Path) -> None:
    """A folder, nothing there, no text, and a place that cannot be written to."""
    (tmp_path / "bytes.csv").write_bytes(b"time\xff\n")
    said = []
    for path in (tmp_path, tmp_path / "none.csv", tmp_path / "bytes.csv"):
        with pytest.raises(SheetError) as caught:
            read(path)
        said += caught.value.sentences()
    with pytest.raises(SheetError) as refused:
        write(tmp_path / "no" / "r.csv", record([1.0]))
    assert said == [
        f"{tmp_path}: expected a record, found a folder",
        f"{tmp_path / 'none.csv'}: expected a file that can be read, found no such file",
        f"{tmp_path / 'bytes.csv'}: expected text in UTF-8, found byte 5, which is none",
    ]
    assert refused.value.sentences() == [
        f"{tmp_path / 'no' / 'r.csv'}: expected a file that can be written, found no such file"
    ]
