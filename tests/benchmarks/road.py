"""The road from a sheet to its assessment."""

from tests.benchmarks.row import Row, timed
from tuner.assess import assess
from tuner.files.sheet import read
from tuner.places import sample_plants

SAMPLE = "heater.toml"


def rows() -> list[Row]:
    """Assess a sampled loop with dead time, limits and lags: a family of 25, beside its nominal plant alone."""
    sheet = read(sample_plants() / SAMPLE)
    family = timed(lambda: assess(sheet, 25), 150, 10)
    nominal = timed(lambda: assess(sheet, 1), 300, 10)
    return [
        Row(
            "assess_ms",
            f"assess {SAMPLE} with a family of 25 that was seen before",
            "ms",
            "<= 10, nominal <= 2",
            family.median,
            family.p99,
            nominal.median,
            family.median / nominal.median,
            "the same with the nominal plant alone",
            f"Nominal: median {nominal.median:.2f} ms, p99 {nominal.p99:.2f} ms.",
        )
    ]
