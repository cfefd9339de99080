"""The open document: changes, tunings, ruler ranges, the plant's forms, and its file."""

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.session.sheets import TEXT, wash_bath
from tuner.errors import FormulaError, LoopError, SheetError
from tuner.files.sheet import parse, read
from tuner.model.controller import Notch
from tuner.model.parameters import find
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PhysicsPlant
from tuner.session.document import Document
from tuner.session.sheet_file import FileChangedError

KP = find("controller.kp")
ACTIONS = st.one_of(
    st.tuples(st.just("kp"), st.sampled_from([0.0, 1.0, 3.0]), st.sampled_from([None, "drag"])),
    st.tuples(st.just("form"), st.sampled_from(["parallel", "standard", "series"]), st.none()),
    st.tuples(st.just("keep"), st.none(), st.none()),
    st.tuples(st.just("reset"), st.sampled_from(["filter_time", "b"]), st.none()),
    st.tuples(st.just("release"), st.none(), st.none()),
    st.tuples(st.just("found"), st.none(), st.none()),
)


@pytest.fixture
def document() -> Document:
    """Return the wash bath, opened."""
    return Document(wash_bath(), None, TEXT)


def _act(document: Document, action: tuple[str, object, str | None]) -> None:
    name, value, key = action
    gain = "kp" if document.sheet.controller.form == "parallel" else "kc"
    deeds: dict[str, Callable[[], object]] = {
        "kp": lambda: document.change_value(gain, value, merge_key=key),  # type: ignore[arg-type] # drawn as a float
        "form": lambda: document.set_form(value),  # type: ignore[arg-type] # drawn as a form
        "keep": document.keep,
        "reset": lambda: document.reset(str(value)),
        "release": document.release,
        "found": document.restore_as_found,
    }
    deeds[name]()


@given(st.lists(ACTIONS, max_size=12))
def test_undoing_everything_returns_the_sheet_as_opened(actions: list[tuple[str, object, str | None]]) -> None:
    """Any sequence of changes, undone, gives the first sheet, no kept tuning, nothing to save; redone, the last."""
    document = Document(wash_bath())
    for action in actions:
        _act(document, action)
    last = (document.sheet, document.kept)
    document.release()
    steps = 0
    while document.undo_label is not None:
        document.undo()
        steps += 1
    assert (document.sheet, document.kept, document.dirty) == (wash_bath(), (), False)
    for _ in range(steps):
        document.redo()
    assert (document.sheet, document.kept) == last
    assert document.redo_label is None


def test_a_drag_is_one_step(document: Document) -> None:
    """Changes under one key merge until released; the step is named."""
    for value in (3.1, 3.2, 3.3):
        document.change_value("kp", value, merge_key="kp")
    document.release()
    assert document.undo_label == "Set kp"
    document.undo()
    assert document.sheet == wash_bath()
    assert document.redo_label == "Set kp"


def test_two_numbers_at_once_are_one_step(document: Document) -> None:
    """Both change together, a drag of both merges, and undo takes both back under one label."""
    before = document.sheet
    for kp, ki in ((4.0, 0.06), (5.0, 0.07)):
        document.change_values({"kp": kp, "ki": ki}, merge_key="map")
    document.release()
    controller = document.sheet.controller
    assert (controller.value("kp"), controller.value("ki")) == (5.0, 0.07)
    assert document.undo_label == "Set kp and ki"
    document.undo()
    assert document.sheet == before


def test_dirty_is_against_the_saved_state(document: Document) -> None:
    """A change makes it dirty; the same change taken back by hand makes it clean again."""
    document.change_value("kp", 4.0)
    assert document.dirty
    document.change_value("kp", 3.0)
    assert not document.dirty


def test_listeners_hear_of_everything_until_they_stop(document: Document) -> None:
    """A listener is called once for each change, and not after it stopped; stopping twice does no harm."""
    heard: list[float] = []
    stop = document.listen(lambda: heard.append(document.sheet.controller.gain_1))
    document.change_value("kp", 4.0)
    document.undo()
    stop()
    stop()
    document.redo()
    assert heard == [4.0, 3.0]


