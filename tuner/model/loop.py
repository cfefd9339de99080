"""The loop around the blocks: its title, its unit of time and its two signals."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Signal:
    """A signal in engineering units.

    Parameters
    ----------
    name, unit : str
        In the words of the plant.
    low, high : float or None
        Ends of its range, absolute; None for none.
    resting : float
        Its value at the resting point, from which every signal of the loop is a deviation.
    """

    name: str = ""
    unit: str = ""
    low: float | None = None
    high: float | None = None
    resting: float = 0.0


@dataclass(frozen=True, slots=True)
class Manipulated(Signal):
    """The signal that the controller sets; `rate` is its fastest change per time unit, None for none."""

    rate: float | None = None


@dataclass(frozen=True, slots=True)
class Loop:
    """What the loop is called, in which unit its times are, and its two signals."""

    title: str
    time_unit: str = "s"
    controlled: Signal = Signal()
    manipulated: Manipulated = Manipulated()
    story: str = ""
