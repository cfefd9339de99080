"""The page of the rehearsal: the loop running in time, to be disturbed and retuned by hand while it runs."""

from collections import deque
from collections.abc import Callable, Mapping
from dataclasses import replace
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QObject, Qt, QTimer
from PySide6.QtGui import QKeySequence, QShortcut

from tuner.errors import LoopError
from tuner.model.demonstration import Stop
from tuner.model.sheet import Sheet
from tuner.rehearse.script import Played
from tuner.rehearse.strip import Strip
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.elided import ElidedLabel, RoleLabel
from tuner.window.pictures import Pictured
from tuner.window.rehearsal.bar import Bar
from tuner.window.rehearsal.body import Body
from tuner.window.rehearsal.chart import Chart, Scene
from tuner.window.rehearsal.drift import Drift
from tuner.window.rehearsal.hand import Hand
from tuner.window.rehearsal.preparing import Ready, Wanted
from tuner.window.rehearsal.ring import Ring
from tuner.window.rehearsal.runner import Runner
from tuner.window.rehearsal.words import PREPARING, played_words, progress, stability
from tuner.window.shown import Failure, Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    from tuner.files.demonstrations import Staged

_WORDS_EVERY: Final = 200
"""Milliseconds between two looks at what is said in words: numbers that change faster cannot be read."""

_ONE_GO: Final = 0.01
"""Share of the width of the chart within which events are one: a ruler is moved in many small steps."""

_EVENTS: Final = 40
"""Events that are marked on the chart."""


