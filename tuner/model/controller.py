"""The controller: gains in the form they were given, times, weights, and the blocks around the law."""

from dataclasses import dataclass, replace
from math import sqrt
from typing import Any, Literal

from tuner.errors import LoopError
from tuner.model.parameters import GAIN_KEYS

Form = Literal["parallel", "standard", "series"]
Action = Literal["reverse", "direct"]

_HELD_AS = {"measurement_filter.time": "measurement_filter"}
"""Keys that are held under another name."""

_ROUNDING = 1e-12
"""Two equal times of the series form may come out this far beyond the bound that they lie on."""


@dataclass(frozen=True, slots=True)
class Gains:
    """Gains of the parallel form: kp, ki (per time unit), kd (times time unit)."""

    kp: float
    ki: float
    kd: float


def parallel_gains(form: Form, first: float, second: float, third: float) -> Gains:
    """Return the gains of a form in the parallel one.

    Standard: kp = kc, ki = kc/ti, kd = kc td. Series: kc (1 + 1/(ti s)) (1 + td s), multiplied out.
    `ti` = 0 means no integral action (Astrom and Hagglund, PID Controllers, 1995).
    """
    if form == "parallel":
        return Gains(first, second, third)
    integral = first / second if second else 0.0
    if form == "standard":
        return Gains(first, integral, first * third)
    interaction = third / second if second else 0.0
    return Gains(first * (1.0 + interaction), integral, first * third)


@dataclass(frozen=True, slots=True)
class Feedforward:
    """How the reference acts on the effort directly: `gain` for static, `filter_time` for inverse."""

    kind: Literal["static", "inverse"]
    gain: float | None = None
    filter_time: float | None = None


@dataclass(frozen=True, slots=True)
class ReferenceFilter:
    """Equal lags, `order` of them, between the reference and the law: 1/(time s + 1)^order."""

    time: float
    order: int = 1


@dataclass(frozen=True, slots=True)
class DisturbanceFeedforward:
    """Compensation of a measured disturbance.

    Parameters
    ----------
    expression : str
        The disturbance's own path to the output, as a formula.
    kind : str
        'static' for the ratio of the static gains, 'dynamic' for that of the whole paths; 'none' where the disturbance
        takes its path and no effort acts against it.
    filter_time : float or None
        Time of the lags that make an improper ratio proper; None where it is proper by itself.
    name, unit : str
        Of the measured disturbance.
    resting : float
        Its value at the resting point.
    """

    expression: str
    kind: Literal["static", "dynamic", "none"] = "dynamic"
    filter_time: float | None = None
    name: str = ""
    unit: str = ""
    resting: float = 0.0

    @property
    def acts(self) -> bool:
        """Whether any effort acts against the disturbance."""
        return self.kind != "none"


@dataclass(frozen=True, slots=True)
class Notch:
    """A notch: centre `frequency` in rad per time unit, gain `depth` there, bandwidth over centre `width`."""

    frequency: float
    depth: float = 0.1
    width: float = 1.0


@dataclass(frozen=True, slots=True)
class LeadLag:
    """A lead (`lead` above `lag`) or a lag on the measurement: (lead s + 1)/(lag s + 1), times in time units."""

    lead: float
    lag: float


@dataclass(frozen=True, slots=True)
class Controller:
    """A controller, gains as given in `form`; see the table in `parameters` for each number.

    Parameters
    ----------
    sample_time : float
        Time between samples; 0 means a continuous controller.
    gain_1, gain_2, gain_3 : float
        kp, ki, kd in the parallel form; kc, ti, td in the standard and series forms.
    measurement_filter : float
        Time of the measurement filter; 0 for none. Lead-lag and notch follow it, in this order.
    as_found : Controller or None
        The controller met on site, whole.
    """

    form: Form = "parallel"
    sample_time: float = 0.0
    gain_1: float = 0.0
    gain_2: float = 0.0
    gain_3: float = 0.0
    filter_time: float = 0.0
    b: float = 1.0
    c: float = 0.0
    windup_time: float | None = None
    action: Action = "reverse"
    feedback: bool = True
    delay_samples: int = 0
    feedforward: Feedforward | None = None
    reference_filter: ReferenceFilter | None = None
    disturbance_feedforward: DisturbanceFeedforward | None = None
    measurement_filter: float = 0.0
    lead_lag: LeadLag | None = None
    notch: Notch | None = None
    as_found: "Controller | None" = None

    @property
    def sign(self) -> float:
        """+1 for reverse action, -1 for direct."""
        return 1.0 if self.action == "reverse" else -1.0

    def value(self, name: str) -> float | None:
        """Return the number under a key of the sheet: a gain of the present form, a time or a weight.

        The number of a block has the block's name before it, as in "notch.depth"; None where there is no such block.
        """
        block, dot, below = self._field(name).partition(".")
        held = getattr(self, block)
        value: float | None = getattr(held, below) if dot and held is not None else held
        return value

    def with_value(self, name: str, value: float | None) -> "Controller":
        """Return this controller with one number changed, named as `value` takes it; its block must be there."""
        block, dot, below = self._field(name).partition(".")
        changed: Any = replace(getattr(self, block), **{below: value}) if dot else value
        return replace(self, **{block: changed})

    def _field(self, name: str) -> str:
        """Return where a key of the sheet is held, dotted in a block."""
        gains = GAIN_KEYS[self.form]
        return f"gain_{gains.index(name) + 1}" if name in gains else _HELD_AS.get(name, name)

    def parallel(self) -> Gains:
        """Return the gains in the parallel form."""
        return parallel_gains(self.form, self.gain_1, self.gain_2, self.gain_3)

    def in_form(self, form: Form) -> "Controller":
        """Return the same controller with its gains in another form; the loop is unchanged.

        Raises
        ------
        LoopError
            When the gains have no such form: no proportional gain beside the others, or, for the series form,
            ti < 4 td (Astrom and Hagglund, PID Controllers, 1995).
        """
        if form == self.form:
            return self
        gains = self.parallel()
        if form == "parallel":
            return replace(self, form=form, gain_1=gains.kp, gain_2=gains.ki, gain_3=gains.kd)
        if gains.kp == 0.0 and (gains.ki or gains.kd):
            raise LoopError(f"the {form} form needs a proportional gain: kp is 0 while ki or kd is not")
        ti = gains.kp / gains.ki if gains.ki else 0.0
        td = gains.kd / gains.kp if gains.kp else 0.0
        if form == "standard":
            return replace(self, form=form, gain_1=gains.kp, gain_2=ti, gain_3=td)
        return self._in_series(gains.kp, ti, td)

    def _in_series(self, kc: float, ti: float, td: float) -> "Controller":
        if ti == 0.0 or td == 0.0:
            return replace(self, form="series", gain_1=kc, gain_2=ti, gain_3=td)
        square = 1.0 - 4.0 * td / ti
        if square < -_ROUNDING:
            raise LoopError(
                f"the series form exists only when the integral time is at least four derivative times: "
                f"Ti = {ti:g} is less than 4 Td = {4.0 * td:g}"
            )
        root = sqrt(max(square, 0.0))
        small = 2.0 * td / (1.0 + root)
        return replace(
            self, form="series", gain_1=kc * (1.0 + root) / 2.0, gain_2=ti * (1.0 + root) / 2.0, gain_3=small
        )
