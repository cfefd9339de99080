"""The one result that the window, the commands, the report and Python callers all show."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Literal

from tuner.simulate.traces import ComplexArray, Traces

if TYPE_CHECKING:
    # Margins come with compiled loops, which who only shows an assessment need not load.
    from tuner.simulate.margins import Margins

Verdict = Literal["met", "missed", "unstable"]


@dataclass(frozen=True, slots=True)
class WorstCase:
    """The worst value of a measure over the family, and the plant that gave it.

    A `value` of None does not exist there; `none` tells that this means "none", as no peak without an overshoot.
    """

    value: float | None
    plant: str
    none: bool = False


@dataclass(frozen=True, slots=True)
class LimitResult:
    """One line of the acceptance sheet, judged over the whole family."""

    measure: str
    limit: float
    value: float | None
    plant: str
    met: bool


@dataclass(frozen=True, slots=True, eq=False)
class MemberResult:
    """What one plant of the family makes of the loop.

    Parameters
    ----------
    name : str
        The plant in words.
    stable : bool
        Decided from the loop's poles, never from a trace.
    measures : mapping of str to float or None
        Every measure of `model.measures`; None where it does not exist, infinity where it is unbounded.
    poles : ndarray of complex, shape (n,)
        Closed-loop poles in s (rad per time unit), rightmost first.
    traces : Traces
        The two runs.
    reasons : mapping of str to str
        For every measure that is None, why, as the end of a sentence.
    final_reference, final_disturbance : float or None
        Where the output ends in each run, deviation; None when the loop is unstable or the run has no step.
    notes : tuple of str
        What else the reader must know about this plant's loop; one sentence each.
    margins : Margins or None
        With the frequencies at which they are taken; None where the loop is unstable or not closed.
    drift : str
        How far the plant is from the nominal one, in words: "gain +15 %, delay +50 %"; empty for the nominal plant.
    """

    name: str
    stable: bool
    measures: Mapping[str, float | None]
    poles: ComplexArray
    traces: Traces
    reasons: Mapping[str, str] = field(default_factory=dict)
    final_reference: float | None = None
    final_disturbance: float | None = None
    notes: tuple[str, ...] = ()
    margins: "Margins | None" = None
    drift: str = ""


@dataclass(frozen=True, slots=True)
class Instability:
    """How an unstable loop runs away, in numbers and in words.

    Parameters
    ----------
    plant : str
        The plant of the family that runs away fastest.
    growth : float
        Real part of its rightmost pole, per time unit.
    doubling_time : float
        ln 2 / growth, time units; infinite on the very edge.
    frequency : float
        Imaginary part, rad per time unit; 0 when it runs away without ringing.
    gain : str
        Key of the gain whose smallest change brings the loop back, '' when no single gain does.
    edge : float or None
        Value of that gain on the edge of stability.
    sentence : str
        All of it in words.
    """

    plant: str
    growth: float
    doubling_time: float
    frequency: float
    gain: str
    edge: float | None
    sentence: str


@dataclass(frozen=True, slots=True, eq=False)
class Assessment:
    """A judged sheet.

    Parameters
    ----------
    title : str
        Title of the loop.
    verdict : str
        'met', 'missed' or 'unstable', over the whole family.
    members : tuple of MemberResult
        The family, nominal plant first.
    worst : mapping of str to WorstCase
        For every measure.
    limits : tuple of LimitResult
        In the order of the sheet.
    notes : tuple of str
        Why a measure does not exist, and what else the reader must know; one sentence each.
    instability : Instability or None
        Set when the verdict is 'unstable'.
    """

    title: str
    verdict: Verdict
    members: tuple[MemberResult, ...]
    worst: Mapping[str, WorstCase]
    limits: tuple[LimitResult, ...]
    notes: tuple[str, ...] = ()
    instability: Instability | None = None

    @property
    def nominal(self) -> MemberResult:
        """The nominal plant's result."""
        return self.members[0]

    def drift_of(self, plant: str) -> str:
        """Return how far a plant has drifted, by its name; the name itself where that is not known."""
        return next((member.drift for member in self.members if member.name == plant and member.drift), plant)

    def seen_from(self, plant: str) -> "Assessment":
        """Return this assessment with a plant of the family in the place of the nominal one; unchanged without it."""
        chosen = [member for member in self.members if member.name == plant]
        rest = [member for member in self.members if member.name != plant]
        return replace(self, members=(*chosen, *rest)) if chosen else self

    @property
    def family_size(self) -> int:
        """Number of plants judged."""
        return len(self.members)
