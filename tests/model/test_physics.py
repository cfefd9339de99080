"""Each physical model against its differential equations, written here anew from first principles."""

from collections.abc import Callable

import numpy as np
import pytest
from numpy.typing import NDArray

from tuner.model.physics import PHYSICS
from tuner.model.plant import PhysicsPlant
from tuner.simulate.realise import realise

Array = NDArray[np.float64]
Numbers = dict[str, float]
GRAVITY = 9.80665
GAS_CONSTANT = 8.314462618


def _dc_motor_speed(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    current, speed = x
    return [
        (u - p["resistance"] * current - p["torque_constant"] * speed) / p["inductance"],
        (p["torque_constant"] * current - p["friction"] * speed) / p["inertia"],
    ], speed


def _dc_motor_position(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    slopes, speed = _dc_motor_speed(p, x[:2], u)
    return [*slopes, speed], x[2]


def _tank(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    resting_flow = p["outflow_coefficient"] * np.sqrt(p["level"])
    level = p["level"] + x[0]
    return [(resting_flow + u - p["outflow_coefficient"] * np.sqrt(level)) / p["area"]], x[0]


def _pumped_tank(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    return [u / p["area"]], x[0]


def _two_tanks(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    between = (x[0] - x[1]) / p["first_resistance"]
    return [(u - between) / p["first_area"], (between - x[1] / p["second_resistance"]) / p["second_area"]], x[1]


def _heater(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    carried = p["flow"] * p["heat_capacity"] * x[0]
    return [(u - carried) / (p["density"] * p["volume"] * p["heat_capacity"])], x[0]


def _exchanger(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    wall, liquid = x
    to_liquid = p["liquid_transfer"] * (wall - liquid)
    return [
        (p["steam_transfer"] * (u - wall) - to_liquid) / p["wall_capacity"],
        (to_liquid - p["flow_capacity"] * liquid) / p["liquid_capacity"],
    ], liquid


def _gas(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    mass_flow = u - p["outlet"] * x[0]
    return [mass_flow / p["molar_mass"] * GAS_CONSTANT * p["temperature"] / p["volume"]], x[0]


def _drive(p: Numbers, x: Array, u: float) -> tuple[list[float], float, float]:
    motor, load, twist = x
    shaft = p["stiffness"] * twist + p["damping"] * (motor - load)
    slopes = [
        (u - shaft - p["motor_friction"] * motor) / p["motor_inertia"],
        (shaft - p["load_friction"] * load) / p["load_inertia"],
        motor - load,
    ]
    return slopes, motor, load


def _levitation(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    height, speed = x
    resting_current = p["gap"] * np.sqrt(p["mass"] * GRAVITY / p["force_constant"])
    pull = p["force_constant"] * ((resting_current + u) / (p["gap"] - height)) ** 2
    return [speed, pull / p["mass"] - GRAVITY], height


def _web(p: Numbers, x: Array, u: float) -> tuple[list[float], float]:
    tension, speed = x
    stretch_rate = p["radius"] * speed / p["span"]
    return [
        p["web_stiffness"] * stretch_rate - p["speed"] / p["span"] * tension,
        (u - p["radius"] * tension - p["friction"] * speed) / p["inertia"],
    ], tension


EQUATIONS: dict[str, tuple[int, Callable[[Numbers, Array, float], tuple[list[float], float]]]] = {
    "dc motor speed": (2, _dc_motor_speed),
    "dc motor position": (3, _dc_motor_position),
    "tank level": (1, _tank),
    "tank level, pumped outflow": (1, _pumped_tank),
    "two tanks in a row": (2, _two_tanks),
    "stirred heater": (1, _heater),
    "heat exchanger": (2, _exchanger),
    "gas pressure vessel": (1, _gas),
    "two-mass drive": (3, lambda p, x, u: (_drive(p, x, u)[0], _drive(p, x, u)[2])),
    "two-mass drive, motor speed": (3, lambda p, x, u: (_drive(p, x, u)[0], _drive(p, x, u)[1])),
    "magnetic levitation": (2, _levitation),
    "web tension": (2, _web),
}


def _linearised(name: str, values: Numbers, s: complex) -> complex:
    """Return the response at `s` of the equations, linearised at rest by central differences."""
    order, equations = EQUATIONS[name]
    point, step = np.zeros(order + 1), 1e-6

    def both(at: Array) -> Array:
        slopes, output = equations(values, at[:-1], float(at[-1]))
        return np.array([*slopes, output])

    columns = [(both(point + step * unit) - both(point - step * unit)) / (2.0 * step) for unit in np.eye(order + 1)]
    jacobian = np.array(columns).T
    a, b, c, d = jacobian[:-1, :-1], jacobian[:-1, -1], jacobian[-1, :-1], jacobian[-1, -1]
    return complex(c @ np.linalg.solve(s * np.eye(order) - a, b) + d)


def _values(name: str, factor: float) -> Numbers:
    """Return the default values, each scaled by another power of the factor."""
    return {p.name: p.default * factor ** (i % 3 - 1) for i, p in enumerate(PHYSICS[name].parameters)}


@pytest.mark.parametrize("factor", [1.0, 1.3])
@pytest.mark.parametrize("name", PHYSICS)
def test_a_model_is_its_differential_equations(name: str, factor: float) -> None:
    """The formula responds as the equations do, linearised numerically where they are nonlinear."""
    values = _values(name, factor)
    system = realise(PhysicsPlant(name), values)
    late = values["density"] * values["pipe_volume"] / values["flow"] if name == "stirred heater" else 0.0
    assert system.dead_time == pytest.approx(late)
    for s in (0.3j, 2.0 + 5j, 40j):
        expected = _linearised(name, values, s) * np.exp(-late * s)
        assert system.response(np.array([s]))[0] == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize("name", PHYSICS)
def test_defaults_and_minimums_make_a_plant(name: str) -> None:
    """A model has a plant at its defaults, and still one where a quantity that may be zero is."""
    model = PHYSICS[name]
    assert model.name == name
    for parameter in model.parameters:
        assert parameter.minimum <= parameter.default
        if parameter.minimum == 0.0:
            assert realise(PhysicsPlant(name), {parameter.name: 0.0}).order > 0


def test_the_web_is_lightly_damped_and_the_magnet_unstable() -> None:
    """What the sentences say of the poles is so at the defaults."""
    web = realise(PhysicsPlant("web tension"), {}).poles
    assert max(-web.real / np.abs(web)) < 0.1
    assert realise(PhysicsPlant("magnetic levitation"), {}).poles.real.max() > 0.0
