"""Run every check: `python3 tests`, some tests: `python3 tests PATH...`, the speeds: `python3 tests bench [--json]`."""

import sys
from pathlib import Path

TESTS = Path(__file__).resolve().parent
OLDEST_PYTHON = (3, 11)


def main() -> int:
    """Find or make the environment with the tools of the tests, then run what is asked for in it."""
    if sys.version_info[:2] < OLDEST_PYTHON:
        found = ".".join(map(str, sys.version_info[:3]))
        sys.stderr.write(f"The tests need Python 3.11 or newer; {sys.executable} is Python {found}.\n")
        return 2
    if not __package__:
        # Run as a folder, Python looks for modules inside it, where `files` or `session` would hide others' modules.
        sys.path[0] = str(TESTS.parent)
    from tuner.bootstrap import enter

    enter(TESTS / "__main__.py", sys.argv[1:], testing=True)
    from tests.runner import run

    return run(sys.argv[1:])


if __name__ == "__main__":
    sys.exit(main())
