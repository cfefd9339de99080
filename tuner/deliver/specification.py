"""Everything that the delivered files say and compute, gathered once before any is written."""

import hashlib
import json
from dataclasses import asdict, dataclass

from tuner import __version__
from tuner.deliver.reference import Reference
from tuner.deliver.vectors import Row, rows
from tuner.judge.assessment import Assessment
from tuner.law.constants import Constants
from tuner.model.sheet import Sheet
from tuner.simulate.batch import law_constants, nominal
from tuner.simulate.feeding import Feeds, feeds_of

CAUTIONS = (
    "This is no safety function: interlocks and trips stay in force.",
    "Local codes and licensed practice decide what may be loaded and run.",
    "Start with the loop watched and the hand on manual.",
)


@dataclass(frozen=True, slots=True, eq=False)
class Specification:
    """What is delivered.

    Parameters
    ----------
    sheet, assessment
        The tuning sheet and what was judged of it.
    constants : Constants
        What the law multiplies with.
    feeds : Feeds
        Its filters beside the law.
    rows : tuple of Row
        Samples with the answers that every file must give.
    digest : str
        SHA-256 of the sheet, see `digest`.
    version, date : str
        Of the program; of the delivery, '' when none was passed in.
    """

    sheet: Sheet
    assessment: Assessment
    constants: Constants
    feeds: Feeds
    rows: tuple[Row, ...]
    digest: str
    version: str
    date: str

    @property
    def resting_disturbance(self) -> float:
        """Value of the measured disturbance at the resting point."""
        return resting_disturbance(self.sheet)

    def reference(self) -> Reference:
        """Return a fresh controller that the files must equal."""
        return _reference(self.sheet, self.constants, self.feeds)


def specify(sheet: Sheet, assessment: Assessment, date: str) -> Specification:
    """Gather what a delivery of this sheet says."""
    made = constants(sheet)
    feeds = feeds_of(sheet, nominal(sheet), sheet.controller.sample_time)
    return Specification(
        sheet=sheet,
        assessment=assessment,
        constants=made,
        feeds=feeds,
        rows=rows(sheet, made, _reference(sheet, made, feeds)),
        digest=digest(sheet),
        version=__version__,
        date=date,
    )


def constants(sheet: Sheet) -> Constants:
    """Return the constants that the simulation gives to the law.

    Raises
    ------
    LoopError
        When the controller cannot run at its sample time.
    """
    controller = sheet.controller
    made = law_constants(sheet, controller.sample_time, controller.measurement_filter)
    return Constants(*(float(value) for value in made))


def resting_disturbance(sheet: Sheet) -> float:
    """Return the value of the measured disturbance at the resting point, 0 where there is none."""
    measured = sheet.controller.disturbance_feedforward
    return float(measured.resting) if measured else 0.0


def _reference(sheet: Sheet, made: Constants, feeds: Feeds) -> Reference:
    feedback = sheet.controller.feedback
    return Reference(made, feeds, resting_disturbance=resting_disturbance(sheet), feedback=feedback)


def digest(sheet: Sheet) -> str:
    """Return the SHA-256 of what a sheet says: its data as JSON with sorted keys, whatever its file looks like."""
    text = json.dumps(asdict(sheet), sort_keys=True, default=repr)
    return hashlib.sha256(text.encode()).hexdigest()
