"""Records as CSV: written sample by sample for hours, and read with every fault at once.

The first line names the columns, each with its unit in brackets: ``time [s],measurement [degC],effort [%]``.
"""

import csv
import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, field
from math import isfinite
from pathlib import Path
from types import TracebackType
from typing import Final, TextIO

import numpy as np
from numpy.typing import NDArray

from tuner.errors import Fault, SheetError, nearest
from tuner.files import words
from tuner.files.sheet import reason
from tuner.model.record import AUTOMATIC, MANUAL, Array, Record, Units

TIME, REFERENCE, MEASUREMENT, EFFORT, DISTURBANCE = "time", "reference", "measurement", "effort", "disturbance"
MODE, EVENT = "mode", "event"

NUMBERS: Final = (TIME, REFERENCE, MEASUREMENT, EFFORT, DISTURBANCE)
"""Columns of numbers, in the order in which they are written."""

COLUMNS: Final = (*NUMBERS, MODE, EVENT)

_NEEDED: Final = (TIME, MEASUREMENT, EFFORT)

MOST_FAULTS: Final = 100
"""Faults of a record that are told one by one."""

MOST_SAMPLES: Final = 5_000_000

_HEADING: Final = re.compile(r"\s*(.*?)\s*(?:\[(.*)\])?\s*")

Faults = list[Fault]


@dataclass(frozen=True, slots=True, eq=False)
class Rows:
    """Samples to be written: arrays of shape (n,), and what was done at some of them, by their place."""

    time: Array
    reference: Array
    measurement: Array
    effort: Array
    disturbance: Array
    manual: NDArray[np.bool_]
    events: dict[int, str] = field(default_factory=dict)


class RecordWriter:
    """Writes a record as it comes; to be used with `with`.

    Raises
    ------
    SheetError
        When the file cannot be written.
    """

    def __init__(self, path: Path, units: Units) -> None:
        self._path = path
        try:
            # Lines end as the CSV of RFC 4180 has them, wherever it is written.
            self._file: TextIO = path.open("w", encoding="utf-8", newline="")
        except OSError as error:
            raise self._refusal(error) from None
        self._rows = csv.writer(self._file)
        self._write([headings(units)])

    def add(self, rows: Rows) -> None:
        """Write some samples."""
        numbers = (rows.time, rows.reference, rows.measurement, rows.effort, rows.disturbance)
        modes = (MANUAL if manual else AUTOMATIC for manual in rows.manual.tolist())
        events = (rows.events.get(place, "") for place in range(len(rows.time)))
        # repr gives the shortest digits that come back as the same number.
        texts = (map(repr, column.tolist()) for column in numbers)
        self._write(zip(*texts, modes, events, strict=True))

    def _write(self, rows: Iterable[Sequence[str]]) -> None:
        try:
            self._rows.writerows(rows)
        except OSError as error:
            raise self._refusal(error) from None

    def close(self) -> None:
        """End the file."""
        try:
            self._file.close()
        except OSError as error:
            raise self._refusal(error) from None

    def _refusal(self, error: OSError) -> SheetError:
        return SheetError([Fault("", "a file that can be written", reason(error))], str(self._path))

    def __enter__(self) -> "RecordWriter":
        """Begin."""
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        """End the file."""
        self.close()


def headings(units: Units) -> list[str]:
    """Return the first line of a record."""
    return [*(f"{name} [{_unit_of(name, units) or '1'}]" for name in NUMBERS), MODE, EVENT]


def _unit_of(name: str, units: Units) -> str:
    return {TIME: units.time, REFERENCE: units.controlled, MEASUREMENT: units.controlled}.get(name, units.manipulated)


def read(path: Path) -> Record:
    """Return the record in a file.

    Raises
    ------
    SheetError
        With every fault, the first hundred one by one, or with the reason why the file cannot be read.
    """
    try:
        if path.is_dir():
            raise SheetError([Fault("", "a record", "a folder")], str(path))
        with path.open(encoding="utf-8-sig", newline="") as file:
            return parse(file, str(path))
    except OSError as error:
        raise SheetError([Fault("", "a file that can be read", reason(error))], str(path)) from None
    except UnicodeDecodeError as error:
        raise SheetError([Fault("", "text in UTF-8", f"byte {error.start + 1}, which is none")], str(path)) from None


def parse(lines: Iterable[str], file: str = "") -> Record:
    """Return the record that lines of CSV hold; `file` is its name in faults.

    Raises
    ------
    SheetError
        With every fault, the first hundred one by one.
    """
    reader = csv.reader(lines, strict=True)
    faults: Faults = []
    try:
        header = _Header.of(next(reader, []), faults)
        table = _Table(header)
        for row in reader if header.usable else ():
            if table.full:
                faults.append(Fault(f"line {reader.line_num}", f"at most {MOST_SAMPLES:,} samples", "more"))
                break
            table.take(row, reader.line_num, faults)
    except csv.Error as error:
        faults.append(Fault(f"line {reader.line_num}", "CSV, quotes closed", str(error)))
        raise SheetError(_told(faults), file) from None
    if header.usable and not len(table.columns[TIME]):
        faults.append(Fault("", "at least one sample below the first line", "none"))
    if faults:
        raise SheetError(_told(faults), file)
    return table.record()


def _told(faults: Faults) -> Faults:
    """Return faults to be told, the last one of many saying how many more there are."""
    more = len(faults) - MOST_FAULTS
    return faults if more <= 0 else [*faults[:MOST_FAULTS], Fault("", "no further fault", f"{more:,} more")]


