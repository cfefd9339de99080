"""Lumped physical models: plants given by masses, volumes and resistances instead of gains and lags.

Each is a formula over its physical parameters, in SI units: the time unit of their loop is the second. All are
standard lumped models, written down from memory from their balances, which each sentence names; the tests derive them
again from the differential equations.
"""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class PhysicalParameter:
    """A physical quantity of a model.

    Parameters
    ----------
    name, unit : str
        As the formula and the sheet write it.
    default : float
        A plausible value of our invention.
    minimum : float
        Smallest value that makes sense; below it the model does not hold.
    sentence : str
        What it is.
    """

    name: str
    unit: str
    default: float
    minimum: float
    sentence: str


@dataclass(frozen=True, slots=True)
class PhysicsModel:
    """A physical model: its name, what drives what by which balance, its formula and its parameters."""

    name: str
    sentence: str
    expression: str
    parameters: tuple[PhysicalParameter, ...]


_SMALL = 1e-12
"""Stands for above zero."""

_P = PhysicalParameter

_MOTOR = (
    _P("torque_constant", "N m/A", 0.05, _SMALL, "Torque for each ampere, equal to volts for each rad/s."),
    _P("resistance", "ohm", 0.5, _SMALL, "Resistance of the armature."),
    _P("inductance", "H", 0.0015, 0.0, "Inductance of the armature."),
    _P("inertia", "kg m^2", 0.00025, _SMALL, "Moment of inertia of rotor and load."),
    _P("friction", "N m s/rad", 0.0001, 0.0, "Viscous friction of rotor and load."),
)
_MOTOR_BALANCE = "((inductance s + resistance)(inertia s + friction) + torque_constant^2)"

_AREA = _P("area", "m^2", 1.5, _SMALL, "Cross section of the tank.")

_DRIVE = (
    _P("motor_inertia", "kg m^2", 0.002, _SMALL, "Moment of inertia of the motor."),
    _P("load_inertia", "kg m^2", 0.006, _SMALL, "Moment of inertia of the load, at the motor shaft."),
    _P("stiffness", "N m/rad", 40.0, _SMALL, "Torsional stiffness of the shaft."),
    _P("damping", "N m s/rad", 0.02, 0.0, "Damping of the shaft."),
    _P("motor_friction", "N m s/rad", 0.01, 0.0, "Viscous friction at the motor."),
    _P("load_friction", "N m s/rad", 0.01, 0.0, "Viscous friction at the load."),
)
_DRIVE_BALANCE = (
    "(s (motor_inertia s + motor_friction)(load_inertia s + load_friction)"
    " + (damping s + stiffness)(motor_inertia s + motor_friction + load_inertia s + load_friction))"
)

