"""The table of tunings in words: values, what is missed, and by how much one is better."""

from dataclasses import replace

from tests.compare.loops import mash
from tests.window.tunings.loops import compared
from tuner.compare.tuning_table import Tuning
from tuner.model.controller import DisturbanceFeedforward
from tuner.model.measures import MEASURES
from tuner.window.tunings.compared import ComparedTunings
from tuner.window.tunings.words import ALONE, summary, table_words
from tuner.window.words_table import CellWords


def rows(shown: ComparedTunings) -> dict[str, tuple[CellWords, ...]]:
    """Return the rows of a table by their heads."""
    words = table_words(shown)
    return {head.text: row for head, row in zip(words.heads, words.rows, strict=True)}


def test_a_column_for_each_tuning() -> None:
    """Named as the trade does, with what it is in the tip."""
    kept = Tuning("A", "kp 3, ki 0.5, kd 0", replace(mash().controller, gain_1=3.0))
    words = table_words(compared(kept))
    assert [column.text for column in words.columns] == ["As found", "As left", "Tuning A"]
    assert words.columns[2].tip == "kp 3, ki 0.5, kd 0"
    assert len(words.heads) == 2 + len(MEASURES)


def test_limits_stand_in_the_heads() -> None:
    """With their sense and unit, before the measures without."""
    heads = [head.text for head in table_words(compared()).heads]
    assert heads[:4] == ["verdict", "misses", "overshoot ≤ 10 %", "max sensitivity ≤ 2"]


def test_misses_are_said_in_words() -> None:
    """In the cell, in the colour of what is lost, and all together with their worst plants."""
    found = rows(compared())
    assert found["verdict"][1].text == "missed"
    cell = found["overshoot ≤ 10 %"][1]
    assert ", missed" in cell.text
    assert cell.role == "lost_word"
    assert found["misses"][0] == CellWords("none", "quiet")
    said = found["misses"][1].text.split("; ")
    assert [part.partition(" >")[2] for part in said] == [" 10 % at gain +20 %", " 2 at gain +20 %"]
    assert said[0].startswith("overshoot ")
    assert found["misses"][1].role == "lost_word"


def test_differences_to_the_first_tuning() -> None:
    """In % of it, better or worse by the sense of the measure; the first has none; the best is strong."""
    found = rows(compared())
    assert found["rise time"][0].text.endswith(" s")
    assert found["rise time"][1].text.endswith(" % better")
    assert found["gain margin"][1].text.endswith(" % worse")
    assert [cell.strong for cell in found["rise time"]] == [False, True]
    assert found["rise time"][1].tip == "Worst at gain \N{MINUS SIGN}20 %."


def test_equal_tunings_have_no_difference() -> None:
    """Nothing is told of what is alike, and nothing is best."""
    same = Tuning("A", "", mash().controller)
    cells = rows(compared(same, more=""))["rise time"]
    assert cells[0].text == cells[1].text
    assert not any(cell.strong for cell in cells)


def test_what_is_not_there_says_why() -> None:
    """In the tip; a tuning that cannot be computed says so in its column."""
    found = rows(compared())
    assert found["peak time"][0].text == "none"
    assert found["peak time"][0].tip == "Not there: there is no overshoot."
    odd = replace(mash().controller, disturbance_feedforward=DisturbanceFeedforward("1"))
    refused = rows(compared(Tuning("A", "", odd), more=""))
    assert refused["verdict"][1].text == "not computed"
    assert refused["misses"][1].text.startswith("It cannot be computed: the disturbance feedforward would be improper")


def test_the_summary_counts() -> None:
    """Better and worse measures of the second tuning against the first; a single one has no rival."""
    found = compared()
    stands = [words.text for words in (row[1] for row in rows(found).values())]
    better = sum(text.endswith("better") for text in stands)
    said = summary(found.table)
    assert said.startswith("As left is better than as found in ")
    assert int(said.split(" measures")[0].rpartition(" ")[2]) >= better > 0
    assert summary(compared(more="").table) == ALONE
    kept = Tuning("A", "", replace(mash().controller, gain_1=1.0))
    assert summary(compared(kept, more="").table).startswith("Tuning A is better than as left in ")
