"""What a person reads, word for word."""

import io
from dataclasses import replace

from rich.console import Console

from tests.judge.invented import member, sheet
from tuner.cli.printing import show, verdict_sentence
from tuner.judge.assessment import Assessment
from tuner.judge.verdict import judge
from tuner.model.sheet import Sheet


def printed(asked: Sheet, assessment: Assessment, file: str = "kiln.toml") -> str:
    """Return what is printed where the output is no terminal."""
    out = io.StringIO()
    show(asked, assessment, file, Console(file=out, width=500, highlight=False, soft_wrap=True))
    return out.getvalue()


def test_a_missed_sheet() -> None:
    """Title, verdict, one line for each limit with units and the worst plant, and the notes; nothing else."""
    asked = sheet({"overshoot": 8.0, "settling_time": 90.0, "gain_margin": 2.0})
    family = [
        member(overshoot=7.66, gain_margin=3.0),
        member("gain 1.04, delay 6", settling_time=96.0, gain_margin=float("inf"), peak_time=None),
    ]

    assert printed(asked, judge(asked, family)) == (
        "Kiln zone  (kiln.toml)\n"
        "Missed: 1 of 3 limits, judged over the family of 2 plants.\n"
        "                value    limit            worst plant\n"
        "overshoot       7.66 %   at most 8 %      nominal              met\n"
        "settling time   96 min   at most 90 min   gain 1.04, delay 6   missed\n"
        "gain margin     3        at least 2       nominal              met\n"
        "- No peak time: the loop is unstable for gain 1.04, delay 6.\n"
        "\n"
    )


def test_a_missing_value_is_said() -> None:
    """A measure that does not exist reads "none"."""
    asked = sheet({"settling_time": 90.0})

    assert "settling time   none    at most 90 min   nominal       missed\n" in printed(
        asked, judge(asked, [member(settling_time=None)])
    )


def test_a_sheet_without_limits_lists_its_measures() -> None:
    """Without limits the worst value of every measure that exists is listed."""
    asked = sheet()
    text = printed(asked, judge(asked, [member(rise_time=None)]))

    assert "Stable, judged over the nominal plant alone; there are no limits to meet.\n" in text
    assert "phase margin                    1 deg        nominal" in text.splitlines()
    assert "rise time  " not in text


def test_nothing_but_plain_text_where_no_terminal_is() -> None:
    """No colour codes, and words in square brackets are printed as they stand."""
    asked = sheet({"overshoot": 8.0})
    odd = replace(judge(asked, [member()]), title="Kiln [red]zone[/red]")

    text = printed(asked, odd)

    assert "\x1b" not in text
    assert text.startswith("Kiln [red]zone[/red]  (kiln.toml)\n")


def test_a_unit_in_square_brackets_is_printed() -> None:
    """Units and plants in a table are no markup either."""
    asked = sheet({"disturbance_peak": 8.0})
    odd = replace(asked, loop=replace(asked.loop, controlled=replace(asked.loop.controlled, unit="[pH]")))

    assert "disturbance peak   1 [pH]   at most 8 [pH]   [b]" in printed(odd, judge(odd, [member("[b]")]))


def test_the_verdict_in_words() -> None:
    """Met, missed and unstable, in singular and plural."""
    one, two = sheet({"overshoot": 8.0}), sheet({"overshoot": 8.0, "rise_time": 0.5})
    family = [member(), member("gain 2")]

    assert verdict_sentence(judge(one, family)) == "Met: 1 of 1 limit, judged over the family of 2 plants."
    assert verdict_sentence(judge(two, family)) == "Missed: 1 of 2 limits, judged over the family of 2 plants."
    assert verdict_sentence(judge(one, [member(stable=False)])) == "Unstable, judged over the nominal plant alone."
