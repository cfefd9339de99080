"""What the frequency page asks the simulation for: the response of the plants of an assessment."""

from dataclasses import replace

from tuner.judge.assessment import Assessment, MemberResult
from tuner.model.family import family_of
from tuner.model.sheet import Sheet
from tuner.simulate.curves import FrequencyCurves, frequency_curves
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import family_poles


def curves_of_one(sheet: Sheet, member: MemberResult) -> FrequencyCurves:
    """Return the response over frequency of one plant of a sheet."""
    plants = [plant for plant in family_of(sheet) if plant.name == member.name]
    loops = loops_of(replace(sheet, controller=replace(sheet.controller, feedback=True)), plants)
    return frequency_curves(loops, member.poles, [member.margins], (member.name,))


def curves_of(sheet: Sheet, seen: Assessment) -> FrequencyCurves:
    """Return the response over frequency of the plants of an assessment, in their order.

    Where the feedback is off, it is that of the loop which closing it would make.
    """
    places = {member.name: place for place, member in enumerate(seen.members)}
    members = sorted(
        (member for member in family_of(sheet) if member.name in places), key=lambda member: places[member.name]
    )
    loops = loops_of(replace(sheet, controller=replace(sheet.controller, feedback=True)), members)
    poles = seen.nominal.poles if sheet.controller.feedback else family_poles(loops[:1])[0].values
    margins = [member.margins for member in seen.members]
    return frequency_curves(loops, poles, margins, tuple(member.name for member in members))
