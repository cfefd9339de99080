"""What the controller as found and the newest kept tuning come to over the whole family, found beside everything else.

Moving the present gains changes none of it, so it is asked for only when the plant, the trial or those tunings change.
"""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

from PySide6.QtCore import QObject

from tuner.compare.tuning_table import AS_FOUND, Column, Tuning
from tuner.judge.assessment import WorstCase
from tuner.judge.overlay import at_plant
from tuner.judge.wording import minus, quantity, unit_of
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Beside, Stop
from tuner.window.in_sight import Answer, InSight, Question, Request

JudgeTuning = Callable[[Sheet, Tuning], Column]
"""Assesses a sheet with a tuning in the place of its own."""

Show = Callable[["tuple[Earlier, ...]"], None]


@dataclass(frozen=True, slots=True)
class Earlier:
    """A tuning's worst value of every measure over the family; where one is worst is how far the plant has drifted."""

    name: str
    worst: Mapping[str, WorstCase]


@dataclass(frozen=True, slots=True)
class EarlierWords:
    """An earlier value beside the present one: in short, and with the plant that is worst."""

    short: str
    whole: str


class EarlierTunings(QObject):
    """Keeps what is shown of earlier tunings true.

    Parameters
    ----------
    document : Document
        Whose tunings they are.
    show : callable
        Takes what is known of them; nothing while that is out of date.
    worker : Beside
        Answers a `Request` with an `Answer` whose finding is a tuple of `Earlier`.
    """

    def __init__(self, document: Document, show: Show, worker: Beside[Request]) -> None:
        super().__init__()
        self._document, self._show = document, show
        self._generation = document.generation
        self.answers = InSight(worker)
        self.answers.answered.connect(show)
        self.answers.late.connect(self._clear)
        self.answers.failed.connect(lambda _sentence: self._clear())
        self._stop_listening = document.listen(self.refresh)
        self.refresh()

    def start(self) -> None:
        """Begin to compute: the first curves of the window had the machine to themselves."""
        self.answers.activate(True)

    def refresh(self) -> None:
        """Ask for what the document holds, unless it is known."""
        if self._document.generation != self._generation:
            self._generation = self._document.generation
            self._clear()
        self.answers.want(question_of(self._document))

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._stop_listening()
        self.answers.close()

    def _clear(self) -> None:
        self._show(())


def question_of(document: Document) -> Question:
    """Return the earlier tunings of a document, on a sheet without the present one and without limits."""
    found, kept = document.sheet.controller.as_found, document.kept[-1:]
    tunings = [Tuning(AS_FOUND, "", found)] if found is not None else []
    tunings += [Tuning(one.name, one.label, replace(one.controller, as_found=None)) for one in kept]
    return Question(replace(document.sheet, controller=Controller(), limits=()), tuple(tunings))


def answering_by(judge: JudgeTuning) -> Callable[[Request, Stop], Answer]:
    """Return what answers requests for earlier tunings; one that cannot be computed is left out."""

    def answer(request: Request, _stop: Stop) -> Answer:
        asked = request.question
        columns = [judge(asked.sheet, tuning) for tuning in asked.kept]
        return Answer(request, tuple(found for column in columns if (found := _earlier(column)) is not None))

    return answer


def earlier_words(earlier: Sequence[Earlier], measure: str, loop: Loop) -> tuple[EarlierWords, ...]:
    """Return what a measure came to under each of some tunings."""
    return tuple(_words(one.name, one.worst[measure], measure, loop) for one in earlier if measure in one.worst)


def _earlier(column: Column) -> Earlier | None:
    assessment = column.assessment
    if assessment is None:
        return None
    drifted = {name: replace(worst, plant=assessment.drift_of(worst.plant)) for name, worst in assessment.worst.items()}
    return Earlier(column.name, drifted)


def _words(name: str, worst: WorstCase, measure: str, loop: Loop) -> EarlierWords:
    value = abs(worst.value) if BY_NAME[measure].by_size and worst.value is not None else worst.value
    said = minus(quantity(value, unit_of(measure, loop), 3)).replace("inf", "∞")
    if value is None and not worst.none:
        said = "—"
    short = "found" if name == AS_FOUND else name
    whole = "As found" if name == AS_FOUND else f"Tuning {name}"
    return EarlierWords(f"{short} {said}", f"{whole}: {said}{at_plant(worst.plant)}.")
