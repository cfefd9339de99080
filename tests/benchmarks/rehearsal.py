"""What a long rehearsal costs in memory: eight hours of the built-in loop in its window's page, as fast as it goes."""

import gc
import time
from pathlib import Path

from PySide6.QtCore import QCoreApplication
from PySide6.QtWidgets import QApplication

from tests.benchmarks.row import Row
from tuner.model.demonstration import SetDisturbance
from tuner.places import keep_compiled_kernels, sample_plants
from tuner.session.document import Document
from tuner.window.rehearsal import build_rehearsal
from tuner.window.rehearsal.page import RehearsalPage
from tuner.window.theme import Theme

HOURS = 8.0
_WARMING = 0.02
"""Share of the time after which memory is taken for the first time: what is made once has been made by then."""

_SLICE = 3_300
"""Samples between two frames: ten times as many as the page runs at a hundred times real time."""


def rows() -> list[Row]:
    """Measure the growth of memory, with every frame drawn and everything recorded."""
    begin = time.perf_counter()
    grown, frames, samples = _grown()
    seconds = time.perf_counter() - begin
    return [
        Row(
            "rehearsal_growth_mb",
            "growth of memory over a rehearsal of 8 hours, accelerated",
            "MB",
            "<= 10",
            grown,
            None,
            10.0,
            grown / 10.0,
            "what is allowed",
            f"{samples:,} samples and {frames:,} frames drawn and recorded in {seconds:.1f} s.",
        )
    ]


def _grown() -> tuple[float, int, int]:
    """Return by how much memory grows, MB, and how many frames and samples there were."""
    keep_compiled_kernels()
    application = QApplication.instance() or QApplication([])
    document = Document.from_file(sample_plants() / "web_tension.toml")
    page = build_rehearsal(document, Theme("light"), synchronous=True)
    page.widget.resize(1200, 800)
    page.widget.show()
    application.processEvents()
    page.show_stale()
    page.runner.record(True)
    try:
        return _run(page, application)
    finally:
        page.close()
        page.widget.hide()
        page.widget.deleteLater()


def _run(page: RehearsalPage, application: QCoreApplication) -> tuple[float, int, int]:
    """Disturb the loop and let it settle, again and again, for eight hours of its own time."""
    rehearsal = page.runner.rehearsal
    assert rehearsal is not None
    end, frames, samples, first = 3600.0 * HOURS, 0, 0, 0.0
    while rehearsal.time < end:
        page.runner.act(SetDisturbance(5.0 if frames % 2 else 0.0))
        samples += page.runner.go_on(_SLICE)
        page.runner.ticked.emit()
        application.processEvents()
        frames += 1
        if not first and rehearsal.time >= _WARMING * end:
            first = _memory()
    return _memory() - first, frames, samples


def _memory() -> float:
    """Return how much memory this process has in use, MB."""
    gc.collect()
    lines = Path("/proc/self/status").read_text(encoding="ascii").splitlines()
    kilobytes = next(line.split()[1] for line in lines if line.startswith("VmRSS"))
    return float(kilobytes) / 1024.0
