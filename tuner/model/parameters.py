"""The one table of every key of a tuning sheet that is not the plant's own.

Reading and checking sheets, sliders, editors, documentation and exported comments all derive from it.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from enum import StrEnum


class Kind(StrEnum):
    """What sort of value a key takes."""

    NUMBER = "a number"
    INTEGER = "a whole number"
    TEXT = "a text"
    FLAG = "true or false"
    SPREAD = '"20 %" or [low, high]'
    CHOICE = "one of a few words"


@dataclass(frozen=True, slots=True)
class Parameter:
    """One key of the sheet.

    Parameters
    ----------
    section, name : str
        Table of the sheet, dotted, and the key in it.
    symbol : str
        How formulas and sliders write it.
    kind : Kind
        What sort of value it takes.
    sentence : str
        What it is, in one sentence.
    unit : str
        Unit, with ``{t}`` for the time unit, ``{y}`` for the controlled and ``{u}`` for the manipulated signal's unit.
    default : float, str, bool or None
        Value when the key is absent; None when absence itself has a meaning, or when the key is required.
    required : bool
        Whether a sheet without it is refused.
    minimum, maximum : float or None
        Smallest and largest value allowed.
    above_minimum : bool
        Whether the minimum itself is excluded.
    choices : tuple of str
        The words of a CHOICE.
    ruler : bool
        Whether it is a gain that gets a slider.
    """

    section: str
    name: str
    symbol: str
    kind: Kind
    sentence: str
    unit: str = ""
    default: float | str | bool | None = None
    required: bool = False
    minimum: float | None = None
    maximum: float | None = None
    above_minimum: bool = False
    choices: tuple[str, ...] = ()
    ruler: bool = False

    @property
    def path(self) -> str:
        """The dotted path of the key in the sheet."""
        return f"{self.section}.{self.name}" if self.section else self.name

    @property
    def key(self) -> str:
        """The path below the controller, as `Controller.value` takes it: "kp", "notch.depth"."""
        return self.path.removeprefix("controller.")


def _number(section: str, name: str, symbol: str, sentence: str, **more: object) -> Parameter:
    return Parameter(section, name, symbol, Kind.NUMBER, sentence, **more)  # type: ignore[arg-type] # keys are checked by the dataclass


def _spread(section: str) -> Parameter:
    return Parameter(section, "spread", "", Kind.SPREAD, "How far the lag may drift; absent: not at all.", unit="{t}")


def _signal(section: str, what: str, unit: str) -> tuple[Parameter, ...]:
    return (
        Parameter(section, "name", "", Kind.TEXT, f"Name of the {what}.", default=""),
        Parameter(section, "unit", "", Kind.TEXT, f"Engineering unit of the {what}.", default=""),
        _number(section, "low", "", f"Lower end of the range of the {what}; absent: none.", unit=unit),
        _number(section, "high", "", f"Upper end of the range of the {what}; absent: none.", unit=unit),
        _number(section, "resting", "", f"Value of the {what} at the resting point.", unit=unit, default=0.0),
    )


def _notch(section: str) -> tuple[Parameter, ...]:
    return (
        _number(
            section,
            "frequency",
            "w",
            "Centre of the notch.",
            unit="rad/{t}",
            required=True,
            minimum=0,
            above_minimum=True,
            ruler=True,
        ),
        _number(
            section, "depth", "g", "Gain at the centre of the notch.", default=0.1, minimum=0, maximum=1, ruler=True
        ),
        _number(
            section,
            "width",
            "q",
            "Bandwidth of the notch over its centre.",
            default=1.0,
            minimum=0,
            above_minimum=True,
            ruler=True,
        ),
    )


_C = "controller"
_TIME = {"unit": "{t}", "minimum": 0}

PARAMETERS: tuple[Parameter, ...] = (
    Parameter("", "sheet", "", Kind.INTEGER, "Version of the format.", required=True, minimum=1, maximum=1),
    Parameter("loop", "title", "", Kind.TEXT, "Name of the loop.", required=True),
    Parameter("loop", "story", "", Kind.TEXT, "What the loop does, in a line.", default=""),
    Parameter(
        "loop",
        "time_unit",
        "",
        Kind.CHOICE,
        "Unit of every time and frequency of the sheet.",
        default="s",
        choices=("s", "min", "h"),
    ),
    *_signal("loop.controlled", "controlled signal", "{y}"),
    *_signal("loop.manipulated", "manipulated signal", "{u}"),
    _number(
        "loop.manipulated",
        "rate",
        "",
        "Fastest change of the effort; absent: none.",
        unit="{u}/{t}",
        minimum=0,
        above_minimum=True,
    ),
    _number("actuator", "lag", "Ta", "First-order lag of the actuator.", default=0.0, **_TIME),
    _spread("actuator"),
    _number("sensor", "lag", "Ts", "First-order lag of the sensor.", default=0.0, **_TIME),
    _spread("sensor"),
    _number(
        "sensor", "noise", "sigma", "Standard deviation of the measurement noise.", unit="{y}", default=0.0, minimum=0
    ),
    _number("sensor", "resolution", "q", "Smallest step of the measurement.", unit="{y}", default=0.0, minimum=0),
    Parameter(
        _C,
        "form",
        "",
        Kind.CHOICE,
        "Form in which the gains are given.",
        default="parallel",
        choices=("parallel", "standard", "series"),
    ),
    _number(_C, "sample_time", "Ts", "Time between samples; 0: a continuous controller.", required=True, **_TIME),
    _number(_C, "kp", "kp", "Proportional gain.", unit="{u}/{y}", default=0.0, minimum=0, ruler=True),
    _number(_C, "ki", "ki", "Integral gain.", unit="{u}/({y} {t})", default=0.0, minimum=0, ruler=True),
    _number(_C, "kd", "kd", "Derivative gain.", unit="{u} {t}/{y}", default=0.0, minimum=0, ruler=True),
    _number(_C, "kc", "Kc", "Controller gain.", unit="{u}/{y}", default=0.0, minimum=0, ruler=True),
    _number(_C, "ti", "Ti", "Integral time; 0: no integral action.", default=0.0, ruler=True, **_TIME),
    _number(_C, "td", "Td", "Derivative time.", default=0.0, ruler=True, **_TIME),
    _number(
        _C,
        "filter_time",
        "Tf",
        "Time of the derivative filter; 0: unfiltered.",
        default=0.0,
        ruler=True,
        **_TIME,
    ),
    _number(_C, "b", "b", "Weight of the reference in the proportional part.", default=1.0, minimum=0, ruler=True),
    _number(_C, "c", "c", "Weight of the reference in the derivative part.", default=0.0, minimum=0, ruler=True),
    _number(
        _C,
        "windup_time",
        "Tt",
        "Time in which a limit empties the integral; absent: the integral ignores limits.",
        unit="{t}",
        minimum=0,
        above_minimum=True,
        ruler=True,
    ),
    Parameter(
        _C,
        "action",
        "",
        Kind.CHOICE,
        "Reverse for a plant whose output rises with the effort, direct for one whose output falls.",
        default="reverse",
        choices=("reverse", "direct"),
    ),
    Parameter(_C, "feedback", "", Kind.FLAG, "False opens the loop: feedforward alone.", default=True),
    Parameter(
        _C,
        "delay_samples",
        "",
        Kind.INTEGER,
        "Computing delay in samples.",
        unit="samples",
        default=0,
        minimum=0,
        maximum=1000,
    ),
    Parameter(
        f"{_C}.feedforward",
        "kind",
        "",
        Kind.CHOICE,
        "How the reference acts on the effort directly.",
        required=True,
        choices=("static", "inverse"),
    ),
    _number(
        f"{_C}.feedforward", "gain", "Kf", "Effort for each unit of reference (static).", unit="{u}/{y}", ruler=True
    ),
    _number(
        f"{_C}.feedforward",
        "filter_time",
        "Tv",
        "Time of the filter that makes the inverse proper.",
        above_minimum=True,
        ruler=True,
        **_TIME,
    ),
    _number(
        f"{_C}.reference_filter",
        "time",
        "Tr",
        "Time of each lag between the reference and the control law.",
        required=True,
        above_minimum=True,
        ruler=True,
        **_TIME,
    ),
    Parameter(
        f"{_C}.reference_filter",
        "order",
        "",
        Kind.INTEGER,
        "Number of equal lags of the reference filter.",
        default=1,
        minimum=1,
        maximum=8,
    ),
    Parameter(
        f"{_C}.disturbance_feedforward",
        "expression",
        "",
        Kind.TEXT,
        "Path of the measured disturbance to the output, as a formula.",
        required=True,
    ),
    Parameter(
        f"{_C}.disturbance_feedforward",
        "kind",
        "",
        Kind.CHOICE,
        "Static: the ratio of the static gains. Dynamic: that of the whole paths, as far as it is causal. "
        "None: no effort acts against the disturbance.",
        default="dynamic",
        choices=("static", "dynamic", "none"),
    ),
    _number(
        f"{_C}.disturbance_feedforward",
        "filter_time",
        "Tz",
        "Time of the lags that make an improper ratio proper; absent: none.",
        above_minimum=True,
        ruler=True,
        **_TIME,
    ),
    Parameter(f"{_C}.disturbance_feedforward", "name", "", Kind.TEXT, "Name of the measured disturbance.", default=""),
    Parameter(f"{_C}.disturbance_feedforward", "unit", "", Kind.TEXT, "Unit of the measured disturbance.", default=""),
    _number(
        f"{_C}.disturbance_feedforward",
        "resting",
        "",
        "Value of the measured disturbance at the resting point.",
        default=0.0,
    ),
    _number(
        f"{_C}.measurement_filter",
        "time",
        "Tm",
        "Time of the first-order measurement filter.",
        required=True,
        above_minimum=True,
        ruler=True,
        **_TIME,
    ),
    _number(f"{_C}.lead_lag", "lead", "Tl", "Time of the lead on the measurement.", required=True, ruler=True, **_TIME),
    _number(
        f"{_C}.lead_lag",
        "lag",
        "Tg",
        "Time of the lag on the measurement.",
        required=True,
        above_minimum=True,
        ruler=True,
        **_TIME,
    ),
    *_notch(f"{_C}.notch"),
    _number("trial", "reference", "", "Size of the reference step.", unit="{y}", default=1.0),
    _number("trial", "disturbance", "", "Size of the disturbance step, at the plant input.", unit="{u}", default=0.0),
    _number("trial", "duration", "", "Length of each run.", unit="{t}", required=True, minimum=0, above_minimum=True),
    _number(
        "trial",
        "settling_band",
        "",
        "Half width of the band of settling and recovery.",
        unit="%",
        default=2.0,
        minimum=0,
        maximum=100,
        above_minimum=True,
    ),
    Parameter(
        "trial",
        "family_size",
        "",
        Kind.INTEGER,
        "Plants that the spread makes and the verdict holds for, the nominal one included.",
        default=25,
        minimum=1,
        maximum=2000,
    ),
)

AS_FOUND_KEYS = tuple(parameter.name for parameter in PARAMETERS if parameter.section == _C)
"""Keys of the controller that the as-found table may repeat; those it leaves out are the controller's."""

