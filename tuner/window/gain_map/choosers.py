"""The row over the map: which gains its axes are, and whose values its contours are."""

from collections.abc import Sequence

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHBoxLayout, QLabel, QWidget

from tuner.model.measures import BY_NAME, MEASURES
from tuner.model.parameters import Parameter, rulers
from tuner.model.sheet import Sheet
from tuner.window.editors.chooser import Chooser
from tuner.window.theme import Theme

NO_MEASURE = "none"
_LENGTHS = {"Across": 10, "Upwards": 10, "Contours": 22}
_TIP = Qt.ItemDataRole.ToolTipRole


class Choosers(QWidget):
    """Three choices; `changed` tells that the hand changed one.

    Attributes
    ----------
    across, upwards : Chooser
        The gains across and upwards; they are never the same, choosing one for both swaps them.
    measure : Chooser
        Whose worst values are drawn as contours.
    """

    changed = Signal()

    def __init__(self, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._parameters: tuple[Parameter, ...] = ()
        self._limits: tuple[str, ...] | None = None
        self._names = ("", "")
        self.across = Chooser(theme, "gain across the map")
        self.upwards = Chooser(theme, "gain up the map")
        self.measure = Chooser(theme, "measure of the contours")
        row = QHBoxLayout(self)
        row.setContentsMargins(8, 4, 8, 4)
        row.setSpacing(8)
        for words, box in (("Across", self.across), ("Upwards", self.upwards), ("Contours", self.measure)):
            label = QLabel(words)
            label.setProperty("voice", "quiet")
            label.setBuddy(box)
            box.setMinimumContentsLength(_LENGTHS[words])
            row.addWidget(label)
            row.addWidget(box)
        row.addStretch(1)
        self.across.activated.connect(lambda _at: self._choose(0))
        self.upwards.activated.connect(lambda _at: self._choose(1))
        self.measure.activated.connect(lambda _at: self.changed.emit())

    @property
    def gains(self) -> tuple[Parameter, Parameter]:
        """The gains chosen, across and upwards."""
        by_name = {parameter.name: parameter for parameter in self._parameters}
        return by_name[self._names[0]], by_name[self._names[1]]

    @property
    def chosen_measure(self) -> str:
        """The measure chosen, empty for none."""
        return str(self.measure.currentData() or "")

    def show_sheet(self, sheet: Sheet) -> None:
        """Offer the gains of the present form, and the measures, those that the sheet limits first."""
        parameters = rulers(sheet.controller.form)
        if parameters != self._parameters:
            self._offer_gains(parameters)
        limits = tuple(name for name, _ in sheet.limits)
        if limits != self._limits:
            self._offer_measures(limits)

    def choose_gains(self, x: str, y: str) -> None:
        """Choose both gains by their names."""
        self._names = (x, y)
        for box, name in zip((self.across, self.upwards), self._names, strict=True):
            box.setCurrentIndex(box.findData(name))

    def _offer_gains(self, parameters: tuple[Parameter, ...]) -> None:
        """Offer other gains; one that both forms have stays chosen, else the one at its place is."""
        before = [parameter.name for parameter in self._parameters]
        names = [parameter.name for parameter in parameters]
        places = [before.index(name) if name in before else at for at, name in enumerate(self._names)]
        self._parameters = parameters
        for box in (self.across, self.upwards):
            box.clear()
            for parameter in parameters:
                box.addItem(parameter.name, parameter.name)
                box.setItemData(box.count() - 1, parameter.sentence, _TIP)
        kept = [old if old in names else names[place] for old, place in zip(self._names, places, strict=True)]
        self.choose_gains(kept[0], kept[1])

    def _offer_measures(self, limits: tuple[str, ...]) -> None:
        """Offer the measures; what was chosen stays chosen, at first it is the first that is limited."""
        first, before = self._limits is None, self.chosen_measure
        self._limits = limits
        self.measure.clear()
        self.measure.addItem(NO_MEASURE, "")
        self._add_measures(limits)
        self._add_measures([measure.name for measure in MEASURES if measure.name not in limits])
        wished = (limits[0] if limits else "") if first else before
        self.measure.setCurrentIndex(max(self.measure.findData(wished), 0))

    def _add_measures(self, names: Sequence[str]) -> None:
        if names:
            self.measure.insertSeparator(self.measure.count())
        for name in names:
            self.measure.addItem(BY_NAME[name].label, name)
            self.measure.setItemData(self.measure.count() - 1, BY_NAME[name].sentence, _TIP)

    def _choose(self, which: int) -> None:
        name = str((self.across, self.upwards)[which].currentData())
        before, other = self._names[which], self._names[1 - which]
        if name == before:
            return
        pair = [name, before if name == other else other]
        self.choose_gains(*(pair if which == 0 else pair[::-1]))
        self.changed.emit()
