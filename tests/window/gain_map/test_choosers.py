"""Which gains are the axes, and whose values the contours are."""

from tests.window.gain_map.made_up_map import Mapping
from tuner.session.document import Document
from tuner.window.gain_map.page import GainMapPage


def choose(page: GainMapPage, which: int, name: str) -> None:
    """Choose a gain by hand."""
    box = (page.choosers.across, page.choosers.upwards)[which]
    box.setCurrentIndex(box.findData(name))
    box.activated.emit(box.currentIndex())


def test_any_two_gains(page: GainMapPage, mapping: Mapping) -> None:
    """Choosing another gain asks for it; choosing the other axis' gain swaps both."""
    choose(page, 1, "kd")
    assert mapping.asked[-1][1:3] == ("kp", "kd")
    choose(page, 0, "kd")
    assert mapping.asked[-1][1:3] == ("kd", "kp")


def test_another_form_brings_its_own_gains(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """The gains at the same places are mapped."""
    assert document.set_form("standard")
    assert mapping.asked[-1][1:3] == ("kc", "ti")
    assert page.view.axes[0].title == "kc, %/degC"


def test_the_measure_of_the_contours(page: GainMapPage, mapping: Mapping) -> None:
    """At first it is that of the first limit, whose line is drawn; none draws none."""
    assert mapping.asked[-1][3] == "overshoot"
    assert page.view.answer is not None
    assert [contour.level for contour in page.view.answer.contours if contour.is_limit] == [8.0]
    page.choosers.measure.setCurrentIndex(0)
    page.choosers.measure.activated.emit(0)
    assert mapping.asked[-1][3] == ""
    assert page.view.answer.contours == ()
