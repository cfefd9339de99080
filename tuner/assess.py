"""The one road from a tuning sheet to its assessment, which window, commands, report and Python callers all take."""

import sys
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, replace
from types import ModuleType

from tuner.errors import LoopError
from tuner.judge.assessment import Assessment, Instability, MemberResult
from tuner.judge.cliff import Runaway, instability
from tuner.judge.verdict import judge, worst_case
from tuner.measure.family import Measured, measure_trials
from tuner.measure.final import family_ends
from tuner.measure.loop import add_damping, add_margins, damping_of
from tuner.model.controller import Controller
from tuner.model.family import NOMINAL, Member, family_of
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.simulate.loop import Loop, loops_around, loops_of
from tuner.simulate.margins import Margins, margins
from tuner.simulate.poles import Poles, closed_loop_poles, family_poles
from tuner.simulate.traces import Traces
from tuner.simulate.trial import run

DOMINANT = (
    "A loop with dead time has more poles than can be listed: damping is that of those at most three times as far left "
    "as the rightmost one."
)
DIRECT = "The plant answers its effort at once: a sample reads the measurement just before its own effort takes hold."
NOT_LINEAR = "Limits or the resolution act in a run: its final value is the mean of its last tenth."


def assess(sheet: Sheet, family_size: int | None = None) -> Assessment:
    """Judge a tuning sheet over the family of plants that its spread makes.

    Parameters
    ----------
    sheet : Sheet
        The loop, its trial and its limits.
    family_size : int or None
        Plants to judge by, the nominal one included; as many as the sheet says unless told. A plant without spread
        is a family of one.

    Raises
    ------
    LoopError
        When the loop is well written but cannot be computed, with the reason; also when the arithmetic fails on
        numbers that nothing refused before.
    """
    return sketched(sheet, family_size).judged()


@dataclass(frozen=True, slots=True, eq=False)
class Sketch:
    """A sheet that was run with its family, before anything is measured; see `sketched`.

    Parameters
    ----------
    members : sequence of Member
        The nominal plant first.
    loops, poles, traces : sequence
        Of each of them.
    """

    sheet: Sheet
    members: Sequence[Member]
    loops: Sequence[Loop]
    poles: Sequence[Poles]
    traces: Sequence[Traces]

    def judged(self) -> Assessment:
        """Measure and judge all of it.

        Raises
        ------
        LoopError
            As `assess` does.
        """
        with _arithmetic_told():
            results = self._results(range(len(self.members)))
            return judge(self.sheet, results, _instability(self.sheet, self.members, self.loops, self.poles))

    def outlined(self, plant: str = "") -> Assessment:
        """Judge by the nominal plant, and by one more where it is named; the others have curves and poles.

        Of the family as a whole only the damping is known, which is read off the poles.

        Raises
        ------
        LoopError
            As `assess` does.
        """
        with _arithmetic_told():
            seen = [i for i, member in enumerate(self.members) if member.name in (NOMINAL, plant)]
            judged = judge(self.sheet, self._results(seen))
            known = dict(zip(seen, judged.members, strict=True))
            members = tuple(known.get(i) or self._bare(i) for i in range(len(self.members)))
            damping = worst_case(BY_NAME["damping"], members)
            return replace(judged, members=members, worst={**judged.worst, "damping": damping})

    def _results(self, places: Sequence[int]) -> tuple[MemberResult, ...]:
        chosen = [(self.members[i], self.loops[i], self.poles[i], self.traces[i]) for i in places]
        members, loops, poles, traces = zip(*chosen, strict=True)
        return _results(self.sheet, members, loops, poles, traces)

    def _bare(self, place: int) -> MemberResult:
        member, poles = self.members[place], self.poles[place]
        known = {"damping": damping_of(poles)}
        return MemberResult(member.name, poles.stable, known, poles.values, self.traces[place], drift=member.drift)


def sketched(sheet: Sheet, family_size: int | None = None) -> Sketch:
    """Run a sheet with its family and find the poles, half the way to an assessment; see `assess`."""
    with _arithmetic_told():
        members = family_of(sheet, family_size)
        loops = loops_of(sheet, members)
        return Sketch(sheet, members, loops, family_poles(loops), run(sheet, members))


