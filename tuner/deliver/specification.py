"""Everything that the delivered files say and compute, gathered once before any is written."""

import hashlib
import json
from dataclasses import asdict, dataclass

from tuner import __version__
from tuner.deliver.reference import Reference
from tuner.deliver.vectors import Row, rows
from tuner.judge.assessment import Assessment
from tuner.law.constants import NO_NOTCH, Constants, bake, notch
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.sheet import Sheet

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
    made = constants(sheet.controller, sheet.loop)
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


def constants(controller: Controller, loop: Loop) -> Constants:
    """Return the constants of the law; without feedback every gain is zero, that of the wind-up too."""
    gains, on = controller.parallel(), float(controller.feedback)
    cut = controller.notch
    made = bake(
        sample_time=controller.sample_time,
        kp=on * gains.kp,
        ki=on * gains.ki,
        kd=on * gains.kd,
        filter_time=controller.filter_time,
        windup_time=controller.windup_time if controller.feedback else None,
        b=controller.b,
        c=controller.c,
        action=controller.sign,
        low=loop.manipulated.low,
        high=loop.manipulated.high,
        rate=loop.manipulated.rate,
        measurement_filter_time=controller.measurement_filter,
        notch_section=notch(controller.sample_time, cut.frequency, cut.depth, cut.width) if cut else NO_NOTCH,
        resting_measurement=loop.controlled.resting,
        resting_effort=loop.manipulated.resting,
    )
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