@dataclass(frozen=True, slots=True)
class _Header:
    """The columns of a record by name, with their place in a line, and their units."""

    places: dict[str, int]
    texts: tuple[str, ...]
    units: Units
    usable: bool

    @classmethod
    def of(cls, texts: list[str], faults: Faults) -> "_Header":
        before = len(faults)
        places: dict[str, int] = {}
        units: dict[str, str] = {}
        for place, text in enumerate(texts):
            if (name := _name(place, text, places, faults)) is not None:
                places[name] = place
                units[name] = _unit(text)
        faults += [Fault("line 1", f"a column named {name}", "none") for name in _NEEDED if name not in places]
        faults += _units_at_odds(units)
        found = Units(units.get(TIME, ""), units.get(MEASUREMENT, ""), units.get(EFFORT, ""))
        return cls(places, tuple(texts), found, len(faults) == before)


def _name(place: int, text: str, known: dict[str, int], faults: Faults) -> str | None:
    match = _HEADING.fullmatch(text)
    name = match[1].casefold() if match else ""
    where = f"line 1, column {place + 1}"
    if name not in COLUMNS:
        faults.append(Fault(where, f"one of {', '.join(COLUMNS)}", words.quoted(text.strip()), nearest(name, COLUMNS)))
    elif name in known:
        faults.append(Fault(where, "each column once", f"{name} again, which column {known[name] + 1} has"))
    else:
        return name
    return None


def _unit(text: str) -> str:
    match = _HEADING.fullmatch(text)
    unit = (match[2] or "").strip() if match else ""
    return "" if unit == "1" else unit


def _units_at_odds(units: dict[str, str]) -> Iterator[Fault]:
    """Tell of columns whose unit is not that of the signal they belong to."""
    for name, like in ((REFERENCE, MEASUREMENT), (DISTURBANCE, EFFORT)):
        if name in units and like in units and units[name] != units[like]:
            expected = f"the unit of the {like}, [{units[like] or '1'}], for the {name}"
            yield Fault("line 1", expected, f"[{units[name] or '1'}]")


class _Table:
    """The numbers of a record as they are read."""

    def __init__(self, header: _Header) -> None:
        self._header = header
        self.columns: dict[str, list[float]] = {name: [] for name in NUMBERS if name in header.places}
        self._manual: list[bool] = []
        self._events: list[str] = []
        self._last = -np.inf

    @property
    def full(self) -> bool:
        """Whether it takes no more."""
        return len(self._manual) >= MOST_SAMPLES

    def take(self, row: list[str], line: int, faults: Faults) -> None:
        """Take in one line; an empty one is passed over."""
        if not any(row):
            return
        if len(row) != len(self._header.texts):
            faults.append(Fault(f"line {line}", _values(len(self._header.texts)), f"{len(row)}"))
            return
        for name, values in self.columns.items():
            values.append(self._number(name, row, line, faults))
        self._check_time(line, faults)
        self._manual.append(self._is_manual(row, line, faults))
        event = self._header.places.get(EVENT)
        self._events.append("" if event is None else row[event])

    def _number(self, name: str, row: list[str], line: int, faults: Faults) -> float:
        text = row[self._header.places[name]]
        try:
            value = float(text)
        except ValueError:
            value = np.nan
        if not isfinite(value):
            faults.append(Fault(self._where(name, line), "a finite number", _found(text)))
        return value

    def _check_time(self, line: int, faults: Faults) -> None:
        time = self.columns[TIME][-1]
        if isfinite(time) and time <= self._last:
            expected = f"a time after {words.number(self._last)}"
            faults.append(Fault(self._where(TIME, line), expected, words.number(time)))
        self._last = max(self._last, time) if isfinite(time) else self._last

    def _is_manual(self, row: list[str], line: int, faults: Faults) -> bool:
        place = self._header.places.get(MODE)
        word = AUTOMATIC if place is None else row[place].strip().casefold()
        if word not in {MANUAL, AUTOMATIC}:
            near = nearest(word, (MANUAL, AUTOMATIC))
            faults.append(Fault(self._where(MODE, line), f"{MANUAL} or {AUTOMATIC}", _found(row[place or 0]), near))
        return word == MANUAL

    def _where(self, name: str, line: int) -> str:
        return f"line {line}, column {self._header.places[name] + 1} ({name})"

    def record(self) -> Record:
        """Return what was read."""
        arrays = {name: np.array(values, dtype=np.float64) for name, values in self.columns.items()}
        return Record(
            self._header.units,
            arrays[TIME],
            arrays[MEASUREMENT],
            arrays[EFFORT],
            arrays.get(REFERENCE),
            arrays.get(DISTURBANCE),
            np.array(self._manual, dtype=np.bool_),
            tuple(self._events),
        )


def _values(count: int) -> str:
    return f"{count} values, one for each column of the first line"


def _found(text: str) -> str:
    return words.quoted(text.strip()) if text.strip() else "nothing"


def written(record: Record) -> Rows:
    """Return a record as rows to be written; a column that it does not have is written as 0."""
    nothing = np.zeros(len(record))
    return Rows(
        record.time,
        nothing if record.reference is None else record.reference,
        record.measurement,
        record.effort,
        nothing if record.disturbance is None else record.disturbance,
        record.manual,
        {place: event for place, event in enumerate(record.events) if event},
    )


def write(path: Path, record: Record) -> None:
    """Write a whole record.

    Raises
    ------
    SheetError
        When the file cannot be written.
    """
    with RecordWriter(path, record.units) as writer:
        writer.add(written(record))
