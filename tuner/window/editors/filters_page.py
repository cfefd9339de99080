"""The page of the filters on the measurement: measurement filter, lead-lag, notch."""

from tuner.model.parameters import in_section
from tuner.session.document import Document
from tuner.session.fields import first_lead_lag, first_notch, with_lead_lag, with_notch
from tuner.window.editors.block_pages import TablePage
from tuner.window.editors.group import OptionalGroup
from tuner.window.theme import Theme


class FiltersPage(TablePage):
    """The blocks between sensor and law, in the order of the signal."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, (("Measurement filter", "controller.measurement_filter"),))
        for part in (LeadLagGroup(document, theme), NotchGroup(document, theme)):
            self.add(part, part)


class LeadLagGroup(OptionalGroup):
    """The lead-lag, there or not."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Lead-lag", ("none", "lead-lag"))

    def refresh(self, *, anew: bool) -> None:
        """Show the lead-lag of the document."""
        led = self._document.sheet.controller.lead_lag
        self.switch.show_choice("none" if led is None else "lead-lag")
        self.show_fields(in_section("controller.lead_lag") if led else (), anew=anew)

    def choose(self, word: str) -> None:
        """Add a lead-lag, or remove it."""
        sheet = self._document.sheet
        led = first_lead_lag(sheet) if word == "lead-lag" else None
        self.try_edit(with_lead_lag(sheet, led), "Add a lead-lag" if led else "Remove the lead-lag")


class NotchGroup(OptionalGroup):
    """The notch, there or not."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__(document, theme, "Notch", ("none", "notch"))

    def refresh(self, *, anew: bool) -> None:
        """Show the notch of the document."""
        notch = self._document.sheet.controller.notch
        self.switch.show_choice("none" if notch is None else "notch")
        self.show_fields(in_section("controller.notch") if notch else (), anew=anew)

    def choose(self, word: str) -> None:
        """Add a notch, or remove it."""
        sheet = self._document.sheet
        notch = first_notch(sheet) if word == "notch" else None
        self.try_edit(with_notch(sheet, notch), "Add a notch" if notch else "Remove the notch")