_MODELS = (
    PhysicsModel(
        "dc motor speed",
        "Armature voltage (V) to shaft speed (rad/s): voltage law of the armature with induced voltage, and the "
        "balance of torque.",
        f"torque_constant / {_MOTOR_BALANCE}",
        _MOTOR,
    ),
    PhysicsModel(
        "dc motor position",
        "Armature voltage (V) to shaft angle (rad): the integral of the speed of the same motor.",
        f"torque_constant / (s {_MOTOR_BALANCE})",
        _MOTOR,
    ),
    PhysicsModel(
        "tank level",
        "Inflow (m^3/s) to level (m) of a tank that drains through an opening, outflow_coefficient sqrt(level): "
        "balance of volume, linearised at the resting level.",
        "1 / (area s + outflow_coefficient / (2 sqrt(level)))",
        (
            _AREA,
            _P("outflow_coefficient", "m^2.5/s", 0.02, _SMALL, "Outflow at one metre of level."),
            _P("level", "m", 1.2, _SMALL, "Resting level."),
        ),
    ),
    PhysicsModel(
        "tank level, pumped outflow",
        "Inflow (m^3/s) to level (m) of a tank that a pump empties at a flow of its own: balance of volume, "
        "integrating.",
        "1 / (area s)",
        (_AREA,),
    ),
    PhysicsModel(
        "two tanks in a row",
        "Inflow (m^3/s) of the first tank to the level (m) of the second; both levels drive the flow between them: "
        "balance of volume of each, with linear resistances.",
        "second_resistance / ((first_area first_resistance s + 1)(second_area second_resistance s + 1)"
        " + first_area second_resistance s)",
        (
            _P("first_area", "m^2", 1.0, _SMALL, "Cross section of the first tank."),
            _P("second_area", "m^2", 1.4, _SMALL, "Cross section of the second tank."),
            _P("first_resistance", "s/m^2", 60.0, _SMALL, "Level difference for each flow between the tanks."),
            _P("second_resistance", "s/m^2", 80.0, _SMALL, "Level for each flow out of the second tank."),
        ),
    ),
    PhysicsModel(
        "stirred heater",
        "Heating power (W) to temperature (K) behind the piping of a stirred vessel with steady throughput: balance "
        "of energy, then plug flow through the pipe.",
        "exp(-(density pipe_volume / flow) s) / (density volume heat_capacity s + flow heat_capacity)",
        (
            _P("volume", "m^3", 0.12, _SMALL, "Liquid in the vessel."),
            _P("density", "kg/m^3", 1000.0, _SMALL, "Density of the liquid."),
            _P("heat_capacity", "J/(kg K)", 4180.0, _SMALL, "Heat capacity of the liquid."),
            _P("flow", "kg/s", 1.6, _SMALL, "Throughput."),
            _P("pipe_volume", "m^3", 0.012, 0.0, "Volume of the pipe up to the sensor."),
        ),
    ),
    PhysicsModel(
        "heat exchanger",
        "Steam temperature (K) to outlet temperature (K) of the liquid, one lump of wall and one of liquid: balance "
        "of energy of each.",
        "steam_transfer liquid_transfer / ((wall_capacity s + steam_transfer + liquid_transfer)"
        "(liquid_capacity s + flow_capacity + liquid_transfer) - liquid_transfer^2)",
        (
            _P("wall_capacity", "J/K", 9000.0, _SMALL, "Heat capacity of the wall."),
            _P("liquid_capacity", "J/K", 30000.0, _SMALL, "Heat capacity of the liquid inside."),
            _P("steam_transfer", "W/K", 2500.0, _SMALL, "Heat flow from steam to wall for each kelvin."),
            _P("liquid_transfer", "W/K", 1800.0, _SMALL, "Heat flow from wall to liquid for each kelvin."),
            _P("flow_capacity", "W/K", 2100.0, _SMALL, "Mass flow times heat capacity of the liquid."),
        ),
    ),
    PhysicsModel(
        "gas pressure vessel",
        "Inflow (kg/s) to pressure (Pa) of a vessel at constant temperature that leaks through a linear outlet: "
        "balance of mass with the law of ideal gases.",
        "1 / ((volume molar_mass / (8.314462618 temperature)) s + outlet)",
        (
            _P("volume", "m^3", 2.0, _SMALL, "Volume of the vessel."),
            _P("molar_mass", "kg/mol", 0.02897, _SMALL, "Molar mass of the gas."),
            _P("temperature", "K", 293.15, _SMALL, "Absolute temperature."),
            _P("outlet", "kg/(s Pa)", 1e-6, 0.0, "Outflow for each pascal."),
        ),
    ),
    PhysicsModel(
        "two-mass drive",
        "Motor torque (N m) to load speed (rad/s) through an elastic shaft: balance of torque of both masses.",
        f"(damping s + stiffness) / {_DRIVE_BALANCE}",
        _DRIVE,
    ),
    PhysicsModel(
        "two-mass drive, motor speed",
        "Motor torque (N m) to motor speed (rad/s) with the load on an elastic shaft: balance of torque of both "
        "masses.",
        f"(s (load_inertia s + load_friction) + damping s + stiffness) / {_DRIVE_BALANCE}",
        _DRIVE,
    ),
    PhysicsModel(
        "magnetic levitation",
        "Coil current (A) to height (m) of a body hanging below a magnet, with force force_constant (current/gap)^2: "
        "balance of force, linearised at the resting gap. Unstable.",
        "(2 sqrt(9.80665 force_constant / mass) / gap) / (s^2 - 2 * 9.80665 / gap)",
        (
            _P("mass", "kg", 0.06, _SMALL, "Mass of the body."),
            _P("force_constant", "N m^2/A^2", 0.0001, _SMALL, "Force at one ampere and one metre of gap."),
            _P("gap", "m", 0.012, _SMALL, "Resting gap below the magnet."),
        ),
    ),
    PhysicsModel(
        "web tension",
        "Torque of the driven roller (N m) to tension (N) of the web before it, fed in at a steady speed: strain of "
        "the span with transport of tension, and balance of torque. Lightly damped.",
        "(web_stiffness / span) radius / ((inertia s + friction)(s + speed / span) + (web_stiffness / span) radius^2)",
        (
            _P("web_stiffness", "N", 20000.0, _SMALL, "Modulus of elasticity times cross section of the web."),
            _P("span", "m", 2.5, _SMALL, "Length of the free web."),
            _P("speed", "m/s", 3.0, 0.0, "Speed of the web."),
            _P("radius", "m", 0.1, _SMALL, "Radius of the roller."),
            _P("inertia", "kg m^2", 0.08, _SMALL, "Moment of inertia of the roller and its drive."),
            _P("friction", "N m s/rad", 0.05, 0.0, "Viscous friction of the roller."),
        ),
    ),
)

PHYSICS: dict[str, PhysicsModel] = {model.name: model for model in _MODELS}
"""Every physical model by its name."""
