"""Where the inner tie rod joint may be for little bump steer: places whose arc follows the path of the outer joint.

Hold the toe while the wheel travels: then the outer joint goes along a path that the arms alone decide. An inner joint as far from
every point of that path, a centre of the arc, makes no bump steer at all. In three dimensions the best centres lie along a line, and
around it there is a patch within a limit. The line comes from the path directly; the patch is solved exactly, place by place.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch, solve_chunks, solve_poses
from toewright.kinematics.design import design_vector
from toewright.kinematics.joints import joint_positions
from toewright.kinematics.sweep import check_positions, default_travel
from toewright.model.axle import Axle
from toewright.model.errors import InputError

if TYPE_CHECKING:
    import xarray as xr

Plane = Literal["front", "top"]

PLANES: dict[str, tuple[str, str]] = {"front": ("y", "z"), "top": ("y", "x")}
"""Planes through the inner joint in which places are tried: their two coordinates."""

GRID = 61
"""Places along each coordinate of the plane."""

ACROSS = 0.25
"""Reach in the plane's second coordinate as a share of the reach in y: bump steer hangs on height far more than on length."""

FINE = 81
"""Places on the finer line around each best place."""

INNER = slice(18, 21)
"""The inner tie rod joint in the design vector."""


@dataclass(frozen=True)
class HeldPath:
    """Path of the outer joint with the toe held, and what follows from it.

    Attributes:
        travel: (T,) mm.
        outer: (T, 3) mm, place of the outer tie rod joint.
        rack: (T,) mm, how far the present inner joint would have to move along the rack to hold the toe.
        point, direction: (3,) a place on the line of best inner joints, and the line's unit vector, outboard to inboard.
        misfit: (2,) mm, root mean square distance of the path from its best arc, and from the best straight line (no arc at all).
    """

    travel: FloatArray
    outer: FloatArray
    rack: FloatArray
    point: FloatArray
    direction: FloatArray
    misfit: FloatArray


@dataclass(frozen=True)
class Locus:
    """Bump steer over places of the inner tie rod joint.

    Attributes:
        side: "left" or "right".
        plane: one of PLANES.
        rack: (R,) mm, rack positions at which the bump steer is taken.
        travel: (T,) mm.
        first, second: (N,) and (M,) mm, the plane's coordinates: y, and z or x.
        worst: (R, N, M) deg, largest |bump steer| over the travel; NaN where a place can't be solved.
        present: (R,) deg, the same where the joint is now.
        joint: (3,) mm, where the joint is now.
        best: (N,) mm, the second coordinate with the least bump steer at the first rack position, for each y; NaN where there is none.
        best_worst: (N,) deg, what is left there.
        limit: deg.
        low, high: (N,) mm, ends of the stretch around ``best`` that keeps the limit; NaN where there is none.
        held: the path and the line at the first rack position.
    """

    side: str
    plane: str
    rack: FloatArray
    travel: FloatArray
    first: FloatArray
    second: FloatArray
    worst: FloatArray
    present: FloatArray
    joint: FloatArray
    best: FloatArray
    best_worst: FloatArray
    limit: float
    low: FloatArray
    high: FloatArray
    held: HeldPath

    def to_xarray(self) -> xr.Dataset:
        """The field and the best places as an xarray Dataset with units."""
        import xarray as xr

        y, across = (f"tie_rod_inner_{letter}" for letter in PLANES[self.plane])
        mm = {"units": "mm"}
        deg = {"units": "deg", "long_name": "largest |bump steer| over the travel, per wheel"}
        data = {
            "bump_steer_most": (("rack_travel", y, across), self.worst, deg),
            "best": (y, self.best, mm),
            "best_bump_steer": (y, self.best_worst, deg),
            "low": (y, self.low, mm),
            "high": (y, self.high, mm),
        }
        coords = {
            "rack_travel": ("rack_travel", self.rack, mm),
            y: (y, self.first, mm),
            across: (across, self.second, mm),
        }
        return xr.Dataset(data, coords=coords, attrs={"side": self.side, "limit_deg": self.limit})


