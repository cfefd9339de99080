"""Files of the program's own making, written whole or not at all."""

import os
import tempfile
from pathlib import Path


def write_whole(path: Path, text: str) -> bool:
    """Write a file so that it holds the old text or the new one, never a part; tell whether that worked.

    What is written this way can be made again or done without, so a full disk or a read-only home stops nobody.
    """
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        descriptor, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}-")
    except OSError:
        return False
    try:
        with os.fdopen(descriptor, "w", encoding="utf-8") as file:
            file.write(text)
        Path(name).replace(path)
    except OSError:
        Path(name).unlink(missing_ok=True)
        return False
    return True
