"""The open document: one tuning sheet with its history, its file and the tunings kept to compare with."""

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from pathlib import Path

from tuner.errors import LoopError, TrimwrightError
from tuner.model.controller import Controller, Form
from tuner.model.parameters import Parameter
from tuner.model.plant import ExpressionPlant, Plant, PlantParameter
from tuner.model.sheet import Sheet
from tuner.session import recent
from tuner.session.history import History
from tuner.session.plant_forms import PlantForm, PlantForms, form_of, switch
from tuner.session.ruler_range import RulerRange, range_for, typical_value, widened
from tuner.session.tunings import KeptTuning, Mark, free_name, in_form_or_none, in_words, marks, with_as_found

Listener = Callable[[], None]


class FileChangedError(TrimwrightError):
    """A save that would overwrite what somebody else wrote into the file meanwhile."""


@dataclass(frozen=True, slots=True)
class State:
    """What undo brings back: the sheet, the kept tunings, and the forms in which the plant was typed."""

    sheet: Sheet
    kept: tuple[KeptTuning, ...] = ()
    forms: PlantForms = field(default_factory=PlantForms)


@dataclass(frozen=True, slots=True)
class SheetFile:
    """Where a sheet comes from and goes to.

    Parameters
    ----------
    opened : Sheet
        As it was read.
    saved : Sheet or None
        As it was written last; None for work found unsaved.
    path : Path or None
        Its file; None before it has one.
    text : str
        The text of the file as last read or written, whose comments a save keeps.
    """

    opened: Sheet
    saved: Sheet | None
    path: Path | None
    text: str


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
        self._history = _fresh(sheet)
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
        document = cls(_read(path), path, _text_of(path))
        recent.remember(path)
        return document

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
        controller = with_as_found(sheet.controller, sheet.controller.as_found)
        forms = self.forms if sheet.plant == self.sheet.plant else self.forms.edited(sheet.plant)
        state = replace(self._history.present, sheet=replace(sheet, controller=controller), forms=forms)
        self._show(self._history.changed(state, label, merge_key))

    def change_value(self, name: str, value: float | None, *, merge_key: str | None = None) -> None:
        """Set one number of the controller, named as in the sheet."""
        controller = self.sheet.controller.with_value(name, value)
        self.change(replace(self.sheet, controller=controller), label=f"Set {name}", merge_key=merge_key)

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

    def reset(self, name: str) -> None:
        """Set one number back to its value in the file as opened; nothing happens when it has none in this form."""
        initial = in_form_or_none(self._file.opened.controller, self.sheet.controller.form)
        if initial is not None:
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
        name = parameter.name
        value = self.sheet.controller.value(name)
        span = self._ranges.get(name)
        span = range_for(parameter, value, typical_value(self.sheet, name)) if span is None else widened(span, value)
        self._ranges[name] = span
        return span

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
        from tuner.session.plants import made

        made(plant)
        self.change(replace(self.sheet, plant=plant), label=label, merge_key=merge_key)

    def change_formula(self, text: str, *, merge_key: str | None = None) -> None:
        """Write the plant as another formula; the parameters follow its names, old ones come back with their values.

        Raises
        ------
        TrimwrightError
            When the formula cannot be read, or is no plant; the present one stays.
        """
        from tuner.session.plants import made, with_formula

        plant, spare = with_formula(self.sheet.plant, self.forms.spare, text)
        made(plant)
        self._change_forms(plant, replace(self.forms.edited(plant), spare=spare), "Change the formula", merge_key)

    def change_spare(self, spare: PlantParameter) -> None:
        """Change a parameter that the formula does not use now."""
        others = tuple(other for other in self.forms.spare if other.name != spare.name)
        forms = replace(self.forms, spare=(*others, spare))
        self._change_forms(self.sheet.plant, forms, f"Change {spare.name}", None)

    def set_plant_form(self, form: PlantForm) -> None:
        """Give the plant in another form; `remark` says so when it is not the same plant there."""
        from tuner.session.plants import converted

        if form == self.plant_form:
            return
        before = self.sheet.plant
        switched = switch(before, self.forms, form, converted)
        forms = (
            self.forms.switched(before, switched.plant) if not switched.remark else self.forms.edited(switched.plant)
        )
        self._change_forms(switched.plant, forms, f"Give the plant as {form}", None)
        self.remark = switched.remark
        self._tell()

    @property
    def formula_parameters(self) -> tuple[PlantParameter, ...]:
        """The parameters of the formula, then those it used once; empty when the plant is no formula."""
        plant = self.sheet.plant
        return (*plant.parameters, *self.forms.spare) if isinstance(plant, ExpressionPlant) else ()

    # Files ------------------------------------------------------------------------------------------------------

    def open(self, path: Path) -> None:
        """Show the sheet of a file; the tunings kept, the history and the ruler ranges begin anew.

        Raises
        ------
        SheetError
            With every fault of the file; the present sheet stays.
        """
        sheet = _read(path)
        self._begin(_fresh(sheet), SheetFile(sheet, sheet, path, _text_of(path)))
        recent.remember(path)

    def start(self, sheet: Sheet, original_text: str = "") -> None:
        """Show a sheet that has no file yet."""
        self._begin(_fresh(sheet), SheetFile(sheet, sheet, None, original_text))

    def recover(self, sheet: Sheet, kept: tuple[KeptTuning, ...], path: Path | None, original_text: str) -> None:
        """Show unsaved work found from an earlier run; it stays unsaved until it is saved."""
        self._begin(_fresh(sheet, kept), SheetFile(sheet, None, path, original_text))

    def save(self) -> None:
        """Write the sheet to its file, comments kept.

        Raises
        ------
        FileChangedError
            When the file is not as it was read or written last.
        TrimwrightError
            When it has no file, or the file cannot be written.
        """
        if self._file.path is None:
            raise TrimwrightError("this sheet has no file yet: choose one to save it as")
        if self._file.path.is_file() and _text_of(self._file.path) != self._file.text:
            raise FileChangedError(
                f"{self._file.path} was changed by somebody else since it was read: "
                "save under another name, or open it again"
            )
        self.save_as(self._file.path)

    def save_as(self, path: Path) -> None:
        """Write the sheet to another file, comments kept, and go on with that one.

        Raises
        ------
        TrimwrightError
            When the file cannot be written.
        """
        from tuner.files import sheet as files

        files.write(path, self.sheet, self._file.text)
        self._file = replace(self._file, path=path, text=_text_of(path), saved=self.sheet)
        recent.remember(path)
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

    def _change_forms(self, plant: Plant, forms: PlantForms, label: str, merge_key: str | None) -> None:
        state = replace(self._history.present, sheet=replace(self.sheet, plant=plant), forms=forms)
        self._show(self._history.changed(state, label, merge_key))

    def _show(self, history: History[State]) -> None:
        self._history = history
        self.refusal = self.remark = ""
        self._tell()

    def _tell(self) -> None:
        for listener in tuple(self._listeners):
            listener()


def _fresh(sheet: Sheet, kept: tuple[KeptTuning, ...] = ()) -> History[State]:
    return History(State(sheet, kept, PlantForms((sheet.plant,), (sheet.plant,))))


def _read(path: Path) -> Sheet:
    from tuner.files import sheet as files

    return files.read(path)


def _text_of(path: Path) -> str:
    """Return the text of a file with its line ends as they are."""
    with path.open(encoding="utf-8", newline="") as file:
        return file.read()