def held_path(axle: Axle, side: str, travel: FloatArray, rack: float = 0.0) -> HeldPath:
    """Path of the outer tie rod joint over wheel travel with the toe held as it is at zero travel.

    With the toe held the rod does not matter: its inner end is moved along the rack (along y without one) until the toe is back, by
    Newton on the exact steer rate. The line of centres is the least-squares solution of |P - q| = const over the path P, which is
    linear in q: its normal equations have one weak direction, the axis of the arc.

    Raises:
        InputError: where the toe can't be held over the travel.
    """
    design = design_vector(axle, side)
    if not np.any(design[layout.RACK_AXIS : layout.RACK_AXIS + 3]):
        design[layout.RACK_AXIS + 1] = 1.0
    goal = solve_poses(design[np.newaxis], np.array([rack]), np.zeros(1))["steer_angle"][0, 0]
    at = np.full(travel.size, rack)
    for _ in range(20):
        poses = solve_poses(design[np.newaxis], at, travel)
        gap = poses["steer_angle"][0] - goal
        if np.any(poses.status != layout.OK):
            raise InputError(
                f"{side}: the toe can't be held over that travel: the linkage stops; ask for less --travel"
            )
        at = at - gap / poses["steer_rate"][0]
        if np.max(np.abs(gap)) < 1e-12:
            break
    poses = solve_poses(design[np.newaxis], at, travel)
    axis = design[layout.RACK_AXIS : layout.RACK_AXIS + 3]
    outer = joint_positions(axle.corner(side), poses.poses[0], at, axis)["tie_rod_outer"]
    middle = outer.mean(axis=0)
    spread = outer - middle
    square = np.sum(spread * spread, axis=1)
    _, _, directions = np.linalg.svd(2.0 * spread, full_matrices=False)
    solved = np.linalg.lstsq(2.0 * spread, square - square.mean(), rcond=1e-14)[0]
    weak = directions[2]
    flat = directions[:2]
    in_plane = flat.T @ (flat @ solved)  # nearest point of the line; along the arc's axis any place will do
    distance = np.linalg.norm(outer - (middle + in_plane), axis=1)
    arc = float(np.sqrt(np.mean((distance - distance.mean()) ** 2)))
    chord = float(np.sqrt(np.mean(np.sum((spread - np.outer(spread @ directions[0], directions[0])) ** 2, axis=1))))
    direction = weak if weak[0] > 0.0 else -weak
    return HeldPath(travel, outer, at - rack, middle + in_plane, direction, np.array([arc, chord]))


def locus(
    axle: Axle,
    *,
    side: str = "left",
    plane: str = "front",
    rack: Sequence[float] | FloatArray = (0.0,),
    travel: Sequence[float] | FloatArray | None = None,
    limit: float = 0.05,
    reach: float = 40.0,
    places: int = GRID,
) -> Locus:
    """Bump steer for inner tie rod joints all over a plane through the present one; every place is solved exactly.

    The rod is as long as each place asks, so that the static toe is as declared.

    Args:
        axle: the axle.
        side: which corner.
        plane: "front" (y and z at the present x) or "top" (y and x at the present z).
        rack: rack positions, mm; the first decides ``best``.
        travel: (T,) mm, ascending; a usual range when not given.
        limit: deg of bump steer that is still accepted, either way.
        reach: places are tried this far either way in y, mm, and a quarter of it in the other coordinate.
        places: how many along each coordinate.

    Raises:
        InputError: for an unknown plane, a limit or reach that is not positive, or where the toe can't be held.
        ValueError: for bad positions.
    """
    if plane not in PLANES:
        raise InputError(f"plane is {plane!r}; allowed are {', '.join(PLANES)}")
    if not (limit > 0.0 and reach > 0.0 and np.isfinite(limit) and np.isfinite(reach)):
        raise InputError(f"limit {limit:g} deg and reach {reach:g} mm must be above 0")
    at_travel = check_positions(travel, default_travel(axle), "travel")
    at_rack = np.asarray(rack, dtype=float)
    held = held_path(axle, side, at_travel, float(at_rack[0]))
    design = design_vector(axle, side)
    joint = design[INNER].copy()
    first = joint[1] + np.linspace(-reach, reach, places)
    across = "xyz".index(PLANES[plane][1])
    second = joint[across] + np.linspace(-ACROSS * reach, ACROSS * reach, places)
    grid = np.tile(second, (places, 1))
    field = _solve_places(design, first, grid, across, at_rack, at_travel)
    now = solve_batch(design[np.newaxis], at_rack, at_travel, columns=("bump_steer",)).values[0, ..., 0]
    coarse = _stretches(grid, field[0], limit)
    finer = _finer(grid, *coarse)
    best, best_worst, low, high = _stretches(
        finer, _solve_places(design, first, finer, across, at_rack[:1], at_travel)[0], limit
    )
    return Locus(
        side=side,
        plane=plane,
        rack=at_rack,
        travel=at_travel,
        first=first,
        second=second,
        worst=field,
        present=np.max(np.abs(now), axis=1),
        joint=joint,
        best=best,
        best_worst=best_worst,
        limit=limit,
        low=low,
        high=high,
        held=held,
    )


