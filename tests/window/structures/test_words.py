"""The table of structures in words."""

from tests.window.structures.loops import PLANT, compared
from tuner.compare.figures import QUANTITIES
from tuner.window.structures.words import summary, table_words
from tuner.window.words_table import CellWords


def rows(plant: str = PLANT, kp: float = 2.0) -> dict[str, tuple[CellWords, ...]]:
    """Return the rows of a table by their heads."""
    words = table_words(compared(plant, kp))
    return {head.text: row for head, row in zip(words.heads, words.rows, strict=True)}


def test_a_column_for_each_structure_in_its_colour() -> None:
    """The names are those of the curves, in the colours of their words."""
    words = table_words(compared())
    assert [(column.text, column.role) for column in words.columns] == [
        ("Feedforward alone", "feedforward_word"),
        ("Feedback alone", "feedback_word"),
        ("Both", "nominal_word"),
    ]
    assert [head.text for head in words.heads] == [
        "verdict",
        *(quantity.label for quantity in QUANTITIES),
        "needs",
        "can destabilise",
        "to know",
    ]


def test_figures_with_units_the_worst_first() -> None:
    """The nominal plant's behind, the worst plant in the tip, the best strong."""
    error = rows()["error left after the step"]
    assert error[0].text == "20 % (nominal 0)"
    assert error[0].tip.startswith("Worst at gain ")
    assert error[0].tip.endswith("20 %. Nominal plant: 0 %.")
    assert [cell.strong for cell in rows()["deviation that stays"]] == [False, True, True]
    assert rows()["deviation that stays"][1].text == "0 degC (nominal 0)"


def test_what_does_not_exist_says_why() -> None:
    """An open loop has no margin; an unstable one no figures, which its verdict says."""
    assert rows()["gain margin"][0].text == "none: there is no feedback"
    wild = rows(kp=40.0)
    assert (wild["verdict"][1].text, wild["verdict"][1].role) == ("unstable", "lost_word")
    assert wild["largest deviation"][1].text == "none"
    assert wild["can destabilise"][1].text.startswith("It does. ")


def test_a_structure_that_is_refused_says_why() -> None:
    """In the last row; above are dashes."""
    refused = rows("gain s/(s + 1)^2")
    assert refused["verdict"][0].text == "not compared"
    assert refused["peak effort"][2].text == "—"
    assert refused["to know"][0].text.startswith("There is no feedforward to compare with: ")


def test_needs_and_remarks() -> None:
    """What each must know or measure, and where the feedforward comes from, which the line above says too."""
    assert rows()["needs"][2].text == "a sensor of the controlled signal, a model of the plant"
    assert summary(compared()).startswith("The sheet has no feedforward; this is the inverse of the nominal plant")
    assert rows()["to know"][0].text == summary(compared())
