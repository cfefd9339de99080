"""A display of its own for the tests that need one: Xvfb with a window manager, ended with the tests."""

import os
import shutil
import subprocess
import time
from collections.abc import Iterator
from contextlib import contextmanager

SCREEN = "1920x1200x24"
TOOLS = ("Xvfb", "openbox", "xprop", "xdotool", "import")
PATIENCE = 20.0  # seconds for the window manager to come up


class NoDisplayError(Exception):
    """There is no display to be had; the text says why."""


@contextmanager
def virtual_display() -> Iterator[dict[str, str]]:
    """Start a display and yield the environment of programs to be shown on it."""
    lacking = [tool for tool in TOOLS if shutil.which(tool) is None]
    if lacking:
        raise NoDisplayError(f"A real window needs {', '.join(lacking)}, which this machine lacks.")
    server, name = _start_server()
    environment = {**os.environ, "DISPLAY": name, "QT_QPA_PLATFORM": "xcb", "XDG_SESSION_TYPE": "x11"}
    environment.pop("WAYLAND_DISPLAY", None)
    manager = _start("openbox", "--sm-disable", environment=environment)
    try:
        _wait_for_manager(environment)
        yield environment
    finally:
        _stop(manager)
        _stop(server)


def _start_server() -> tuple["subprocess.Popen[bytes]", str]:
    """Start Xvfb on a free display, which it chooses itself and writes to a pipe once it can be used."""
    reading, writing = os.pipe()
    number = ("-displayfd", str(writing), "-screen", "0", SCREEN, "-nolisten", "tcp")
    server = _start("Xvfb", *number, descriptors=(writing,))
    os.close(writing)
    with os.fdopen(reading) as pipe:
        name = pipe.readline().strip()
    if not name:
        raise NoDisplayError(f"Xvfb ended with status {server.wait()} before it had a display.")
    return server, f":{name}"


def _wait_for_manager(environment: dict[str, str]) -> None:
    """Wait until the window manager has said on the root window that it is there."""
    deadline = time.monotonic() + PATIENCE
    command = ["xprop", "-root", "_NET_SUPPORTING_WM_CHECK"]
    while time.monotonic() < deadline:
        if b"window id" in subprocess.run(command, env=environment, capture_output=True, check=False).stdout:
            return
        time.sleep(0.05)
    raise NoDisplayError("The window manager openbox did not come up.")


def _start(
    *command: str, environment: dict[str, str] | None = None, descriptors: tuple[int, ...] = ()
) -> "subprocess.Popen[bytes]":
    silent = subprocess.DEVNULL
    return subprocess.Popen(command, env=environment, pass_fds=descriptors, stdout=silent, stderr=silent)


def _stop(process: "subprocess.Popen[bytes]") -> None:
    process.terminate()
    try:
        process.wait(10)
    except subprocess.TimeoutExpired:
        process.kill()
        process.wait()
