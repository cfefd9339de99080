"""The Bode plots of the loop gain, and the plot of both sensitivities."""

from typing import TYPE_CHECKING

from tuner.window.frequency import margin_marks
from tuner.window.frequency.divisions import DECIBELS, DEGREES
from tuner.window.frequency.panel import Bundle, FrequencyPanel
from tuner.window.plots.extent import Extent
from tuner.window.plots.marks import Marks
from tuner.window.shown import Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

HALF_TURN = -180.0

_LEAST_TOP, _MOST_TOP = 2.0, 6.0
"""How high the plot of the sensitivities reaches: at least, and at most for the sake of a peak."""
_ABOVE = 1.15
"""Room above a peak or a limit."""


class MagnitudePanel(FrequencyPanel):
    """The size of the loop gain over frequency, with the gain margin."""

    measures = ("gain_margin",)
    steps = DECIBELS

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the size of L."""
        return (Bundle(curves.decibels, "loop gain |L|", "nominal", 0.25),)

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the line of one, the gain margin, and its limit."""
        return margin_marks.joined(
            margin_marks.line_at(curves, 0.0),
            margin_marks.gain_margin(shown, curves),
            margin_marks.end_of_samples(curves, self.height().low),
        )

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "size of the loop gain, dB"

    def height(self) -> Extent:
        """Return the heights around one."""
        return Extent(-40.0, 40.0)


class PhasePanel(FrequencyPanel):
    """The phase of the loop gain over frequency, with the phase margin and the delay margin."""

    measures = ("phase_margin", "delay_margin")
    steps = DEGREES

    def __init__(self, name: str, theme: Theme) -> None:
        self._line = HALF_TURN
        super().__init__(name, theme)

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the phase of L."""
        return (Bundle(curves.phase, "phase of L", "nominal", 0.25),)

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the line of half a turn, both margins, and their limits."""
        self._line = min(HALF_TURN, margin_marks.half_turn(shown, curves))
        return margin_marks.joined(
            margin_marks.line_at(curves, HALF_TURN),
            margin_marks.phase_margin(shown, curves),
            margin_marks.delay_margin(shown, curves),
            margin_marks.end_of_samples(curves, self.height().low),
        )

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "phase of the loop gain, °"

    def height(self) -> Extent:
        """Return the phases around half a turn, and around the one from which the margin is taken."""
        return Extent(self._line - 180.0, 0.0)


class SensitivityPanel(FrequencyPanel):
    """Sensitivity and complementary sensitivity over frequency, with their limits."""

    measures = ("max_sensitivity", "max_complementary", "bandwidth")

    def __init__(self, name: str, theme: Theme) -> None:
        self._top = _LEAST_TOP
        super().__init__(name, theme, kinds=2)

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the sizes of S and T."""
        return (
            Bundle(curves.sensitivity, "sensitivity |S|", "nominal", 0.8),
            Bundle(curves.complementary, "complementary |T|", "disturbance", 0.15),
        )

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the limits of both peaks and of the bandwidth, and the peaks."""
        self._top = self._room(shown)
        return margin_marks.joined(
            margin_marks.sensitivity_limits(shown, curves),
            margin_marks.peaks(shown),
            margin_marks.end_of_samples(curves, 0.0),
        )

    def worst_kind(self, measure: str) -> int:
        """Return the curves of T for its own peak, else those of S."""
        return 1 if measure == "max_complementary" else 0

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "sizes of both sensitivities, 1"

    def height(self) -> Extent:
        """Return the heights up to the limits and the peak."""
        return Extent(0.0, self._top)

    @staticmethod
    def _room(shown: Shown) -> float:
        limits, margins = dict(shown.sheet.limits), shown.assessment.nominal.margins
        most = max(limits.get("max_sensitivity", 0.0), limits.get("max_complementary", 0.0))
        peak = max(margins.max_sensitivity, margins.max_complementary) if margins is not None else _LEAST_TOP
        return max(_LEAST_TOP, _ABOVE * most, min(_ABOVE * peak, _MOST_TOP))
