"""Feedforward and reference filter, sample by sample, as plain functions in the same small subset as `pid.law`."""

SECTION = ("b0", "b1", "b2", "a1", "a2")
"""The constants of one section, in the order in which `section` takes them."""


def scaled(value: float, resting: float, gain: float) -> float:
    """Return a gain times the deviation of a value from rest: static feedforward, or the first part of a filter.

    Parameters
    ----------
    value, resting : float
        In engineering units.
    gain : float
        Units of what is wanted for each unit of the value.
    """
    return gain * (value - resting)


def section(  # noqa: PLR0913, PLR0917 - one text of scalars, which compilers and translators take whole
    value: float, memory_1: float, memory_2: float, b0: float, b1: float, b2: float, a1: float, a2: float
) -> tuple[float, float, float]:
    """Take one sample of (b0 x^2 + b1 x + b2)/(x^2 + a1 x + a2), x = z - 1; return it and both memories.

    In x the coefficients of slow filters keep their digits, and b2/a2 is the static gain exactly (Middleton and
    Goodwin, IEEE Transactions on Automatic Control 31, 1986; from memory). A value that is not finite passes and
    leaves the memories as they are, so that it holds the effort no longer than it lasts.

    Parameters
    ----------
    value : float
        What comes in, as a deviation.
    memory_1, memory_2 : float
        What the previous sample returned; zero at rest.
    b0, ..., a2 : float
        Constants of the section.
    """
    out = value
    if value - value == 0.0:
        out = (b0 * value) + memory_1
        memory_1 = memory_1 + (((b1 * value) - (a1 * out)) + memory_2)
        memory_2 = memory_2 + ((b2 * value) - (a2 * out))
    return (out, memory_1, memory_2)
