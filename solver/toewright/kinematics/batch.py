"""Many designs at once: grids and lists of poses, chunk by chunk, on several threads."""

from __future__ import annotations

import os
from collections import deque
from collections.abc import Iterator, Sequence
from concurrent.futures import Future, ThreadPoolExecutor
from dataclasses import dataclass
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray

from toewright.core import kernels, layout
from toewright.core.types import FloatArray, IntArray, StatusArray
from toewright.kinematics.lines import Line, grid_line

Scalar = TypeVar("Scalar", bound=np.generic)

CHUNK = 256
"""Designs per chunk: enough to keep the kernels busy, few enough that the arrays stay small."""

LONGEST_STRIDE = 0.06
"""Longest stride of the lanes as a share of the lever (wheel centre to tie rod outer joint): about 7 mm on a car."""

TRAVEL_AT = ("wheel-centre", "contact-point")
"""What ``wheel_travel`` is the height of."""


@dataclass(frozen=True)
class Batch:
    """Results of N designs over a grid.

    Attributes:
        columns: names of the last axis of ``values`` (toewright.core.layout.COLUMNS, or ``bump_steer``).
        values: (N, R, T, C) mm, deg, deg/mm; NaN where the pose is not ok.
        poses: (N, R, T, 6) wheel-centre x, y (mm from design), Gibbs vector, z; NaN where not ok.
        status: (N, R, T) numbers of toewright.kinematics.status.
        iterations: (N, R, T) Newton iterations of the pose.
        ends: (N, R, T, 2) rack and wheel travel (mm) where the path to the pose stopped; NaN where it did not.
    """

    columns: tuple[str, ...]
    values: FloatArray
    poses: FloatArray
    status: StatusArray
    iterations: IntArray
    ends: FloatArray

    def __getitem__(self, name: str) -> FloatArray:
        """One column, (N, R, T)."""
        return self.values[..., self.columns.index(name)]


def _drive(travel_at: str) -> float:
    if travel_at not in TRAVEL_AT:
        raise ValueError(f"travel_at is {travel_at!r}; allowed are {' and '.join(map(repr, TRAVEL_AT))}")
    return float(TRAVEL_AT.index(travel_at))


def _check_designs(designs: FloatArray) -> FloatArray:
    designs = np.ascontiguousarray(designs, dtype=float)
    if designs.ndim != 2 or designs.shape[1] != layout.DESIGN_SIZE or designs.shape[0] == 0:
        raise ValueError(f"designs must have the shape (N, {layout.DESIGN_SIZE}) with N > 0, not {designs.shape}")
    return designs


def _stride(designs: FloatArray) -> float:
    outer, centre = designs[:, 21:24], designs[:, 24:27]
    return float(LONGEST_STRIDE * np.min(np.linalg.norm(outer - centre, axis=1)))


def _column_indices(columns: Sequence[str]) -> IntArray:
    unknown = [name for name in columns if name not in layout.COLUMN_INDEX and name != "bump_steer"]
    if unknown:
        raise ValueError(f"unknown column {unknown[0]!r}; allowed are bump_steer, {', '.join(layout.COLUMNS)}")
    return np.array([layout.COLUMN_INDEX["toe_in" if n == "bump_steer" else n] for n in columns], dtype=np.int64)


def _solve_chunk(designs: FloatArray, rack: Line, travel: Line, drive: float, columns: tuple[str, ...]) -> Batch:
    count, R, T = designs.shape[0], rack.values.size, travel.values.size
    poses = np.empty((count, R * T, layout.POSE_SIZE))
    iterations = np.zeros((count, R * T), dtype=np.int64)
    indices = _column_indices(columns)
    values = np.empty((count, R * T, indices.size))
    axes = (rack.values, rack.way, rack.keep, travel.values, travel.way, travel.keep, drive)
    kernels.solve_grid(designs, *axes, poses, iterations, indices, values)
    lost = np.isnan(poses[..., 0])
    status = np.where(lost, np.int8(layout.OUT_OF_REACH), np.int8(layout.OK))
    ends = np.full((count, R * T, 2), np.nan)
    if lost.any():
        again = np.flatnonzero(lost.any(axis=1))
        kernels.walk_grid(designs, again, *axes, poses, status, iterations, ends)
        poses[status != layout.OK] = np.nan
        at_rack = np.repeat(rack.values, T)[np.newaxis]
        at_travel = np.tile(travel.values, R)[np.newaxis]
        walked = np.empty((again.size, R * T, indices.size))
        kernels.measure_poses(designs[again], poses[again], at_rack, at_travel, drive, indices, walked)
        values[again] = walked
    grid = values.reshape(count, R, T, -1)
    if "bump_steer" in columns:
        k = columns.index("bump_steer")
        grid[..., k] -= grid[:, :, travel.zero, np.newaxis, k].copy()

    def wanted(array: NDArray[Scalar]) -> NDArray[Scalar]:
        return array if _whole(rack) and _whole(travel) else array[:, rack.wanted][:, :, travel.wanted]

    return Batch(
        columns,
        wanted(grid),
        wanted(poses.reshape(count, R, T, -1)),
        wanted(status.reshape(count, R, T)),
        wanted(iterations.reshape(count, R, T)),
        wanted(ends.reshape(count, R, T, 2)),
    )


def _whole(line: Line) -> bool:
    """True where the requested positions are all positions of the line, in order."""
    return line.wanted.size == line.values.size and bool(np.all(np.diff(line.wanted) == 1))