BLOCKS = ("feedforward", "reference_filter", "disturbance_feedforward", "measurement_filter", "lead_lag", "notch")
"""Tables of the controller, of blocks around the law, that the as-found table may repeat as well."""

GAIN_KEYS: dict[str, tuple[str, str, str]] = {
    "parallel": ("kp", "ki", "kd"),
    "standard": ("kc", "ti", "td"),
    "series": ("kc", "ti", "td"),
}
"""The three gains of each form."""


def in_section(section: str) -> tuple[Parameter, ...]:
    """Return the parameters of one table of the sheet, in order."""
    return tuple(parameter for parameter in PARAMETERS if parameter.section == section)


def find(path: str) -> Parameter:
    """Return the parameter at a dotted path.

    Raises
    ------
    KeyError
        When the table has no such parameter.
    """
    return _BY_PATH[path]


def rulers(form: str) -> tuple[Parameter, ...]:
    """Return the parameters of the law itself that get a slider when the gains are in `form`."""
    foreign = {key for keys in GAIN_KEYS.values() for key in keys} - set(GAIN_KEYS[form])
    return tuple(one for one in in_section(_C) if one.ruler and one.name not in foreign)


def block_rulers(block: str) -> tuple[Parameter, ...]:
    """Return the parameters of a block of the controller that get a slider, by the key of its table."""
    return tuple(parameter for parameter in in_section(f"{_C}.{block}") if parameter.ruler)


def _by_path(parameters: Iterable[Parameter]) -> dict[str, Parameter]:
    return {parameter.path: parameter for parameter in parameters}


_BY_PATH = _by_path(PARAMETERS)
