"""Comparisons as JSON: every number and sentence, strictly."""

import json
from math import inf

from tests.compare.loops import mash, without_gains
from tuner.compare.as_json import structures_as_json, tunings_as_json
from tuner.compare.comparison import compare_structures
from tuner.compare.figures import QUANTITIES
from tuner.compare.tunings import compare_tunings
from tuner.judge.as_json import as_json


def strictly(found: object) -> str:
    """Return it as strict JSON."""
    return json.dumps(found, allow_nan=False)


def test_structures() -> None:
    """Kind, needs, words, figures and the assessment of each."""
    sheet = mash()
    compared = compare_structures(sheet)
    found = structures_as_json(sheet, compared)
    strictly(found)
    assert found["title"] == "Mash tun"
    assert [one["structure"] for one in found["structures"]] == ["feedforward", "feedback", "both"]
    first = found["structures"][0]
    assert first["needs"] == ["a model of the plant"]
    assert first["can_destabilise"] is False
    assert list(first["figures"]) == [quantity.name for quantity in QUANTITIES]
    assert first["figures"]["gain_margin"] == {
        "nominal": None,
        "worst": None,
        "plant": "nominal",
        "reason": "there is no feedback",
    }
    assert compared[0].assessment is not None
    assert first["assessment"] == as_json(compared[0].assessment)
    assert "traces" in structures_as_json(sheet, compared, traces=True)["structures"][2]["assessment"]


def test_a_structure_that_is_refused() -> None:
    """Null in the place of the assessment, no figures, and the reason among the remarks."""
    sheet = without_gains()
    back = structures_as_json(sheet, compare_structures(sheet))["structures"][1]
    assert (back["assessment"], back["figures"]) == (None, {})
    assert back["remarks"] == ["There is no feedback to compare with: all gains of the controller are 0."]


def test_tunings() -> None:
    """Each tuning with its assessment, each measure with a value for each tuning; infinity as a word."""
    sheet = mash("gain/(5 s + 1)", sample_time=0.0, more="[controller.as_found]\nkp = 1\nki = 0.1\n")
    table = compare_tunings(sheet)
    found = tunings_as_json(sheet, table)
    strictly(found)
    assert [one["name"] for one in found["tunings"]] == ["as found", "as left"]
    assert table.columns[1].assessment is not None
    assert found["tunings"][1]["assessment"] == as_json(table.columns[1].assessment)
    by_name = {one["measure"]: one for one in found["measures"]}
    assert by_name["gain_margin"]["values"][0]["value"] == "inf"
    assert by_name["gain_margin"]["limit"] is None
    assert by_name["overshoot"]["limit"] == 10.0
    assert table.rows[0].limit != inf
