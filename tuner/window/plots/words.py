"""What stands beside a plot: the limits that are missed there, or that none is."""

from collections.abc import Collection

from tuner.judge.overlay import PLOT_OF, Plot
from tuner.window.shown import Shown


def missed_words(shown: Shown, plots: Collection[Plot]) -> tuple[str, bool]:
    """Return the words on the limits that belong to some plots, and whether any of them is missed."""
    missed = [callout.sentence for callout in shown.overlay.callouts if callout.plot in plots]
    if missed:
        return "; ".join(missed), True
    count = sum(PLOT_OF[limit.measure] in plots for limit in shown.assessment.limits)
    if not count:
        return "nothing here is on the acceptance sheet", False
    met = {1: "the limit here is met", 2: "both limits here are met"}
    return met.get(count, f"all {count} limits here are met"), False
