"""The open document: one tuning sheet with its history, its file and the tunings kept to compare with."""

from collections.abc import Callable, Mapping
from dataclasses import replace
from pathlib import Path

from tuner.errors import LoopError, SheetError
from tuner.model.controller import Controller, Form
from tuner.model.parameters import Parameter
from tuner.model.plant import ExpressionPlant, Plant, PlantParameter
from tuner.model.sheet import Sheet
from tuner.session.blocks import Block, with_block, without_block
from tuner.session.history import History
from tuner.session.plant_forms import PlantForm, PlantForms, form_of
from tuner.session.ruler_range import RulerRange, range_for, typical_value, widened
from tuner.session.sheet_file import SheetFile, read_file, unsaved_file
from tuner.session.state import (
    State,
    first_state,
    has_feedforward,
    typed_before,
    with_disturbance_path,
    with_feedforward_switched,
    with_formula,
    with_parameter,
    with_plant,
    with_plant_form,
    with_sheet,
    with_typed_plant,
)
from tuner.session.tunings import (
    KeptTuning,
    Mark,
    free_name,
    has_number,
    in_form_or_none,
    in_words,
    marks,
    with_as_found,
)

Listener = Callable[[], None]


class Document:
    """One open tuning sheet; every state in it is frozen, so a sheet taken from it never changes under the taker.

    Parameters
    ----------
    sheet : Sheet
        What is shown first.
    path : Path or None
        Its file; None before it has one.
    original_text : str
        The text of the file, whose comments a save keeps.

    Attributes
    ----------
    refusal : str
        Why the last switch of forms was refused; empty after any change.
    remark : str
        What the last switch of the plant's form could not keep; empty after any other change.
    generation : int
        Counts the sheets opened, so that a view knows when to forget what was typed for the one before.
    """

    def __init__(self, sheet: Sheet, path: Path | None = None, original_text: str = "") -> None:
        self._listeners: list[Listener] = []
        self._history = History(first_state(sheet))
        self._file = SheetFile(sheet, sheet, path, original_text)
        self._ranges: dict[str, RulerRange] = {}
        self.refusal = self.remark = ""
        self.generation = 1

    @classmethod
    def from_file(cls, path: Path) -> "Document":
        """Open a tuning sheet.

        Raises
        ------
        SheetError
            With every fault of the file.
        """
        file = read_file(path)
        return cls(file.opened, path, file.text)

    # What is shown ----------------------------------------------------------------------------------------------

    @property
    def sheet(self) -> Sheet:
        """The sheet as it is now."""
        return self._history.present.sheet

    @property
    def kept(self) -> tuple[KeptTuning, ...]:
        """The tunings kept to compare with, oldest first."""
        return self._history.present.kept

    @property
    def forms(self) -> PlantForms:
        """What was typed in each form of the plant."""
        return self._history.present.forms

    @property
    def opened(self) -> Sheet:
        """The sheet as it was opened, the aim of every reset."""
        return self._file.opened

    @property
    def path(self) -> Path | None:
        """The file of the sheet."""
        return self._file.path

    @property
    def original_text(self) -> str:
        """The text of the file as last read or written."""
        return self._file.text

    @property
    def dirty(self) -> bool:
        """Whether there is something to save."""
        return self.sheet != self._file.saved

    def listen(self, listener: Listener) -> Callable[[], None]:
        """Call `listener` after everything that happens to the document; the function returned ends that."""
        self._listeners.append(listener)
        return lambda: self._listeners.remove(listener) if listener in self._listeners else None

    # Changes ----------------------------------------------------------------------------------------------------

    def change(self, sheet: Sheet, *, label: str, merge_key: str | None = None) -> None:
        """Show another sheet.

        Parameters
        ----------
        sheet : Sheet
            The whole new sheet.
        label : str
            What happened, for the menu: "Undo <label>".
        merge_key : str or None
            Changes under one key are one step, until `release` or a change under another.
        """
        self._show(self._history.changed(with_sheet(self._history.present, sheet), label, merge_key))

    def edit(self, sheet: Sheet, *, label: str, merge_key: str | None = None) -> None:
        """Show another sheet, as `change` does, unless its file would be refused.

        Raises
        ------
        SheetError
            With the faults that the change would bring; the present sheet stays.
        """
        self._change_checked(with_sheet(self._history.present, sheet), label, merge_key)

    def change_value(self, name: str, value: float | None, *, merge_key: str | None = None) -> None:
        """Set one number of the controller, named as in the sheet."""
        controller = self.sheet.controller.with_value(name, value)
        self.change(replace(self.sheet, controller=controller), label=f"Set {name}", merge_key=merge_key)

    def change_values(self, values: Mapping[str, float | None], *, merge_key: str | None = None) -> None:
        """Set some numbers of the controller at once, as one step; they are named as in the sheet."""
        controller = self.sheet.controller
        for name, value in values.items():
            controller = controller.with_value(name, value)
        label = f"Set {' and '.join(values)}"
        self.change(replace(self.sheet, controller=controller), label=label, merge_key=merge_key)

    def release(self) -> None:
        """End the merging: the drag is over, the field is left."""
        self._history = self._history.released()

    def undo(self) -> None:
        """Go one step back."""
        self._show(self._history.undone())

    def redo(self) -> None:
        """Go one step forward again."""
        self._show(self._history.redone())

    @property
    def undo_label(self) -> str | None:
        """What undo would take back, None when there is nothing."""
        return self._history.past[-1].label if self._history.past else None

    @property
    def redo_label(self) -> str | None:
        """What redo would bring again, None when there is nothing."""
        return self._history.future[-1].label if self._history.future else None

    # Tunings ----------------------------------------------------------------------------------------------------

    def keep(self, label: str = "") -> KeptTuning:
        """Set the present tuning aside to compare with; its label is its gains in words unless given."""
        controller = self.sheet.controller
        tuning = KeptTuning(free_name(self.kept), label or in_words(controller), controller)
        self._change_kept((*self.kept, tuning), f"Keep tuning {tuning.name}")
        return tuning

    def drop(self, name: str) -> None:
        """Let a kept tuning go."""
        self._change_kept(tuple(tuning for tuning in self.kept if tuning.name != name), f"Drop tuning {name}")

    def restore(self, name: str) -> None:
        """Make a kept tuning the present one."""
        tuning = next(tuning for tuning in self.kept if tuning.name == name)
        self._tune(tuning.controller, f"Restore tuning {name}")

    def revert(self) -> None:
        """Go back to the whole sheet as it was opened; an ordinary change, which undo takes back."""
        self.change(self._file.opened, label="Revert to the sheet as opened")

    def restore_initial(self) -> None:
        """Go back to the controller as it was opened."""
        self._tune(self._file.opened.controller, "Restore the gains as opened")

    def restore_as_found(self) -> None:
        """Go back to the gains met on site; nothing happens when there are none."""
        found = self.sheet.controller.as_found
        if found is not None:
            self._tune(found, "Restore the gains as found")

    def note_as_found(self) -> None:
        """Note the present gains as those met on site."""
        controller = self.sheet.controller
        noted = with_as_found(controller, controller)
        self.change(replace(self.sheet, controller=noted), label="Note the gains as found")

    def forget_as_found(self) -> None:
        """Forget the gains met on site."""
        controller = with_as_found(self.sheet.controller, None)
        self.change(replace(self.sheet, controller=controller), label="Forget the gains as found")

    def reset(self, name: str) -> None:
        """Set one number back to its value in the file as opened; nothing happens when it has none in this form."""
        initial = in_form_or_none(self._file.opened.controller, self.sheet.controller.form)
        if initial is not None and has_number(initial, name):
            self.change_value(name, initial.value(name))

    def set_form(self, form: Form) -> bool:
        """Give the gains in another form, the loop unchanged; tell whether they have one, else `refusal` says why."""
        try:
            controller = self.sheet.controller.in_form(form)
        except LoopError as refusal:
            self.refusal = str(refusal)
            self._tell()
            return False
        self.change(replace(self.sheet, controller=controller), label=f"Give the gains in {form} form")
        return True

    def marks(self, name: str) -> tuple[Mark, ...]:
        """Return the values worth finding again on the ruler of a number, in the present form of the gains."""
        return marks(name, self.sheet.controller, self._file.opened.controller, self.kept)

    def range_of(self, parameter: Parameter) -> RulerRange:
        """Return what the ruler of a parameter spans; it only ever widens while the sheet is open."""
        name = parameter.key
        value = self.sheet.controller.value(name)
        span = self._ranges.get(name)
        span = range_for(parameter, value, typical_value(self.sheet, name)) if span is None else widened(span, value)
        self._ranges[name] = span
        return span

    # Blocks -----------------------------------------------------------------------------------------------------

    def put_block(self, block: Block, *, there: bool) -> None:
        """Put a block of the loop in, its numbers to begin with, or take it out.

        Raises
        ------
        SheetError
            When the loop cannot be so; the present sheet stays.
        """
        verb, change = ("Add", with_block) if there else ("Remove", without_block)
        self.edit(change(self.sheet, block.key), label=f"{verb} the {block.words}")

    def switch_feedback(self) -> None:
        """Open the feedback path, or close it."""
        law = self.sheet.controller
        label = "Open the feedback path" if law.feedback else "Close the feedback path"
        self.change(replace(self.sheet, controller=replace(law, feedback=not law.feedback)), label=label)

    def switch_feedforward(self) -> None:
        """Open the feedforward paths, or close them with the feedforwards that were there."""
        state = with_feedforward_switched(self._history.present)
        if state != self._history.present:
            label = "Close the feedforward path" if state.aside is None else "Open the feedforward path"
            self._change_checked(state, label, None)

    @property
    def has_feedforward(self) -> bool:
        """Whether there is feedforward, or one that is switched off."""
        return has_feedforward(self._history.present)

    # The plant --------------------------------------------------------------------------------------------------

    @property
    def plant_form(self) -> PlantForm:
        """The form in which the plant is given."""
        return form_of(self.sheet.plant)

    def change_plant(self, plant: Plant, *, label: str, merge_key: str | None = None) -> None:
        """Show another plant, once it is known that there is one.

        Raises
        ------
        TrimwrightError
            When the plant cannot be made; the present one stays.
        """
        self._change_checked(with_plant(self._history.present, plant), label, merge_key)

    def change_formula(self, text: str, *, merge_key: str | None = None) -> None:
        """Write the plant as another formula; the parameters follow its names, old ones come back with their values.

        Raises
        ------
        TrimwrightError
            When the formula cannot be read, or is no plant; the present one stays.
        """
        self._change_checked(with_formula(self._history.present, text), "Change the formula", merge_key)

    def change_disturbance_path(self, text: str, *, merge_key: str | None = None) -> None:
        """Write a measured disturbance's path to the output as a formula, empty for none.

        Raises
        ------
        TrimwrightError
            When the formula cannot be read or used; the present one stays.
        """
        state = with_disturbance_path(self._history.present, text)
        self._change_checked(state, "Change the disturbance path", merge_key)

    def change_parameter(self, parameter: PlantParameter, *, label: str) -> None:
        """Change a named number of the plant, or one that its formula does not use now.

        Raises
        ------
        TrimwrightError
            When there is no such plant; the present one stays.
        """
        state = with_parameter(self._history.present, parameter)
        self._change_checked(state, label, merge_key=f"parameter {parameter.name}")

    def set_plant_form(self, form: PlantForm) -> None:
        """Give the plant in another form; `remark` says so when it is not the same plant there, or not possible."""
        if form == self.plant_form:
            return
        switched = with_plant_form(self._history.present, form)
        self._show_plant(switched.state, f"Give the plant as {form}", switched.remark)

    @property
    def has_typed_plant(self) -> bool:
        """Whether the present form shows another plant than was last typed in it."""
        return typed_before(self._history.present) is not None

    def bring_back_plant(self) -> None:
        """Show the plant as it was last typed in the present form."""
        self._show_plant(with_typed_plant(self._history.present), "Bring back the plant typed before")

    @property
    def spare_parameters(self) -> tuple[PlantParameter, ...]:
        """The parameters that the formula used once, with their numbers; none when the plant is no formula."""
        return self.forms.spare if isinstance(self.sheet.plant, ExpressionPlant) else ()

    # Files ------------------------------------------------------------------------------------------------------

    def open(self, path: Path) -> None:
        """Show the sheet of a file; the tunings kept, the history and the ruler ranges begin anew.

        Raises
        ------
        SheetError
            With every fault of the file; the present sheet stays.
        """
        file = read_file(path)
        self._begin(History(first_state(file.opened)), file)

    def start(self, sheet: Sheet, original_text: str = "") -> None:
        """Show a sheet that has no file yet."""
        self._begin(History(first_state(sheet)), SheetFile(sheet, sheet, None, original_text))

    def recover(self, sheet: Sheet, kept: tuple[KeptTuning, ...], path: Path | None, original_text: str) -> None:
        """Show unsaved work found from an earlier run; it stays unsaved until it is saved."""
        self._begin(History(first_state(sheet, kept)), unsaved_file(sheet, path, original_text))

    def save(self) -> None:
        """Write the sheet to its file, comments kept.

        Raises
        ------
        FileChangedError
            When the file is not as it was read or written last.
        TrimwrightError
            When it has no file, or the file cannot be written.
        """
        self.save_as(self._file.own_path())

    def save_as(self, path: Path) -> None:
        """Write the sheet to another file, comments kept, and go on with that one.

        Raises
        ------
        TrimwrightError
            When the file cannot be written.
        """
        self._file = self._file.written(self.sheet, path)
        self._tell()

    # Inside -----------------------------------------------------------------------------------------------------

    def _begin(self, history: History[State], file: SheetFile) -> None:
        self._history, self._file = history, file
        self._ranges = {}
        self.refusal = self.remark = ""
        self.generation += 1
        self._tell()

    def _tune(self, controller: Controller, label: str) -> None:
        tuned = with_as_found(controller, self.sheet.controller.as_found)
        self.change(replace(self.sheet, controller=tuned), label=label)

    def _change_kept(self, kept: tuple[KeptTuning, ...], label: str) -> None:
        self._show(self._history.changed(replace(self._history.present, kept=kept), label))

    def _change_checked(self, state: State, label: str, merge_key: str | None) -> None:
        from tuner.session.checks import refuse_new_faults

        refuse_new_faults(self.sheet, state.sheet)
        self._show(self._history.changed(state, label, merge_key))

    def _show_plant(self, state: State, label: str, remark: str = "") -> None:
        """Show a plant in another form, unless its sheet's file would be refused; then the remark says why."""
        from tuner.session.checks import refuse_new_faults

        try:
            refuse_new_faults(self.sheet, state.sheet)
        except SheetError as refusal:
            self._show(self._history, f"Not possible: {refusal}")
            return
        self._show(self._history.changed(state, label), remark)

    def _show(self, history: History[State], remark: str = "") -> None:
        self._history = history
        self.refusal, self.remark = "", remark
        self._tell()

    def _tell(self) -> None:
        for listener in tuple(self._listeners):
            listener()