def solve_chunks(
    designs: FloatArray,
    rack: FloatArray,
    travel: FloatArray,
    *,
    travel_at: str = "wheel-centre",
    columns: Sequence[str] = layout.COLUMNS,
    threads: int | None = None,
    chunk: int = CHUNK,
) -> Iterator[tuple[slice, Batch]]:
    """Solve designs over a grid and hand the results over chunk by chunk, in order.

    Memory stays at a few chunks whatever the number of designs: reduce each chunk as it comes.

    Args:
        designs: (N, 35) design vectors, see ``design_vector``.
        rack: (R,) rack travel in mm, any order.
        travel: (T,) wheel travel in mm, any order.
        travel_at: what the wheel travel is the height of, "wheel-centre" or "contact-point".
        columns: which results, in which order.
        threads: how many run at once; as many as there are processors when not given.
        chunk: designs per chunk.

    Yields:
        The slice of the designs and their Batch.

    Raises:
        ValueError: for a wrong shape, an unknown column or an unknown ``travel_at``.
    """
    designs = _check_designs(designs)
    drive = _drive(travel_at)
    stride = _stride(designs)
    rack_line, travel_line = grid_line(rack, stride), grid_line(travel, stride)
    names = tuple(columns)
    _column_indices(names)
    slices = [slice(i, min(i + chunk, len(designs))) for i in range(0, len(designs), chunk)]
    workers = min(threads or os.cpu_count() or 1, len(slices))
    if workers == 1:
        for part in slices:
            yield part, _solve_chunk(designs[part], rack_line, travel_line, drive, names)
        return
    with ThreadPoolExecutor(workers) as pool:
        waiting: deque[tuple[slice, Future[Batch]]] = deque()
        for part in slices:
            waiting.append((part, pool.submit(_solve_chunk, designs[part], rack_line, travel_line, drive, names)))
            if len(waiting) > 2 * workers:
                first, future = waiting.popleft()
                yield first, future.result()
        while waiting:
            first, future = waiting.popleft()
            yield first, future.result()


def solve_batch(
    designs: FloatArray,
    rack: FloatArray,
    travel: FloatArray,
    *,
    travel_at: str = "wheel-centre",
    columns: Sequence[str] = layout.COLUMNS,
    threads: int | None = None,
) -> Batch:
    """Solve designs (N, 35) over a grid of rack travel (R,) and wheel travel (T,), all in mm, and keep everything.

    Args and Raises: as ``solve_chunks``.
    """
    parts = [b for _, b in solve_chunks(designs, rack, travel, travel_at=travel_at, columns=columns, threads=threads)]
    if len(parts) == 1:
        return parts[0]
    return Batch(
        parts[0].columns,
        np.concatenate([b.values for b in parts]),
        np.concatenate([b.poses for b in parts]),
        np.concatenate([b.status for b in parts]),
        np.concatenate([b.iterations for b in parts]),
        np.concatenate([b.ends for b in parts]),
    )


@dataclass(frozen=True)
class PoseList:
    """Results of N designs, each at its own list of M poses; attributes as ``Batch`` with (N, M) for (N, R, T)."""

    columns: tuple[str, ...]
    values: FloatArray
    poses: FloatArray
    status: StatusArray
    iterations: IntArray
    ends: FloatArray

    def __getitem__(self, name: str) -> FloatArray:
        """One column, (N, M)."""
        return self.values[..., self.columns.index(name)]


def _pose_rows(positions: FloatArray, count: int) -> FloatArray:
    rows = np.ascontiguousarray(np.atleast_2d(np.asarray(positions, dtype=float)))
    if rows.ndim != 2 or rows.shape[0] not in (1, count):
        raise ValueError(f"positions must have the shape (M,) or ({count}, M), not {rows.shape}")
    return rows


def solve_poses(
    designs: FloatArray,
    rack: FloatArray,
    travel: FloatArray,
    *,
    travel_at: str = "wheel-centre",
    columns: Sequence[str] = layout.COLUMNS,
) -> PoseList:
    """Solve designs (N, 35) at listed poses: rack and travel (M,) for all, or (N, M) for each, in mm.

    Every pose is walked to from the design position on its own, along the rack first, then along travel.

    Raises:
        ValueError: for a wrong shape, an unknown column or an unknown ``travel_at``.
    """
    designs = _check_designs(designs)
    drive = _drive(travel_at)
    names = tuple(columns)
    indices = _column_indices(names)
    if "bump_steer" in names:
        raise ValueError("bump_steer compares poses; ask for toe_in at both")
    at_rack, at_travel = _pose_rows(rack, len(designs)), _pose_rows(travel, len(designs))
    count, size = len(designs), max(at_rack.shape[1], at_travel.shape[1])
    if at_rack.shape[1] != at_travel.shape[1]:
        raise ValueError(f"rack has {at_rack.shape[1]} positions and travel {at_travel.shape[1]}; they must be as many")
    poses = np.full((count, size, layout.POSE_SIZE), np.nan)
    status, iterations = np.zeros((count, size), dtype=np.int8), np.zeros((count, size), dtype=np.int64)
    ends = np.empty((count, size, 2))
    kernels.walk_poses(designs, at_rack, at_travel, drive, poses, status, iterations, ends)
    values = np.empty((count, size, indices.size))
    kernels.measure_poses(designs, poses, at_rack, at_travel, drive, indices, values)
    return PoseList(names, values, poses, status, iterations, ends)
