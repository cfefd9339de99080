"""What is done with the run as a whole: running, speed and the big stop in a row, record and demonstration apart."""

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHBoxLayout, QLabel, QPushButton, QSizePolicy, QWidget

from tuner.rehearse.pacing import FASTEST, SLOWEST
from tuner.session.typed import Bounds
from tuner.window.flow import FlowLayout
from tuner.window.rehearsal.runner import Runner
from tuner.window.rehearsal.stepped_line import SteppedLine, next_speed
from tuner.window.theme import Theme

_STOP_LOOK = """
QPushButton {{ background: {lost_word}; color: {on_accent}; border: 1px solid {lost_word}; border-radius: 2px;
    padding: 8px 24px; }}
QPushButton:hover, QPushButton:focus {{ border-color: {ink}; }}
QPushButton:disabled {{ background: {page}; color: {kept_word}; border-color: {line}; }}
"""


class Bar(QWidget):
    """The row; it shows a runner and says what the hand wants.

    Attributes
    ----------
    apart : QWidget
        Record and demonstration, which stand in the row only where there is room.
    """

    stop_wanted = Signal()
    run_wanted = Signal(bool)
    """Run, or pause."""
    anew_wanted = Signal()
    speed_wanted = Signal(float)
    record_wanted = Signal(bool)
    save_wanted = Signal()
    play_wanted = Signal()

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.run = _button("Run", "Let time go by, or stand still.", checkable=True)
        self.anew = _button("From rest", "Begin anew: the loop of the sheet, at rest.")
        self.speed = SteppedLine(theme, "speed", Bounds(SLOWEST, FASTEST), next_speed)
        self.record = _button("Record", "Keep every sample and every event in a record.", checkable=True)
        self.save = _button("Save record…", "Write the record to a file, as CSV.")
        self.play = _button("Play demonstration…", "Let a file of actions do what the hand does.")
        self.stop = _button("Stop", "To manual, the effort to rest, the disturbance off: Escape, or Ctrl+. anywhere.")
        self.stop.setFont(theme.font("body", strong=True))
        self._arrange()
        self.apart = self._arranged_apart()
        self._connect()
        theme.changed.connect(self._dress)
        self._dress()

    def show_runner(self, runner: Runner, *, saving: bool) -> None:
        """Show what runs."""
        ready = runner.rehearsal is not None
        self.run.setChecked(runner.running)
        self.run.setText("Pause" if runner.running else "Run")
        self.speed.show_value(runner.pacer.speed, "times")
        self.record.setChecked(runner.recording)
        self.record.setText("End record" if runner.recording else "Record")
        for button in (self.run, self.anew, self.record, self.stop):
            button.setEnabled(ready)
        self.save.setEnabled(runner.recorder is not None and not saving)

    def take_apart(self) -> None:
        """Have record and demonstration in the row."""
        self.row.insertWidget(self.row.count() - 2, self.apart, 1, Qt.AlignmentFlag.AlignVCenter)

    def _arrange(self) -> None:
        self.row = QHBoxLayout(self)
        self.row.setContentsMargins(8, 4, 8, 4)
        self.row.setSpacing(8)
        for part in (self.run, self.anew, self._speed_with_name()):
            self.row.addWidget(part, 0, Qt.AlignmentFlag.AlignVCenter)
        self.row.addStretch(1)
        self.row.addWidget(self.stop)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Maximum)

    def _arranged_apart(self) -> QWidget:
        whole = QWidget()
        row = FlowLayout(whole, 8)
        for part in (self.record, self.save, self.play):
            row.addWidget(part)
        return whole

    def _speed_with_name(self) -> QWidget:
        whole, label = QWidget(), QLabel("Speed")
        label.setProperty("voice", "quiet")
        label.setBuddy(self.speed.line)
        row = QHBoxLayout(whole)
        row.setContentsMargins(4, 0, 0, 0)
        row.setSpacing(8)
        row.addWidget(label)
        row.addWidget(self.speed)
        # As high as the buttons beside it, so that all stand on one line.
        whole.setFixedHeight(self.run.sizeHint().height())
        return whole

    def _connect(self) -> None:
        self.run.clicked.connect(self.run_wanted)
        self.anew.clicked.connect(lambda _checked=False: self.anew_wanted.emit())
        self.speed.wanted.connect(self.speed_wanted)
        self.record.clicked.connect(self.record_wanted)
        self.save.clicked.connect(lambda _checked=False: self.save_wanted.emit())
        self.play.clicked.connect(lambda _checked=False: self.play_wanted.emit())
        self.stop.clicked.connect(lambda _checked=False: self.stop_wanted.emit())

    def _dress(self) -> None:
        self.stop.setStyleSheet(_STOP_LOOK.format(**self._theme.palette.colours))


def _button(words: str, tip: str, *, checkable: bool = False) -> QPushButton:
    button = QPushButton(words)
    button.setCheckable(checkable)
    button.setToolTip(tip)
    button.setAccessibleDescription(tip)
    return button
