"""Static feedforward, as a plain function in the same small subset as `pid.law`."""


def static(reference: float, resting_measurement: float, feedforward_gain: float) -> float:
    """Return the effort, as a deviation, that a reference asks for by itself.

    Parameters
    ----------
    reference, resting_measurement : float
        In engineering units of the controlled signal.
    feedforward_gain : float
        Effort for each unit of reference.
    """
    return feedforward_gain * (reference - resting_measurement)
