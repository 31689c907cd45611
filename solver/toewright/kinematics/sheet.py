"""The design-position sheet: the figures of each corner where it was drawn, and what is odd about them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.status import OK, STATUS_MEANINGS, STATUS_NAMES
from toewright.kinematics.sweep import design_pose
from toewright.model.axle import Axle, Corner
from toewright.model.errors import InputError

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
    "steer_rate",
    "bump_steer_rate",
    "camber_gain",
)
"""Quantities of the sheet, in its order; ``steer_rate`` for axles with a rack only."""

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

TOP_OF_STEERING_AXIS = {"double-wishbone": "upper_ball_joint", "strut": "strut_top_mount"}
"""Upper point of the steering axis by corner kind; the lower one is lower_ball_joint."""

SHALLOW = 40.0
"""A transmission angle (deg) nearer than this to 0 or 180 leaves little way to the lock."""

COMMON = {
    "caster": ("caster", "deg", (3.0, 8.0), (0.0, 14.0)),
    "kingpin_inclination": ("kingpin inclination", "deg", (8.0, 15.0), (3.0, 20.0)),
    "scrub_radius": ("scrub radius", "mm", (-30.0, 30.0), (-80.0, 80.0)),
}
"""Words, unit, what passenger cars commonly steer with, and the range outside which a remark is made (common practice, no rule)."""


@dataclass(frozen=True)
class TieRodPlace:
    """Where the outer tie rod joint stands to the steering axis, seen from above at the joint's own height.

    Attributes:
        ahead: mm ahead of the axis; negative behind.
        inboard: mm nearer the centre plane than the axis; negative outboard.
        arm: steering arm, mm: distance of the joint from the axis.
    """

    ahead: float
    inboard: float
    arm: float

    @property
    def words(self) -> str:
        """In words, with units."""
        return (
            f"{abs(self.ahead):.1f} mm {'ahead of' if self.ahead >= 0 else 'behind'} the steering axis and "
            f"{abs(self.inboard):.1f} mm {'inboard' if self.inboard >= 0 else 'outboard'} of it"
        )


@dataclass(frozen=True)
class CornerSheet:
    """Design-position figures of one corner.

    Attributes:
        side: "left" or "right".
        kind: corner kind.
        figures: names of SHEET_COLUMNS to values, in the units of the glossary.
        lengths: words to mm.
        tie_rod: where its outer joint stands.
        remarks: what is odd, one sentence each, without the side.
    """

    side: str
    kind: str
    figures: Mapping[str, float]
    lengths: Mapping[str, float]
    tie_rod: TieRodPlace
    remarks: tuple[str, ...]


def link_lengths(corner: Corner) -> dict[str, float]:
    """Lengths of a corner's links (mm) by their words."""
    points = corner.points
    return {words: float(np.linalg.norm(points[a] - points[b])) for words, a, b in LINKS[corner.kind]}


def tie_rod_place(corner: Corner) -> TieRodPlace:
    """Where the outer tie rod joint stands to the steering axis."""
    lower, upper = corner.points["lower_ball_joint"], corner.points[TOP_OF_STEERING_AXIS[corner.kind]]
    outer = corner.points["tie_rod_outer"]
    axis: FloatArray = (upper - lower) / np.linalg.norm(upper - lower)
    level = lower + axis * ((outer[2] - lower[2]) / axis[2])
    arm = float(np.linalg.norm(np.cross(outer - lower, axis)))
    return TieRodPlace(float(outer[0] - level[0]), float((level[1] - outer[1]) * corner.sign), arm)


def _remarks(figures: Mapping[str, float]) -> tuple[str, ...]:
    found = []
    angle = figures["transmission_angle"]
    if not SHALLOW <= angle <= 180.0 - SHALLOW:
        found.append(
            f"transmission angle {angle:.0f} deg in the design position: little way is left to the lock (0 or 180 deg)"
        )
    for name, (label, unit, (low, high), (least, most)) in COMMON.items():
        if not least <= figures[name] <= most:
            found.append(
                f"{label} {figures[name]:+.1f} {unit}: passenger cars commonly steer with {low:+g} to {high:+g} {unit} "
                "(common practice, not a rule)"
            )
    if figures["mechanical_trail"] < 0.0:
        found.append(
            f"mechanical trail {figures['mechanical_trail']:+.1f} mm: the steering axis meets the road behind the contact point, "
            "so this geometry does not centre the steering by itself"
        )
    return tuple(found)


def design_sheets(axle: Axle) -> tuple[CornerSheet, CornerSheet]:
    """Design-position sheets of the left and the right corner; the file's own remarks (Axle.remarks) stand apart.

    Remarks are made for axles that steer by a rack only.

    Raises:
        InputError: if a linkage is locked in its design position, so that it has no rates.
    """
    maps = design_pose(axle)
    sheets = []
    for s, side in enumerate(maps.sides):
        corner, status = axle.corner(side), STATUS_NAMES[maps.status[s, 0, 0]]
        if maps.status[s, 0, 0] != OK:
            raise InputError(
                f"{axle.path or axle.title}: {side}: {status} in the design position: {STATUS_MEANINGS[status]}; "
                "move tie_rod_outer or tie_rod_inner"
            )
        figures = {
            name: float(maps[name][s, 0, 0]) for name in SHEET_COLUMNS if name != "steer_rate" or axle.rack is not None
        }
        remarks = () if axle.rack is None else _remarks(figures)
        sheets.append(CornerSheet(side, corner.kind, figures, link_lengths(corner), tie_rod_place(corner), remarks))
    return sheets[0], sheets[1]
