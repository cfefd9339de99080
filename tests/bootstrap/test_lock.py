"""The lock between two runs."""

import subprocess
import sys
from pathlib import Path

import pytest

from tuner.bootstrap.lock import locked

HOLDER = """
import sys, time
from pathlib import Path
from tuner.bootstrap.lock import locked
with locked(Path(sys.argv[1]), lambda: None):
    print("held", flush=True)
    sys.stdin.read()
"""
ROOT = Path(__file__).parents[2]


def test_a_free_lock_is_taken_without_waiting(tmp_path: Path) -> None:
    """Taken and dropped any number of times, its folder is made, and a file left over is no lock."""
    for _ in range(2):
        with locked(tmp_path / "new" / "lock", lambda: pytest.fail("nobody holds it")):
            pass
    assert (tmp_path / "new" / "lock").exists()


def test_a_held_lock_is_waited_for_until_its_holder_is_gone(tmp_path: Path) -> None:
    """Waiting is said once; a holder that is killed leaves no lock behind."""
    lock = tmp_path / "lock"
    pipe = subprocess.PIPE
    with subprocess.Popen([sys.executable, "-c", HOLDER, str(lock)], cwd=ROOT, stdin=pipe, stdout=pipe) as holder:
        assert holder.stdout is not None
        assert holder.stdout.readline() == b"held\n"
        waited = []

        def end_holder() -> None:
            waited.append(True)
            holder.kill()

        with locked(lock, end_holder):
            assert waited == [True]
