"""The report of speeds: what a program and a person read in it."""

import json

from tests.benchmarks.__main__ import GROUPS
from tests.benchmarks.report import LONG, NAMES, as_json, as_text
from tests.benchmarks.row import Row, summed_up

MEASURED = Row("assess_ms", "assess", "ms", "<= 10", 9.0, 12.0, 3.0, 3.0, "one plant", "Quick.")
MISSING = Row("rehearsal_growth_mb", "growth", "MB", "<= 10", note="Not measured: no rehearsal.")


def test_the_names_are_those_of_the_groups_in_their_order() -> None:
    """Ten rows, each measured by one group, and those that are measured only when asked for."""
    assert [name for names, _ in GROUPS for name in names] == [*NAMES, *LONG]
    assert len(set(NAMES)) == 10


def test_json_holds_four_figures_a_row() -> None:
    """Exactly value, p99, yardstick and ratio; null where there is none."""
    assert json.loads(as_json([MEASURED, MISSING])) == {
        "assess_ms": {"value": 9.0, "p99": 12.0, "yardstick": 3.0, "ratio": 3.0},
        "rehearsal_growth_mb": {"value": None, "p99": None, "yardstick": None, "ratio": None},
    }


def test_the_table_says_what_is_missing_and_why() -> None:
    """A dash for each missing figure, and the reason below."""
    lines = as_text([MEASURED, MISSING]).splitlines()
    assert lines[0].split() == ["name", "figure", "p99", "yardstick", "ratio", "goal"]
    assert lines[1].split() == ["assess_ms", "9", "12", "3", "3", "<=", "10"]
    assert lines[2].split() == ["rehearsal_growth_mb", "-", "-", "-", "-", "<=", "10"]
    assert "assess_ms: assess, ms. Yardstick: one plant. Quick." in lines
    assert "rehearsal_growth_mb: growth, MB. Not measured: no rehearsal." in lines


def test_few_times_have_their_largest_as_percentile() -> None:
    """The median and the 99th percentile; of a hundred times the second largest stays out."""
    assert summed_up([3.0, 1.0, 2.0]).median == 2.0
    assert summed_up([3.0, 1.0, 2.0]).p99 == 3.0
    assert summed_up([float(i) for i in range(1000)]).p99 == 990.0
