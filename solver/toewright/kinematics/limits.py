"""How far the steering is from its limits: stroke, lock, transmission angle, largest steer angle."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.design import SIDES
from toewright.kinematics.maps import CornerMaps, Stop
from toewright.kinematics.summary import Place
from toewright.kinematics.sweep import default_rack, default_travel, sweep
from toewright.model.axle import Axle

SEARCH = 3.0
"""The rack is moved up to this many steering levers (wheel centre to outer tie rod joint) to find where the linkage stops."""


@dataclass(frozen=True)
class AxleLimits:
    """Limits of an axle.

    Attributes:
        stroke: rack stroke each way, mm; None without a rack.
        searched: how far the rack was moved each way to find a stop, mm.
        stops: first lock or loss of reach per side and direction, at zero wheel travel along the rack and over the default map.
        inside: those of them that lie inside the stroke and the default travel.
        smallest_transmission: the place where the transmission angle is farthest from 90 deg, and the angle there.
        largest_steer: the place of the largest steer angle by magnitude, and the angle there.
    """

    stroke: float | None
    searched: float
    stops: tuple[Stop, ...]
    inside: tuple[Stop, ...]
    smallest_transmission: Place | None
    largest_steer: Place | None


def limits(axle: Axle) -> AxleLimits:
    """Limits of an axle over its rack stroke and the default wheel travel, and where the rack would lock beyond its stroke."""
    maps = sweep(axle, default_rack(axle), default_travel(axle))
    stops = list(maps.stops)
    searched = 0.0
    if axle.rack is not None:
        lever = max(
            float(np.linalg.norm(c.points["tie_rod_outer"] - c.points["wheel_centre"])) for c in (axle.left, axle.right)
        )
        searched = max(SEARCH * lever, 1.5 * axle.rack.stroke)
        beyond = sweep(axle, np.linspace(-searched, searched, 61), [0.0])
        known = {(stop.side, stop.along, stop.rack_travel > 0.0) for stop in stops}
        stops += [s for s in beyond.stops if (s.side, s.along, s.rack_travel > 0.0) not in known]
    margin = np.minimum(maps["transmission_angle"], 180.0 - maps["transmission_angle"])
    return AxleLimits(
        stroke=None if axle.rack is None else axle.rack.stroke,
        searched=searched,
        stops=tuple(sorted(stops, key=lambda s: (SIDES.index(s.side), s.rack_travel))),
        inside=maps.stops,
        smallest_transmission=_extreme(maps, -margin, "transmission_angle"),
        largest_steer=_extreme(maps, np.abs(maps["steer_angle"]), "steer_angle"),
    )


def _extreme(maps: CornerMaps, score: FloatArray, name: str) -> Place | None:
    """Where the score (S, R, T) is greatest, with the named quantity there."""
    if np.all(np.isnan(score)):
        return None
    s, i, j = np.unravel_index(int(np.nanargmax(score)), score.shape)
    value = float(maps[name][s, i, j])
    return Place(maps.sides[s], float(maps.rack_travel[i]), float(maps.wheel_travel[j]), (value,))
