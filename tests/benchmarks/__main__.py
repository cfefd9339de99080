"""Measure the speeds that the program aims at: `python3 tests bench [--json] [NAME...]`."""

import argparse
import sys
from collections.abc import Callable, Sequence

from tests.benchmarks import changes, growth, kernels, processes, rehearsal, road, windows
from tests.benchmarks.report import LONG, NAMES, as_json, as_text
from tests.benchmarks.row import Row

GROUPS: tuple[tuple[tuple[str, ...], Callable[[], Sequence[Row]]], ...] = (
    (NAMES[0:3], kernels.rows),
    (NAMES[3:6], windows.rows),
    (NAMES[6:7], road.rows),
    (NAMES[7:9], processes.rows),
    (NAMES[9:10], rehearsal.rows),
    (LONG[:1], changes.rows),
    (LONG[1:], growth.rows),
)


def main() -> int:
    """Measure what is asked for, all by default, and print it; progress goes to the error output."""
    parser = argparse.ArgumentParser(prog="python3 tests bench", description=__doc__)
    parser.add_argument("--json", action="store_true", help="print one JSON object instead of a table")
    parser.add_argument(
        "names",
        nargs="*",
        metavar="NAME",
        help=f"rows to print: {', '.join(NAMES)}; and, only when asked for, {', '.join(LONG)}",
    )
    asked = parser.parse_args()
    wanted = set(asked.names or NAMES)
    if unknown := sorted(wanted - {*NAMES, *LONG}):
        parser.error(f"no row is called {', '.join(unknown)}; there are {', '.join((*NAMES, *LONG))}")
    rows = [row for names, measure in GROUPS if wanted & set(names) for row in _measured(names, measure)]
    rows = [row for row in rows if row.name in wanted]
    sys.stdout.write(as_json(rows) + "\n" if asked.json else as_text(rows))
    return 0


def _measured(names: tuple[str, ...], measure: Callable[[], Sequence[Row]]) -> Sequence[Row]:
    sys.stderr.write(f"measuring {', '.join(names)} ...\n")
    sys.stderr.flush()
    return measure()


if __name__ == "__main__":
    sys.exit(main())
