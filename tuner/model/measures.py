"""The one table of measures: numbers read off the trial and the loop, and how a limit bounds each."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Measure:
    """One measure.

    Parameters
    ----------
    name, label : str
        Key in sheets and results, and words on screen.
    unit : str
        With ``{t}``, ``{y}``, ``{u}`` as in `parameters.Parameter`; '' for a plain ratio.
    at_least : bool
        True when a limit is a lower bound; otherwise it is an upper bound.
    none_is_good : bool
        True when a null value means "none" (no overshoot) and so meets any limit.
    sentence : str
        Definition, in one sentence.
    by_size : bool
        True when the limit bounds the absolute value.
    """

    name: str
    label: str
    unit: str
    sentence: str
    at_least: bool = False
    none_is_good: bool = False
    by_size: bool = False


MEASURES: tuple[Measure, ...] = (
    Measure("overshoot", "overshoot", "%", "Highest excursion of the output beyond its final value, in % of it."),
    Measure("peak_time", "peak time", "{t}", "Time of the first maximum, when it overshoots.", none_is_good=True),
    Measure("rise_time", "rise time", "{t}", "Time from 10 % to 90 % of the final value."),
    Measure("settling_time", "settling time", "{t}", "Time after which the output stays in the settling band."),
    Measure(
        "steady_state_error",
        "steady-state error",
        "%",
        "Reference minus final value, in % of the reference step.",
        by_size=True,
    ),
    Measure("undershoot", "undershoot", "%", "Excursion of the output the wrong way, in % of the final value."),
    Measure("iae_reference", "IAE, reference", "{y} {t}", "Integral of the absolute error of the reference trial."),
    Measure(
        "iae_disturbance", "IAE, disturbance", "{y} {t}", "Integral of the absolute error of the disturbance trial."
    ),
    Measure("disturbance_peak", "disturbance peak", "{y}", "Largest absolute deviation after the disturbance step."),
    Measure(
        "disturbance_recovery",
        "recovery time",
        "{t}",
        "Time after which the deviation stays in the band about its final value.",
    ),
    Measure("peak_effort", "peak effort", "{u}", "Largest absolute deviation of the effort, reference trial."),
    Measure("effort_travel", "effort travel", "{u}", "Total variation of the effort, reference trial."),
    Measure(
        "saturated_share", "share at a limit", "", "Share of the samples of the reference trial at a limit, 0 to 1."
    ),
    Measure("gain_margin", "gain margin", "", "Smallest factor above one that the loop gain can take.", at_least=True),
    Measure("phase_margin", "phase margin", "deg", "Smallest phase lag that the loop can take.", at_least=True),
    Measure("delay_margin", "delay margin", "{t}", "Smallest dead time that the loop can take.", at_least=True),
    Measure("max_sensitivity", "max sensitivity", "", "Peak of the sensitivity abs(S)."),
    Measure("max_complementary", "max complementary sensitivity", "", "Peak of abs(T)."),
    Measure("bandwidth", "bandwidth", "rad/{t}", "Lowest frequency where abs(S) reaches 0.707.", at_least=True),
    Measure("damping", "damping", "", "Smallest damping ratio of the closed-loop poles.", at_least=True),
)

BY_NAME: dict[str, Measure] = {measure.name: measure for measure in MEASURES}