def test_kept_tunings_come_back(document: Document) -> None:
    """A tuning kept has a name and its gains in words, can be restored and dropped."""
    document.keep()
    document.change_value("kp", 5.0)
    document.keep("brisk")
    assert [(one.name, one.label) for one in document.kept] == [("A", "kp 3, ki 0.05, kd 4"), ("B", "brisk")]
    document.restore("A")
    assert document.sheet.controller.gain_1 == 3.0
    document.drop("A")
    assert [one.name for one in document.kept] == ["B"]
    document.keep()
    assert [one.name for one in document.kept] == ["B", "A"]


def test_as_found_is_restored_and_kept(document: Document) -> None:
    """Restoring the gains as found leaves them noted, and undo brings the others back."""
    document.restore_as_found()
    assert document.sheet.controller.gain_1 == 1.5
    assert document.sheet.controller.as_found is not None
    document.undo()
    assert document.sheet.controller.gain_1 == 3.0


def test_the_controller_as_found_stays_whole(document: Document) -> None:
    """What was met on site follows no change of the controller, neither in its action nor in its blocks."""
    document.note_as_found()
    noted = document.sheet.controller.as_found
    changed = replace(document.sheet.controller, action="direct", delay_samples=2, notch=Notch(0.5))
    document.change(replace(document.sheet, controller=changed), label="Turn")
    assert document.sheet.controller.as_found == noted
    document.restore_as_found()
    assert document.sheet.controller == replace(wash_bath().controller, as_found=noted)


def test_reset_is_the_value_as_opened(document: Document) -> None:
    """One number goes back to the file's, in the present form of the gains."""
    document.change_value("kp", 9.0)
    document.reset("kp")
    assert document.sheet.controller.gain_1 == 3.0
    document.set_form("standard")
    document.change_value("ti", 1.0)
    document.reset("ti")
    assert document.sheet.controller.value("ti") == pytest.approx(60.0)


def test_revert_is_a_change_like_any(document: Document) -> None:
    """Reverting gives the sheet as opened, and undo takes that back."""
    document.change_value("kp", 9.0)
    document.revert()
    assert document.sheet == wash_bath()
    document.undo()
    assert document.sheet.controller.gain_1 == 9.0


def test_a_refused_form_says_why_and_changes_nothing(document: Document) -> None:
    """Ti < 4 Td has no series form; the sentence stays until the next change."""
    document.change_value("kd", 100.0)
    before = document.sheet
    assert not document.set_form("series")
    assert document.sheet == before
    assert document.refusal == (
        "the series form exists only when the integral time is at least four derivative times: "
        "Ti = 60 is less than 4 Td = 133.333"
    )
    document.change_value("kd", 4.0)
    assert document.refusal == ""


def test_a_form_leaves_the_loop_alone(document: Document) -> None:
    """The gains in another form are the same parallel gains."""
    assert document.set_form("series")
    gains = document.sheet.controller.parallel()
    assert (gains.kp, gains.ki, gains.kd) == pytest.approx((3.0, 0.05, 4.0))


def test_marks_follow_the_form(document: Document) -> None:
    """The marks of a ruler are the values as opened, as found and kept, in the present form."""
    document.keep()
    marks = [(mark.kind, mark.label, mark.value) for mark in document.marks("kp")]
    assert marks == [("reset", "as opened", 3.0), ("as_found", "as found", 1.5), ("kept", "A", 3.0)]
    document.set_form("standard")
    assert [mark.value for mark in document.marks("ti")] == pytest.approx([60.0, 30.0, 60.0])


def test_ranges_are_stable_and_widen(document: Document) -> None:
    """Undo and drags leave a range as it is; a value typed outside widens it, for good."""
    assert (document.range_of(KP).low, document.range_of(KP).high) == (0.1, 100.0)
    document.change_value("kp", 60.0)
    assert document.range_of(KP).high == 100.0
    document.change_value("kp", 600.0)
    assert document.range_of(KP).high == 1000.0
    document.undo()
    assert document.range_of(KP).high == 1000.0


# The plant ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("text", "error"), [("gain / (lag s + ", FormulaError), ("lag s^2 + 1", LoopError)])
def test_a_refused_formula_changes_nothing(document: Document, text: str, error: type[Exception]) -> None:
    """A formula that cannot be read, or is no plant, leaves the last one."""
    with pytest.raises(error):
        document.change_formula(text)
    assert document.sheet == wash_bath()
    assert document.undo_label is None


