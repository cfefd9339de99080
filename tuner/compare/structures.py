"""One loop as three structures: feedforward alone, feedback alone, and both."""

from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from tuner.compare.choosing import Chosen, choose_feedforward, with_feedforward
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.model.sheet import Sheet
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import family_poles

Kind = Literal["feedforward", "feedback", "both"]
Alone = Literal["stable", "integrating", "unstable"]

NAMES: dict[Kind, str] = {"feedforward": "feedforward alone", "feedback": "feedback alone", "both": "both"}
"""What the structures are called, in the order in which they are compared."""

SENSOR = "a sensor of the controlled signal"
MEASURED_DISTURBANCE = "a measured disturbance"
MODEL = "a model of the plant"

INTEGRATES = (
    "The plant integrates: without feedback every disturbance and every error of the model carries its output away "
    "without end, so feedforward alone holds nothing."
)
RUNS_AWAY = (
    "The plant is unstable by itself: without feedback its output runs away however good the model is, so feedforward "
    "alone is pointless."
)
NO_FEEDBACK = "There is no feedback to compare with: all gains of the controller are 0."
NOTHING_MEASURED = "Nothing acts against a measured disturbance: without feedback a disturbance is left as it is."

_CAUTIONS: dict[Alone, str] = {"stable": "", "integrating": INTEGRATES, "unstable": RUNS_AWAY}
_SMALL = 1e-9
"""Size of a pole, in parts of the others' or of 1 per trial, below which it lies at the origin."""


@dataclass(frozen=True, slots=True)
class Structure:
    """One way to control the loop of a sheet.

    Parameters
    ----------
    kind, name : str
        Its key, and what it is called.
    sheet : Sheet or None
        The sheet with this structure; None where there is none, which `refusal` then says.
    needs : tuple of str
        What it has to know or measure.
    alone : str
        What the family does without any feedback: 'stable', 'integrating' or 'unstable' when one of its plants is.
    remarks : tuple of str
        What else must be known, a sentence each: where its feedforward comes from, and what it cannot do.
    refusal : str
        Why there is none, a sentence; empty where there is one.
    """

    kind: Kind
    name: str
    sheet: Sheet | None
    needs: tuple[str, ...]
    alone: Alone
    remarks: tuple[str, ...] = ()
    refusal: str = ""


def structures(sheet: Sheet) -> tuple[Structure, ...]:
    """Return the same loop with feedforward alone, with feedback alone, and with both.

    A sheet without feedforward of the reference is given one, see `choose_feedforward`. Feedback alone has no
    feedforward of either kind, and meets a measured disturbance on the same path.

    Raises
    ------
    LoopError
        When the plant cannot be computed, with the reason.
    """
    alone, chosen = plant_alone(sheet), choose_feedforward(sheet)
    return (_feedforward_alone(sheet, chosen, alone), _feedback_alone(sheet, alone), _both(sheet, chosen, alone))


def plant_alone(sheet: Sheet) -> Alone:
    """Return what the plants of a sheet's family do without feedback: the worst of them counts."""
    bare = replace(sheet, controller=Controller(feedback=False))
    rightmost = [found for found in family_poles(loops_of(bare, family_of(sheet))) if not found.stable]
    if not rightmost:
        return "stable"
    for found in rightmost:
        scale = max(float(np.abs(found.values).max()), 1.0 / sheet.trial.duration)
        beyond = found.values[found.values.real >= -_SMALL * scale]
        if (np.abs(beyond) > _SMALL * scale).any():
            return "unstable"
    return "integrating"


def _feedforward_alone(sheet: Sheet, chosen: Chosen, alone: Alone) -> Structure:
    measured = _measures(sheet)
    needs = (MODEL, MEASURED_DISTURBANCE) if measured else (MODEL,)
    caution = [_CAUTIONS[alone]] if alone != "stable" else []
    remarks = (*caution, chosen.sentence, *_against(sheet), *([] if measured else [NOTHING_MEASURED]))
    if chosen.feedforward is None:
        return _refused("feedforward", needs, alone, chosen.sentence)
    found = with_feedforward(sheet, chosen.feedforward)
    opened = replace(found, controller=replace(found.controller, feedback=False))
    return Structure("feedforward", NAMES["feedforward"], opened, needs, alone, remarks)


def _feedback_alone(sheet: Sheet, alone: Alone) -> Structure:
    if not _has_gains(sheet):
        return _refused("feedback", (SENSOR,), alone, NO_FEEDBACK)
    measured = sheet.controller.disturbance_feedforward
    unopposed = replace(measured, kind="none") if measured else None
    controller = replace(sheet.controller, feedback=True, feedforward=None, disturbance_feedforward=unopposed)
    return Structure("feedback", NAMES["feedback"], replace(sheet, controller=controller), (SENSOR,), alone)


def _both(sheet: Sheet, chosen: Chosen, alone: Alone) -> Structure:
    measured = _measures(sheet)
    needs = (SENSOR, MODEL, MEASURED_DISTURBANCE) if measured else (SENSOR, MODEL)
    if chosen.feedforward is None:
        return _refused("both", needs, alone, chosen.sentence)
    if not _has_gains(sheet):
        return _refused("both", needs, alone, NO_FEEDBACK)
    found = with_feedforward(sheet, chosen.feedforward)
    closed = replace(found, controller=replace(found.controller, feedback=True))
    return Structure("both", NAMES["both"], closed, needs, alone, (chosen.sentence, *_against(sheet)))


def _refused(kind: Kind, needs: tuple[str, ...], alone: Alone, why: str) -> Structure:
    return Structure(kind, NAMES[kind], None, needs, alone, refusal=why)


def _measures(sheet: Sheet) -> bool:
    measured = sheet.controller.disturbance_feedforward
    return measured is not None and measured.acts


def _against(sheet: Sheet) -> tuple[str, ...]:
    """Say what acts against a measured disturbance."""
    against = sheet.controller.disturbance_feedforward
    if against is None or not against.acts:
        return ()
    return (f"Against {against.name or 'the measured disturbance'} acts a {against.kind} feedforward.",)


def _has_gains(sheet: Sheet) -> bool:
    gains = sheet.controller.parallel()
    return any((gains.kp, gains.ki, gains.kd))
