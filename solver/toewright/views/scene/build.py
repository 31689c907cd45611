"""From an axle to a scene: solve the poses, gather the parts, write the caption."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.design import SIDES
from toewright.kinematics.joints import UPRIGHT_POINTS
from toewright.kinematics.maps import CornerMaps
from toewright.kinematics.status import OK, STATUS_MEANINGS, STATUS_NAMES
from toewright.kinematics.sweep import sweep
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import axis_label
from toewright.views.scene import palette
from toewright.views.scene.linkage import (
    KEY,
    THICKNESS,
    CornerPose,
    corner_parts,
    corner_pose,
    joint_labels,
    rack_parts,
)
from toewright.views.scene.parts import Bounds, Caption, ColourScale, Floor, Part, Path, Scene
from toewright.views.scene.wheel import wheel_size
from toewright.views.words import number, travel_words

ANGLES = ("steer_angle", "toe_in", "camber", "caster", "kingpin_inclination", "scrub_radius", "mechanical_trail")
"""Figures under the picture."""

LEAST_SCALE = 0.01
"""Half the range (deg) of the colour scale where there is hardly any bump steer to show."""


@dataclass(frozen=True)
class Pose:
    """Where the linkage stands: rack travel (mm, along the rack axis +) and wheel travel (mm, bump +)."""

    rack: float = 0.0
    travel: float = 0.0

    @property
    def words(self) -> str:
        """``rack travel +20 mm, wheel travel -10 mm (rebound)``."""
        rack = f"{self.rack:+g} mm" if self.rack else "0 mm"
        return f"rack travel {rack}, wheel travel {travel_words(self.travel)}"


def build_scene(
    axle: Axle,
    poses: Sequence[Pose] = (Pose(),),
    *,
    sides: Sequence[str] = SIDES,
    travel_at: str = "wheel-centre",
    locus: Sequence[float] | None = None,
) -> Scene:
    """The scene of an axle.

    Args:
        axle: the axle.
        poses: the first is drawn solid, the others are ghosts.
        sides: which corners.
        travel_at: "wheel-centre" or "contact-point": what the wheel travel is the height of.
        locus: wheel travels in mm, ascending, over which the paths of the moving joints are drawn at the solid pose's rack travel.

    Raises:
        InputError: if the linkage cannot reach one of the poses, or none of the locus.
    """
    solved = [solve_pose(axle, pose, sides, travel_at) for pose in poses]
    corners = corners_of(axle, solved[0], sides)
    parts = pose_parts(axle, corners)
    scale = None
    notes = []
    if locus is not None:
        curves, scale = locus_parts(axle, poses[0].rack, locus, sides, travel_at)
        parts += curves
        notes.append(
            f"Curves: paths of the moving joints and of the contact point over wheel travel {locus[0]:+g} to {locus[-1]:+g} mm, "
            "coloured by bump steer."
        )
    ghosts = [
        faded(part, f"ghost {n} ")
        for n, maps in enumerate(solved[1:], start=1)
        for part in pose_parts(axle, corners_of(axle, maps, sides))
    ]
    if ghosts:
        notes.append(f"Pale: {'; '.join(pose.words for pose in poses[1:])}.")
    size_note = wheel_size(axle.wheel).note
    if size_note:
        notes.append(size_note)
    notes.append("Lengths in mm, angles in deg; axes ISO 8855: x forward, y left, z up.")
    if travel_at != "wheel-centre":
        notes.append("Wheel travel is that of the contact point.")
    colours = {part.colour for part in parts if not isinstance(part, Path)}
    key = [(colour, words) for colour, words in KEY.items() if colour in colours]
    if palette.ROD in colours:
        both = any(axle.corner(side).kind == "double-wishbone" for side in sides)
        key[0] = (palette.DAMPER, "upper arm or damper body" if both else "damper body")
    caption = Caption(axle.title, poses[0].words, figure_rows(solved[0]), tuple(sides), tuple(notes))
    made = Scene(
        parts=tuple(parts),
        ghosts=tuple(ghosts),
        labels=tuple(label for corner in corners.values() for label in joint_labels(corner)),
        floor=Floor(0.0, (0.0, 0.0), (1.0, 1.0), 1.0),
        scale=scale,
        caption=caption,
        key=tuple(key),
    )
    return replace(made, floor=floor_under(made.bounds, [c.contact_point for c in corners.values()]))


def solve_pose(axle: Axle, pose: Pose, sides: Sequence[str], travel_at: str) -> CornerMaps:
    """Solve one pose of the corners.

    Raises:
        InputError: if the linkage cannot reach it.
    """
    maps = sweep(axle, [pose.rack], [pose.travel], travel_at=travel_at, sides=sides)
    for s, side in enumerate(maps.sides):
        status = maps.status[s, 0, 0]
        if status != OK:
            why = next((stop.sentence for stop in maps.stops if stop.side == side), None)
            why = why or f"{side}: {STATUS_MEANINGS[STATUS_NAMES[status]]}"
            raise InputError(
                f"{axle.path or axle.title}: {pose.words} cannot be drawn: {why.replace('; ', ', ')}; ask for less travel"
            )
    return maps


def corners_of(axle: Axle, maps: CornerMaps, sides: Sequence[str]) -> dict[str, CornerPose]:
    """The corners of a sweep over a single pose, by side."""
    return {side: corner_pose(axle, maps, side, 0, 0) for side in sides}


def pose_parts(axle: Axle, corners: dict[str, CornerPose]) -> list[Part]:
    """All parts of one pose."""
    parts = [part for corner in corners.values() for part in corner_parts(axle, corner)]
    return parts + rack_parts(axle, corners)


def faded(part: Part, prefix: str) -> Part:
    """The same part as a ghost."""
    if isinstance(part, Path):
        return part
    return replace(part, name=prefix + part.name, opacity=palette.GHOST * part.opacity)


def locus_parts(
    axle: Axle, rack: float, travels: Sequence[float], sides: Sequence[str], travel_at: str
) -> tuple[list[Part], ColourScale]:
    """Paths of the moving joints and of the contact points over wheel travel, with bump steer (deg) as their numbers.

    Raises:
        InputError: if fewer than two of the travels can be reached.
    """
    maps = sweep(axle, [rack], travels, travel_at=travel_at, sides=sides)
    radius = 0.6 * THICKNESS * axle.wheel.loaded_radius
    curves: list[Part] = []
    largest = 0.0
    for s, side in enumerate(sides):
        reached = maps.status[s, 0] == OK
        if reached.sum() < 2:
            raise InputError(
                f"{axle.path or axle.title}: the locus needs two or more wheel travels that can be reached, the {side} side "
                f"reaches {int(reached.sum())} of {len(travels)}; give others with --travel"
            )
        values = maps["bump_steer"][s, 0, reached]
        largest = max(largest, float(np.max(np.abs(values))))
        for name in UPRIGHT_POINTS[axle.corner(side).kind]:
            points = maps.joints[s][name][0, reached]
            curves.append(Path(f"{side} path of {name.replace('_', ' ')}", points, values, radius))
        curves.append(Path(f"{side} path of contact point", maps["contact_point"][s, 0, reached], values, radius))
    return curves, ColourScale(axis_label("bump_steer"), max(LEAST_SCALE, largest))


def figure_rows(maps: CornerMaps) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Figures of a single pose: name with unit and sign in words, then one number for each side."""
    return tuple((axis_label(name), tuple(number(float(value), 2) for value in maps[name][:, 0, 0])) for name in ANGLES)


def floor_under(bounds: Bounds, contacts: Sequence[FloatArray]) -> Floor:
    """The road at the mean height of the contact points, a little larger than what stands on it."""
    width = float(np.max((bounds.high - bounds.low)[:2]))
    spacing = 100.0 if width < 2500.0 else 200.0
    low = spacing * np.floor((bounds.low[:2] - 0.2 * spacing) / spacing)
    high = spacing * np.ceil((bounds.high[:2] + 0.2 * spacing) / spacing)
    height = float(np.mean([c[2] for c in contacts]))
    return Floor(height, (float(low[0]), float(low[1])), (float(high[0]), float(high[1])), spacing)
