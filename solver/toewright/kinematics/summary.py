"""What a designer reads first of a map: bump steer, the worst place, ranges; and whether one side tells all."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.maps import CornerMaps
from toewright.kinematics.status import STATUS_NAMES
from toewright.model.axle import Axle

RANGED = (
    "steer_angle",
    "camber",
    "caster",
    "kingpin_inclination",
    "scrub_radius",
    "mechanical_trail",
    "transmission_angle",
)
"""Quantities whose range over the map is shown."""

SAME = 1e-9
"""Points and positions (mm) that differ by less are the same."""


@dataclass(frozen=True)
class Place:
    """A pose and what a quantity is there.

    Attributes:
        side: "left", "right", or "both" where the quantity is the sum of both wheels.
        rack_travel, wheel_travel: mm.
        values: the quantity of each wheel of ``side``, left first.
    """

    side: str
    rack_travel: float
    wheel_travel: float
    values: tuple[float, ...]

    @property
    def value(self) -> float:
        """The value, or the sum of both wheels'."""
        return sum(self.values)


@dataclass(frozen=True)
class BumpSteer:
    """Bump steer over wheel travel at straight ahead and at both ends of the rack travel.

    Attributes:
        side: "left", "right", or "both" where the figure is the total of both wheels.
        racks: (C,) mm, ascending: both ends and the position nearest to straight ahead; all where there are no more than three.
        travels: (T,) mm, ascending.
        steer: (C,) steer angle at those rack positions and the travel nearest to zero, deg, to the left +; the mean of both wheels
            where side is "both".
        angles: (W, C, T) bump steer of each wheel, deg, toe-in +; NaN where not ok. W is 1, or 2 where side is "both".
        status: (C, T) words of toewright.kinematics.status; of both wheels the worse one.
        worst: where its size is largest over the whole map, between the columns too; None where there is none.
        worst_straight: the same at straight ahead only; None when rack travel 0 was not among the positions.
    """

    side: str
    racks: FloatArray
    travels: FloatArray
    steer: FloatArray
    angles: FloatArray
    status: np.ndarray[tuple[int, ...], np.dtype[np.str_]]
    worst: Place | None
    worst_straight: Place | None


@dataclass(frozen=True)
class Range:
    """Least and greatest value of a quantity of one corner over the map, and its design value (None when not in the map)."""

    least: Place
    greatest: Place
    design: float | None


def bump_steer(maps: CornerMaps, *, total: bool = False) -> tuple[BumpSteer, ...]:
    """Bump steer of each corner of a sweep, or of both wheels together.

    Args:
        maps: the sweep.
        total: one result, the total of both wheels.

    Raises:
        ValueError: if the total is wanted of a sweep of one side.
    """
    if total and len(maps.sides) != 2:
        raise ValueError("the total toe needs both sides; sweep both")
    groups = [list(range(len(maps.sides)))] if total else [[s] for s in range(len(maps.sides))]
    rack_zero = int(np.argmin(np.abs(maps.rack_travel)))
    travel_zero = int(np.argmin(np.abs(maps.wheel_travel)))
    last = maps.rack_travel.size - 1
    columns = list(range(last + 1)) if last < 3 else sorted({0, rack_zero, last})
    straight = [rack_zero] if abs(maps.rack_travel[rack_zero]) < SAME else []
    found = []
    for group in groups:
        side = "both" if total else maps.sides[group[0]]
        angles = maps["bump_steer"][group]
        worse = np.max(maps.status[group], axis=0)
        found.append(
            BumpSteer(
                side=side,
                racks=maps.rack_travel[columns],
                travels=maps.wheel_travel,
                steer=np.mean(maps["steer_angle"][group][:, columns, travel_zero], axis=0),
                angles=angles[:, columns],
                status=np.array(STATUS_NAMES)[worse[columns]],
                worst=_largest(maps, side, angles, list(range(last + 1))),
                worst_straight=_largest(maps, side, angles, straight),
            )
        )
    return tuple(found)


def _largest(maps: CornerMaps, side: str, angles: FloatArray, racks: list[int]) -> Place | None:
    size = np.abs(angles[:, racks].sum(axis=0))
    if not np.any(np.isfinite(size)):
        return None
    i, j = (int(k) for k in np.unravel_index(int(np.nanargmax(size)), size.shape))
    return _place(maps, side, racks[i], j, angles)


def _place(maps: CornerMaps, side: str, rack: int, travel: int, values: FloatArray) -> Place:
    return Place(
        side,
        float(maps.rack_travel[rack]),
        float(maps.wheel_travel[travel]),
        tuple(float(v) for v in values[:, rack, travel]),
    )


def ranges(maps: CornerMaps, side: str) -> dict[str, Range]:
    """Range of each quantity of RANGED over one corner's map; empty when no pose is ok."""
    index = maps.side_index(side)
    found: dict[str, Range] = {}
    at_design = [np.flatnonzero(np.abs(axis) < SAME) for axis in (maps.rack_travel, maps.wheel_travel)]
    for name in RANGED:
        values = maps[name][index]
        if not np.any(np.isfinite(values)):
            continue
        ends = [np.unravel_index(int(find(values)), values.shape) for find in (np.nanargmin, np.nanargmax)]
        least, greatest = (_place(maps, side, int(i), int(j), values[np.newaxis]) for i, j in ends)
        known = all(found_at.size for found_at in at_design)
        found[name] = Range(least, greatest, float(values[at_design[0][0], at_design[1][0]]) if known else None)
    return found


def mirror_images(axle: Axle) -> bool:
    """True where the right corner is the left one's mirror image and the rack moves straight across the car."""
    if axle.left.kind != axle.right.kind:
        return False
    if axle.rack is not None and np.any(np.abs(axle.rack.axis[[0, 2]]) > SAME):
        return False
    image = axle.left.mirrored().points
    return all(np.allclose(image[name], point, rtol=0.0, atol=SAME) for name, point in axle.right.points.items())


def one_side_tells_all(axle: Axle, maps: CornerMaps) -> bool:
    """True where the right corner's map is the left one's with the rack the other way."""
    return (
        len(maps.sides) == 2
        and mirror_images(axle)
        and bool(np.allclose(maps.rack_travel, -maps.rack_travel[::-1], rtol=0.0, atol=SAME))
    )
