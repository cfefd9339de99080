"""A fresh machine in a folder: a bare checkout, and an apt, a venv and a pip that only write down how they are called.

The programs run for real, in processes of their own; what they find on the machine is changed from the outside, by a
`sitecustomize` module and a search path that hold nothing else.
"""

import json
import os
import shutil
import signal
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
BASE_PYTHON = str(getattr(sys, "_base_executable", sys.executable))
EVERYTHING = "ensurepip,libGL.so.1,libEGL.so.1,/usr/include/stdio.h"

SITECUSTOMIZE = """
import ctypes, importlib.util, os, pathlib, signal, sys

# Where the tests run in the background Ctrl-C is ignored, and whoever they start would ignore it too.
signal.signal(signal.SIGINT, signal.default_int_handler)

def lacks(name):
    installed = os.path.exists(os.path.join(os.environ["FAKE"], "installed"))
    return name in os.environ.get("FAKE_MISSING", "").split(",") and not installed

def load(name, *rest):
    if lacks(name):
        raise OSError(name)

def access(path, mode, real=os.access):
    return os.environ.get("FAKE_READ_ONLY") != str(path) and real(path, mode)

def find(name, *rest, real=importlib.util.find_spec):
    return None if lacks(name) else real(name, *rest)

def exists(path, real=pathlib.Path.exists):
    return not lacks(str(path)) and real(path)

ctypes.CDLL, os.access, importlib.util.find_spec, pathlib.Path.exists = load, access, find, exists
os.geteuid = lambda: int(os.environ.get("FAKE_USER", "0"))
if "FAKE_VERSION" in os.environ:
    sys.version_info = tuple(map(int, os.environ["FAKE_VERSION"].split(".")))
"""
VENV = """
import sys
from pathlib import Path
folder = Path(sys.argv[1])
(folder / "bin").mkdir()
(folder / "bin" / "python").symlink_to(sys.executable)
(folder / "pyvenv.cfg").write_text(f"home = {Path(sys.executable).parent}\\n")
"""
RECORD = """
import os, sys, time
with open(os.path.join(os.environ["FAKE"], "calls"), "a") as calls:
    calls.write("\\t".join(["NAME", *sys.argv[1:]]) + "\\n")
time.sleep(float(os.environ.get("FAKE_NAME_SECONDS", "0")))
print(os.environ.get("FAKE_NAME_SAYS", ""))
if os.environ.get("FAKE_NAME_STATUS"):
    sys.exit(int(os.environ["FAKE_NAME_STATUS"]))
"""
PROGRAM = """
import json, os, sys
def main(argv):
    with open(os.path.join(os.environ["FAKE"], "calls"), "a") as calls:
        calls.write("\\t".join(["program", *argv]) + "\\n")
    print(json.dumps({"argv": argv, "folder": os.getcwd(), "prefix": sys.prefix}))
    return 7
run = main
"""


@dataclass(frozen=True, slots=True)
class Outcome:
    """How a command ended and what it wrote."""

    status: int
    out: str
    err: str

    @property
    def ran(self) -> dict[str, object]:
        """What the program itself saw: its arguments, its working folder and its environment."""
        seen: dict[str, object] = json.loads(self.out)
        return seen


class FakeMachine:
    """A folder with a bare checkout whose path has spaces, and the tools around it."""

    def __init__(self, folder: Path) -> None:
        self.tools = folder / "tools"
        self.checkout = folder / "a bare checkout"
        self.elsewhere = folder / "elsewhere"
        self.cache = folder / "cache"
        self.elsewhere.mkdir()
        self._lay_tools()
        self._lay_checkout()

    @property
    def environment(self) -> Path:
        """The environment beside the checkout's files."""
        return self.checkout / ".venv"

    @property
    def calls(self) -> list[list[str]]:
        """The calls of apt, venv and pip so far: name and arguments."""
        record = self.tools / "calls"
        return [line.split("\t") for line in record.read_text().splitlines()] if record.exists() else []

    def called(self, name: str) -> list[list[str]]:
        """Return the arguments of the calls of one tool."""
        return [call[1:] for call in self.calls if call[0] == name]

    def start(self, *arguments: str, program: str = "tuner", **settings: str) -> "subprocess.Popen[str]":
        """Start `python3 tuner` in a process group of its own; the settings are variables of the fake tools."""
        pipe = subprocess.PIPE
        return subprocess.Popen(
            [BASE_PYTHON, str(self.checkout / program), *arguments],
            cwd=self.elsewhere,
            env=self._variables(settings),
            stdin=subprocess.DEVNULL,
            stdout=pipe,
            stderr=pipe,
            text=True,
            start_new_session=True,
        )

    def run(self, *arguments: str, program: str = "tuner", **settings: str) -> Outcome:
        """Run `python3 tuner` to its end."""
        with self.start(*arguments, program=program, **settings) as process:
            try:
                out, err = process.communicate(timeout=60)
            except subprocess.TimeoutExpired:
                os.killpg(process.pid, signal.SIGKILL)
                raise
        return Outcome(process.returncode, out, err)

    def _variables(self, settings: dict[str, str]) -> dict[str, str]:
        fixed = {
            "PATH": str(self.tools / "bin"),
            "PYTHONPATH": str(self.tools),
            "PYTHONDONTWRITEBYTECODE": "1",
            "HOME": str(self.elsewhere),
            "XDG_CACHE_HOME": str(self.cache),
            "FAKE": str(self.tools),
        }
        return {**fixed, **settings}

    def _lay_tools(self) -> None:
        (self.tools / "bin").mkdir(parents=True)
        (self.tools / "sitecustomize.py").write_text(SITECUSTOMIZE)
        for name, work in (("venv", VENV), ("pip", ""), ("apt", "")):
            (self.tools / name).mkdir()
            (self.tools / name / "__init__.py").touch()
            text = RECORD.replace("FAKE_NAME", f"FAKE_{name.upper()}").replace("NAME", name) + work
            (self.tools / name / "__main__.py").write_text(text)
        self.add_command(
            "apt-get",
            f'"{BASE_PYTHON}" -m apt "$@" || exit $?\ncase "$*" in *" install "*) : > "$FAKE/installed";; esac',
        )

    def add_command(self, name: str, script: str = "") -> None:
        """Put a command on the search path."""
        command = self.tools / "bin" / name
        command.write_text(f"#!/bin/sh\n{script}\n")
        command.chmod(0o755)

    def _lay_checkout(self) -> None:
        skipped = shutil.ignore_patterns("__pycache__")
        shutil.copytree(ROOT / "tuner" / "bootstrap", self.checkout / "tuner" / "bootstrap", ignore=skipped)
        for name in ("pyproject.toml", "tuner/__init__.py", "tuner/__main__.py", "tests/__main__.py"):
            (self.checkout / name).parent.mkdir(exist_ok=True)
            shutil.copy(ROOT / name, self.checkout / name)
        for program in ("tuner/cli/main.py", "tests/runner.py"):
            (self.checkout / program).parent.mkdir(exist_ok=True)
            (self.checkout / program).write_text(PROGRAM)
