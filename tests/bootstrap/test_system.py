"""What the operating system must bring, and how its packages are called."""

import platform
import sys
from pathlib import Path

import pytest

from tuner.bootstrap import system
from tuner.bootstrap.system import Need

LINUX = pytest.mark.skipif(sys.platform != "linux", reason="elsewhere nothing is looked for")


@LINUX
@pytest.mark.parametrize(
    ("kind", "there", "absent"),
    [
        ("module", "json", "no_such_module"),
        ("library", "libc.so.6", "libnosuch.so.1"),
        ("command", "sh", "no-such-command"),
        ("file", __file__, f"{__file__}.no"),
    ],
)
def test_each_kind_of_need_is_looked_for(kind: str, there: str, absent: str) -> None:
    """A module, a shared library, a command and a file are found where they are and missed where they are not."""
    needs = (Need("a", kind, there), Need("b", kind, absent))
    assert [need.package for need in system.missing(needs)] == ["b"]


def test_elsewhere_than_on_linux_nothing_is_missing(monkeypatch: pytest.MonkeyPatch) -> None:
    """On other systems the Python packages bring all they need."""
    monkeypatch.setattr(sys, "platform", "darwin")
    assert system.missing(system.VENV + system.WINDOW + system.TESTS) == []


@pytest.mark.parametrize(
    ("release", "package"),
    [
        ({"ID": "debian", "VERSION_ID": "12"}, "libglib2.0-0"),
        ({"ID": "debian", "VERSION_ID": "13"}, "libglib2.0-0t64"),
        ({"ID": "ubuntu", "VERSION_ID": "22.04"}, "libglib2.0-0"),
        ({"ID": "ubuntu", "VERSION_ID": "24.04"}, "libglib2.0-0t64"),
        ({"ID": "debian"}, "libglib2.0-0"),
        ({"ID": "another", "VERSION_ID": "40"}, "libglib2.0-0"),
    ],
)
def test_a_package_has_the_name_of_its_release(
    release: dict[str, str], package: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The library whose package was renamed with the change to 64-bit times is asked for under its name there."""
    monkeypatch.setattr(platform, "freedesktop_os_release", lambda: release)
    assert system.package_names([system.WINDOW[0], system.WINDOW[1]]) == [package, "libgl1"]
    assert system.install_line([system.WINDOW[1]]) == "sudo apt-get install --no-install-recommends libgl1"


def test_a_system_that_does_not_say_its_release_keeps_the_old_name(monkeypatch: pytest.MonkeyPatch) -> None:
    """Without a release file the name that both releases understand is used."""

    def no_file() -> dict[str, str]:
        raise FileNotFoundError

    monkeypatch.setattr(platform, "freedesktop_os_release", no_file)
    assert system.package_names([system.WINDOW[0]]) == ["libglib2.0-0"]


@LINUX
@pytest.mark.parametrize(
    ("arguments", "display", "wanted"),
    [
        ([], True, True),
        ([], False, False),
        (["a.toml"], True, True),
        (["a.toml"], False, False),
        (["judge", "a.toml"], True, False),
        (["--help"], True, False),
    ],
)
def test_a_window_is_wanted_for_a_sheet_on_a_display(
    arguments: list[str], display: bool, wanted: bool, monkeypatch: pytest.MonkeyPatch
) -> None:
    """No arguments or a sheet open a window if there is a display; a command never does."""
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    if display:
        monkeypatch.setenv("DISPLAY", ":0")
    assert system.wants_window(arguments) is wanted


@LINUX
def test_a_file_of_any_name_is_a_sheet(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A path that exists is opened, whatever its ending."""
    monkeypatch.setenv("DISPLAY", ":0")
    (tmp_path / "sheet.txt").touch()
    assert system.wants_window([str(tmp_path / "sheet.txt")])
