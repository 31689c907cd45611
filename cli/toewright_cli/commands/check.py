"""``toewright check``: is the file right, and what are the figures of the design position?"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from toewright_cli.console import out, print_definitions, print_json, table
from toewright_cli.options import AsJson, Explain
from toewright_cli.progress import notice_compilation
from toewright_cli.toe import ToeDiameterOption, ToeUnit, toe_scale

if TYPE_CHECKING:
    from toewright.kinematics.sheet import CornerSheet
    from toewright.model.axle import Axle

_UNITS = {
    "bump_steer_rate": ("deg/m", 1000.0, 2),
    "camber_gain": ("deg/m", 1000.0, 2),
    "steer_rate": ("deg/mm", 1.0, 4),
}
"""Unit, factor and decimals of rates as they are shown; everything else in its own unit with two decimals."""


def check(
    files: Annotated[
        list[Path], typer.Argument(metavar="FILE...", help="Hardpoint files (.toml).", show_default=False)
    ],
    toe_diameter: ToeDiameterOption = None,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Validate hardpoint files and print the design-position sheet of each corner with remarks.

    Example: toewright check hardpoints/*.toml
    """
    from toewright.kinematics.sheet import SHEET_COLUMNS, design_sheets
    from toewright.model.files import load

    axles = [load(file) for file in files]
    notice_compilation()
    documents = []
    for axle in axles:
        sheets = design_sheets(axle)
        if as_json:
            documents.append(sheet_document(axle, sheets))
        else:
            print_sheets(axle, sheets, toe_diameter)
    if as_json:
        print_json(documents)
    elif explain:
        print_definitions(SHEET_COLUMNS)


def sheet_document(axle: Axle, sheets: tuple[CornerSheet, ...]) -> dict[str, Any]:
    """One file's sheet for ``--json``."""
    from toewright.kinematics.sheet import SHEET_COLUMNS
    from toewright.model.glossary import quantity

    return {
        "file": str(axle.path),
        "sha256": axle.sha256,
        "title": axle.title,
        "units": {name: quantity(name).unit for name in SHEET_COLUMNS},
        "signs": {name: quantity(name).sign for name in SHEET_COLUMNS},
        "corners": [
            {"side": s.side, "type": s.kind, **s.figures, "lengths_mm": s.lengths, "tie_rod": s.layout} for s in sheets
        ],
        "remarks": [*axle.remarks, *(r for s in sheets for r in s.remarks)],
    }


def print_sheets(axle: Axle, sheets: tuple[CornerSheet, ...], toe_diameter: float | None) -> None:
    """The design-position sheet as a table: one column where both corners agree."""
    from toewright.kinematics.sheet import sheets_agree
    from toewright.model.glossary import quantity

    console = out()
    one = axle.symmetric or sheets_agree(sheets)
    shown = sheets[:1] if one else sheets
    console.print(f"{axle.path}: {axle.title}", style="bold", markup=False, soft_wrap=True)
    console.print(_layout_words(axle, sheets, one), markup=False, soft_wrap=True)
    rows: list[list[str]] = []
    for name in shown[0].figures:
        entry = quantity(name)
        unit, factor, places = _UNITS.get(name, (entry.unit, 1.0, 2))
        values = (f"{factor * s.figures[name] + 0.0:+.{places}f}" for s in shown)
        rows.append(
            [entry.label, unit, entry.sign, *(v.replace("-0.00", "+0.00") if float(v) == 0 else v for v in values)]
        )
        if name == "bump_steer_rate":
            rows.append(_workshop_row(axle, shown, toe_diameter))
    headings = ["design position, per wheel", "unit", "+ means", *(["each corner"] if one else [s.side for s in shown])]
    console.print(table(headings, rows, left=3))
    lengths = [[words, *(f"{s.lengths[words]:.2f}" for s in shown)] for words in shown[0].lengths]
    console.print(table(["lengths (mm)", *headings[3:]], lengths))
    for sheet in shown:
        console.print(f"Tie rod, {'each side' if one else sheet.side}: {sheet.layout}.", markup=False, soft_wrap=True)
    remarks = [*axle.remarks, *(r for s in shown for r in s.remarks)]
    console.print("Remarks:" if remarks else "Remarks: none.", markup=False)
    for remark in remarks:
        console.print(f"  {remark}", markup=False, soft_wrap=True)
    console.print("")


def _layout_words(axle: Axle, sheets: tuple[CornerSheet, ...], one: bool) -> str:
    kinds = " / ".join(dict.fromkeys(s.kind for s in sheets))
    rack = "no rack (toe links)" if axle.rack is None else f"rack with {axle.rack.stroke:g} mm of stroke each way"
    sides = (
        "right corner mirrors the left" if axle.symmetric else "both corners alike" if one else "left and right differ"
    )
    base = "" if axle.vehicle.wheelbase is None else f", wheelbase {axle.vehicle.wheelbase:g} mm"
    return f"{axle.vehicle.axle} axle, {kinds}, {rack}{base}; {sides}. Axes ISO 8855, mm, deg."


def _workshop_row(axle: Axle, shown: tuple[CornerSheet, ...], diameter: float | None) -> list[str]:
    from toewright.kinematics.sheet import WORKSHOP_TRAVEL

    label = f"  per {WORKSHOP_TRAVEL:g} mm of travel"
    if diameter is None and axle.wheel.rim_diameter is None:
        values = [f"{60.0 * WORKSHOP_TRAVEL * s.figures['bump_steer_rate']:+.2f}" for s in shown]
        return [label, "minutes of arc", "toe-in with bump +", *values]
    scale = toe_scale(axle, ToeUnit.MM, diameter, False)
    values = [f"{scale.value(WORKSHOP_TRAVEL * s.figures['bump_steer_rate']):+.3f}" for s in shown]
    return [label, f"mm across {scale.diameter:g} mm", "toe-in with bump +", *values]
