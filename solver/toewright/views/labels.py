"""Places for names in a picture: near their joints, off each other and, where it can be had, off what is drawn."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray

CELL = 5.0
"""Size (px) of the cells in which it is counted what a name would cover."""

DISTANCES = (12.0, 20.0, 30.0, 44.0, 62.0, 84.0, 110.0, 140.0)
ANGLES = np.radians(np.arange(0.0, 360.0, 15.0))
MARGIN = 3.0

FAR, COVER, CROSS, STACK = 1.5, 2.2, 60.0, 1000.0
"""What it costs to be one px farther off, to cover one cell of the drawing, to cross another leader, and to lie on another name."""


@dataclass(frozen=True)
class Box:
    """A rectangle, px."""

    left: float
    low: float
    width: float
    height: float

    def overlaps(self, other: Box) -> bool:
        """Do the two share any area, or come nearer than a margin?"""
        return (
            self.left < other.left + other.width + MARGIN
            and other.left < self.left + self.width + MARGIN
            and self.low < other.low + other.height + MARGIN
            and other.low < self.low + self.height + MARGIN
        )

    def nearest(self, point: FloatArray) -> FloatArray:
        """Point (2,) of the rectangle that is nearest to another one."""
        low = np.array([self.left, self.low])
        return np.clip(point, low, low + np.array([self.width, self.height]))


def _crosses(a: FloatArray, b: FloatArray, c: FloatArray, d: FloatArray) -> bool:
    """Do the segments ab and cd cross?"""

    def turn(p: FloatArray, q: FloatArray, r: FloatArray) -> float:
        return float((q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0]))

    return turn(a, b, c) * turn(a, b, d) < 0.0 and turn(c, d, a) * turn(c, d, b) < 0.0


def _candidates(anchor: FloatArray, size: FloatArray) -> list[tuple[float, Box]]:
    found = []
    for distance in DISTANCES:
        for angle in ANGLES:
            direction = np.array([np.cos(angle), np.sin(angle)])
            centre = anchor + distance * direction + 0.5 * size * np.clip(1.4 * direction, -1.0, 1.0)
            found.append((distance, Box(*(centre - 0.5 * size), *size)))
    return found


def _lure(box: Box, anchors: FloatArray, own: int) -> float:
    """Cost of a name that stands nearer to another joint than to its own."""
    away = np.array([np.linalg.norm(box.nearest(anchor) - anchor) for anchor in anchors])
    nearer = away[away < away[own]]
    return float(np.sum(away[own] - nearer)) + 12.0 * len(nearer)


def place_labels(
    anchors: FloatArray, sizes: FloatArray, drawn: FloatArray, area: tuple[float, float], taken: Sequence[Box] = ()
) -> list[Box]:
    """Rectangles for names, one for each anchor, in the order given.

    Args:
        anchors: (N, 2) px.
        sizes: (N, 2) width and height of the names, px.
        drawn: (M, 2) px, points of what is drawn.
        area: width and height of the picture, px.
        taken: rectangles that are not free.
    """
    counts = np.zeros((int(area[0] // CELL) + 2, int(area[1] // CELL) + 2))
    cells = np.unique((drawn // CELL).astype(int), axis=0) if len(drawn) else np.zeros((0, 2), dtype=int)
    inside = np.all((cells >= 0) & (cells < counts.shape), axis=1)
    counts[tuple(cells[inside].T)] = 1.0
    totals = np.pad(counts.cumsum(0).cumsum(1), ((1, 0), (1, 0)))

    def covered(box: Box) -> float:
        x0, y0 = int(max(box.left // CELL, 0)), int(max(box.low // CELL, 0))
        x1 = min(int((box.left + box.width) // CELL) + 1, counts.shape[0])
        y1 = min(int((box.low + box.height) // CELL) + 1, counts.shape[1])
        return float(totals[x1, y1] - totals[x0, y1] - totals[x1, y0] + totals[x0, y0])

    distances = np.linalg.norm(anchors[:, np.newaxis] - anchors, axis=-1)
    crowding = np.sum(np.exp(-distances / 60.0), axis=1)
    placed: dict[int, Box] = {}
    leaders: list[tuple[FloatArray, FloatArray]] = []
    for index in np.argsort(-crowding, kind="stable"):
        anchor = anchors[index]
        best: tuple[float, Box] | None = None
        for distance, box in _candidates(anchor, sizes[index]):
            if (
                box.left < MARGIN or box.low < MARGIN or box.left + box.width > area[0] - MARGIN
                or box.low + box.height > area[1] - MARGIN
            ):  # fmt: skip
                continue
            cost = FAR * distance + COVER * covered(box)
            if best is not None and cost >= best[0]:
                continue
            end = box.nearest(anchor)
            cost += STACK * sum(box.overlaps(other) for other in (*taken, *placed.values()))
            cost += CROSS * sum(_crosses(anchor, end, *leader) for leader in leaders)
            cost += CROSS * sum(np.linalg.norm(other.nearest(0.5 * (anchor + end)) - 0.5 * (anchor + end)) < 4.0
                                for other in placed.values())  # fmt: skip
            near = [a for a in anchors if box.left - 4 < a[0] < box.left + box.width + 4
                    and box.low - 4 < a[1] < box.low + box.height + 4]  # fmt: skip
            cost += 0.5 * CROSS * len(near) + _lure(box, anchors, index)
            if best is None or cost < best[0]:
                best = (cost, box)
        if best is None:
            half = 0.5 * sizes[index]
            low = np.clip(anchor - half, MARGIN, np.maximum(np.array(area) - sizes[index] - MARGIN, MARGIN))
            best = (0.0, Box(*low, *sizes[index]))
        placed[int(index)] = best[1]
        leaders.append((anchor, best[1].nearest(anchor)))
    return [placed[i] for i in range(len(anchors))]
