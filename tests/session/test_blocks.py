"""The blocks of the loop: what each says, and that each comes and goes."""

from dataclasses import replace

import pytest

from tests.session.sheets import wash_bath
from tuner.files.sheet import parse, render
from tuner.model.controller import DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.sheet import Actuator, Sensor, Sheet
from tuner.session.blocks import blocks, with_block, without_block

MAY_COME = (
    "feedforward",
    "reference_filter",
    "disturbance_feedforward",
    "actuator",
    "sensor",
    "measurement_filter",
    "lead_lag",
    "notch",
)


def bare() -> Sheet:
    """Return a loop with none of the blocks that may come and go."""
    return replace(wash_bath(), actuator=Actuator(), sensor=Sensor())


def test_they_stand_in_the_order_of_the_signal() -> None:
    """From the reference around the loop and back."""
    assert list(blocks(bare())) == [
        "feedforward", "reference_filter", "law", "disturbance_feedforward", "limits", "actuator", "path", "plant",
        "sensor", "measurement_filter", "lead_lag", "notch",
    ]  # fmt: skip


@pytest.mark.parametrize("key", MAY_COME)
def test_each_comes_and_goes(key: str) -> None:
    """Put in, it is there with numbers that a file may hold; taken out, the sheet is as it was."""
    sheet = bare()
    assert not blocks(sheet)[key].there
    put_in = with_block(sheet, key)
    assert blocks(put_in)[key].there
    assert parse(render(put_in)) == put_in
    removed = without_block(put_in, key)
    assert not blocks(removed)[key].there
    if key != "disturbance_feedforward":
        assert removed == sheet


def test_the_path_of_a_disturbance_outlives_its_feedforward() -> None:
    """Without feedforward the disturbance still comes along its path; put in again, it is made of that path."""
    sheet = with_block(bare(), "disturbance_feedforward")
    silent = without_block(sheet, "disturbance_feedforward")
    assert blocks(silent)["path"].there
    assert with_block(silent, "disturbance_feedforward") == sheet
    assert not blocks(without_block(silent, "path"))["path"].there


def test_what_they_are_set_to() -> None:
    """A few figures with their unit."""
    sheet = bare()
    law = replace(
        sheet.controller,
        reference_filter=ReferenceFilter(2.5),
        lead_lag=LeadLag(3.0, 1.0),
        notch=Notch(2.1),
        measurement_filter=0.4,
        feedforward=Feedforward("inverse", filter_time=1.0),
        disturbance_feedforward=DisturbanceFeedforward("1/(s + 1)", kind="static"),
    )
    found = blocks(replace(sheet, controller=law, actuator=Actuator(0.8), sensor=Sensor(1.5)))
    told = {key: block.detail for key, block in found.items()}
    assert told["reference_filter"] == "2.5 s"
    assert told["lead_lag"] == "3 to 1 s"
    assert told["notch"] == "2.1 rad/s"
    assert told["measurement_filter"] == "0.4 s"
    assert (told["actuator"], told["sensor"]) == ("0.8 s", "1.5 s")
    assert (told["feedforward"], told["disturbance_feedforward"]) == ("inverse", "static")


def test_sentences_for_who_does_not_see_them() -> None:
    """What it is, what it is set to and what a press does."""
    found = blocks(replace(bare(), actuator=Actuator(0.8)))
    assert found["actuator"].sentence() == "actuator, 0.8 s: edit it"
    assert found["lead_lag"].sentence() == "lead-lag, not there: add it"
    assert found["plant"].sentence() == "plant: edit it"


def test_what_is_always_there_cannot_be_taken_out() -> None:
    """Law, limits and plant make the loop."""
    for key in ("law", "limits", "plant"):
        assert not blocks(bare())[key].may_go
        with pytest.raises(KeyError):
            without_block(bare(), key)
