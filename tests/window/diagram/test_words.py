"""What stands at the signals: letters, units, names, and values of the nominal and the worst plant."""

from dataclasses import replace

from tests.session.sheets import wash_bath
from tests.window.answers import shown_of
from tuner.assess import assess
from tuner.model.controller import DisturbanceFeedforward
from tuner.window.diagram.words import SignalWords, signal_words


def test_without_an_assessment_there_are_no_values() -> None:
    """Letters with units and the names of the signals."""
    sheet = wash_bath()
    words = signal_words(sheet, None)
    assert set(words) == {"r", "u", "d", "y"}
    assert words["y"].letter == f"y, {sheet.loop.controlled.unit}"
    assert words["u"].name == sheet.loop.manipulated.name
    assert not any(one.values for one in words.values())


def test_values_are_those_of_the_assessment() -> None:
    """Peak and share at a limit at the effort, overshoot at the output, the peak after the disturbance."""
    sheet = wash_bath()
    sheet = replace(sheet, trial=replace(sheet.trial, disturbance=10.0))
    found = assess(sheet, 5)
    words = signal_words(sheet, shown_of(sheet, found))
    own, worst = (f"{value:.3g}" for value in (found.nominal.measures["peak_effort"], found.worst["peak_effort"].value))
    assert words["u"].values[0].startswith(f"peak {own}")
    assert worst in words["u"].values[0]
    assert words["u"].values[1].startswith("at a limit ")
    assert words["d"].values[0].startswith("moves y by ")
    assert words["y"].values[0].startswith("overshoot ")


def test_a_measured_disturbance_has_its_own_name_and_unit() -> None:
    """Else it is in units of the effort."""
    sheet = wash_bath()
    path = DisturbanceFeedforward("1/(s + 1)", name="Inflow", unit="kg/s")
    measured = replace(sheet, controller=replace(sheet.controller, disturbance_feedforward=path))
    assert signal_words(measured, None)["d"] == SignalWords("d, kg/s", "Inflow")
    assert signal_words(sheet, None)["d"].name == "disturbance"


def test_a_sentence_holds_all_of_it() -> None:
    """For who does not see the diagram."""
    assert (
        SignalWords("u, %", "Valve", ("peak 3 %", "at a limit 0 %")).sentence()
        == "u, %, Valve, peak 3 %, at a limit 0 %"
    )
