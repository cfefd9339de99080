"""What passes between the window and its worker: one immutable request, one answer."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Literal, Protocol

from tuner.judge.assessment import Assessment, MemberResult
from tuner.judge.overlay import Overlay
from tuner.model.sheet import Sheet
from tuner.session.tunings import KeptTuning

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves


FamilyView = Literal["both", "band", "curves", "none"]
"""How the plots show the family: as the ground it covers, curve by curve, as both, or not at all."""


@dataclass(frozen=True, slots=True)
class Request:
    """A sheet to assess, and the tunings to run beside it, as found and kept ones; the newest `number` wins.

    `frequency` asks for the response over frequency as well; `looked_at` names the plant of the family that the plots
    are to show in the place of the nominal one, '' for the nominal one itself; `family_view` is how they show the rest.
    """

    number: int
    sheet: Sheet
    kept: tuple[KeptTuning, ...] = ()
    frequency: bool = False
    looked_at: str = ""
    family_view: FamilyView = "both"


@dataclass(frozen=True, slots=True, eq=False)
class KeptResult:
    """What a kept tuning makes of the plant that is looked at, the nominal one as a rule."""

    name: str
    label: str
    member: MemberResult
    frequency: "FrequencyCurves | None" = None
    """The response over frequency, where it was asked for."""


@dataclass(frozen=True, slots=True, eq=False)
class Shown:
    """Everything that the views show of one request.

    Parameters
    ----------
    number : int
        That of the request.
    sheet : Sheet
        The sheet that was assessed.
    assessment : Assessment
        Of the whole family, or of the nominal plant alone while `whole` is false; `outlined` then says whether the
        others are there too, with their curves, their poles and the damping of those.
    overlay : Overlay
        What is drawn over the curves.
    kept : tuple of KeptResult
        Kept tunings that could be run.
    whole : bool
        False for the quick first answer, which does not judge the family and so gives no verdict.
    outlined : bool
        Whether a quick answer has the curves of the family all the same.
    frequency : FrequencyCurves or None
        The response over frequency, where it was asked for.
    looked_at : str
        The plant that stands first in `seen`; '' for the nominal one.
    seen : Assessment or None
        The same assessment with that plant in the place of the nominal one; None where that is the nominal one.
    family_view : str
        How the plots show the family.
    """

    number: int
    sheet: Sheet
    assessment: Assessment
    overlay: Overlay
    kept: tuple[KeptResult, ...] = ()
    whole: bool = True
    outlined: bool = False
    frequency: "FrequencyCurves | None" = None
    looked_at: str = ""
    seen: Assessment | None = None
    family_view: FamilyView = "both"

    @property
    def has_family(self) -> bool:
        """Whether it has the curves and the poles of the family."""
        return self.whole or self.outlined

    def as_seen(self) -> "Shown":
        """Return this answer as the plots show it: with the plant that is looked at in the nominal one's place."""
        return self if self.seen is None else replace(self, assessment=self.seen)


@dataclass(frozen=True, slots=True)
class Failure:
    """A request that could not be computed, and why, in a sentence."""

    number: int
    sentence: str


Glance = Callable[[Sheet, str], Assessment]
"""Assesses a sheet with its nominal plant, and the plant of a name if there is one, as fast as can be."""


class Sketched(Protocol):
    """A sheet that was run with its family, before anything is measured."""

    def outlined(self, plant: str, /) -> Assessment:
        """Judge by the nominal plant, and the plant of a name if there is one; the others have their curves."""
        ...

    def judged(self) -> Assessment:
        """Measure and judge all of it."""
        ...


Sketch = Callable[[Sheet, int], Sketched]
"""Runs a sheet with a family of so many plants, half the way to its assessment."""

Draw = Callable[[Sheet, Assessment], Overlay]
"""Says what to draw over the curves of an assessment."""
