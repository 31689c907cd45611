"""The design-position sheet on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.views.sentences import sheet_remarks
from toewright.views.words import axle_words, figure, number
from toewright_cli.console import print_table, say
from toewright_cli.outputs import meanings, source_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.kinematics.sheet import CornerSheet
    from toewright.model.axle import Axle
    from toewright.views.toe import ToeScale

WORKSHOP_TRAVEL = 25.0
"""Wheel travel (mm, bump) of the workshop's bump-steer figure."""


def sheet_document(axle: Axle, sheets: Sequence[CornerSheet]) -> dict[str, Any]:
    """One file's sheet for ``--json``, in the units of the glossary."""
    from toewright.kinematics.sheet import SHEET_COLUMNS
    from toewright.kinematics.summary import mirror_images

    return {
        **source_of(axle),
        "quantities": meanings(SHEET_COLUMNS),
        "mirror_images": mirror_images(axle),
        "corners": [
            {
                "side": sheet.side,
                "type": sheet.kind,
                **sheet.figures,
                "lengths_mm": sheet.lengths,
                "tie_rod_outer": {
                    "ahead_of_steering_axis_mm": sheet.tie_rod.ahead,
                    "inboard_of_steering_axis_mm": sheet.tie_rod.inboard,
                    "steering_arm_mm": sheet.tie_rod.arm,
                },
            }
            for sheet in sheets
        ],
        "remarks": sheet_remarks(axle, sheets),
    }


def print_sheet(axle: Axle, sheets: Sequence[CornerSheet], workshop: ToeScale) -> None:
    """The sheet as one table: one column of figures where the corners are mirror images, otherwise two."""
    from toewright.kinematics.summary import mirror_images

    one = mirror_images(axle)
    shown = sheets[:1] if one else sheets
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    say(
        "The sides are mirror images: one column stands for each of them."
        if one
        else "The sides differ: one column for each."
    )
    rows: list[list[str]] = []
    for name in shown[0].figures:
        rows += _figure_rows(name, [s.figures[name] for s in shown], [s.figures[name] for s in sheets], workshop)
    rows.append([])
    for words in shown[0].lengths:
        rows.append([words, *(number(s.lengths[words], 2, sign=False) for s in shown if words in s.lengths), "mm"])
    rows.append(["steering arm", *(number(s.tie_rod.arm, 2, sign=False) for s in shown), "mm, joint to steering axis"])
    headings = ["design position", *(["each side"] if one else [s.side for s in shown]), "unit, sign"]
    print_table(headings, rows, right=range(1, len(headings) - 1))
    for sheet in shown:
        say(f"Outer tie rod joint{'' if one else f', {sheet.side}'}: {sheet.tie_rod.words}.")
    remarks = sheet_remarks(axle, sheets)
    say("Remarks: none." if not remarks else "Remarks:")
    for remark in remarks:
        say(f"- {remark}")


def _figure_rows(name: str, values: Sequence[float], wheels: Sequence[float], workshop: ToeScale) -> list[list[str]]:
    """The row of one figure; toe and its rate get a second one, as a workshop measures them.

    Args:
        name: the quantity.
        values: of the corners that have a column.
        wheels: of both corners.
        workshop: how the workshop measures toe.
    """
    from toewright.model.glossary import quantity

    label = {"toe_in": "static toe", "camber": "static camber"}.get(name) or quantity(name).label
    shown = [figure(name, value) for value in values]
    _, unit, sign = shown[0]
    numbers = [text for text, _, _ in shown]
    if name not in ("toe_in", "bump_steer_rate"):
        return [[label, *numbers, f"{unit}, {sign}"]]
    travel, second = (
        (1.0, "  as measured") if name == "toe_in" else (WORKSHOP_TRAVEL, f"  over {WORKSHOP_TRAVEL:g} mm of bump")
    )
    if workshop.total:
        cells = [*[""] * (len(values) - 1), workshop.cell(*(travel * wheel for wheel in wheels))]
    else:
        cells = [workshop.cell(travel * value) for value in values]
    return [[label, *numbers, f"{unit} per wheel, {sign}"], [second, *cells, workshop.words]]
