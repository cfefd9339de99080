"""Everything that the delivered files say and compute, gathered once before any is written."""

import hashlib
import json
from dataclasses import asdict, dataclass

from tuner import __version__
from tuner.deliver.reference import Reference
from tuner.deliver.vectors import Row, rows
from tuner.judge.assessment import Assessment
from tuner.law.constants import Constants
from tuner.model.controller import Controller
from tuner.model.sheet import Sheet
from tuner.simulate.batch import law_constants

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
    rows: tuple[Row, ...]
    digest: str
    version: str
    date: str

    @property
    def feedforward_gain(self) -> float | None:
        """Effort for each unit of reference; None without static feedforward."""
        return static_gain(self.sheet.controller)

    def reference(self) -> Reference:
        """Return a fresh controller that the files must equal."""
        return Reference(self.constants, self.feedforward_gain, feedback=self.sheet.controller.feedback)


def specify(sheet: Sheet, assessment: Assessment, date: str) -> Specification:
    """Gather what a delivery of this sheet says."""
    made = constants(sheet)
    reference = Reference(made, static_gain(sheet.controller), feedback=sheet.controller.feedback)
    return Specification(
        sheet=sheet,
        assessment=assessment,
        constants=made,
        rows=rows(sheet, made, reference),
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


def static_gain(controller: Controller) -> float | None:
    """Return the gain of the static feedforward, None when there is none."""
    feedforward = controller.feedforward
    static = feedforward is not None and feedforward.kind == "static"
    return float(feedforward.gain or 0.0) if feedforward is not None and static else None


def digest(sheet: Sheet) -> str:
    """Return the SHA-256 of what a sheet says: its data as JSON with sorted keys, whatever its file looks like."""
    text = json.dumps(asdict(sheet), sort_keys=True, default=repr)
    return hashlib.sha256(text.encode()).hexdigest()
