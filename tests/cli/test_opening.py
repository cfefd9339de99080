"""`open`: with a display the window, without one the main job."""

from pathlib import Path

import pytest

from tests.cli.written import BAD, MISSED, put
from tuner.cli.main import main
from tuner.cli.opening import free_folder, has_display

Captured = pytest.CaptureFixture[str]


@pytest.fixture
def headless(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> Path:
    """Take the display away and work in an empty folder."""
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    monkeypatch.chdir(tmp_path)
    return tmp_path


def test_a_display_is_known_by_its_variable(headless: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """One of the three says that a window can be shown."""
    assert headless.is_dir()
    assert not has_display()
    monkeypatch.setenv("WAYLAND_DISPLAY", "wayland-0")
    assert has_display()


def test_the_main_job_without_a_display(headless: Path, capsys: Captured) -> None:
    """The built-in loop is judged and delivered into a new folder, and both are said."""
    assert main([]) == 0

    told = capsys.readouterr()
    folder = headless / "trimwright-delivery-heater"
    assert "Met: " in told.out
    assert "There is no display here, so no window opens. The built-in loop was judged;" in told.out
    assert f"Delivered to {folder}:\n" in told.out
    assert (folder / "controller.c").is_file()
    assert told.err == ""


def test_an_earlier_delivery_is_left_alone(tmp_path: Path) -> None:
    """The next free name is taken."""
    (tmp_path / "trimwright-delivery-heater").mkdir()
    (tmp_path / "trimwright-delivery-heater-2").mkdir()

    assert free_folder(tmp_path) == tmp_path / "trimwright-delivery-heater-3"


def test_a_folder_that_cannot_be_written_to_is_passed_over(tmp_path: Path) -> None:
    """A place that does not exist is no place to deliver to."""
    assert free_folder(tmp_path / "none") is None


def test_a_sheet_of_ones_own_is_judged_and_not_delivered(headless: Path, capsys: Captured) -> None:
    """Nothing is written that was not asked for; the command that would do it is shown."""
    (path,) = put(headless, a=MISSED)

    assert main([path]) == 1
    assert capsys.readouterr().out.endswith(f"To hand the controller over: trimwright deliver {path} --to FOLDER\n")
    assert [one.name for one in headless.iterdir()] == ["a.toml"]


def test_a_bad_sheet_without_a_display(headless: Path, capsys: Captured) -> None:
    """Faults are told as everywhere."""
    (path,) = put(headless, a=BAD)

    assert main(["open", path]) == 2
    assert len(capsys.readouterr().err.splitlines()) == 2
