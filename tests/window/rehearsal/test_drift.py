"""Which plant is rehearsed: by name, or by sliders within the spread."""

from dataclasses import replace

import pytest
from pytestqt.qtbot import QtBot

from tests.rehearse.loops import oven
from tests.window import made_up
from tuner.assess import assess
from tuner.model.demonstration import SetPlant
from tuner.model.plant import Spread
from tuner.model.sheet import Actuator
from tuner.window.rehearsal.drift import Drift, drifting
from tuner.window.theme import Theme


def test_what_drifts() -> None:
    """Parameters with a spread, and lags of actuator and sensor that have one."""
    sheet = replace(oven(), actuator=Actuator(0.8, Spread(0.5, 1.5)))
    assert [one.name for one in drifting(sheet)] == ["gain", "delay", "actuator lag"]


def test_sliders_reach_the_ends_of_the_spread(qtbot: QtBot, theme: Theme) -> None:
    """From the lower to the upper end; the nominal value itself is found again."""
    drift = Drift(theme)
    qtbot.addWidget(drift)
    drift.show_sheet(oven())
    wanted: list[object] = []
    drift.wanted.connect(wanted.append)
    drift.sliders["delay"].setValue(100)
    drift.sliders["delay"].setValue(50)
    drift.sliders["gain"].setValue(100)
    assert wanted == [
        SetPlant((("delay", 5.46),)),
        SetPlant((("delay", 4.2),)),
        SetPlant((("gain", 1.035),)),
    ]
    drift.show_values({"gain": 1.035, "delay": 4.2, "lag": 32.0})
    assert drift.chooser.currentText() == "By hand"
    assert drift.sliders["gain"].value() == 100


def test_worst_plants_are_offered_by_name(qtbot: QtBot, theme: Theme) -> None:
    """Each by the limit that it is worst for and how far it has drifted; choosing one wants its values."""
    drift = Drift(theme)
    qtbot.addWidget(drift)
    sheet = replace(oven(), limits=(("overshoot", 8.0), ("gain_margin", 2.0)))
    drift.show_sheet(sheet)
    drift.show_worst(sheet, assess(sheet, 5))
    texts = [drift.chooser.itemText(index) for index in range(drift.chooser.count())]
    assert texts[0] == "Nominal"
    assert texts[-1] == "By hand"
    worst = next(text for text in texts if text.startswith("Worst gain margin: gain +15 %"))
    wanted: list[object] = []
    drift.wanted.connect(wanted.append)
    drift.chooser.setCurrentIndex(texts.index(worst))
    drift.chooser.activated.emit(texts.index(worst))
    drift.chooser.setCurrentIndex(0)
    drift.chooser.activated.emit(0)
    assert isinstance(wanted[0], SetPlant)
    assert dict(wanted[0].values)["gain"] == pytest.approx(1.035)
    assert wanted[1] == SetPlant(())


def test_a_plant_that_cannot_drift_has_no_choice(qtbot: QtBot, theme: Theme) -> None:
    """Nothing is shown where nothing can be chosen."""
    drift = Drift(theme)
    qtbot.addWidget(drift)
    plant = replace(made_up.sheet().plant, parameters=())
    drift.show_sheet(made_up.sheet(plant=plant))
    assert drift.isHidden()
