"""The workshop's one-page sheet as HTML that prints on A4."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from toewright.views.words import number

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.studies.shims import ShimTable
    from toewright.views.toe import ToeScale

CAUTIONS = (
    "Steering can kill: work to the car's own instructions; a qualified engineer and the rules you race or drive under have the last word.",
    "After every change tighten every joint to its torque, lock the jam nuts, and check that the thread engages as its maker asks.",
    "Turn both ends alike, so that the rod end stays clear of its stops; check joint tilt at full lock in full bump and full rebound.",
    "Set the toe again, then measure the bump steer on the car at its ride height; this table is geometry without play or flex.",
    "Check rack, arms and wheels for clearance through the whole travel and both locks before the car moves.",
)
"""What every workshop table says."""


def best_step(found: ShimTable, name: str) -> int | None:
    """Row of an adjuster's step with the least bump steer; None where no step is solved, and for the tie rod's thread, which sets toe."""
    if any(a.name == name and a.thread_pitch is not None for a in found.adjusters):
        return None
    rows = found.rows_of(name)
    most = found["bump_steer_most"][rows]
    return None if np.all(np.isnan(most)) else int(rows[int(np.nanargmin(most))])


def shim_page(axle: Axle, found: ShimTable, scale: ToeScale) -> str:
    """HTML of the sheet: one table for each adjuster, room to note what was measured, cautions; no script, nothing from outside."""
    from jinja2 import Environment, PackageLoader

    from toewright import __version__

    environment = Environment(
        loader=PackageLoader("toewright.views"), autoescape=True, trim_blocks=True, lstrip_blocks=True
    )
    tables = []
    for adjuster in found.adjusters:
        best = best_step(found, adjuster.name)
        rows = []
        for i in found.rows_of(adjuster.name).tolist():
            turns = float(found["rod_turns"][i])
            ok = found.status[i] == 0
            cells = [
                scale.cell(float(found["toe_before"][i])).strip(),
                number(turns if turns == turns else float(found["rod_longer"][i]), 2),
                scale.cell(float(found["bump_steer_low"][i])).strip(),
                scale.cell(float(found["bump_steer_high"][i])).strip(),
                number(float(found["camber"][i]), 2),
                number(float(found["caster"][i]), 2),
            ]
            rows.append(
                {
                    "step": number(float(found["adjustment"][i]), 2),
                    "cells": cells if ok else [str(found.status_names[i]), *[""] * 5],
                    "best": i == best,
                    "now": float(found["adjustment"][i]) == 0.0,
                }
            )
        tables.append(
            {"name": adjuster.name.replace("_", " "), "words": adjuster.words, "unit": adjuster.unit, "rows": rows}
        )
    turns_known = bool(np.isfinite(found["rod_turns"]).any())
    return environment.get_template("shims.html").render(
        title=axle.title,
        file=axle.path.name if axle.path else "",
        sha256=axle.sha256 or "",
        version=__version__,
        side=found.side,
        ride_height=number(found.ride_height, 1),
        low=number(float(found.travel[0]), 0),
        high=number(float(found.travel[-1]), 0),
        scale=scale.words,
        rod="turns" if turns_known else "mm",
        tables=tables,
        notes=found.notes,
        cautions=CAUTIONS,
    )
