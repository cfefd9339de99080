"""Step measures against handbook values.

Values to 6 digits were computed independently with mpmath at 20 to 30 digits from the closed forms; the books print
them to 2 or 3 digits. What a book prints is from memory where it says so.
"""

from typing import NamedTuple

import numpy as np
import pytest

from tuner.measure.curve import Array, first_maximum, first_reach, highest, last_exit

PRINTED = 6e-6
"""Relative: six printed digits, and half a unit in the last."""


class Row(NamedTuple):
    """One row of the exact table of the second-order step response, wn = 1."""

    zeta: float
    overshoot: float
    rise: float
    first_hit: float | None
    peak_time: float | None
    settling_2: float
    settling_5: float
    settling_1: float
    half: float


TABLE = (
    Row(0.1, 72.9248, 1.10420, 1.67938, 3.15742, 38.3833, 28.9679, 44.8054, 1.08842),
    Row(0.2, 52.6621, 1.20343, 1.80870, 3.20638, 19.6019, 13.7444, 22.9332, 1.13327),
    Row(0.3, 37.2326, 1.32134, 1.96605, 3.29328, 11.2301, 10.1371, 14.3246, 1.18217),
    Row(0.4, 25.3827, 1.46349, 2.16288, 3.42776, 8.40932, 7.60878, 11.3322, 1.23559),
    Row(0.5, 16.3034, 1.63757, 2.41840, 3.62760, 8.07635, 5.28909, 8.78057, 1.29404),
    Row(0.6, 9.47802, 1.85405, 2.76787, 3.92699, 5.94299, 5.22905, 6.25864, 1.35803),
    Row(0.7, 4.59879, 2.12620, 3.28533, 4.39911, 5.97879, 2.89982, 6.57473, 1.42806),
    Row(0.7071067811865476, 4.32139, 2.14804, 3.33216, 4.44288, 5.96259, 2.92984, 6.58644, 1.43328),
    Row(0.75, 2.83754, 2.28754, 3.65697, 4.74964, 5.74261, 3.12504, 6.59619, 1.46549),
    Row(0.8, 1.51646, 2.46749, 4.16349, 5.23599, 3.75584, 3.38535, 6.35328, 1.50459),
    Row(0.9, 0.152376, 2.88296, 6.17258, 7.20731, 4.69960, 4.01434, 5.12733, 1.58796),
    Row(1.0, 0.0, 3.35791, None, None, 5.83392, 4.74387, 6.63835, 1.67835),
    Row(1.5, 0.0, 5.85828, None, None, 10.6547, 8.25581, 12.4694, 2.22492),
    Row(2.0, 0.0, 8.22924, None, None, 14.8779, 11.4583, 17.4648, 2.86490),
)
"""Rise times 10-90 % for zeta 0.1 to 0.9: Nise, Control Systems Engineering, normalised rise-time table. Overshoot,
peak time and the rise 0-100 %: Ogata, Modern Control Engineering, chapter 5. Settling: true last exits, computed."""

T = np.linspace(0.0, 60.0, 24001)


def step_response(zeta: float) -> Array:
    """Return the unit step response of 1/(s^2 + 2 zeta s + 1), in closed form."""
    if zeta < 1.0:
        w = np.sqrt(1.0 - zeta**2)
        curve = 1.0 - np.exp(-zeta * T) * (np.cos(w * T) + zeta / w * np.sin(w * T))
    elif zeta == 1.0:
        curve = 1.0 - np.exp(-T) * (1.0 + T)
    else:
        w = np.sqrt(zeta**2 - 1.0)
        slow, fast = zeta - w, zeta + w
        curve = 1.0 - (fast * np.exp(-slow * T) - slow * np.exp(-fast * T)) / (2.0 * w)
    return np.asarray(curve)[None]


@pytest.mark.parametrize("row", TABLE, ids=lambda row: f"zeta {row.zeta:g}")
def test_the_exact_second_order_table(row: Row) -> None:
    """Every column of the table to its printed digits."""
    y = step_response(row.zeta)
    rise = first_reach(T, y, (0.9,))[0] - first_reach(T, y, (0.1,))[0]

    assert rise[0] == pytest.approx(row.rise, rel=PRINTED)
    assert first_reach(T, y, (0.5,))[0][0] == pytest.approx(row.half, rel=PRINTED)
    for band, settling in ((0.02, row.settling_2), (0.05, row.settling_5), (0.01, row.settling_1)):
        assert last_exit(T, y - 1.0, np.array([band]))[0] == pytest.approx(settling, rel=PRINTED)
    if row.peak_time is not None and row.first_hit is not None:
        assert 100.0 * (highest(T, y).height[0] - 1.0) == pytest.approx(row.overshoot, rel=PRINTED)
        assert first_maximum(T, y, 1.0)[0] == pytest.approx(row.peak_time, rel=PRINTED)
        assert first_reach(T, y, (1.0,))[0][0] == pytest.approx(row.first_hit, rel=PRINTED)


@pytest.mark.parametrize(("band", "factor"), [(0.02, 3.912023), (0.05, 2.995732), (0.01, 4.605170)])
def test_first_order_settling(band: float, factor: float) -> None:
    """Settling of a first-order lag: T ln 50, T ln 20, T ln 100; rounded to 4 T, 3 T, 4.6 T (Nise, chapter 4)."""
    assert last_exit(T, np.exp(-T)[None], np.array([band]))[0] == pytest.approx(factor, rel=PRINTED)


def test_first_order_rise() -> None:
    """Rise 10-90 % of a first-order lag is T ln 9 (Nise, chapter 4); 63.2 % at T and 28.3 % at T/3 (any text)."""
    y = 1.0 - np.exp(-T)[None]

    assert (first_reach(T, y, (0.9,))[0] - first_reach(T, y, (0.1,))[0])[0] == pytest.approx(2.197224577, rel=1e-8)
    assert first_reach(T, y, (0.6321205588,))[0][0] == pytest.approx(1.0, rel=1e-8)
    assert first_reach(T, y, (0.2834686894,))[0][0] == pytest.approx(1.0 / 3.0, rel=1e-8)
