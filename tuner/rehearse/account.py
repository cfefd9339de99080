"""What happened in a rehearsal, in sentences: when the loop was unstable and how it grew, and how far it went."""

from dataclasses import dataclass
from math import inf

import numpy as np

from tuner.judge.wording import quantity
from tuner.rehearse.growth import Growth
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.strip import Array, Strip


class Peaks:
    """The lowest and the highest value of a signal, with their times."""

    def __init__(self) -> None:
        self.low, self.high = (inf, 0.0), (-inf, 0.0)

    def follow(self, t: Array, values: Array) -> None:
        """Take in further points, shape (n,) each."""
        lowest, highest = int(np.argmin(values)), int(np.argmax(values))
        self.low = min(self.low, (float(values[lowest]), float(t[lowest])), key=lambda place: place[0])
        self.high = max(self.high, (float(values[highest]), float(t[highest])), key=lambda place: place[0])


@dataclass(frozen=True, slots=True)
class Spell:
    """A time in which the loop was unstable: from `begin` to `end`, None for the end of the run, and its growth."""

    begin: float
    end: float | None
    growth: Growth | None


def drifts_by_hand(rehearsal: Rehearsal, growth: Growth | None) -> bool:
    """Tell whether a loop only does not come back by itself: a plant that integrates, under the hand."""
    return rehearsal.mode == "manual" and growth is not None and growth.predicted <= 1.0


class Account:
    """Watches a rehearsal; to be told of every strip, and to look after whatever is done to the loop.

    Attributes
    ----------
    output, effort : Peaks
        How far they went, engineering units.
    """

    def __init__(self, rehearsal: Rehearsal) -> None:
        self._rehearsal = rehearsal
        self.output, self.effort = Peaks(), Peaks()
        self._samples = self._limited = 0
        self._since: float | None = None
        self._growth: Growth | None = None
        self._held = False
        self._spells: list[Spell] = []
        self.look()

    def follow(self, strip: Strip) -> None:
        """Take in what has just run."""
        if len(strip):
            self.output.follow(strip.t, strip.y)
            self.effort.follow(strip.t, strip.u)
            self._samples += len(strip)
            self._limited += int(np.count_nonzero(strip.limited))
            self._held = self._held or bool(strip.limited.any())
        self.look()

    def look(self) -> None:
        """See whether the loop is unstable now, and how it grows until a limit holds it."""
        growth = self._rehearsal.growth()
        stable = self._rehearsal.stable or drifts_by_hand(self._rehearsal, growth)
        if self._since is not None and (stable or self._is_another(growth)):
            self._spells.append(Spell(self._since, self._rehearsal.time, self._growth))
            self._since = None
        if not stable and self._since is None:
            self._since, self._growth, self._held = self._rehearsal.time, growth, False
        elif growth is not None:
            self._remember(growth)

    def _is_another(self, growth: Growth | None) -> bool:
        """Tell whether the loop has become another one, which grows by another factor."""
        return growth is not None and self._growth is not None and growth.predicted != self._growth.predicted

    def _remember(self, growth: Growth) -> None:
        """Keep what is known of the growth: once a limit holds the effort, what was measured before says more."""
        measured = self._growth is not None and self._growth.measured is not None
        if not self._held or not measured:
            self._growth = growth

    @property
    def spells(self) -> tuple[Spell, ...]:
        """The times in which the loop was unstable, each with one growth."""
        last = () if self._since is None else (Spell(self._since, None, self._growth),)
        return (*self._spells, *last)

    def sentences(self) -> list[str]:
        """Return what happened so far."""
        told = [self._told(spell) for spell in self.spells] or ["The loop was stable all the time."]
        if self._samples:
            told += self._extremes()
        if self._rehearsal.ran_away:
            told.append("The loop ran away beyond all numbers and stood still from then on.")
        return told

    def _told(self, spell: Spell) -> str:
        growth = f": {spell.growth.sentence.removeprefix('Unstable: ')}" if spell.growth is not None else "."
        until = "on to the end" if spell.end is None else f"to {self._time(spell.end)}"
        return f"Unstable from {self._time(spell.begin)} {until}{growth}"

    def _extremes(self) -> list[str]:
        loop = self._rehearsal.sheet.loop
        output = self._between(loop.controlled.name or "The output", self.output, loop.controlled.unit)
        effort = self._between(loop.manipulated.name or "The effort", self.effort, loop.manipulated.unit)
        share = self._limited / self._samples
        held = f"; a limit held it {quantity(100.0 * share, '%', 3)} of the time" if self._limited else ""
        return [f"{output}.", f"{effort}{held}."]

    def _between(self, name: str, peaks: Peaks, unit: str) -> str:
        (low, low_at), (high, high_at) = peaks.low, peaks.high
        lowest = f"{quantity(low, unit)} (at {self._time(low_at)})"
        return f"{name} went from {lowest} to {quantity(high, unit)} (at {self._time(high_at)})"

    def _time(self, time: float) -> str:
        return quantity(time, self._rehearsal.sheet.loop.time_unit)