def test_numbers_changed_by_hand_make_another_formula(document: Document) -> None:
    """Coefficients changed by hand are converted; the formula typed before can still be brought back."""
    document.set_plant_form("coefficients")
    document.change_plant(CoefficientPlant((2.0,), (1.0, 3.0, 2.0)), label="Set the denominator")
    document.set_plant_form("formula")
    assert document.sheet.plant == ExpressionPlant("2 / (s^2 + 3 s + 2)")
    assert document.has_typed_plant
    document.bring_back_plant()
    assert document.sheet.plant == wash_bath().plant
    assert not document.has_typed_plant


def test_a_form_without_conversion_says_so(document: Document) -> None:
    """No numbers make a physical model: a first one is shown, with a remark."""
    document.set_plant_form("physics")
    assert isinstance(document.sheet.plant, PhysicsPlant)
    assert document.remark == (
        "Not converted (a physical model is chosen by name, not found from numbers); "
        "this is a first plant to be overwritten."
    )


def test_edit_refuses_what_the_file_would_be_refused_for(document: Document) -> None:
    """A resting point outside the range is refused with the reader's own words, and nothing changes."""
    signal = replace(document.sheet.loop.controlled, resting=400.0)
    with pytest.raises(SheetError, match=r"^loop\.controlled\.resting: expected a number of at most"):
        document.edit(replace(document.sheet, loop=replace(document.sheet.loop, controlled=signal)), label="Rest")
    assert document.sheet == wash_bath()


# Files ----------------------------------------------------------------------------------------------------------


def test_saving_keeps_the_comments(file: Path) -> None:
    """A saved file has the new number and every comment, and is what is read again; nothing is left to save."""
    document = Document.from_file(file)
    document.change_value("kp", 4.5)
    document.save()
    text = file.read_text(encoding="utf-8")
    assert text == TEXT.replace("kp = 3.0      # by hand", "kp = 4.5      # by hand")
    assert read(file) == document.sheet
    assert not document.dirty
    document.undo()
    assert document.dirty


def test_saving_as_goes_on_with_the_new_file(file: Path, tmp_path: Path) -> None:
    """The old file stays; the comments go along."""
    document = Document.from_file(file)
    document.change_value("kp", 4.5)
    document.save_as(tmp_path / "other.toml")
    assert file.read_text(encoding="utf-8") == TEXT
    assert document.path == tmp_path / "other.toml"
    assert "# by hand" in document.original_text


def test_a_file_changed_by_somebody_else_is_not_overwritten(file: Path) -> None:
    """What another wrote into the file meanwhile stays, and the change stays unsaved."""
    document = Document.from_file(file)
    document.change_value("kp", 4.5)
    file.write_text(TEXT + "# mine", encoding="utf-8")
    with pytest.raises(FileChangedError, match="was changed by somebody else since it was read"):
        document.save()
    assert file.read_text(encoding="utf-8").endswith("# mine")
    assert document.dirty


def test_opening_begins_anew(document: Document, file: Path) -> None:
    """History, kept tunings and ranges are those of the sheet opened."""
    document.change_value("kp", 600.0)
    document.range_of(KP)
    document.keep()
    generation = document.generation
    document.open(file)
    assert (document.undo_label, document.kept, document.path) == (None, (), file)
    assert document.range_of(KP).high == 100.0
    assert document.generation == generation + 1


def test_a_file_with_faults_leaves_the_sheet(document: Document, tmp_path: Path) -> None:
    """Every fault of the file is told, and the present sheet stays with its changes."""
    bad = tmp_path / "bad.toml"
    bad.write_text("sheet = 1\n[loop]\ntitel = 1\n", encoding="utf-8")
    document.change_value("kp", 9.0)
    with pytest.raises(SheetError) as refusal:
        document.open(bad)
    assert len(refusal.value.faults) > 1
    assert document.sheet.controller.gain_1 == 9.0


def test_a_new_sheet_has_no_file(document: Document) -> None:
    """An example shown is not dirty and has no path."""
    document.start(parse(TEXT), TEXT)
    assert (document.path, document.dirty) == (None, False)


def test_a_form_that_the_file_would_be_refused_for_is_not_taken(document: Document) -> None:
    """Coefficients have no names for the disturbance path to share; the remark says so, and the formula stays."""
    document.change_disturbance_path("rise / (lag s + 1)")
    before = document.sheet
    document.set_plant_form("coefficients")
    assert document.sheet == before
    assert document.remark.startswith("Not possible: controller.disturbance_feedforward.expression, character 1")
