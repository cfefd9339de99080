"""A rehearsal: one loop in time, and all that a person may do to it while it runs."""

from collections.abc import Mapping
from dataclasses import replace
from math import ceil, isfinite, pi

import numpy as np

from tuner.errors import LoopError
from tuner.law import pid
from tuner.model.controller import Controller
from tuner.model.family import NOMINAL, Member, family_of
from tuner.model.sheet import Sheet
from tuner.rehearse.aim import Aim
from tuner.rehearse.bench import Bench
from tuner.rehearse.growth import Growth, Slopes, Turns, grown
from tuner.rehearse.strip import Strip
from tuner.simulate.loop import loop_of
from tuner.simulate.poles import Poles, closed_loop_poles

MOST_SAMPLES = 100_000
"""Samples that one call goes on by at most."""

_STEPS_A_TURN = 60.0
"""Steps of a continuous controller in the time in which its fastest closed-loop pole turns once."""

_FEWEST, _MOST = 1_000, 200_000
"""Steps of a continuous controller in the time of the trial."""

RAN_AWAY = "The loop has run away beyond all numbers: it stands still until it is started anew."


class Rehearsal:
    """A loop that runs in time, from rest and in automatic.

    Everything takes hold at the next sample. One thread at a time may use it.

    Parameters
    ----------
    sheet : Sheet
        The loop; its trial gives the size of things, nothing else of it is used.
    seed : int
        Of the noise, so that a run can be repeated.

    Attributes
    ----------
    notes : tuple of str
        What a reader must know about this rehearsal; one sentence each.

    Raises
    ------
    LoopError
        When the loop cannot be computed.
    """

    def __init__(self, sheet: Sheet, seed: int = 1) -> None:
        self._given = sheet
        self.notes = _notes(sheet)
        self._member = family_of(sheet, 1)[0]
        self._bench = Bench(sampled(sheet), self._member)
        self._aim = Aim(sheet.loop.controlled.resting)
        self._random = np.random.default_rng(seed)
        self._noise, self._disturbance, self._by_hand = False, 0.0, sheet.loop.manipulated.resting
        self._turns, self._slopes = Turns(), Slopes()
        self._poles: Poles | None = None
        self._last_limit = -np.inf
        self._looked = -np.inf

    # What it is like now ----------------------------------------------------------------------------------------

    @property
    def sheet(self) -> Sheet:
        """The sheet with the controller as it is now."""
        return self._given

    @property
    def sample_time(self) -> float:
        """Time between samples, time units; of a continuous controller the step at which it is computed."""
        return self._bench.sheet.controller.sample_time

    @property
    def time(self) -> float:
        """Time since the start, time units."""
        return self._bench.count * self.sample_time

    @property
    def mode(self) -> str:
        """'manual' while the effort is set by hand, else 'automatic'."""
        return "manual" if self._bench.mode == pid.MANUAL else "automatic"

    @property
    def values(self) -> dict[str, float]:
        """The plant as it is now: the value of every parameter by its name."""
        return dict(self._member.values)

    @property
    def reference(self) -> float:
        """Where the reference is or goes, engineering units."""
        return self._aim.target

    @property
    def disturbance(self) -> float:
        """The disturbance, as a deviation."""
        return self._disturbance

    @property
    def noise(self) -> bool:
        """Whether the measurement is noisy."""
        return self._noise

    @property
    def effort(self) -> float:
        """The last effort, engineering units."""
        return self._bench.effort + self._given.loop.manipulated.resting

    @property
    def by_hand(self) -> float:
        """Where the effort is or goes while it is set by hand, engineering units."""
        return self._by_hand

    @property
    def poles(self) -> Poles:
        """The closed-loop poles of the loop as it is now; those of the plant alone while it is not closed."""
        if self._poles is None:
            controller = self._bench.sheet.controller
            closed = controller if self.mode == "automatic" else replace(controller, feedback=False)
            member = replace(self._member, values=self.values)
            self._poles = closed_loop_poles(loop_of(replace(self._bench.sheet, controller=closed), member))
        return self._poles

    @property
    def stable(self) -> bool:
        """Whether the loop as it is now is stable, by its poles."""
        return self.poles.stable

    @property
    def ran_away(self) -> bool:
        """Whether the loop has run away and stands still."""
        return self._bench.ran_away

    def growth(self) -> Growth | None:
        """Return how the loop grows; None while it is stable."""
        poles = self.poles
        if poles.stable or not len(poles.values) or not isfinite(poles.growth):
            return None
        pole = complex(poles.values[0])
        lately = self.time - self._last_limit <= (2.0 * pi / abs(pole.imag) if pole.imag else 10.0 * self.sample_time)
        return grown(pole, self._turns, self._slopes, self._given.loop.time_unit, limited=bool(lately))

    # Going on ---------------------------------------------------------------------------------------------------

    def advance(self, samples: int) -> Strip:
        """Go on by some samples, at most `MOST_SAMPLES`; by fewer only where the loop runs away."""
        count = 0 if self.ran_away else min(max(samples, 0), MOST_SAMPLES)
        t = np.asarray((self._bench.count + np.arange(count)) * self.sample_time, dtype=float)
        r, d = self._aim.at(t), np.full(count, self._disturbance)
        noise = self._random.normal(0.0, self._given.sensor.noise, count) if self._noise else np.zeros(count)
        manual = np.full(count, self.mode == "manual")
        y, ym, u, limited, held = self._bench.advance(r, noise, d, self._by_hand)
        ran = len(y)
        rest, rest_effort = self._given.loop.controlled.resting, self._given.loop.manipulated.resting
        strip = Strip(
            t[:ran], r[:ran], y + rest, ym + rest, u + rest_effort, d[:ran],
            limited > 0.0, held > 0.0, manual[:ran],
        )  # fmt: skip
        self._follow(strip)
        return strip

    def _follow(self, strip: Strip) -> None:
        """Watch how the output grows."""
        if self.stable or not len(strip):
            return
        self._turns.follow(strip.t, strip.y)
        apart = self._apart()
        for time, value in zip(strip.t.tolist(), strip.y.tolist(), strict=True):
            if time >= self._looked + apart:
                self._slopes.follow(time, value)
                self._looked = time
        if strip.limited.any():
            self._last_limit = float(strip.t[np.flatnonzero(strip.limited)[-1]])

    def _apart(self) -> float:
        """Return the time between two looks at what runs away: half the time in which it grows by e."""
        growth = self.poles.growth
        return max(0.5 / growth, self.sample_time) if growth > 0.0 else self.sample_time

    # What a person does -----------------------------------------------------------------------------------------

    def set_reference(self, value: float) -> None:
        """Step the reference to a value, engineering units."""
        self._aim = self._aim.towards(value, self.time)
        self._asked_anew()

    def ramp_reference(self, to: float, over: float) -> None:
        """Send the reference to a value in a straight line, within a time."""
        self._aim = self._aim.towards(to, self.time, max(over, 0.0))
        self._asked_anew()

    def set_disturbance(self, size: float) -> None:
        """Let a disturbance act from now on; 0 ends it."""
        self._disturbance = size
        self._asked_anew()

    def set_noise(self, on: bool) -> None:
        """Turn the noise of the sheet's sensor on or off."""
        self._noise = on

    def to_manual(self) -> None:
        """Take the effort in hand, where it is."""
        if self.mode == "automatic":
            self._by_hand = self.effort
            self._change_mode(pid.MANUAL)

    def set_manual(self, effort: float) -> None:
        """Set the effort by hand, engineering units; it moves there as fast as its limits let it.

        Raises
        ------
        LoopError
            When it is no finite number.
        """
        if not isfinite(effort):
            raise LoopError(f"an effort by hand must be a finite number, found {effort:g}")
        self.to_manual()
        self._by_hand = effort

    def to_automatic(self) -> None:
        """Let the law take over; the effort goes on from where it is, but for a loop without feedback."""
        if self.mode == "manual":
            feedback = self._given.controller.feedback
            self._change_mode(pid.TRANSFER if feedback else pid.AUTOMATIC)
            if not feedback:
                self._bench.forget_integral()

    def set_controller(self, controller: Controller) -> None:
        """Go on with other gains, times or blocks; the effort goes on from where it is.

        Raises
        ------
        LoopError
            When the loop cannot be computed with them, or the sample time is another one; nothing is changed then.
        """
        if controller.sample_time != self._given.controller.sample_time:
            raise LoopError(
                "the sample time cannot change while a loop runs: expected "
                f"{self._given.controller.sample_time:g}, found {controller.sample_time:g}; start the rehearsal anew"
            )
        sheet = replace(self._given, controller=controller)
        fixed = replace(controller, sample_time=self.sample_time)
        now = float(self._aim.at(np.array([self.time]))[0])
        measured = controller.disturbance_feedforward
        apart = self._disturbance + (measured.resting if measured else 0.0)
        self._bench.retune(replace(sheet, controller=fixed), now, apart)
        self._given = sheet
        if self.mode == "automatic" and controller.feedback:
            self._bench.set_mode(pid.TRANSFER)
        self._changed()

    def set_plant(self, values: Mapping[str, float]) -> None:
        """Let the plant be another one from now on: the values of some parameters, the others stay.

        Raises
        ------
        LoopError
            When there is no such parameter, or the plant cannot be computed; nothing is changed then.
        """
        unknown = [name for name in values if name not in self._member.values]
        if unknown:
            known = ", ".join(self._member.values) or "none"
            raise LoopError(f"the plant has the parameters {known}, found {unknown[0]}")
        member = Member(NOMINAL, self._member.values | dict(values))
        self._bench.change_plant(member)
        self._member = member
        self._changed()

    def stop(self) -> None:
        """Stop: the effort by hand and on its way to rest, the disturbance off."""
        self.set_disturbance(0.0)
        self.to_manual()
        self._by_hand = self._given.loop.manipulated.resting
        if self.ran_away:
            self.restart()

    def restart(self) -> None:
        """Bring the loop to rest at once, as no plant could; its time goes on."""
        self._bench.restart()
        self._aim = Aim(self._given.loop.controlled.resting)
        self._changed()

    # Inside -----------------------------------------------------------------------------------------------------

    def _change_mode(self, mode: float) -> None:
        self._bench.set_mode(mode)
        self._changed()

    def _changed(self) -> None:
        self._poles = None
        self._asked_anew()

    def _asked_anew(self) -> None:
        """Begin anew to watch how the output grows."""
        self._turns.clear()
        self._slopes.clear()


def sampled(sheet: Sheet) -> Sheet:
    """Return a sheet with a sample time to rehearse with: its own, or a short one for a continuous controller."""
    controller = sheet.controller
    if controller.sample_time:
        return sheet
    return replace(sheet, controller=replace(controller, sample_time=_short_step(sheet)))


def _short_step(sheet: Sheet) -> float:
    """Return a step in which nothing of a continuous loop moves far."""
    poles = closed_loop_poles(loop_of(sheet, family_of(sheet, 1)[0])).values
    fastest = float(np.abs(poles).max(initial=0.0))
    wanted = ceil(sheet.trial.duration * fastest * _STEPS_A_TURN / (2.0 * pi))
    return sheet.trial.duration / min(max(wanted, _FEWEST), _MOST)


def _notes(sheet: Sheet) -> tuple[str, ...]:
    if sheet.controller.sample_time:
        return ()
    step = sampled(sheet).controller.sample_time
    return (f"A continuous controller is rehearsed in steps of {step:.3g} {sheet.loop.time_unit}.",)
