"""The pair of Python and PySide6 in use keeps its references to None."""

import subprocess
import sys

CALLS = 1000
PROGRAM = f"""
import sys
from PySide6.QtGui import QImage, QPainter
image = QImage(8, 8, QImage.Format.Format_RGB32)
painter = QPainter(image)
before = sys.getrefcount(None)
for _ in range({CALLS}):
    painter.save()
    painter.restore()
print(before - sys.getrefcount(None))
painter.end()
"""


def test_calls_that_return_nothing_lose_no_reference() -> None:
    """A pair that loses one to None at each such call aborts after some thousand of them, before Python 3.12."""
    run = subprocess.run([sys.executable, "-c", PROGRAM], capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
    assert int(run.stdout) < CALLS / 10, "Install the PySide6 that pyproject.toml pins for this Python."
