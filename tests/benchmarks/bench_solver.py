"""How fast, and against what: prints ratios measured in one run, with the machine and the versions.

    python tests/benchmarks/bench_solver.py            # full size, about a minute
    python tests/benchmarks/bench_solver.py --designs 64 --quick

Nothing is asserted on a time: machines differ and are shared.
"""

from __future__ import annotations

import argparse
import os
import platform
import statistics
import sys
import time
from pathlib import Path

import numba
import numpy as np
import scipy
import scipy.optimize

sys.path.insert(0, str(Path(__file__).parent.parent))

from corners import PLAIN, make_axle
from second_opinion import PointModel

from toewright.core import kernels, layout
from toewright.kinematics.batch import LONGEST_STRIDE, solve_batch, solve_chunks
from toewright.kinematics.design import design_vectors
from toewright.kinematics.lines import grid_line
from toewright.kinematics.maps import SWEEP_COLUMNS
from toewright.kinematics.slopes import contracted_gradient

RACK, TRAVEL = np.linspace(-24.0, 24.0, 21), np.linspace(-25.0, 25.0, 21)
COLUMNS = tuple(name for name in SWEEP_COLUMNS if name != "bump_steer")


def scattered(count: int) -> np.ndarray:
    """Designs (count, 35): one corner with every coordinate scattered by 1 mm."""
    base = design_vectors(make_axle(PLAIN["double-wishbone"]), ["left"])
    designs = np.repeat(base, count, axis=0)
    designs[:, :27] += np.random.default_rng(1).normal(0.0, 1.0, (count, 27))
    return designs


def median(times: list[float]) -> float:
    """Median of repeated measurements."""
    return statistics.median(times)


def timed(work, repeats: int) -> list[float]:
    """Seconds of each repetition, after one that does not count."""
    work()
    found = []
    for _ in range(repeats):
        start = time.perf_counter()
        work()
        found.append(time.perf_counter() - start)
    return found


def rival(designs: np.ndarray, poses: int) -> float:
    """Seconds per pose of scipy.optimize.root on the same five rows, each pose started from the one before."""
    packed = np.empty(kernels.PACKED)
    kernels.pack(designs[0], packed)
    rows = packed[:40].reshape(5, 8)
    a, b, sig, c, axis = rows[:, :3], rows[:, 3:6], rows[:, 6], rows[:, 7], packed[40:43]

    half = 0.5 * sig

    def equations(x: np.ndarray, rack: float, travel: float) -> np.ndarray:
        p, q, r = x[2], x[3], x[4]
        n = 2.0 / (1.0 + p * p + q * q + r * r)
        rotation = np.array(
            [
                [1.0 - n * (q * q + r * r), n * (p * q - r), n * (p * r + q)],
                [n * (p * q + r), 1.0 - n * (p * p + r * r), n * (q * r - p)],
                [n * (p * r - q), n * (q * r + p), 1.0 - n * (p * p + q * q)],
            ]
        )
        t = np.array([x[0], x[1], travel]) - b
        t[4] -= rack * axis
        return ((half[:, None] * t + a @ rotation.T) * t).sum(axis=1) + c

    spent, done = 0.0, 0
    for at_rack in RACK:
        for way in (TRAVEL[10:], TRAVEL[9::-1]):
            x = np.zeros(5)
            for k, at_travel in enumerate(way):
                x[:] = scipy.optimize.root(equations, x, args=(at_rack * (1 + k) / 11, at_travel)).x if k == 0 else x
                start = time.perf_counter()
                x = scipy.optimize.root(equations, x, args=(at_rack, at_travel)).x
                spent += time.perf_counter() - start
                done += 1
                if done == poses:
                    return spent / poses
    return spent / done


def natural_rival(poses: int) -> float:
    """Seconds per pose of scipy.optimize.root as one would write it first: point coordinates, from the pose before."""
    model = PointModel(make_axle(PLAIN["double-wishbone"]), "left")
    x, spent = model.start.ravel(), 0.0
    for k in range(poses):
        rack, travel = RACK[10] + 0.02 * k, TRAVEL[11 + k % 10]
        start = time.perf_counter()
        x = model.root(x, rack, travel)
        spent += time.perf_counter() - start
    return spent / poses