def _solve_places(
    design: FloatArray, first: FloatArray, second: FloatArray, across: int, rack: FloatArray, travel: FloatArray
) -> FloatArray:
    """Largest |bump steer| over travel, (R, N, M) deg, of inner joints at first (N,) = y and second (N, M) = the other coordinate."""
    count, across_count = second.shape
    designs = np.repeat(design[np.newaxis], count * across_count, axis=0)
    designs[:, 19] = np.repeat(first, across_count)
    designs[:, 18 + across] = second.ravel()
    worst = np.empty((len(designs), rack.size))
    for part, batch in solve_chunks(designs, rack, travel, columns=("bump_steer",)):
        worst[part] = np.max(np.abs(batch.values[..., 0]), axis=2)  # NaN where any pose is not reached
    return worst.T.reshape(rack.size, count, across_count)


def _finer(second: FloatArray, best: FloatArray, least: FloatArray, low: FloatArray, high: FloatArray) -> FloatArray:
    """A finer set of places (N, M) around each row's best, one node of the first set beyond the stretch that keeps the limit."""
    step = second[:, 1] - second[:, 0]
    middle = np.where(np.isnan(best), second.mean(axis=1), best)
    under = np.where(np.isnan(low), middle - step, low) - 1.5 * step
    over = np.where(np.isnan(high), middle + step, high) + 1.5 * step
    share = np.linspace(0.0, 1.0, FINE)
    return under[:, np.newaxis] + (over - under)[:, np.newaxis] * share


def _stretches(
    places: FloatArray, field: FloatArray, limit: float
) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """For each row of a field (N, M): place and value of its least, and the ends of the stretch around it below the limit.

    The least is between nodes where |bump steer| has its kink: both branches are followed as straight lines from the nodes beside it.
    """
    count = field.shape[0]
    best, least, low, high = (np.full(count, np.nan) for _ in range(4))
    for n in range(count):
        row, second = field[n], places[n]
        if np.all(np.isnan(row)):
            continue
        k = int(np.nanargmin(row))
        best[n], least[n] = second[k], row[k]
        if 2 <= k < second.size - 2 and np.all(np.isfinite(row[k - 2 : k + 3])):
            best[n], least[n] = _kink(second, row, k)
        if least[n] <= limit:
            low[n] = _crossing(second, row, k, -1, limit)
            high[n] = _crossing(second, row, k, 1, limit)
    return best, least, low, high


def _kink(second: FloatArray, row: FloatArray, k: int) -> tuple[float, float]:
    step = second[1] - second[0]
    right_first = k if row[k + 1] >= row[k - 1] else k + 1  # which side of the kink the lowest node is on
    left_last = right_first - 1
    left_slope = (row[left_last] - row[left_last - 1]) / step
    right_slope = (row[right_first + 1] - row[right_first]) / step
    if right_slope - left_slope <= 0.0:
        return float(second[k]), float(row[k])
    gap = row[left_last] + left_slope * step - row[right_first]
    at = second[right_first] - gap / (left_slope - right_slope)
    at = float(np.clip(at, second[left_last], second[right_first]))
    value = float(row[right_first] + right_slope * (at - second[right_first]))
    return at, min(max(value, 0.0), float(row[k]))


def _crossing(second: FloatArray, row: FloatArray, k: int, way: int, limit: float) -> float:
    """Where the row leaves the limit, walking from node k; the end of the row where it does not."""
    i = k
    while 0 <= i + way < second.size and row[i + way] <= limit:
        i += way
    j = i + way
    if not 0 <= j < second.size or not np.isfinite(row[j]):
        return float(second[i])
    if row[i] >= limit:
        return float(second[i])
    share = (limit - row[i]) / (row[j] - row[i])
    return float(second[i] + share * (second[j] - second[i]))
