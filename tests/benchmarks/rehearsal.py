"""What a long rehearsal costs in memory."""

from tests.benchmarks.row import Row


def rows() -> list[Row]:
    """Return the row of the rehearsal, which the program does not have yet."""
    return [
        Row(
            "rehearsal_growth_mb",
            "growth of memory over a rehearsal of 8 hours, accelerated",
            "MB",
            "<= 10",
            note="Not measured: there is no rehearsal yet.",
        )
    ]
