"""`judge` on whole sheets: output, faults and exit status."""

import io
import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

from tests.cli.written import BAD, MET, MISSED, UNSTABLE, put
from tuner.cli.main import main
from tuner.places import sample_plants

Captured = pytest.CaptureFixture[str]


def test_a_met_sheet(tmp_path: Path, capsys: Captured) -> None:
    """Verdict and table for a person, status 0."""
    (path,) = put(tmp_path, met=MET)

    assert main(["judge", path]) == 0

    told = capsys.readouterr()
    assert told.err == ""
    lines = told.out.splitlines()
    assert lines[0] == f"Bath  ({path})"
    assert lines[1] == "Met: 1 of 1 limit, judged over the nominal plant alone."
    assert lines[2] == "                value     limit          worst plant"
    assert lines[3].startswith("settling time   ")
    assert lines[3].endswith(" s   at most 30 s   nominal       met")


@pytest.mark.parametrize(
    ("sheets", "status"),
    [
        ({"a": MET}, 0),
        ({"a": MISSED}, 1),
        ({"a": UNSTABLE}, 1),
        ({"a": BAD}, 2),
        ({"a": MET, "b": MISSED}, 1),
        ({"a": BAD, "b": MISSED}, 2),
        ({"a": MET, "b": BAD}, 2),
    ],
)
def test_exit_status(sheets: dict[str, str], status: int, tmp_path: Path) -> None:
    """0 met, 1 missed or unstable, 2 unusable; of several sheets the largest."""
    assert main(["judge", "--json", *put(tmp_path, **sheets)]) == status


def test_one_json_object_a_line_and_a_bad_sheet_does_not_stop_the_rest(tmp_path: Path, capsys: Captured) -> None:
    """Faults go to stderr, each with file and key; the other sheets are judged all the same."""
    first, bad, last = put(tmp_path, a=MET, b=BAD, c=UNSTABLE)

    assert main(["judge", first, bad, last, "--json"]) == 2

    told = capsys.readouterr()
    found = [json.loads(line) for line in told.out.splitlines()]
    assert [(one["title"], one["verdict"]) for one in found] == [("Bath", "met"), ("Wild bath", "unstable")]
    assert told.err.splitlines() == [
        f"{bad}: controller.kq: expected a key of [controller], found an unknown one; the nearest valid name is kp",
        f"{bad}: trial.duration: expected a number above 0, found -40",
    ]


def test_a_folder_means_its_sheets(tmp_path: Path, capsys: Captured) -> None:
    """In the order of their names."""
    put(tmp_path, b=MET, a=MISSED)

    assert main(["judge", str(tmp_path), "--json"]) == 1
    assert [json.loads(line)["title"] for line in capsys.readouterr().out.splitlines()] == ["Slow bath", "Bath"]


def test_traces_come_when_asked_for(tmp_path: Path, capsys: Captured) -> None:
    """The runs of the nominal plant, sample instants included."""
    (path,) = put(tmp_path, a=MET)
    main(["judge", path, "--json", "--traces"])

    run = json.loads(capsys.readouterr().out)["traces"]["reference"]

    assert {k * 0.5 for k in range(81)} <= set(run["t"])
    assert run["r"] == [5.0] * len(run["t"])


def test_the_size_of_the_family(capsys: Captured) -> None:
    """`--family` takes the place of 25."""
    main(["judge", str(sample_plants() / "tank_level.toml"), "--json", "--family", "4"])

    assert json.loads(capsys.readouterr().out)["family_size"] == 4


def typed(data: bytes) -> io.TextIOWrapper:
    """Return a standard input that holds these bytes, of a terminal that knows only ASCII."""
    return io.TextIOWrapper(io.BytesIO(data), "ascii")


def test_a_sheet_on_standard_input(monkeypatch: pytest.MonkeyPatch, capsys: Captured) -> None:
    """A dash reads the sheet from standard input, and faults say so."""
    monkeypatch.setattr(sys, "stdin", typed(MET.encode()))
    assert main(["judge", "-", "--json"]) == 0
    monkeypatch.setattr(sys, "stdin", typed(b""))
    assert main(["judge", "-", "--json"]) == 2
    assert capsys.readouterr().err == "standard input: expected a tuning sheet, found an empty file\n"


