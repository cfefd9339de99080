"""What stands beside a plot: the limits that are missed there, or that none is."""

from collections.abc import Collection

from tuner.judge.overlay import PLOT_OF, Plot
from tuner.window.shown import Shown


def missed_words(shown: Shown, plots: Collection[Plot]) -> tuple[str, bool]:
    """Return the words on the limits that belong to some plots, and whether any of them is missed."""
    missed = [callout.sentence for callout in shown.overlay.callouts if callout.plot in plots]
    if missed:
        return "; ".join(missed), True
    return met_words(sum(PLOT_OF[limit.measure] in plots for limit in shown.assessment.limits)), False


def met_words(count: int) -> str:
    """Return the words on so many limits that are all met."""
    few = ("nothing here is on the acceptance sheet", "the limit here is met", "both limits here are met")
    return few[count] if count < len(few) else f"all {count} limits here are met"
