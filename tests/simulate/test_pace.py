"""A family taken from sample to sample in one go goes where it goes step by step."""

import numpy as np
import pytest

from tests.simulate import invented
from tuner.model.family import family_of
from tuner.simulate.grid import Grid
from tuner.simulate.pace import paced
from tuner.simulate.wiring import Wired, wire


def step_by_step(wired: Wired, member: int, efforts: np.ndarray, steps: int, late: int) -> np.ndarray:
    """Return the output at every step, and the state at the end, by the equivalents over one step."""
    x, out = np.zeros(wired.c.shape[2]), []
    old_u = old_d = 0.0
    for index in range(len(efforts) * steps):
        source = (index - late) // steps
        new_u = efforts[source] if index >= late else 0.0
        new_d = 0.7 if index >= wired.delay[member, 1] else 0.0
        out.append(wired.c[member, 0] @ x + wired.direct[member, 0] @ (old_u, old_d))
        held = wired.held
        x = x + held.growth[member] @ x + held.old[member] @ (old_u, old_d) + held.new[member] @ (new_u, new_d)
        old_u, old_d = new_u, new_d
    return np.append(out, x)


@pytest.mark.parametrize("delay_samples", [0, 2])
@pytest.mark.parametrize("steps", [1, 3])
def test_outputs_and_states_agree(steps: int, delay_samples: int) -> None:
    """With dead time of whole and broken steps, computing delay, and a disturbance that arrives within a sample."""
    sheet = invented.heater()
    members, grid = family_of(sheet, 3), Grid(0.5, steps, 40 * steps + 1)
    wired = wire(sheet, members, grid.step)
    size = wired.c.shape[2] + 1
    pace = paced(wired, grid, delay_samples, size)
    efforts = np.sin(np.arange(40.0))
    for member in range(len(members)):
        arrival, delay = pace.timing[member, :2]
        state, out = np.zeros(size + 2), []
        for k in range(40):
            when = 0 if k < arrival else 1 if k == arrival else 2
            state[size + 1] = efforts[k - delay] if k >= delay else 0.0
            row = pace.rows[member] @ state + 0.7 * pace.push[member, when]
            out.extend(row[1 : 1 + steps])
            state[:size], state[size] = row[1 + steps :], state[size + 1]
        late = int(wired.delay[member, 0]) + delay_samples * steps
        expected = step_by_step(wired, member, efforts, steps, late)
        assert np.append(out, state[: size - 1]) == pytest.approx(expected, abs=1e-11)
        assert state[size - 1] == 0.0
