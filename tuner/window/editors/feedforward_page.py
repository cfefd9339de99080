"""The page of what acts on the effort beside the feedback: from the reference and from a measured disturbance."""

from typing import ClassVar

from tuner.model.controller import Feedforward
from tuner.model.parameters import find, in_section
from tuner.session.document import Document
from tuner.session.fields import first_reference_filter, with_feedforward, with_reference_filter
from tuner.window.editors.field import Page
from tuner.window.editors.group import OptionalGroup
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme


class FeedforwardPage(Page):
    """Feedforward of the reference, the filter before the law, and feedforward of a measured disturbance."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__()
        self.disturbance_path = DisturbancePath(document, theme)
        groups = ReferenceFeedforward(document, theme), ReferenceFilterGroup(document, theme), self.disturbance_path
        for part in groups:
            self.add(part, part)


class ReferenceFeedforward(OptionalGroup):
    """The feedforward of the reference: none, or of one of the kinds in the table, with that kind's number."""

    _NUMBER: ClassVar = {"static": "gain", "inverse": "filter_time"}

    def __init__(self, document: Document, theme: Theme) -> None:
        words = ("none", *find("controller.feedforward.kind").choices)
        super().__init__(document, theme, "Feedforward of the reference", words)

    def refresh(self, *, anew: bool) -> None:
        """Show the feedforward of the document."""
        present: Feedforward | None = self._document.sheet.controller.feedforward
        self.switch.show_choice(present.kind if present else "none")
        self.show_fields([find(f"controller.feedforward.{self._NUMBER[present.kind]}")] if present else [], anew=anew)

    def choose(self, word: str) -> None:
        """Have feedforward of a kind, or none."""
        self.try_edit(with_feedforward(self._document.sheet, word), f"Set the feedforward to {word}")


class ReferenceFilterGroup(OptionalGroup):
    """The filter between the reference and the law, there or not."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Reference filter", ("none", "lags"))

    def refresh(self, *, anew: bool) -> None:
        """Show the reference filter of the document."""
        smooth = self._document.sheet.controller.reference_filter
        self.switch.show_choice("none" if smooth is None else "lags")
        self.show_fields(in_section("controller.reference_filter") if smooth else (), anew=anew)

    def choose(self, word: str) -> None:
        """Add a reference filter, or remove it."""
        sheet = self._document.sheet
        smooth = first_reference_filter(sheet) if word == "lags" else None
        label = "Add a reference filter" if smooth else "Remove the reference filter"
        self.try_edit(with_reference_filter(sheet, smooth), label)


class DisturbancePath(OptionalGroup):
    """The measured disturbance's own path to the output, a formula, and what is made of it; empty for none."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Feedforward of a measured disturbance", ())
        self.switch.hide()
        parameter = find("controller.disturbance_feedforward.expression")
        self.text: TypedText[str] = TypedText(theme, self._held(), Words(str.strip, str), self._take, lines=2)
        self.text.setPlaceholderText("none")
        self.text.setAccessibleName("path of the measured disturbance")
        self.text.setToolTip(f"{parameter.sentence} Empty: none.")
        self.text.intake.path = parameter.path
        self.text.intake.left.connect(document.release)
        self.text.intake.faulted.connect(self.fault.say)
        self.column.insertWidget(1, self.text)

    def refresh(self, *, anew: bool) -> None:
        """Show the path of the document, and what else is known of the disturbance."""
        self.text.intake.show_value(self._held(), anew=anew)
        others = [one for one in in_section("controller.disturbance_feedforward") if one.name != "expression"]
        self.show_fields(others if self._held() else (), anew=anew)

    def _held(self) -> str:
        path = self._document.sheet.controller.disturbance_feedforward
        return path.expression if path else ""

    def _take(self, formula: str) -> None:
        self._document.change_disturbance_path(formula, merge_key="disturbance path")
