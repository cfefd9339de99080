"""What no gain changes is kept from frame to frame, on a grid that shows every turn."""

from dataclasses import replace

import numpy as np

from tests.footing.random_loops import sheet
from tuner.footing.chains import chains_of, looked_at_closely


def test_gains_and_limits_do_not_matter() -> None:
    """The very same chains come back after a gain or a limit has changed; another dead time makes others."""
    found = sheet(1)
    first = chains_of(found, 3)
    moved = replace(found, controller=found.controller.with_value("filter_time", 0.33), limits=())
    assert chains_of(moved, 3) is first
    assert chains_of(replace(found, controller=replace(found.controller, delay_samples=3)), 3) is not first


def test_the_grid_rises_and_turns_slowly() -> None:
    """The phase of the dead time turns by no more than a sixth of half a turn between two frequencies."""
    for seed in range(6):
        for chains in chains_of(sheet(seed), 3):
            assert (np.diff(chains.w, axis=1) >= 0.0).all()
            assert (np.diff(chains.w, axis=1) * chains.rows.delay[:, None]).max() <= np.pi / 6.0 * 1.01


def test_poles_are_looked_at_closely() -> None:
    """A lightly damped pole gets frequencies within its own width."""
    (chains,) = chains_of(sheet(0), 1)
    pole = -0.001 + 2.345j
    closer = looked_at_closely(chains, [np.array([pole])])
    assert np.abs(closer.w - pole.imag).min() < 0.001
