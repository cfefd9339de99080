"""Windows over made-up loops, and a person who answers every question as told."""

from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path
from typing import TypeVar, cast

from tests.window import made_up, made_up_footing
from tests.window.gain_map.made_up_map import Mapping
from tuner.session.document import Document
from tuner.window import app
from tuner.window.app import Wiring, wire
from tuner.window.asking import Asking, LeftBehind, Unsaved
from tuner.window.editors import build_editors
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.question import PaintMap
from tuner.window.main_window import MainWindow
from tuner.window.rehearsal import build_rehearsal
from tuner.window.rulers import build_rulers, keep_painted
from tuner.window.rulers.painting import PaintRulers, ReasonAt
from tuner.window.structures import build_structures
from tuner.window.theme import Theme
from tuner.window.tunings import build_tunings
from tuner.window.worker import Assessor

Answer = TypeVar("Answer")


class Answers(Asking):
    """Answers as told, and remembers what was said."""

    def __init__(self, **answers: object) -> None:
        self.answers = answers
        self.asked: list[str] = []
        self.told: list[tuple[str, str, list[str]]] = []

    def _answer(self, question: str, kind: type[Answer]) -> Answer | None:
        self.asked.append(question)
        answer = self.answers.get(question)
        assert answer is None or isinstance(answer, kind)
        return answer

    def sheet_to_open(self, start: Path) -> Path | None:
        """Return the path told."""
        del start
        return self._answer("open", Path)

    def sheet_to_save(self, suggested: Path) -> Path | None:
        """Return the path told."""
        self.suggested = suggested
        return self._answer("save", Path)

    def picture_to_save(self, suggested: Path) -> Path | None:
        """Return the path told."""
        self.suggested = suggested
        return self._answer("picture", Path)

    def demonstration_to_open(self, start: Path) -> Path | None:
        """Return the path told."""
        self.start = start
        return self._answer("demonstration", Path)

    def record_to_save(self, suggested: Path) -> Path | None:
        """Return the path told."""
        self.suggested = suggested
        return self._answer("record", Path)

    def folder(self, start: Path) -> Path | None:
        """Return the path told."""
        del start
        return self._answer("folder", Path)

    def about_unsaved(self, name: str) -> Unsaved:
        """Return the answer told, else cancel."""
        self.name = name
        return cast("Unsaved", self._answer("unsaved", str) or "cancel")

    def about_left_behind(self, name: str) -> LeftBehind:
        """Return the answer told, else later."""
        self.name = name
        return cast("LeftBehind", self._answer("left behind", str) or "later")

    def agree(self, title: str, sentence: str, action: str) -> bool:
        """Return the answer told."""
        del title, sentence
        return bool(self._answer(action, bool))

    def tell(self, title: str, opening: str, sentences: Sequence[str]) -> None:
        """Remember what was said."""
        self.told.append((title, opening, list(sentences)))


@contextmanager
def opened(  # noqa: PLR0913 - each is what some test is about
    document: Document | None = None,
    asking: Asking | None = None,
    *,
    judge: made_up.Judge = made_up.judge,
    synchronous: bool = True,
    theme: Theme | None = None,
    paint: PaintRulers | None = None,
    reason_at: ReasonAt | None = None,
    paint_map: PaintMap | None = None,
) -> Iterator[tuple[MainWindow, Wiring]]:
    """Open a window on a made-up loop, and close it whatever happens."""
    held = document or Document(made_up.sheet())
    look = theme or Theme("light")
    assessor = Assessor(
        made_up.sketching(judge), lambda sheet, _plant: judge(sheet, 1), made_up.draw, synchronous=synchronous
    )
    rulers = build_rulers(held, look)
    painting, reasons = paint or made_up_footing.Painting(), reason_at or made_up_footing.Reasons()
    gain_map = build_gain_map(held, look, paint_map or Mapping(), reasons, synchronous=synchronous)
    compared = (
        build_structures(held, look, app._structures, made_up.draw, synchronous=synchronous),
        build_tunings(held, look, app._tunings, synchronous=synchronous),
    )
    rehearsal = build_rehearsal(held, look, synchronous=synchronous)
    window = MainWindow(held, look, assessor, build_editors(held, look), rulers, (gain_map, *compared, rehearsal))
    footing = keep_painted(held, rulers, painting, reasons, synchronous=synchronous)
    wiring = wire(window, asking or Answers(unsaved="discard"), footing, gain_map, others=(*compared, rehearsal))
    window.resize(1280, 800)
    window.show()
    if synchronous:
        window.ask()
    try:
        yield window, wiring
    finally:
        wiring.keeping.end()
        footing.close()
        gain_map.close()
        for page in (*compared, rehearsal):
            page.close()
        assessor.close()
        window.hide()
        window.deleteLater()
