"""What the operating system must bring: named by Debian's packages, looked for by what they contain."""

import importlib.util
import os
import shutil
import sys
from pathlib import Path
from typing import NamedTuple


class Need(NamedTuple):
    """A Debian package and the one thing in it that shows whether it is there."""

    package: str
    kind: str
    name: str


VENV = (Need("python3-venv", "module", "ensurepip"),)
WINDOW = (
    Need("libglib2.0-0", "library", "libglib-2.0.so.0"),
    Need("libgl1", "library", "libGL.so.1"),
    Need("libegl1", "library", "libEGL.so.1"),
    Need("libxkbcommon0", "library", "libxkbcommon.so.0"),
    Need("libdbus-1-3", "library", "libdbus-1.so.3"),
    Need("libfontconfig1", "library", "libfontconfig.so.1"),  # brings a font as well
    Need("libxcb-cursor0", "library", "libxcb-cursor.so.0"),
    Need("libxcb-icccm4", "library", "libxcb-icccm.so.4"),
    Need("libxcb-keysyms1", "library", "libxcb-keysyms.so.1"),
    Need("libxcb-shape0", "library", "libxcb-shape.so.0"),
    Need("libxkbcommon-x11-0", "library", "libxkbcommon-x11.so.0"),
)
TESTS = (
    Need("xvfb", "command", "Xvfb"),
    Need("xauth", "command", "xauth"),
    Need("xdotool", "command", "xdotool"),
    Need("openbox", "command", "openbox"),
    Need("imagemagick", "command", "import"),
    Need("x11-utils", "command", "xwininfo"),
    Need("gcc", "command", "gcc"),
    Need("g++", "command", "g++"),
    Need("libc6-dev", "file", "/usr/include/stdio.h"),
)


def missing(needs: tuple[Need, ...]) -> list[Need]:
    """Return the needs that this machine does not meet; other systems than Linux bring theirs with the packages."""
    return [need for need in needs if sys.platform == "linux" and not _is_met(need)]


def package_names(needs: list[Need]) -> list[str]:
    """Return the packages to install, under the names of this release of Debian or Ubuntu."""
    return [_renamed(need.package) for need in needs]


def install_line(needs: list[Need]) -> str:
    """Return the command that a person types to install the packages."""
    return f"sudo apt-get install --no-install-recommends {' '.join(package_names(needs))}"


def has_apt() -> bool:
    """Tell whether this system installs packages with apt."""
    return shutil.which("apt-get") is not None


def is_root() -> bool:
    """Tell whether this process may install packages."""
    return os.name == "posix" and os.geteuid() == 0


def wants_window(arguments: list[str]) -> bool:
    """Tell whether these arguments of the program open a window: none or a sheet, and a display to open it on."""
    is_command = bool(arguments) and not arguments[0].endswith(".toml") and not Path(arguments[0]).exists()
    return not is_command and _has_display()


def _has_display() -> bool:
    names = ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM")
    return sys.platform != "linux" or any(os.environ.get(name) for name in names)


def _is_met(need: Need) -> bool:
    if need.kind == "module":
        return importlib.util.find_spec(need.name) is not None
    if need.kind == "command":
        return shutil.which(need.name) is not None
    return _loads(need.name) if need.kind == "library" else Path(need.name).exists()


def _loads(library: str) -> bool:
    import ctypes

    try:
        ctypes.CDLL(library)
    except OSError:
        return False
    return True


def _renamed(package: str) -> str:
    """Return the name since the change to 64-bit times, where the release has made it."""
    return f"{package}t64" if package == "libglib2.0-0" and _has_64_bit_names() else package


def _has_64_bit_names() -> bool:
    import platform

    try:
        release = platform.freedesktop_os_release()
    except OSError:
        return False
    first = {"debian": 13, "ubuntu": 24}.get(release.get("ID", ""))
    number = release.get("VERSION_ID", "").split(".")[0]
    return first is not None and number.isdigit() and int(number) >= first
