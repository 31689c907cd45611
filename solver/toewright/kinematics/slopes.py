"""Exact derivatives of every corner result by rack travel, wheel travel and every hardpoint coordinate."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from toewright.core import kernels, layout
from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.batch import TRAVEL_AT, solve_batch
from toewright.kinematics.design import SIDES, coordinate_index, coordinate_names, design_vectors
from toewright.model.axle import Axle

SLOPE_COLUMNS = tuple(name for name in layout.COLUMNS if name not in ("residual", "grip"))
"""Results that have derivatives; ``bump_steer`` may be asked for as well."""

SETUP_PARAMETERS = {"toe_in": layout.TOE_IN, "camber": layout.CAMBER, "loaded_radius": layout.RADIUS}
MOTION_PARAMETERS = {"rack_travel": layout.DESIGN_SIZE, "wheel_travel": layout.DESIGN_SIZE + 1}


@dataclass(frozen=True)
class Slopes:
    """Derivatives over axes (side, rack_travel, wheel_travel, column, parameter).

    Attributes:
        sides, rack_travel, wheel_travel: as in CornerMaps.
        columns: the results.
        parameters: ``point.x`` ... (per mm), toe_in, camber (per deg), loaded_radius, rack_travel, wheel_travel (per mm).
        values: (S, R, T, C, Q), units of the column per unit of the parameter; NaN where the pose is not ok.
        status: (S, R, T).
    """

    sides: tuple[str, ...]
    rack_travel: FloatArray
    wheel_travel: FloatArray
    columns: tuple[str, ...]
    parameters: tuple[str, ...]
    values: FloatArray
    status: StatusArray

    def of(self, column: str, parameter: str) -> FloatArray:
        """Derivative of one result by one parameter, (S, R, T)."""
        return self.values[..., self.columns.index(column), self.parameters.index(parameter)]


def parameter_index(kind: str, name: str) -> int:
    """Number of a parameter in the kernels.

    Raises:
        ValueError: if the corner kind has no such coordinate.
    """
    fixed = {**SETUP_PARAMETERS, **MOTION_PARAMETERS}
    return fixed[name] if name in fixed else coordinate_index(kind, name)


def derive(
    designs: FloatArray,
    poses: FloatArray,
    rack: FloatArray,
    travel: FloatArray,
    parameters: Sequence[int],
    columns: Sequence[str],
    *,
    travel_at: str = "wheel-centre",
) -> FloatArray:
    """Derivatives at solved poses: designs (N, 35), poses (N, M, 6), rack and travel (N or 1, M) mm to (N, M, C, Q).

    Each parameter moves the design as the file would state it: link lengths follow the points, static toe-in and
    camber stay as declared.
    """
    indices = np.array([layout.COLUMN_INDEX[name] for name in columns], dtype=np.int64)
    out = np.empty((*poses.shape[:2], indices.size, len(parameters)))
    drive = float(TRAVEL_AT.index(travel_at))
    kernels.derive_poses(
        designs, np.ascontiguousarray(poses), rack, travel, drive, np.array(parameters, dtype=np.int64), indices, out
    )
    return out


def slopes(
    axle: Axle,
    rack: FloatArray,
    travel: FloatArray,
    *,
    travel_at: str = "wheel-centre",
    sides: Sequence[str] = SIDES,
    columns: Sequence[str] = SLOPE_COLUMNS,
    parameters: Sequence[str] | None = None,
) -> Slopes:
    """Exact derivatives of corner results over a grid.

    Args:
        axle: the axle.
        rack, travel: (R,) and (T,) mm, ascending.
        travel_at: what the wheel travel is the height of.
        sides: which corners; they must be of one kind when ``parameters`` is not given.
        columns: which results: SLOPE_COLUMNS, or ``bump_steer``.
        parameters: which parameters; by default every hardpoint coordinate, rack_travel and wheel_travel.

    Raises:
        ValueError: for an unknown column, parameter, side or ``travel_at``.
    """
    unknown = [name for name in columns if name not in SLOPE_COLUMNS and name != "bump_steer"]
    if unknown:
        raise ValueError(f"{unknown[0]!r} has no derivative; allowed are bump_steer, {', '.join(SLOPE_COLUMNS)}")
    corners = [axle.corner(side) for side in sides]
    if parameters is None:
        parameters = (*coordinate_names(corners[0].kind), *MOTION_PARAMETERS)
    at_rack, at_travel = np.atleast_1d(np.asarray(rack, float)), np.atleast_1d(np.asarray(travel, float))
    both = np.append(at_travel, 0.0)
    designs = design_vectors(axle, sides)
    batch = solve_batch(designs, at_rack, both, travel_at=travel_at, columns=("grip",))
    R, T = at_rack.size, both.size
    needed = ["toe_in" if name == "bump_steer" else name for name in columns]
    values = np.empty((len(corners), R, T, len(needed), len(parameters)))
    for s, corner in enumerate(corners):
        values[s] = derive(
            designs[s : s + 1],
            batch.poses[s].reshape(1, R * T, -1),
            np.repeat(at_rack, T)[np.newaxis],
            np.tile(both, R)[np.newaxis],
            [parameter_index(corner.kind, name) for name in parameters],
            needed,
            travel_at=travel_at,
        ).reshape(R, T, len(needed), len(parameters))
    for k, name in enumerate(columns):
        if name == "bump_steer":
            reference = values[:, :, -1:, k, :].copy()
            for q, parameter in enumerate(parameters):
                if parameter != "wheel_travel":  # the reference stays at zero travel
                    values[..., k, q] -= reference[..., q]
    return Slopes(
        tuple(sides), at_rack, at_travel, tuple(columns), tuple(parameters), values[:, :, :-1], batch.status[:, :, :-1]
    )


def contracted_gradient(
    designs: FloatArray,
    poses: FloatArray,
    rack: FloatArray,
    travel: FloatArray,
    weights: FloatArray,
    *,
    travel_at: str = "wheel-centre",
) -> FloatArray:
    """Slope of one weighted sum of results by all 27 entries of the nine point slots, for many designs at once.

    The adjoint of the solve: one transposed solution per pose whatever the number of coordinates.

    Args:
        designs: (N, 35).
        poses: (N, M, 6) solved poses.
        rack, travel: (N or 1, M) mm.
        weights: (N or 1, M, 5) of layout.OBJECTIVE_TERMS.
        travel_at: what the wheel travel is the height of.

    Returns:
        (N, 27) objective per mm.
    """
    out = np.empty((designs.shape[0], 27))
    kernels.contract_gradient(designs, poses, rack, travel, float(TRAVEL_AT.index(travel_at)), weights, out)
    return out