def test_standard_input_is_utf_8(monkeypatch: pytest.MonkeyPatch, capsys: Captured) -> None:
    """Whatever the terminal's encoding, a sheet is read as UTF-8; what is none is told."""
    monkeypatch.setattr(sys, "stdin", typed(MET.replace("Bath", "Bäckerei").encode()))
    assert main(["judge", "-", "--json"]) == 0
    assert json.loads(capsys.readouterr().out)["title"] == "Bäckerei"
    monkeypatch.setattr(sys, "stdin", typed(b"sheet = 1 # \xff"))
    assert main(["judge", "-"]) == 2
    assert capsys.readouterr().err == "standard input: expected text in UTF-8, found byte 13, which is none\n"


@pytest.mark.parametrize(
    ("name", "said"),
    [
        ("none.toml", "expected a file that can be read, found no such file"),
        ("a" * 300 + ".toml", "expected a file that can be read, found file name too long"),
        ("", "expected a folder with tuning sheets (*.toml), found none in it"),
    ],
)
def test_what_is_not_there(name: str, said: str, tmp_path: Path, capsys: Captured) -> None:
    """A missing file, a name that cannot be one and an empty folder are one sentence each."""
    path = str(tmp_path / name) if name else str(tmp_path)

    assert main(["judge", path]) == 2
    assert capsys.readouterr().err == f"{path}: {said}\n"


def test_a_loop_that_cannot_be_computed(tmp_path: Path, capsys: Captured) -> None:
    """A trial of too many samples is refused in one sentence that begins with the file."""
    (path,) = put(tmp_path, a=MET.replace("duration = 40", "duration = 1e9"))

    assert main(["judge", path]) == 2

    said = capsys.readouterr().err
    assert said.startswith(f"{path}: ")
    assert len(said.splitlines()) == 1


def run(*words: str) -> subprocess.CompletedProcess[str]:
    """Run the program as its own process."""
    program = "import sys; from tuner.cli.main import console; console()"
    return subprocess.run([sys.executable, "-c", program, *words], capture_output=True, text=True, check=False)


def test_judging_loads_no_window_and_no_plotting() -> None:
    """Neither Qt nor pyqtgraph, matplotlib, scipy.signal or control come with a verdict."""
    heavy = ("PySide6", "pyqtgraph", "matplotlib", "scipy.signal", "control")
    program = (
        "import sys; from tuner.cli.main import main\n"
        f"status = main(['judge', {str(sample_plants() / 'tank_level.toml')!r}])\n"
        f"sys.stderr.write(repr([name for name in {heavy!r} if name in sys.modules]))\n"
    )

    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=False)

    assert done.stderr == "[]"


def test_no_colour_where_no_terminal_is(tmp_path: Path) -> None:
    """The output of a pipe holds no escape codes."""
    done = run("judge", *put(tmp_path, a=MISSED, b=UNSTABLE))

    assert done.returncode == 1
    assert "\x1b" not in done.stdout + done.stderr
    assert "Unstable: grows e-fold every" in done.stdout


def test_a_name_that_the_encoding_lacks(tmp_path: Path) -> None:
    """A terminal that knows only ASCII gets the letter escaped; JSON is ASCII in any case."""
    (path,) = put(tmp_path, a=MET.replace("Bath", "Bäckerei Ω").replace("degC", "°C"))
    program = "import sys; from tuner.cli.main import console; console()"
    environment = os.environ | {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}

    plain, machine = (
        subprocess.run(
            [sys.executable, "-c", program, "judge", path, *more],
            env=environment,
            capture_output=True,
            text=True,
            check=False,
        )
        for more in ((), ("--json",))
    )

    assert (plain.returncode, plain.stderr) == (0, "")
    assert plain.stdout.startswith("B\\xe4ckerei \\u03a9  (")
    assert json.loads(machine.stdout)["title"] == "Bäckerei Ω"


def test_a_reader_that_stops_reading_is_no_fault(tmp_path: Path) -> None:
    """When the pipe closes, the program ends without a word."""
    reading, writing = os.pipe()
    os.close(reading)
    program = "import sys; from tuner.cli.main import console; console()"
    with os.fdopen(writing, "wb") as closed:
        done = subprocess.run(
            [sys.executable, "-c", program, "judge", *put(tmp_path, a=MET), "--json"],
            stdout=closed,
            stderr=subprocess.PIPE,
            text=True,
            check=False,
        )

    assert (done.returncode, done.stderr) == (141, "")
