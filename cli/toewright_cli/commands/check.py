"""``toewright check``: is the file right, and what are the figures of the design position?"""

from __future__ import annotations

from pathlib import Path
from typing import Annotated, Any

import typer

from toewright_cli.console import complain, print_definitions, print_json
from toewright_cli.options import AsJson, Explain
from toewright_cli.progress import notice_compilation
from toewright_cli.toe import ToeDiameterOption, ToeTotalOption, ToeUnitOption, workshop_scale


def check(
    files: Annotated[
        list[Path], typer.Argument(metavar="FILE...", help="Hardpoint files (.toml).", show_default=False)
    ],
    toe_unit: ToeUnitOption = None,
    toe_diameter: ToeDiameterOption = None,
    toe_total: ToeTotalOption = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Validate hardpoint files and print the design-position sheet of each corner, remarks, limits and the file's own targets.

    All files are checked; the exit code is 2 when any of them is at fault, 1 when one misses a target.

    Example: toewright check hardpoints/*.toml
    """
    from toewright.kinematics.limits import limits
    from toewright.kinematics.sheet import SHEET_COLUMNS, design_sheets
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.studies.verdicts import check_targets
    from toewright_cli.show.limits import limits_document, print_limits
    from toewright_cli.show.sheet import print_sheet, sheet_document
    from toewright_cli.show.verdicts import print_verdicts, verdicts_document

    documents: list[dict[str, Any]] = []
    shown = faults = missed = 0
    for file in files:
        try:
            axle = load(file)
            workshop = workshop_scale(axle, toe_unit, toe_diameter, toe_total)
            notice_compilation()
            sheets = design_sheets(axle)
            bounds = limits(axle)
            verdicts = check_targets(axle)
        except InputError as error:
            faults += 1
            complain(str(error))
            documents.append({"file": str(file), "error": str(error)})
            continue
        if as_json:
            targets = verdicts_document(verdicts)
            documents.append(
                {**sheet_document(axle, sheets), "limits": limits_document(axle, bounds), "targets": targets}
            )
        else:
            if shown:
                typer.echo()
            print_sheet(axle, sheets, workshop)
            print_limits(axle, bounds)
            print_verdicts(verdicts)
        shown += 1
        missed += sum(not verdict.passed for verdict in verdicts)
    if as_json:
        print_json(documents)
    elif explain and shown:
        print_definitions(SHEET_COLUMNS)
    if faults:
        raise typer.Exit(2)
    if missed:
        raise typer.Exit(1)
