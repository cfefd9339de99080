"""The page: everything the hand can do while the loop runs, and what it says."""

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QAbstractButton, QAbstractSlider, QApplication, QComboBox, QLineEdit
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tests.window.rehearsal.conftest import Hours
from tests.window.rehearsal.test_runner import staged
from tuner.errors import LoopError
from tuner.model.demonstration import Action, SetController, SetReference
from tuner.model.sheet import Sensor
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.wording import CAUTION
from tuner.session.document import Document
from tuner.window.beside import Beside, Stop
from tuner.window.elided import ElidedLabel
from tuner.window.rehearsal.page import RehearsalPage
from tuner.window.rehearsal.preparing import Ready, Wanted
from tuner.window.rehearsal.words import AT_REST
from tuner.window.theme import Theme


def loop(page: RehearsalPage) -> Rehearsal:
    """Return the loop that is rehearsed."""
    assert page.runner.rehearsal is not None
    return page.runner.rehearsal


def typed(line: QLineEdit, text: str) -> None:
    """Type into a line and press Enter."""
    line.selectAll()
    QTest.keyClicks(line, text)
    QTest.keyClick(line, Qt.Key.Key_Return)


def test_it_begins_at_rest(page: RehearsalPage) -> None:
    """Nothing moves until Run; what is said tells so, the caution is there once."""
    assert not page.runner.running
    assert page.state.text() == AT_REST
    assert [one.text() for one in page.widget.findChildren(ElidedLabel)].count(CAUTION) == 1
    assert page.bar.run.text() == "Run"
    assert not page.bar.save.isEnabled()


def test_run_and_pause_by_the_button(page: RehearsalPage) -> None:
    """One button does both, and says which comes next."""
    QTest.mouseClick(page.bar.run, Qt.MouseButton.LeftButton)
    assert page.runner.running
    assert page.bar.run.text() == "Pause"
    QTest.mouseClick(page.bar.run, Qt.MouseButton.LeftButton)
    assert not page.runner.running


def test_the_reference_is_typed_stepped_and_ramped(page: RehearsalPage, hours: Hours) -> None:
    """A number, a step up by the size of the trial's, and a ramp over a time."""
    typed(page.hand.reference.line, "75")
    assert loop(page).reference == 75.0
    QTest.mouseClick(page.hand.reference.more, Qt.MouseButton.LeftButton)
    assert loop(page).reference == 80.0
    page.runner.tick()
    hours.pass_by(2.0)
    typed(page.hand.over.line, "10")
    typed(page.hand.reference.line, "90")
    hours.pass_by(5.0)
    assert 84.0 < loop(page).advance(1).r[0] < 86.0


def test_a_disturbance_acts_while_it_is_held(page: RehearsalPage) -> None:
    """On by the press, off by the release, by mouse and by the space bar; latched it stays."""
    QTest.mousePress(page.hand.push, Qt.MouseButton.LeftButton)
    assert loop(page).disturbance == 10.0
    QTest.mouseRelease(page.hand.push, Qt.MouseButton.LeftButton)
    assert loop(page).disturbance == 0.0
    QTest.keyPress(page.hand.push, Qt.Key.Key_Space)
    assert loop(page).disturbance == 10.0
    QTest.keyRelease(page.hand.push, Qt.Key.Key_Space)
    assert loop(page).disturbance == 0.0
    page.hand.latch.click()
    assert loop(page).disturbance == 10.0
    typed(page.hand.amount.line, "-4")
    assert loop(page).disturbance == -4.0
    page.hand.latch.click()
    assert loop(page).disturbance == 0.0


def test_manual_and_automatic(page: RehearsalPage, hours: Hours) -> None:
    """The effort is set by box and slider only by hand; it begins where the law left it."""
    assert not page.hand.slider.isEnabled()
    page.hand.mode.buttons["Manual"].click()
    assert loop(page).mode == "manual"
    assert page.hand.slider.isEnabled()
    typed(page.hand.effort.line, "45")
    page.runner.tick()
    hours.pass_by(3.0)
    assert loop(page).effort == pytest.approx(45.0)
    page.hand.slider.setValue(300)
    hours.pass_by(5.0)
    assert loop(page).effort == pytest.approx(30.0)
    page.hand.mode.buttons["Automatic"].click()
    assert loop(page).mode == "automatic"


