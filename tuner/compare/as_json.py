"""Comparisons as the plain objects that other programs read: strict JSON, infinity as a string."""

from typing import Any

from tuner.compare.comparison import Comparison
from tuner.compare.tuning_table import Cell, Column, Row, TuningTable
from tuner.judge.as_json import as_json, number
from tuner.model.sheet import Sheet

Json = dict[str, Any]


def structures_as_json(sheet: Sheet, comparisons: tuple[Comparison, ...], *, traces: bool = False) -> Json:
    """Return a comparison of structures.

    Returns
    -------
    dict
        ``title``, and ``structures``, a list of objects in the order feedforward, feedback, both::

            {"structure": "feedforward|feedback|both", "name": "feedforward alone",
             "needs": ["a model of the plant"], "remarks": ["..."],
             "can_destabilise": false, "stability": "No: ...",
             "figures": {"steady_state_error": {"nominal": 0.0, "worst": 15.0, "plant": "gain 0.765", "reason": ""},
                         "disturbance_peak": {}, "final_deviation": {}, "iae_reference": {}, "iae_disturbance": {},
                         "peak_effort": {}, "saturated_share": {}, "gain_margin": {}},
             "assessment": {}}

        Figures are sizes, in the units of the measures of those names, ``final_deviation`` in that of the controlled
        signal; null where there is none, with the reason. ``assessment`` is what `judge` prints of such a sheet; where
        the structure cannot be had it is null, the figures are empty, and ``remarks`` says why.
    traces : bool
        As in `as_json.as_json`.
    """
    return {"title": sheet.loop.title, "structures": [_structure(one, traces=traces) for one in comparisons]}


def tunings_as_json(sheet: Sheet, found: TuningTable, *, traces: bool = False) -> Json:
    """Return a table of tunings.

    Returns
    -------
    dict
        ``title``; ``tunings``, a list of objects with ``name``, ``label``, ``refusal`` and ``assessment`` as `judge`
        prints it, null where it is refused; and ``measures``, a list with one object for each measure, those with
        limits first, whose ``values`` are in the order of the tunings::

            {"measure": "overshoot", "limit": 8.0,
             "values": [{"value": 3.1, "plant": "gain +15 %", "met": true, "best": false}]}

        ``met`` is null without a limit. Values are the worst over the family.
    traces : bool
        As in `as_json.as_json`.
    """
    return {
        "title": sheet.loop.title,
        "tunings": [_column(column, traces=traces) for column in found.columns],
        "measures": [_row(row) for row in found.rows],
    }


def _structure(one: Comparison, *, traces: bool) -> Json:
    return {
        "structure": one.structure.kind,
        "name": one.name,
        "needs": list(one.structure.needs),
        "remarks": list(one.remarks),
        "can_destabilise": one.can_destabilise,
        "stability": one.stability,
        "figures": {
            figure.name: {
                "nominal": number(figure.nominal),
                "worst": number(figure.worst),
                "plant": figure.plant,
                "reason": figure.reason,
            }
            for figure in one.figures
        },
        "assessment": None if one.assessment is None else as_json(one.assessment, traces=traces),
    }


def _column(column: Column, *, traces: bool) -> Json:
    assessment = None if column.assessment is None else as_json(column.assessment, traces=traces)
    tuning = column.tuning
    return {"name": tuning.name, "label": tuning.label, "refusal": column.refusal, "assessment": assessment}


def _row(row: Row) -> Json:
    return {"measure": row.measure.name, "limit": number(row.limit), "values": [_cell(cell) for cell in row.cells]}


def _cell(cell: Cell) -> Json:
    return {"value": number(cell.value), "plant": cell.plant, "met": cell.met, "best": cell.best}
