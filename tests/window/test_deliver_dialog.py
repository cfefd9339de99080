"""The dialog of a delivery shows the verdict, asks who answers for an unmet one, and shows what was proved."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from pathlib import Path

import pytest
from PySide6.QtWidgets import QLabel
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer
from tuner.deliver.proof import Proof
from tuner.errors import DeliveryError
from tuner.window.cautions import CAUTION
from tuner.window.deliver_dialog import LANGUAGES, DeliverDialog, real_deliverer
from tuner.window.shown import Shown
from tuner.window.theme import Theme

LOOSE = (("overshoot", 99.0),)


@dataclass
class Recorder:
    """Delivers nothing and remembers what it was asked."""

    proof: tuple[Proof, ...] = (Proof("controller.py", "run over 100000 samples", 100_000, 0.0, proved=True),)
    refusal: str = ""
    asked: list[tuple[Path, list[str], bool, bool]] = field(default_factory=list)

    def __call__(
        self, shown: Shown, folder: Path, languages: Sequence[str], *, accept_unmet: bool, overwrite: bool
    ) -> Sequence[Proof]:
        """Remember, and refuse or prove as told."""
        del shown
        self.asked.append((folder, list(languages), accept_unmet, overwrite))
        if self.refusal:
            raise DeliveryError(self.refusal)
        return self.proof


def dialog(qtbot: QtBot, theme: Theme, shown: Shown, recorder: Recorder, folder: Path) -> DeliverDialog:
    """Return the dialog, shown."""
    made = DeliverDialog(shown, folder, recorder, theme, None)
    qtbot.addWidget(made)
    made.show()
    return made


def deliver(made: DeliverDialog, qtbot: QtBot) -> None:
    """Press the button and wait for the end."""
    made.deliver_button.click()
    assert made.busy
    assert not made.deliver_button.isEnabled()
    qtbot.waitUntil(lambda: not made.busy)


def test_a_met_sheet_is_delivered_at_once(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """Folder and languages as chosen, nothing to answer for, and the proof of each file."""
    recorder = Recorder()
    made = dialog(qtbot, theme, answer(1.0, limits=LOOSE), recorder, tmp_path / "out")
    assert not made.accept_unmet.isVisible()
    made.languages["c"].setChecked(False)
    deliver(made, qtbot)
    assert recorder.asked == [(tmp_path / "out", ["json", "python"], False, False)]
    assert "proved: controller.py, run over 100000 samples" in made.outcome.toPlainText()


@pytest.mark.parametrize("kp", [2.2, 4.5], ids=["missed", "unstable"])
def test_an_unmet_sheet_needs_somebody_who_answers(qtbot: QtBot, theme: Theme, tmp_path: Path, kp: float) -> None:
    """The button works only after the sentence of responsibility is ticked, and that is handed on."""
    recorder = Recorder()
    made = dialog(qtbot, theme, answer(kp), recorder, tmp_path)
    assert made.accept_unmet.isVisible()
    assert not made.deliver_button.isEnabled()
    made.accept_unmet.setChecked(True)
    deliver(made, qtbot)
    assert recorder.asked[0][2] is True


def test_what_is_missed_is_in_sight(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """Verdict, each missed limit, and the caution stand in the dialog."""
    shown = answer(2.2)
    made = dialog(qtbot, theme, shown, Recorder(), tmp_path)
    said = {label.text() for label in made.findChildren(QLabel)}
    assert {callout.sentence for callout in shown.overlay.callouts} <= said
    assert CAUTION in said
    assert "4 of 4 limits missed" in said


def test_without_folder_or_language_there_is_nothing_to_do(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """The button is grey without a folder, and without any language."""
    made = dialog(qtbot, theme, answer(1.0, limits=LOOSE), Recorder(), tmp_path)
    made.folder.setText("  ")
    assert not made.deliver_button.isEnabled()
    made.folder.setText(str(tmp_path))
    assert made.deliver_button.isEnabled()
    for box in made.languages.values():
        box.setChecked(False)
    assert not made.deliver_button.isEnabled()


def test_a_refusal_is_said_and_can_be_put_right(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """The reason stands in the dialog, which stays open and lets one try again."""
    recorder = Recorder(refusal="out: already holds controller.py; say so if they may be overwritten")
    made = dialog(qtbot, theme, answer(1.0, limits=LOOSE), recorder, tmp_path)
    deliver(made, qtbot)
    assert made.outcome.toPlainText() == f"Nothing was written. {recorder.refusal}"
    recorder.refusal = ""
    made.overwrite.setChecked(True)
    deliver(made, qtbot)
    assert recorder.asked[1][3] is True


def test_a_file_that_was_not_proved_is_not_called_proved(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """What could not be run here says so."""
    recorder = Recorder((Proof("controller.c", "not run here, because no compiler", 0, None, proved=False),))
    made = dialog(qtbot, theme, answer(1.0, limits=LOOSE), recorder, tmp_path)
    deliver(made, qtbot)
    assert "not proved: controller.c, not run here, because no compiler" in made.outcome.toPlainText()


def test_closing_waits_for_a_delivery(qtbot: QtBot, theme: Theme, tmp_path: Path) -> None:
    """A dialog closed at once leaves no thread behind."""
    made = dialog(qtbot, theme, answer(1.0, limits=LOOSE), Recorder(), tmp_path)
    made.deliver_button.click()
    made.reject()
    assert made._task is None or made._task.isFinished()


def test_the_languages_are_those_of_the_program() -> None:
    """Each language offered is a target of the delivery."""
    from tuner.deliver.targets import targets

    assert {key for key, _ in LANGUAGES} <= set(targets())
    assert callable(real_deliverer())
