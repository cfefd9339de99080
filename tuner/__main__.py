"""Run Trimwright: `python3 tuner` from a bare checkout, `python -m tuner` where it is installed."""

import sys
from pathlib import Path

PROGRAM = Path(__file__).resolve().parent
OLDEST_PYTHON = (3, 11)


def main() -> int:
    """Find or make the environment, then hand the arguments to the command line."""
    if sys.version_info[:2] < OLDEST_PYTHON:
        found = ".".join(map(str, sys.version_info[:3]))
        sys.stderr.write(f"Trimwright needs Python 3.11 or newer; {sys.executable} is Python {found}.\n")
        return 2
    if not __package__:
        # Run as a folder, Python looks for modules inside it, where `files` or `session` would hide others' modules.
        sys.path[0] = str(PROGRAM.parent)
    from tuner.bootstrap import enter

    enter(PROGRAM / "__main__.py", sys.argv[1:])
    from tuner.cli.main import main as command_line

    return command_line(sys.argv[1:])


if __name__ == "__main__":
    sys.exit(main())
