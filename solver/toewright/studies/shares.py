"""Which scatter makes the spread: Sobol indices beside the linear shares of the exact slopes."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch, solve_poses
from toewright.kinematics.design import design_vector
from toewright.kinematics.slopes import derive
from toewright.model.axle import Axle
from toewright.studies.scatter import Variable, built_designs, frozen

INDEX_SAMPLES = 1024
"""Base samples of the Sobol indices; a power of two."""


@dataclass(frozen=True)
class Share:
    """What one scatter adds to the spread of bump steer at full bump.

    Attributes:
        name, group: of the Variable.
        slope: deg/mm, exact.
        linear: share (0 to 1) of the variance by the slopes alone.
        first, total: Sobol indices (I. M. Sobol, Math. Comput. Simul. 55 (2001) 271-280; A. Saltelli et al., Global Sensitivity
            Analysis, 2008).
    """

    name: str
    group: str
    slope: float
    linear: float
    first: float
    total: float


def sobol_shares(
    figure: Callable[[FloatArray], FloatArray], distributions: Sequence[object], seed: int, samples: int = INDEX_SAMPLES
) -> tuple[FloatArray, FloatArray]:
    """First- and total-order Sobol indices (V,) of a figure of V independent variables, by scipy.stats.sobol_indices.

    ``figure`` takes (V, N) and gives (N,).
    """
    from scipy.stats import sobol_indices

    if len(distributions) == 1:  # all of the variance is its own; scipy wants two or more
        return np.ones(1), np.ones(1)
    found = sobol_indices(func=figure, n=samples, dists=list(distributions), rng=np.random.default_rng(seed))  # type: ignore[arg-type]
    return np.asarray(found.first_order, dtype=float), np.asarray(found.total_order, dtype=float)


def shares(axle: Axle, variables: tuple[Variable, ...], travel: float, rack: float, seed: int) -> tuple[Share, ...]:
    """What each scatter adds to the spread of the left wheel's bump steer at a wheel travel, the largest total first."""
    mine = tuple(v for v in variables if any(side == "left" for side, _ in v.places))
    if not mine:
        return ()
    design = design_vector(axle, "left")
    at_rack, at = np.array([rack]), np.array([0.0, travel])

    def figure(moves: FloatArray) -> FloatArray:
        built = built_designs({"left": design}, mine, np.ascontiguousarray(moves.T))["left"]
        found: FloatArray = solve_batch(built, at_rack, at[1:], columns=("bump_steer",)).values[:, 0, 0, 0]
        middle = float(np.nanmean(found))
        return np.where(np.isnan(found), middle, found)

    first, total = sobol_shares(figure, [frozen(v) for v in mine], seed)
    poses = solve_poses(design[np.newaxis], np.full(2, rack), at, columns=("grip",)).poses
    slopes = np.zeros(len(mine))
    for v, variable in enumerate(mine):
        indices = [index for side, index in variable.places if side == "left"]
        by_each = derive(design[np.newaxis], poses, np.full((1, 2), rack), at[np.newaxis], indices, ["toe_in"])[0, :, 0]
        slopes[v] = float((by_each[1] - by_each[0]).sum())
    spread = (slopes * np.array([v.deviation for v in mine])) ** 2
    linear = spread / spread.sum() if spread.sum() > 0.0 else spread
    found = [
        Share(v.name, v.group, float(slopes[k]), float(linear[k]), float(first[k]), float(total[k]))
        for k, v in enumerate(mine)
    ]
    return tuple(sorted(found, key=lambda share: -share.total))