@pytest.mark.parametrize("keys", ["button", "Escape", "Ctrl+."])
def test_the_big_stop(page: RehearsalPage, hours: Hours, keys: str) -> None:
    """By button and by both keys: to manual, the effort to rest, the disturbance off."""
    page.hand.latch.click()
    typed(page.hand.reference.line, "80")
    page.runner.run()
    page.runner.tick()
    hours.pass_by(10.0)
    if keys == "button":
        page.bar.stop.click()
    else:
        page.bar.run.setFocus()
        QTest.keyClick(
            page.bar.run,
            Qt.Key.Key_Escape if keys == "Escape" else Qt.Key.Key_Period,
            Qt.KeyboardModifier.NoModifier if keys == "Escape" else Qt.KeyboardModifier.ControlModifier,
        )
    assert loop(page).mode == "manual"
    assert loop(page).disturbance == 0.0
    assert not page.hand.latch.isChecked()
    hours.pass_by(20.0)
    assert loop(page).effort == pytest.approx(40.0)


def test_escape_is_left_to_others_at_rest(page: RehearsalPage) -> None:
    """Where nothing runs, Escape brings back what stood in a line."""
    page.hand.reference.line.setFocus()
    page.hand.reference.line.selectAll()
    QTest.keyClicks(page.hand.reference.line, "99")
    QTest.keyClick(page.hand.reference.line, Qt.Key.Key_Escape)
    assert page.hand.reference.line.text() == "72"
    assert loop(page).mode == "automatic"


def test_a_push_leaves_a_latched_disturbance_on(page: RehearsalPage) -> None:
    """What stays on stays on after the button was held beside it."""
    page.hand.latch.click()
    QTest.mousePress(page.hand.push, Qt.MouseButton.LeftButton)
    QTest.mouseRelease(page.hand.push, Qt.MouseButton.LeftButton)
    assert page.hand.latch.isChecked()
    assert loop(page).disturbance == 10.0


def test_what_was_done_is_marked_on_the_chart(page: RehearsalPage, document: Document, hours: Hours) -> None:
    """Once for everything within a hundredth of its width, of the hand, of the rulers and of demonstrations."""
    page.runner.set_speed(10.0)
    page.runner.tick()
    typed(page.hand.reference.line, "75")
    hours.pass_by(2.0)
    for kp in (2.1, 2.2, 2.3):
        document.change_value("kp", kp)
    hours.pass_by(2.0)
    shown = page.chart.output.shown
    assert shown is not None
    assert shown.events == pytest.approx((0.0, 20.0), abs=0.5)
    strokes = [stroke.x0 for stroke in page.chart.output.marks.strokes if stroke.dashed]
    assert strokes == list(shown.events)


def test_a_demonstration_of_another_loop_is_left_alone_by_the_rulers(page: RehearsalPage, document: Document) -> None:
    """The page says so."""
    other = replace(made_up.sheet(), sensor=Sensor(lag=2.0))
    page.play(replace(staged(Action(0.0, None, "Begin.")), sheet=other))
    assert page.told.text() == "Show, on a.toml. The rulers act on the open sheet, not on this one."
    document.change_value("kp", 3.0)
    assert loop(page).sheet.controller.gain_1 == 2.0


def test_the_rulers_change_the_gains_while_it_runs(page: RehearsalPage, document: Document, hours: Hours) -> None:
    """A change of the document reaches the running loop, and an unstable one is told in words."""
    page.runner.tick()
    hours.pass_by(2.0)
    document.change_value("kp", 3.5)
    assert loop(page).sheet.controller.gain_1 == 3.5
    assert loop(page).time > 0.0
    assert page.stability.text() == "Stable in automatic, with the plant as it is."
    document.change_values({"kp": 60.0, "kd": 0.0, "ki": 10.0})
    page.runner.act(SetReference(73.0))
    hours.pass_by(20.0)
    assert page.stability.text().startswith("Unstable: the swing grows by a factor of ")


def test_another_plant_begins_anew(page: RehearsalPage, document: Document, hours: Hours) -> None:
    """What is more than a change of the controller makes another loop, at rest."""
    page.runner.tick()
    hours.pass_by(2.0)
    document.change(replace(document.sheet, sensor=Sensor(lag=2.0)), label="Slower sensor")
    assert loop(page).time == 0.0
    assert loop(page).sheet.sensor.lag == 2.0


def test_another_sample_time_begins_anew(page: RehearsalPage, document: Document, hours: Hours) -> None:
    """The sample time cannot change while a loop runs."""
    page.runner.tick()
    hours.pass_by(2.0)
    sheet = document.sheet
    document.change(replace(sheet, controller=replace(sheet.controller, sample_time=0.25)), label="Faster")
    assert (loop(page).time, loop(page).sample_time) == (0.0, 0.25)


