"""The control law: one sample of it, as a plain function over scalars.

Everything that runs this law derives from the text of `law`: the simulation compiles it, and the exporters translate
its syntax tree. It therefore keeps to a small subset: assignment, if/else, comparison, `and`, addition, subtraction
and multiplication. There is no division and no call, so every target computes the same bits.
"""

# ruff: noqa: PLR1730 - languages differ in what min and max make of a signed zero; comparisons they share

INPUTS = ("reference", "measurement", "feedforward", "manual_effort")
"""What a sample brings, in engineering units; `feedforward` is an effort added to that of the feedback."""

STATE = (
    "effort",
    "integral",
    "derivative",
    "weighted_error",
    "filtered",
    "lead_memory",
    "notch_1",
    "notch_2",
    "mode",
    "limited",
    "fault",
)
"""What is kept from sample to sample; `effort` is the output. All start at zero, which is the resting point."""

PARAMETERS = (
    "proportional_gain",
    "integral_gain",
    "derivative_gain",
    "derivative_decay",
    "windup_gain",
    "b",
    "c",
    "action",
    "low",
    "high",
    "rate_step",
    "filter_gain",
    "lead_gain",
    "lead_rest",
    "lead_share",
    "notch_b0",
    "notch_b1",
    "notch_b2",
    "notch_a1",
    "notch_a2",
    "resting_measurement",
    "resting_effort",
)
"""The constants of one controller, as `constants.bake` makes them from gains and times."""

AUTOMATIC, MANUAL, TRANSFER = 0.0, 1.0, 2.0
"""Values of `mode`. TRANSFER lasts one sample: the integral takes the value that keeps the effort where it is."""


def law(  # noqa: C901, PLR0913, PLR0917 - one text of scalars, which compilers and translators take whole
    reference: float,
    measurement: float,
    feedforward: float,
    manual_effort: float,
    effort: float,
    integral: float,
    derivative: float,
    weighted_error: float,
    filtered: float,
    lead_memory: float,
    notch_1: float,
    notch_2: float,
    mode: float,
    limited: float,
    fault: float,
    proportional_gain: float,
    integral_gain: float,
    derivative_gain: float,
    derivative_decay: float,
    windup_gain: float,
    b: float,
    c: float,
    action: float,
    low: float,
    high: float,
    rate_step: float,
    filter_gain: float,
    lead_gain: float,
    lead_rest: float,
    lead_share: float,
    notch_b0: float,
    notch_b1: float,
    notch_b2: float,
    notch_a1: float,
    notch_a2: float,
    resting_measurement: float,
    resting_effort: float,
) -> tuple[float, float, float, float, float, float, float, float, float, float, float]:
    """Compute one sample of the two-degree-of-freedom PID law and return the new state, in the order of STATE.

    The integral is a forward difference and the derivative a backward difference (Astrom and Wittenmark,
    Computer-Controlled Systems); the limited effort feeds back to the integral. `effort` is kept as a deviation
    from `resting_effort`, like every other state.

    Parameters
    ----------
    reference, measurement : float
        In engineering units. A value that is not finite holds the last effort and raises `fault`.
    feedforward : float
        Effort to add, as a deviation.
    manual_effort : float
        Effort in engineering units, taken while `mode` is MANUAL, and limited like any other; finite in every mode.
    effort, integral, ..., fault : float
        The state that the previous sample returned.
    proportional_gain, ..., resting_effort : float
        The constants of the controller, see `constants.bake`.

    Returns
    -------
    tuple of float
        The new state. `limited` is 1.0 when a limit changed the effort.
    """
    # A difference with itself is zero for finite numbers only; anything else holds the effort.
    if (
        (reference - reference == 0.0)
        and (measurement - measurement == 0.0)
        and (feedforward - feedforward == 0.0)
        and (manual_effort - manual_effort == 0.0)
    ):
        fault = 0.0

        # Measurement filter, lead-lag and notch.
        asked = reference - resting_measurement
        filtered = filtered + (filter_gain * ((measurement - resting_measurement) - filtered))
        led = (lead_gain * filtered) + lead_memory
        lead_memory = lead_memory + (lead_share * ((lead_rest * filtered) - lead_memory))
        found = (notch_b0 * led) + notch_1
        notch_1 = ((notch_b1 * led) - (notch_a1 * found)) + notch_2
        notch_2 = (notch_b2 * led) - (notch_a2 * found)

        # Proportional and derivative parts.
        proportional = proportional_gain * ((b * asked) - found)
        weighted = (c * asked) - found
        derivative = (derivative_decay * derivative) + (derivative_gain * (weighted - weighted_error))
        weighted_error = weighted

        # Effort wanted: automatic, by hand, or held for the one sample of the transfer.
        wanted = (action * ((proportional + integral) + derivative)) + feedforward
        if mode == 1.0:
            wanted = manual_effort - resting_effort
        if mode == 2.0:
            wanted = effort

        # Limits in value, then in rate.
        allowed = wanted
        if allowed < low:
            allowed = low
        if allowed > high:
            allowed = high
        if allowed < effort - rate_step:
            allowed = effort - rate_step
        if allowed > effort + rate_step:
            allowed = effort + rate_step

        limited = 0.0
        if allowed != wanted:
            limited = 1.0

        # Integral; outside automatic it takes the value that continues the effort.
        if mode == 0.0:
            integral = (integral + (integral_gain * (asked - found))) + ((windup_gain * action) * (allowed - wanted))
        else:
            integral = ((action * (allowed - feedforward)) - proportional) - derivative
            if mode == 2.0:
                integral = integral + (integral_gain * (asked - found))
                mode = 0.0
        effort = allowed
    else:
        fault = 1.0
    return (effort, integral, derivative, weighted_error, filtered, lead_memory, notch_1, notch_2, mode, limited, fault)
