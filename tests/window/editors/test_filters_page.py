"""The page of the filters on the measurement."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest

from tests.window.editors.finding import segments, typed_field
from tests.window.editors.typing import enter
from tuner.session.document import Document
from tuner.window.editors.panel import EditorPanel


def test_a_notch_above_nyquist_is_refused(panel: EditorPanel, document: Document) -> None:
    """What the reader of files would refuse is refused in the field."""
    panel.select("Filters")
    QTest.mouseClick(segments(panel.pages["Filters"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    before = document.sheet
    field = typed_field(panel, "Filters", "controller.notch.frequency")
    enter(field.line, "50")
    assert document.sheet == before
    assert field.fault.text() == "Expected a frequency below pi / sample_time, 3.142, found 50"


def test_the_blocks_stand_in_the_order_of_the_signal(panel: EditorPanel, document: Document) -> None:
    """Measurement filter, lead-lag, notch; each is added by itself."""
    panel.select("Filters")
    for word in ("lead-lag", "notch"):
        QTest.mouseClick(segments(panel.pages["Filters"], word).buttons[word], Qt.MouseButton.LeftButton)
    law = document.sheet.controller
    assert law.lead_lag is not None
    assert law.notch is not None
    tops = [
        typed_field(panel, "Filters", path).mapTo(panel, typed_field(panel, "Filters", path).rect().topLeft()).y()
        for path in ("controller.measurement_filter.time", "controller.lead_lag.lead", "controller.notch.frequency")
    ]
    assert tops == sorted(tops)