def test_the_plant_drifts_by_sliders_and_by_name(page: RehearsalPage, document: Document) -> None:
    """Within the spread by hand; worst plants by what they are worst for; back to the nominal one."""
    assert list(page.drift.sliders) == ["gain"]
    page.drift.sliders["gain"].setValue(100)
    assert loop(page).values["gain"] == pytest.approx(1.035)
    assert page.drift.chooser.currentText() == "By hand"
    page.drift.chooser.setCurrentIndex(0)
    page.drift.chooser.activated.emit(0)
    assert loop(page).values["gain"] == 0.9
    assert page.drift.chooser.currentText() == "Nominal"
    assert document.sheet == made_up.sheet()


def test_noise(page: RehearsalPage, document: Document) -> None:
    """Only where the sheet's sensor has any."""
    assert not page.hand.noise.isEnabled()
    document.change(replace(document.sheet, sensor=Sensor(noise=0.1)), label="Noisy")
    assert page.hand.noise.isEnabled()
    page.hand.noise.click()
    assert loop(page).noise


def test_a_demonstration_is_played(page: RehearsalPage, document: Document, hours: Hours) -> None:
    """At its speed, its sentences shown as they come; a ruler then takes over."""
    page.play(
        staged(Action(0.0, None, "Begin."), Action(10.0, SetController((("kp", 3.0),)), "More eager."), speed=5.0)
    )
    assert page.runner.running
    assert page.bar.speed.value == 5.0
    assert page.told.text() == "Show, on a.toml."
    page.runner.tick()
    hours.pass_by(1.0)
    assert page.told.text() == "0 s: Begin."
    hours.pass_by(2.0)
    assert page.told.text() == "10 s: More eager.  (controller: kp 3)"
    assert loop(page).sheet.controller.gain_1 == 3.0
    assert document.sheet.controller.gain_1 == 2.0
    document.change_value("kp", 2.5)
    assert loop(page).sheet.controller.gain_1 == 2.5


def test_from_rest(page: RehearsalPage, hours: Hours) -> None:
    """The loop of the sheet begins anew, and goes on running if it ran."""
    page.runner.run()
    page.runner.tick()
    hours.pass_by(2.0)
    page.bar.anew.click()
    assert loop(page).time == 0.0
    assert page.runner.running


def test_it_goes_on_out_of_sight(page: RehearsalPage, hours: Hours) -> None:
    """Another page in sight does not stop it; back in sight the chart shows where it is."""
    page.runner.run()
    page.runner.tick()
    hours.pass_by(1.0)
    page.widget.hide()
    hours.pass_by(5.0)
    assert page.runner.running
    page.widget.show()
    QApplication.processEvents()
    shown = page.chart.output.shown
    assert shown is not None
    assert shown.now >= 5.0


def test_a_loop_that_cannot_be_computed_says_why(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """The sentence stands where the chart would be, and nothing can be run."""

    def refuse(_wanted: Wanted, _stop: Stop) -> Ready:
        raise LoopError("the loop has no gain: kp is 0")

    page = RehearsalPage(document, theme, Beside(refuse, synchronous=True))
    qtbot.addWidget(page.widget)
    page.widget.show()
    page.show_stale()
    assert page.chart.output.empty_words == "the loop has no gain: kp is 0"
    assert not page.bar.run.isEnabled()
    assert not page.hand.isEnabled()
    page.close()
    page.widget.hide()


def test_every_control_has_a_name(page: RehearsalPage) -> None:
    """Whatever takes the keyboard says what it is, by its words or by a name."""
    kinds = (QAbstractButton, QLineEdit, QAbstractSlider, QComboBox)
    parts = [part for kind in kinds for part in page.widget.findChildren(kind)]
    nameless = [
        part
        for part in parts
        if part.focusPolicy() & Qt.FocusPolicy.TabFocus
        and not part.accessibleName()
        and not (isinstance(part, QAbstractButton) and part.text())
    ]
    assert nameless == []


def test_it_is_forgotten_with_its_document(page: RehearsalPage, document: Document, tmp_path: Path) -> None:
    """Another sheet means another loop."""
    del tmp_path
    before = loop(page)
    document.start(made_up.sheet(1.0))
    page.forget()
    assert loop(page) is not before
    assert loop(page).sheet.controller.gain_1 == 1.0
