"""Pages of the plot area: only the one in sight draws, and it has the newest answer."""

from dataclasses import replace

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest

from tests.window.windows import opened


def test_the_trial_comes_first() -> None:
    """It is in sight until another is chosen, and asks for no curves over frequency."""
    with opened() as (window, _):
        assert window.pages.page is window.plots
        assert window.shown is not None
        assert window.shown.frequency is None


def test_a_page_in_sight_has_the_newest_answer() -> None:
    """Choosing the frequency page asks for its curves; going back shows the newest trial."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        assert window.shown is not None
        assert window.shown.frequency is not None
        sheet = window.document.sheet
        moved = replace(sheet, controller=sheet.controller.with_value("kp", 1.5))
        window.document.edit(moved, label="Set kp")
        assert window.frequency.panels["Nyquist plot"].shown is window.shown
        assert window.plots.panels["Effort"].shown is not window.shown
        window.pages.choose("Trial")
        assert window.plots.panels["Effort"].shown is window.shown


def test_pages_are_chosen_by_the_keyboard() -> None:
    """The arrows go from word to word."""
    with opened() as (window, _):
        first = window.pages.words.buttons["Trial"]
        first.setFocus()
        QTest.keyClick(first, Qt.Key.Key_Right)
        assert window.pages.page is window.frequency
        assert window.pages.stack.currentWidget() is window.frequency.widget


def test_a_page_that_is_not_known_is_the_first_one() -> None:
    """Whatever was remembered."""
    with opened() as (window, _):
        window.pages.begin_with("Weather")
        assert window.pages.page is window.plots


def test_the_name_of_a_curve_over_frequency_leads_to_its_plant() -> None:
    """As in the plots of the trial."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        panel = window.frequency.panels["Bode magnitude"]
        assert panel.shown is not None
        plant = panel.shown.assessment.members[1].name
        panel.plant_wanted.emit(plant)
        assert window.looked_at == plant
        assert panel.shown.frequency is not None
        assert panel.shown.frequency.plants[0] == plant


def test_a_loop_that_is_left_is_forgotten_everywhere() -> None:
    """No page shows an answer on another loop."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        window.pages.forget()
        assert window.frequency.panels["Nyquist plot"].ask() is None


def test_a_chip_shows_its_worst_plant_in_place_of_the_nominal_one() -> None:
    """The plots have that plant's curves, the verdict stays, and the way back is there."""
    with opened() as (window, _):
        assert window.shown is not None
        limit = window.shown.assessment.limits[0]
        QTest.mouseClick(window.ribbon.chips[0], Qt.MouseButton.LeftButton)
        assert window.shown.looked_at == limit.plant
        shown = window.plots.panels["Effort"].shown
        assert shown is not None
        assert shown.assessment.nominal.name == limit.plant
        assert window.shown.assessment.nominal.name == "nominal"
        assert window.pages.back.isVisibleTo(window)
        window.pages.back.click()
        assert window.shown.looked_at == ""
        assert not window.pages.back.isVisibleTo(window)


def test_the_worst_plant_stays_in_sight_while_gains_move() -> None:
    """The same plant, by its name, with the new gains."""
    with opened() as (window, _):
        window.look_at_worst()
        assert window.shown is not None
        plant = window.shown.looked_at
        assert plant
        sheet = window.document.sheet
        moved = replace(sheet, controller=sheet.controller.with_value("kp", 1.5))
        window.document.edit(moved, label="Set kp")
        assert window.shown.looked_at == plant
        assert window.shown.sheet.controller.value("kp") == 1.5


def test_the_keyboard_chooses_a_plant_too() -> None:
    """The space bar on a chip does what a press does."""
    with opened() as (window, _):
        QTest.keyClick(window.ribbon.chips[0], Qt.Key.Key_Space)
        assert window.shown is not None
        assert window.shown.looked_at == window.shown.assessment.limits[0].plant


def test_pressing_the_chip_again_goes_back() -> None:
    """The chip of the plant that is looked at leads to the nominal one, and says so."""
    with opened() as (window, _):
        chip = window.ribbon.chips[0]
        QTest.mouseClick(chip, Qt.MouseButton.LeftButton)
        assert chip.words.is_looked_at
        assert "press to look at the nominal plant again" in chip.toolTip()
        QTest.mouseClick(chip, Qt.MouseButton.LeftButton)
        assert window.looked_at == ""
        assert not chip.words.is_looked_at


def test_escape_goes_back_to_the_nominal_plant() -> None:
    """From a chip, and from a plot once its pointer is let go."""
    with opened() as (window, _):
        window.look_at_worst()
        QTest.keyClick(window.ribbon.chips[0], Qt.Key.Key_Escape)
        assert window.looked_at == ""
        window.look_at_worst()
        view = window.plots.panels["Effort"].view
        QTest.keyClick(view, Qt.Key.Key_Right)
        QTest.keyClick(view, Qt.Key.Key_Escape)
        assert window.looked_at
        QTest.keyClick(view, Qt.Key.Key_Escape)
        assert window.looked_at == ""


def test_a_plant_that_is_gone_is_forgotten() -> None:
    """The plots show the nominal one, and nothing is left to go back from."""
    with opened() as (window, _):
        window.look_at("gain 7")
        assert window.looked_at == ""
        assert window.shown is not None
        assert window.shown.looked_at == ""
        assert not window.pages.back.isVisibleTo(window)


def test_looking_changes_nothing_in_the_sheet() -> None:
    """Neither the sheet nor what can be undone nor the verdict."""
    with opened() as (window, _):
        assert window.shown is not None
        before, verdict = window.document.sheet, window.shown.assessment.verdict
        window.look_at_worst()
        assert window.document.sheet is before
        assert window.document.undo_label is None
        assert not window.document.dirty
        assert window.shown.assessment.verdict == verdict


def test_the_name_of_a_curve_leads_to_its_plant() -> None:
    """What a plot asks for is looked at."""
    with opened() as (window, _):
        assert window.shown is not None
        plant = window.shown.assessment.members[2].name
        window.plots.panels["Effort"].plant_wanted.emit(plant)
        assert window.shown.looked_at == plant