class RehearsalPage(QObject):
    """The page.

    Parameters
    ----------
    document : Document
        Whose loop is rehearsed; its controller is followed while it runs.
    theme : Theme
        The look.
    worker : Beside
        Answers a `Wanted` with a `Ready`.
    """

    name = "Rehearsal"
    wants_frequency = False

    def __init__(self, document: Document, theme: Theme, worker: Beside[Wanted], runner: Runner | None = None) -> None:
        super().__init__()
        self._document, self._theme, self._worker = document, theme, worker
        self._awake = self._saving = False
        self._asked = self._first = 0
        self._generation = document.generation
        self._base: Sheet | None = None
        self._shown: Shown | None = None
        self._ring: Ring | None = None
        self._events: deque[float] = deque(maxlen=_EVENTS)
        self.guard: Callable[[], bool] = lambda: True
        self.runner = runner or Runner()
        self.bar, self.hand, self.drift, self.chart = Bar(theme), Hand(theme), Drift(theme), Chart(theme)
        self.stability, self.told, self.state = RoleLabel(theme), ElidedLabel(), ElidedLabel()
        self.widget = Body(theme, self.bar, self.chart.widget, (self.hand, self.drift), self._lines())
        self._words = QTimer(self, interval=_WORDS_EVERY)
        self._words.timeout.connect(self._say)
        self._connect()
        self.chart.say_empty(PREPARING)
        self._refresh()

    @property
    def panels(self) -> Mapping[str, Pictured]:
        """The page itself, of which a picture can be had."""
        return {self.name: self}

    # What a page does -------------------------------------------------------------------------------------------

    def show(self, shown: Shown) -> None:
        """Take the worst plants from an answer."""
        self._shown = shown
        self._wake()
        self._offer_worst()

    def show_stale(self) -> None:
        """Make ready although the loop cannot be assessed as it is now."""
        self._wake()

    def show_whole(self) -> None:
        """Do nothing: the chart always shows its whole width."""

    def forget(self) -> None:
        """Forget the loop that is left, and make the next one ready."""
        self._shown = None
        self._drop()
        self._ask()

    def say_empty(self, sentence: str) -> None:
        """Do nothing: a loop without a verdict can be rehearsed."""

    def hold(self, held: bool) -> None:
        """Do nothing: a hand on a ruler changes the gains as it moves."""

    def close(self) -> None:
        """Stand still, and let everything go."""
        self._stop_listening()
        self._words.stop()
        self.runner.close()
        self._worker.close()

    # What the hand does -----------------------------------------------------------------------------------------

    def play(self, staged: "Staged") -> None:
        """Play a demonstration on its own sheet, from rest, at its speed."""
        self._ask(staged)

    def stop(self) -> None:
        """Stop: to manual, the effort to rest, the disturbance off."""
        self.hand.latch.setChecked(False)
        self._mark()
        self.runner.act(Stop())

    def begin_anew(self) -> None:
        """Begin with the loop of the document at rest, running if this one runs."""
        self._ask(at_once=self.runner.running)

    def _record(self, on: bool) -> None:
        """Begin a record or end it; one that is not saved is let go for another only if that is agreed to."""
        if not on or self.guard():
            self.runner.record(on)
        else:
            self._refresh()

    def set_saving(self, words: str) -> None:
        """Say that a record is being written."""
        self._saving = True
        self.told.setText(words)
        self._refresh()

    def end_saving(self, words: str) -> None:
        """Say what became of it."""
        self._saving = False
        self.told.setText(words)
        self._refresh()

    # Making ready -----------------------------------------------------------------------------------------------

    def _wake(self) -> None:
        """Make the loop ready once the page is first in sight and the window has its first answer."""
        if not self._awake and self.widget.isVisible():
            self._awake = True
            self._ask()

    def _ask(self, staged: "Staged | None" = None, *, at_once: bool = False) -> None:
        if not self._awake and staged is None:
            return
        self._awake = True
        self._asked += 1
        sheet = self._document.sheet if staged is None else staged.sheet
        self._worker.submit(Wanted(self._asked, sheet, staged, at_once or staged is not None))

    def _drop(self) -> None:
        self._first = self._asked + 1
        self._ring = self._base = None
        self.runner.forget()
        self.chart.forget()
        self.chart.say_empty(PREPARING)

    def _on_ready(self, ready: Ready) -> None:
        wanted, rehearsal = ready.wanted, ready.rehearsal
        if wanted.number < max(self._first, self._asked):
            return
        self._base = wanted.sheet
        self._ring = Ring(_span(wanted.sheet), rehearsal.sample_time)
        self.chart.forget()
        self.hand.show_sheet(wanted.sheet)
        self.drift.show_sheet(wanted.sheet)
        self._offer_worst()
        self._events.clear()
        self.told.setText(_opening(wanted, self._document.sheet))
        self.runner.begin(rehearsal, wanted.staged)
        self._follow_document()
        self._draw()
        if wanted.at_once:
            self.runner.run()

    def _on_failed(self, failure: Failure) -> None:
        if failure.number >= max(self._first, self._asked):
            self.runner.forget()
            self.chart.say_empty(failure.sentence)

    def _offer_worst(self) -> None:
        shown, base = self._shown, self._base
        if shown is not None and shown.whole and base is not None and _same_loop(shown.sheet, base):
            self.drift.show_worst(shown.sheet, shown.assessment)
            self._refresh()

    # Following --------------------------------------------------------------------------------------------------

    def _follow_document(self) -> None:
        """Take over the gains of the rulers; begin anew where the loop itself is another one."""
        if self._base is None or self._document.generation != self._generation:
            self._generation = self._document.generation
            return
        sheet = self._document.sheet
        if not _same_loop(sheet, self._base):
            if self.runner.staged is None:
                self._ask(at_once=self.runner.running)
            return
        if self.runner.playing and sheet.controller == self._base.controller:
            return
        if sheet.controller.sample_time != self._base.controller.sample_time:
            self._ask(at_once=self.runner.running)
            return
        self._retune(sheet)

    def _retune(self, sheet: Sheet) -> None:
        if self._base is not None and sheet.controller == self._base.controller:
            return
        self._mark()
        try:
            self.runner.retune(sheet.controller)
        except LoopError as refusal:
            self.told.setText(str(refusal))
        self._base = replace(sheet, trial=self._base.trial) if self._base is not None else None

    def _on_advanced(self, strip: Strip) -> None:
        if self._ring is not None:
            self._ring.add(strip)

    def _on_happened(self, played: Played) -> None:
        self._mark() if played.words else None
        if self.runner.sheet is not None:
            self.told.setText(played_words(played, self.runner.sheet.loop.time_unit))

    def _mark(self) -> None:
        """Mark on the chart that something was done now; what is done in one go is marked once."""
        rehearsal, base = self.runner.rehearsal, self._base
        if rehearsal is None or base is None:
            return
        if not self._events or rehearsal.time > self._events[-1] + _ONE_GO * _span(base):
            self._events.append(rehearsal.time)

    def _on_refused(self, sentence: str) -> None:
        if sentence:
            self.told.setText(sentence)

    def _on_ticked(self) -> None:
        if self.widget.isVisible():
            self._draw()
            if self.runner.rehearsal is not None:
                self.hand.show_effort(self.runner.rehearsal)

    def _draw(self) -> None:
        rehearsal = self.runner.rehearsal
        if rehearsal is None or self._ring is None or self._base is None:
            return
        span, signals = _span(self._base), self._ring.signals()
        self.chart.show(Scene(rehearsal.sheet, rehearsal.time, span, signals, rehearsal.noise, tuple(self._events)))

    def _refresh(self) -> None:
        """Show what holds now."""
        rehearsal = self.runner.rehearsal
        self.bar.show_runner(self.runner, saving=self._saving)
        self.hand.show_rehearsal(rehearsal)
        self.drift.setEnabled(rehearsal is not None)
        if rehearsal is not None and self.drift.sliders:
            self.drift.show_values(rehearsal.values)
        self._escape.setEnabled(self.runner.running)
        (self._words.start if self.runner.running else self._words.stop)()
        self._say()

    def _say(self) -> None:
        rehearsal = self.runner.rehearsal
        if rehearsal is None or not self.widget.isVisible():
            return
        sentence, bad = stability(rehearsal)
        self.stability.setText(sentence)
        self.stability.set_role("lost_word" if bad else "quiet")
        self.state.setText(progress(rehearsal, self.runner.pacer, running=self.runner.running))
        self.hand.show_effort(rehearsal)

    # Making -----------------------------------------------------------------------------------------------------

    def _connect(self) -> None:
        self._stop_listening = self._document.listen(self._follow_document)
        self._worker.answered.connect(self._on_ready)
        self._worker.failed.connect(self._on_failed)
        runner, bar = self.runner, self.bar
        runner.advanced.connect(self._on_advanced)
        runner.changed.connect(self._refresh)
        runner.happened.connect(self._on_happened)
        runner.refused.connect(self._on_refused)
        runner.ticked.connect(self._on_ticked)
        bar.run_wanted.connect(lambda on: runner.run() if on else runner.pause())
        bar.anew_wanted.connect(self.begin_anew)
        bar.speed_wanted.connect(runner.set_speed)
        bar.record_wanted.connect(self._record)
        bar.stop_wanted.connect(self.stop)
        bar.speed.faulted.connect(self._on_refused)
        for part in (self.hand, self.drift):
            part.wanted.connect(lambda _deed: self._mark())
            part.wanted.connect(runner.act)
        self.widget.seen.connect(self._on_seen)
        self._theme.changed.connect(self.stability.dress)
        self.stability.dress()
        self._add_keys()

    def _lines(self) -> tuple[ElidedLabel, ElidedLabel, ElidedLabel]:
        """Return the lines of words, named."""
        self.told.setAccessibleName("what happened")
        self.stability.setAccessibleName("stability")
        self.state.setAccessibleName("state of the rehearsal")
        self.state.setProperty("voice", "quiet")
        return self.told, self.stability, self.state

    def _add_keys(self) -> None:
        """Stop by Escape on this page while it runs, and by Ctrl+. wherever the window is."""
        here, anywhere = Qt.ShortcutContext.WidgetWithChildrenShortcut, Qt.ShortcutContext.WindowShortcut
        self._escape = QShortcut(QKeySequence("Escape"), self.widget, context=here)
        self._escape.activated.connect(self.stop)
        QShortcut(QKeySequence("Ctrl+."), self.widget, context=anywhere).activated.connect(self.stop)

    def _on_seen(self, seen: bool) -> None:
        if seen:
            self._draw()
            self._say()


def _span(sheet: Sheet) -> float:
    """Return the width of the chart: that of the trial, in which the loop shows what it does."""
    return sheet.trial.duration


def _same_loop(one: Sheet, other: Sheet) -> bool:
    """Tell whether two sheets differ in their controller at most, as far as a rehearsal goes."""
    return (one.loop, one.plant, one.actuator, one.sensor) == (other.loop, other.plant, other.actuator, other.sensor)


def _opening(wanted: Wanted, opened: Sheet) -> str:
    if wanted.staged is None:
        return ""
    apart = "" if _same_loop(wanted.sheet, opened) else " The rulers act on the open sheet, not on this one."
    return f"{wanted.staged.demonstration.title}, on {wanted.staged.sheet_path.name}.{apart}"
