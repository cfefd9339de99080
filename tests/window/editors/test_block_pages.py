"""The pages that the table of parameters describes whole, and the gains as found."""

from tests.window.editors.finding import button
from tuner.session.document import Document
from tuner.window.editors.panel import EditorPanel


def test_the_gains_as_found_are_noted_restored_and_forgotten(panel: EditorPanel, document: Document) -> None:
    """The controller's page notes the present gains, restores and forgets them."""
    panel.select("Controller")
    page = panel.pages["Controller"]
    button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 1.5
    document.change_value("kp", 7.0)
    button(page, "Note present").click()
    document.change_value("kp", 1.0)
    button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 7.0
    button(page, "Forget").click()
    assert document.sheet.controller.as_found is None
    assert not button(page, "Restore").isEnabled()
