"""What a designer reads first: bump steer at straight ahead and at both locks, the worst place, ranges, stops."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.maps import CornerMaps
from toewright.kinematics.status import OK

ROWS = 11
"""Wheel-travel rows of the compact table."""

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


@dataclass(frozen=True)
class Place:
    """A pose and the value of a quantity there."""

    side: str
    rack_travel: float
    wheel_travel: float
    value: float


@dataclass(frozen=True)
class SideSummary:
    """One corner's map at a glance.

    Attributes:
        side: "left" or "right".
        racks: rack positions of the columns (mm): both ends of the request and the position nearest to straight ahead.
        steer: steer angle at those positions and zero or least wheel travel, deg.
        travels: wheel-travel rows (mm).
        bump_steer: (rows, columns) deg, toe-in +; NaN where not ok.
        worst: where |bump_steer| is largest; None when no pose is ok.
        ranges: quantity name to the places of its least and greatest value.
    """

    side: str
    racks: FloatArray
    steer: FloatArray
    travels: FloatArray
    bump_steer: FloatArray
    worst: Place | None
    ranges: dict[str, tuple[Place, Place]]


def _place(maps: CornerMaps, side: int, flat: int, values: FloatArray) -> Place:
    i, j = np.unravel_index(flat, values.shape)
    return Place(maps.sides[side], float(maps.rack_travel[i]), float(maps.wheel_travel[j]), float(values[i, j]))


def spread_indices(size: int, count: int, keep: int) -> list[int]:
    """At most about ``count`` indices of 0..size-1 in even steps from index ``keep`` outward, with both ends among them."""
    step = max(1, -(-(size - 1) // (count - 1)))
    return sorted({*range(keep, size, step), *range(keep, -1, -step), 0, size - 1})


def summarise(maps: CornerMaps) -> tuple[SideSummary, ...]:
    """Summary of each corner of a sweep."""
    rack_zero = int(np.argmin(np.abs(maps.rack_travel)))
    travel_zero = int(np.argmin(np.abs(maps.wheel_travel)))
    columns = sorted({0, rack_zero, maps.rack_travel.size - 1})
    rows = spread_indices(maps.wheel_travel.size, ROWS, travel_zero)
    found = []
    for s, side in enumerate(maps.sides):
        bump = maps["bump_steer"][s]
        worst = None
        ranges: dict[str, tuple[Place, Place]] = {}
        if np.any(maps.status[s] == OK):
            worst = _place(maps, s, int(np.nanargmax(np.abs(bump))), bump)
            for name in RANGED:
                values = maps[name][s]
                low, high = int(np.nanargmin(values)), int(np.nanargmax(values))
                ranges[name] = (_place(maps, s, low, values), _place(maps, s, high, values))
        found.append(
            SideSummary(
                side=side,
                racks=maps.rack_travel[columns],
                steer=maps["steer_angle"][s][columns, travel_zero],
                travels=maps.wheel_travel[rows],
                bump_steer=bump[np.ix_(columns, rows)].T,
                worst=worst,
                ranges=ranges,
            )
        )
    return tuple(found)


def mirror_images(maps: CornerMaps, symmetric: bool) -> bool:
    """True where the right corner's map is the left one's with the rack the other way, so one of them tells all."""
    return (
        symmetric
        and maps.sides == ("left", "right")
        and bool(np.allclose(maps.rack_travel, -maps.rack_travel[::-1], rtol=0.0, atol=1e-9))
    )
