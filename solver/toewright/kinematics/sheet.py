"""The design-position sheet: the figures of each corner where it was drawn, and what is odd about them."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from toewright.kinematics.status import OK
from toewright.kinematics.sweep import design_pose
from toewright.model.axle import Axle, Corner

SHEET_COLUMNS = (
    "toe_in",
    "camber",
    "kingpin_inclination",
    "caster",
    "scrub_radius",
    "mechanical_trail",
    "wheel_centre_offset",
    "wheel_centre_trail",
    "transmission_angle",
    "bump_steer_rate",
    "camber_gain",
    "steer_rate",
)
"""Quantities of the sheet, in its order."""

LINKS = {
    "double-wishbone": (
        ("upper arm, front leg", "upper_pivot_front", "upper_ball_joint"),
        ("upper arm, rear leg", "upper_pivot_rear", "upper_ball_joint"),
        ("lower arm, front leg", "lower_pivot_front", "lower_ball_joint"),
        ("lower arm, rear leg", "lower_pivot_rear", "lower_ball_joint"),
        ("tie rod", "tie_rod_inner", "tie_rod_outer"),
        ("ball joint to ball joint", "lower_ball_joint", "upper_ball_joint"),
    ),
    "strut": (
        ("lower arm, front leg", "lower_pivot_front", "lower_ball_joint"),
        ("lower arm, rear leg", "lower_pivot_rear", "lower_ball_joint"),
        ("tie rod", "tie_rod_inner", "tie_rod_outer"),
        ("ball joint to top mount", "lower_ball_joint", "strut_top_mount"),
    ),
}
"""Lengths of the sheet: words and the two points, by corner kind."""

WORKSHOP_TRAVEL = 25.0
"""Wheel travel of the workshop's bump-steer figure: toe change across the rim per 25 mm."""


@dataclass(frozen=True)
class CornerSheet:
    """Design-position figures of one corner.

    Attributes:
        side: "left" or "right".
        kind: corner kind.
        figures: SHEET_COLUMNS to values, in the units of the glossary.
        lengths: words to mm.
        layout: where the tie rod stands, in words.
        remarks: what is odd, one sentence each.
        solved: False where the linkage is at its toggle in the design position, so that no rate exists.
    """

    side: str
    kind: str
    figures: dict[str, float]
    lengths: dict[str, float]
    layout: str
    remarks: tuple[str, ...]
    solved: bool


def link_lengths(corner: Corner) -> dict[str, float]:
    """Lengths of a corner's links (mm) by their words."""
    points = corner.points
    return {words: float(np.linalg.norm(points[a] - points[b])) for words, a, b in LINKS[corner.kind]}


def tie_rod_layout(corner: Corner) -> str:
    """Where the outer tie rod joint stands to the steering axis, in words."""
    points = corner.points
    lower = points["lower_ball_joint"]
    upper = points["upper_ball_joint" if corner.kind == "double-wishbone" else "strut_top_mount"]
    outer = points["tie_rod_outer"]
    on_axis = lower + (upper - lower) * ((outer[2] - lower[2]) / (upper[2] - lower[2]))
    ahead, inboard = float(outer[0] - on_axis[0]), float((on_axis[1] - outer[1]) * corner.sign)
    return (
        f"outer joint {abs(ahead):.1f} mm {'ahead of' if ahead >= 0 else 'behind'} and "
        f"{abs(inboard):.1f} mm {'inboard' if inboard >= 0 else 'outboard'} of the steering axis"
    )


def _remarks(side: str, figures: dict[str, float], solved: bool) -> tuple[str, ...]:
    if not solved:
        return (
            f"{side}: the linkage is at its toggle in the design position (tie rod and steering arm in line): it can't steer; "
            "move tie_rod_outer or tie_rod_inner",
        )
    found = []
    angle = figures["transmission_angle"]
    if not 40.0 <= angle <= 140.0:
        found.append(f"{side}: transmission angle {angle:.0f} deg at design leaves little way to the lock (90 is best)")
    for name, label, low, high in (
        ("caster", "caster", 3.0, 8.0),
        ("kingpin_inclination", "kingpin inclination", 8.0, 15.0),
    ):
        if not low <= figures[name] <= high:
            found.append(
                f"{side}: {label} {figures[name]:+.1f} deg lies outside what passenger cars commonly steer with, {low:g} to {high:g} deg "
                "(common practice, not a rule)"
            )
    return tuple(found)


def design_sheets(axle: Axle) -> tuple[CornerSheet, ...]:
    """Design-position sheet of both corners; the car's own remarks (Axle.remarks) stand apart.

    Remarks on caster and kingpin inclination are made for axles that steer by a rack only.
    """
    maps = design_pose(axle)
    sheets = []
    for s, side in enumerate(maps.sides):
        corner = axle.corner(side)
        solved = bool(maps.status[s, 0, 0] == OK)
        figures = {name: float(maps[name][s, 0, 0]) for name in SHEET_COLUMNS}
        if axle.rack is None:
            figures.pop("steer_rate")
        remarks = _remarks(side, figures, solved) if axle.rack is not None or not solved else ()
        sheets.append(
            CornerSheet(side, corner.kind, figures, link_lengths(corner), tie_rod_layout(corner), remarks, solved)
        )
    return tuple(sheets)


def sheets_agree(sheets: tuple[CornerSheet, ...]) -> bool:
    """True where all corners have the same figures, so that one column tells all."""
    return all(
        a.kind == b.kind
        and a.layout == b.layout
        and np.allclose(list(a.figures.values()), list(b.figures.values()), rtol=0.0, atol=1e-9, equal_nan=True)
        for a, b in pairwise(sheets)
    )
