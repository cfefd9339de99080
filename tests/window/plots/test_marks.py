"""Marks have the coordinates of the overlay, to the last figure."""

from math import inf, pi, radians, tan

import pytest

from tests.window import made_up
from tuner.judge.overlay import Band, Boundary, Instant, Level, Overlay, Wedge
from tuner.model.controller import Controller
from tuner.window.plots.extent import Extent
from tuner.window.plots.marks import Area, Stroke, pole_marks, rectangle, trace_marks

SHEET = made_up.sheet()


def test_a_band_is_an_area_with_its_edges() -> None:
    """Area, edges and gate lie at the band's own numbers, its words at its end."""
    band = Band("reference", "settling_time", "±2 % from 90 s", 90.0, 240.0, 4.9, 5.1)
    made = trace_marks("reference", SHEET, Overlay(bands=(band,)))
    assert made.areas == (Area(rectangle(90.0, 240.0, 4.9, 5.1), "limit_zone"),)
    assert {(s.x0, s.y0, s.x1, s.y1) for s in made.strokes} == {
        (90.0, 4.9, 240.0, 4.9),
        (90.0, 5.1, 240.0, 5.1),
        (90.0, 4.9, 90.0, 5.1),
    }
    assert made.words[0].text == "±2 % from 90 s"


def test_a_limit_level_is_a_line_across() -> None:
    """A limit of the acceptance sheet is a line over the whole duration, without hatching."""
    level = Level("reference", "overshoot", "overshoot 8 %", 5.4, "below")
    made = trace_marks("reference", SHEET, Overlay(levels=(level,)))
    assert made.strokes == (Stroke(0.0, 5.4, 240.0, 5.4, "limit", measure="overshoot"),)
    assert made.areas == ()


@pytest.mark.parametrize(("value", "keep", "ends"), [(60.0, "below", (60.0, inf)), (-40.0, "above", (-inf, -40.0))])
def test_beyond_the_range_of_the_actuator_it_is_hatched(value: float, keep: str, ends: tuple[float, float]) -> None:
    """The hatching reaches from the end of the range to infinity."""
    level = Level("effort", "", "limit", value, keep)  # type: ignore[arg-type]  # parametrised literals
    (area,) = trace_marks("effort", SHEET, Overlay(levels=(level,))).areas
    assert area.hatched
    assert {y for _, y in area.corners} == set(ends)


def test_the_reference_is_a_dashed_mark() -> None:
    """The reference itself is no limit: dashed and quiet."""
    (stroke,) = trace_marks("reference", SHEET, Overlay(levels=(Level("reference", "", "r", 5.0, ""),))).strokes
    assert stroke.dashed
    assert (stroke.y0, stroke.y1) == (5.0, 5.0)


def test_an_instant_is_a_stroke_at_its_time() -> None:
    """A time by which something must have happened stands upright there."""
    instant = Instant("reference", "rise_time", "90 % by 30 s", 30.0, 0.5, 4.5)
    (stroke,) = trace_marks("reference", SHEET, Overlay(instants=(instant,))).strokes
    assert (stroke.x0, stroke.y0, stroke.x1, stroke.y1) == (30.0, 0.5, 30.0, 4.5)


def test_a_plot_shows_only_its_own_marks() -> None:
    """What belongs to another plot is not drawn."""
    level = Level("effort", "", "limit", 60.0, "below")
    assert trace_marks("disturbance", SHEET, Overlay(levels=(level,))).strokes == ()


def test_the_wedge_has_its_angle() -> None:
    """The rays of damping 0.5 leave the origin at 60 degrees from the negative real axis."""
    made = pole_marks(SHEET, Overlay(wedge=Wedge("damping", "damping 0.5", 0.5, 60.0)))
    rays = [stroke for stroke in made.strokes if stroke.measure == "damping"]
    assert {round(stroke.y1 / stroke.x1, 9) for stroke in rays} == {
        round(sign * tan(radians(60.0)), 9) for sign in (1.0, -1.0)
    }


def test_the_settling_boundary_stands_at_its_real_part() -> None:
    """An upright line at the boundary; what is slower is shaded up to the axis."""
    made = pole_marks(SHEET, Overlay(boundary=Boundary("settling_time", "±2 % in 90 s", -0.0435)))
    (line,) = [stroke for stroke in made.strokes if stroke.measure == "settling_time"]
    assert line.x0 == line.x1 == -0.0435
    assert any({x for x, _ in area.corners} == {-0.0435, 0.0} for area in made.areas)


def test_half_the_sampling_frequency_is_marked_for_a_sampled_loop() -> None:
    """At pi / 0.5 s above and below; a continuous controller has no such line."""
    kept = [stroke.y0 for stroke in pole_marks(SHEET, Overlay()).strokes if stroke.role == "kept"]
    assert sorted(kept) == pytest.approx([-pi / 0.5, pi / 0.5])
    continuous = made_up.sheet(controller=Controller(gain_1=1.0))
    assert not [stroke for stroke in pole_marks(continuous, Overlay()).strokes if stroke.role == "kept"]


def test_the_unstable_half_is_hatched() -> None:
    """Right of the imaginary axis the plane is hatched, to infinity."""
    (area,) = [area for area in pole_marks(SHEET, Overlay()).areas if area.hatched]
    assert {x for x, _ in area.corners} == {0.0, inf}


def test_levels_say_what_must_stay_in_sight() -> None:
    """The finite heights of strokes, and none when there are no strokes."""
    level = Level("reference", "overshoot", "", 5.4, "below")
    assert trace_marks("reference", SHEET, Overlay(levels=(level,))).levels() == Extent(5.4, 5.4)
    assert trace_marks("reference", SHEET, Overlay()).levels() is None
