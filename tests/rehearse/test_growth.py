"""How a signal grows: known growing signals, and the words for them."""

import numpy as np
import pytest

from tuner.rehearse.growth import Slopes, Turns, grown

T = np.arange(0.0, 60.0, 0.1)


def swinging(growth: float, frequency: float, about: float = 0.0) -> Turns:
    """Return what follows a swing that grows."""
    turns = Turns()
    turns.follow(T, about + 0.01 * np.exp(growth * T) * np.sin(frequency * T))
    return turns


@pytest.mark.parametrize("growth", [0.01, 0.05, 0.12])
@pytest.mark.parametrize("about", [0.0, 72.0])
def test_the_factor_of_a_cycle(growth: float, about: float) -> None:
    """exp(growth times period), whatever the swing is about, to half a per cent."""
    turns = swinging(growth, 1.0, about)
    assert turns.factor() == pytest.approx(np.exp(growth * 2.0 * np.pi), rel=5e-3)
    assert turns.period() == pytest.approx(2.0 * np.pi, rel=0.02)


def test_small_wiggles_do_not_count() -> None:
    """Noise on a large swing makes no turns of its own."""
    turns, noise = Turns(), np.random.default_rng(3).normal(0.0, 0.02, len(T))
    turns.follow(T, np.exp(0.05 * T) * np.sin(T) + noise)
    assert turns.factor() == pytest.approx(np.exp(0.05 * 2.0 * np.pi), rel=0.05)


def test_nothing_is_said_before_it_has_swung() -> None:
    """Neither of too few turns nor after everything was forgotten."""
    turns = Turns()
    assert (turns.factor(), turns.period()) == (None, None)
    turns = swinging(0.05, 1.0)
    turns.clear()
    assert (turns.factor(), turns.period()) == (None, None)


def test_a_runaway_without_ringing() -> None:
    """The rate of an exponential from three looks at it, from wherever it starts; none where it stands still."""
    slopes = Slopes()
    for time in (0.0, 2.0, 4.0):
        slopes.follow(time, 5.0 + 0.3 * np.exp(0.2 * time))
    assert slopes.rate() == pytest.approx(0.2, rel=1e-9)
    slopes.clear()
    assert slopes.rate() is None
    for time in (0.0, 2.0, 4.0):
        slopes.follow(time, 5.0)
    assert slopes.rate() is None


def test_words_of_a_swing() -> None:
    """What it shows beside what the pole says; the pole alone while it has shown nothing."""
    found = grown(0.05 + 1j, swinging(0.05, 1.0), Slopes(), "s", limited=False)
    assert found.sentence == ("Unstable: the swing grows by a factor of 1.37 each cycle of 6.28 s; the pole says 1.37.")
    assert found.predicted == pytest.approx(np.exp(0.1 * np.pi))
    early = grown(0.05 + 1j, Turns(), Slopes(), "min", limited=False)
    assert early.sentence == "Unstable: the swing grows by a factor of 1.37 each cycle of 6.28 min, the pole says."
    assert early.measured is None


def test_words_of_a_runaway() -> None:
    """It doubles; on the very edge the pole says no time."""
    slopes = Slopes()
    for time in (0.0, 2.0, 4.0):
        slopes.follow(time, np.exp(0.2 * time))
    found = grown(0.2 + 0j, Turns(), slopes, "s", limited=False)
    assert found.sentence == "Unstable: it doubles every 3.47 s; the pole says every 3.47 s."
    assert (found.predicted, found.measured) == pytest.approx((np.exp(0.2), np.exp(0.2)))
    edge = grown(0j, Turns(), Slopes(), "s", limited=False)
    assert edge.sentence == "Unstable: it runs away and doubles; the pole lies on the very edge."


def test_a_limit_is_told() -> None:
    """What a limit holds does not grow as the pole says."""
    found = grown(0.05 + 1j, swinging(0.05, 1.0), Slopes(), "s", limited=True)
    assert found.sentence.endswith("; a limit of the effort holds it now, so that it no longer grows as the pole says.")
