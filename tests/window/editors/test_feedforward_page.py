"""The page of feedforward: the path of a measured disturbance is a formula, and what else is known of it."""

from tests.session.sheets import wash_bath
from tests.window.editors.finding import typed_field
from tests.window.editors.typing import enter
from tuner.session.document import Document
from tuner.window.editors.panel import EditorPanel


def test_the_disturbance_path_is_a_formula(panel: EditorPanel, document: Document) -> None:
    """It is typed like the plant's, says its faults in place, and an empty one is none."""
    panel.select("Feedforward")
    path = panel.disturbance_path
    enter(path.text, "2 / (lag s + 1")
    assert path.fault.isVisible()
    assert document.sheet.controller.disturbance_feedforward is None
    enter(path.text, "2 / (lag s + 1)")
    assert document.sheet.controller.disturbance_feedforward is not None
    assert path.fault.isHidden()
    enter(path.text, "")
    assert document.sheet == wash_bath()


def test_what_is_known_of_a_measured_disturbance(panel: EditorPanel, document: Document) -> None:
    """Its name, unit, resting value and the time of its lags have fields while there is a path."""
    panel.select("Feedforward")
    enter(panel.disturbance_path.text, "2 / (lag s + 1)")
    for key, text in (("name", "Inflow"), ("unit", "kg/s"), ("resting", "4"), ("filter_time", "1.5")):
        enter(typed_field(panel, "Feedforward", f"controller.disturbance_feedforward.{key}").line, text)
    found = document.sheet.controller.disturbance_feedforward
    assert found is not None
    assert (found.name, found.unit, found.resting, found.filter_time) == ("Inflow", "kg/s", 4.0, 1.5)
    enter(panel.disturbance_path.text, "")
    assert document.sheet == wash_bath()