def lanes_only(designs: np.ndarray) -> None:
    """Poses alone, on one thread, as the batch calls the kernel."""
    lever = np.min(np.linalg.norm(designs[:, 21:24] - designs[:, 24:27], axis=1))
    rack, travel = grid_line(RACK, LONGEST_STRIDE * lever), grid_line(TRAVEL, LONGEST_STRIDE * lever)
    poses, counts = np.empty((512, 441, 6)), np.empty((512, 441), np.int64)
    nothing = np.empty(0, np.int64)
    for first in range(0, len(designs), 512):
        part = designs[first : first + 512]
        axes = (rack.values, rack.way, rack.keep, travel.values, travel.way, travel.keep, 0.0)
        kernels.solve_grid(part, *axes, poses[: len(part)], counts[: len(part)], nothing, np.empty((len(part), 441, 0)))


def drain(designs: np.ndarray, threads: int) -> None:
    """All corner outputs and exact rates, reduced chunk by chunk."""
    for _, batch in solve_chunks(designs, RACK, TRAVEL, columns=COLUMNS, threads=threads):
        batch.values[0, 0, 0, 0]


def main() -> None:
    """Measure and print."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--designs", type=int, default=2000)
    parser.add_argument("--quick", action="store_true", help="one repetition, no large batch")
    options = parser.parse_args()
    repeats, rivals = (1, 40) if options.quick else (7, 400)
    designs = scattered(options.designs)
    count = len(designs) * RACK.size * TRAVEL.size
    print(f"{platform.processor() or platform.machine()}, {os.cpu_count()} processors, Python {platform.python_version()}, "
          f"numpy {np.__version__}, scipy {scipy.__version__}, numba {numba.__version__}")  # fmt: skip
    print(f"{len(designs)} designs x {RACK.size} x {TRAVEL.size} poses; medians of {repeats}")
    slow = rival(designs, rivals)
    bare = median(timed(lambda: lanes_only(designs), repeats)) / count
    one = median(timed(lambda: drain(designs, 1), repeats)) / count
    two = median(timed(lambda: drain(designs, 2), repeats)) / count
    first = natural_rival(rivals)
    print(f"scipy.optimize.root, point coordinates         {1e9 * first:10.0f} ns/pose   (A)")
    print(f"scipy.optimize.root, our five rows in numpy    {1e9 * slow:10.0f} ns/pose   (B)")
    print(f"poses, one thread                              {1e9 * bare:10.1f} ns/pose   "
          f"{first / bare:8.0f} times as fast as A, {slow / bare:6.0f} times B")  # fmt: skip
    print(f"with all outputs and exact rates, one thread   {1e9 * one:10.1f} ns/pose   "
          f"{first / one:8.0f} times as fast as A, {slow / one:6.0f} times B")  # fmt: skip
    print(
        f"with all outputs, two threads                  {1e9 * two:10.1f} ns/pose   {one / two:8.2f} times one thread"
    )
    few = designs[: min(512, len(designs))]
    batch = solve_batch(few, RACK, TRAVEL, columns=("grip",), threads=1)
    poses = np.ascontiguousarray(batch.poses.reshape(len(few), -1, 6))
    rack, travel = np.repeat(RACK, 21)[None], np.tile(TRAVEL, 21)[None]
    weights = np.ones((1, 441, len(layout.OBJECTIVE_TERMS)))
    slope = median(timed(lambda: contracted_gradient(few, poses, rack, travel, weights), repeats)) / (len(few) * 441)
    solve = median(timed(lambda: lanes_only(few), repeats)) / (len(few) * 441)
    print(
        f"all hardpoint slopes of one objective          {1e9 * slope:10.1f} ns/pose   {slope / solve:8.2f} times the solve"
    )
    for size in (1, 16, 1000) if options.quick else (1, 16, 1000, 20_000, 100_000):
        some = scattered(size)
        spent = median(timed(lambda some=some: drain(some, 1), 1 if size > 1000 else repeats)) / (size * 441)
        print(f"cost per pose with {size:7d} designs              {1e9 * spent:10.1f} ns/pose")


if __name__ == "__main__":
    main()