def glance(sheet: Sheet, plant: str = "") -> Assessment:
    """Judge by the nominal plant alone, and by one more plant of the family where it is named, as fast as can be.

    What takes longer than all the rest is left out: how an unstable loop runs away.

    Parameters
    ----------
    plant : str
        Name of a plant of the family; one that is not there is left out.

    Raises
    ------
    LoopError
        As `assess` does.
    """
    with _arithmetic_told():
        members = family_of(sheet) if plant else family_of(sheet, 1)
        seen = [member for member in members if member.name in (NOMINAL, plant)]
        return judge(sheet, results_of(sheet, seen))


@contextmanager
def _arithmetic_told() -> Iterator[None]:
    """Tell of arithmetic that fails as of a loop that cannot be computed."""
    try:
        yield
    except (ArithmeticError, ValueError, MemoryError) as error:
        raise LoopError(f"the loop cannot be computed with these numbers: {error}") from error


def results_of(sheet: Sheet, members: Sequence[Member]) -> tuple[MemberResult, ...]:
    """Return what each of some plants makes of the loop, as an assessment has it.

    Raises
    ------
    LoopError
        When a loop cannot be computed.
    """
    loops = loops_of(sheet, members)
    return _results(sheet, members, loops, family_poles(loops), run(sheet, members))


def _results(
    sheet: Sheet,
    members: Sequence[Member],
    loops: Sequence[Loop],
    poles: Sequence[Poles],
    traces: Sequence[Traces],
) -> tuple[MemberResult, ...]:
    measured = measure_trials(sheet, traces, [found.stable for found in poles], family_ends(sheet, members))
    return tuple(map(_result, members, loops, poles, traces, measured, _margins(loops, poles)))


def _margins(loops: Sequence[Loop], poles: Sequence[Poles]) -> list[Margins | None]:
    """Return the margins of the loops that have any: stable and closed."""
    places = [i for i, loop in enumerate(loops) if poles[i].stable and loop.factors.gain]
    found: list[Margins | None] = [None] * len(loops)
    if places:
        for i, one in zip(places, margins([loops[i] for i in places], [poles[i].values for i in places]), strict=True):
            found[i] = one
    return found


def _result(  # noqa: PLR0913, PLR0917 - what is known of one plant
    member: Member, loop: Loop, poles: Poles, traces: Traces, measured: Measured, found: Margins | None
) -> MemberResult:
    add_margins(measured, found, stable=poles.stable)
    add_damping(measured, poles)
    return MemberResult(
        name=member.name,
        stable=poles.stable,
        measures=measured.values,
        poles=poles.values,
        traces=traces,
        reasons=measured.reasons,
        final_reference=measured.final_reference,
        final_disturbance=measured.final_disturbance,
        notes=tuple(_notes(loop, poles, traces, measured.values)),
        margins=found,
        drift=member.drift,
    )


def _notes(loop: Loop, poles: Poles, traces: Traces, found: Mapping[str, float | None]) -> Iterator[str]:
    if poles.stable and not poles.complete and found["damping"] is not None:
        yield DOMINANT
    if loop.sample_time and loop.chain.d and not loop.chain.dead_time:
        yield DIRECT
    if poles.stable and not (traces.reference.linear and traces.disturbance.linear):
        yield NOT_LINEAR
    yield from traces.notes


def _instability(
    sheet: Sheet, members: Sequence[Member], loops: Sequence[Loop], poles: Sequence[Poles]
) -> Instability | None:
    """Say how the plant that runs away fastest does so; None when every plant's loop is stable."""
    unstable = [i for i, found in enumerate(poles) if not found.stable]
    if not unstable:
        return None
    worst = max(unstable, key=lambda i: poles[i].growth)
    pole = complex(poles[worst].values[0]) if poles[worst].values.size else 0j
    runaway = Runaway(members[worst].name, pole.real, abs(pole.imag), poles[worst].reason)
    return instability(sheet, runaway, _stability(loops[worst]))


def _stability(loop: Loop) -> Callable[[Controller], bool]:
    """Return whether the same plant is stable under another controller."""

    def is_stable(controller: Controller) -> bool:
        return closed_loop_poles(loops_around(controller, [loop.chain])[0]).stable

    return is_stable


class _Road(ModuleType):
    """Lets `tuner.assess(sheet)` be written also where this module has taken the place of the function."""

    def __call__(self, sheet: Sheet, family_size: int | None = None) -> Assessment:
        return assess(sheet, family_size)


sys.modules[__name__].__class__ = _Road
