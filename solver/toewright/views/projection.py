"""Parallel projections: how a scene in mm becomes a flat picture."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray


@dataclass(frozen=True)
class View:
    """A direction to look from.

    Attributes:
        name: "front", "side", "top" or "oblique".
        words: what it shows, for the picture.
        right, up, toward: unit vectors (3,) of the picture's axes; ``toward`` points to the viewer.
    """

    name: str
    words: str
    right: FloatArray
    up: FloatArray
    toward: FloatArray

    def project(self, points: FloatArray) -> FloatArray:
        """Picture coordinates (..., 3) of points (..., 3): to the right, up, toward the viewer; mm."""
        flat: FloatArray = points @ np.stack([self.right, self.up, self.toward], axis=-1)
        return flat


def view_from(name: str, words: str, toward: tuple[float, float, float], up: tuple[float, float, float]) -> View:
    """The view from a direction; ``up`` need not be normal to it."""
    back = np.array(toward) / np.linalg.norm(toward)
    right = np.cross(np.array(up), back)
    right /= np.linalg.norm(right)
    return View(name, words, right, np.cross(back, right), back)


VIEWS = {
    view.name: view
    for view in (
        view_from("front", "front view, seen from ahead", (1.0, 0.0, 0.0), (0.0, 0.0, 1.0)),
        view_from("side", "side view, seen from the left", (0.0, 1.0, 0.0), (0.0, 0.0, 1.0)),
        view_from("top", "top view, forward is down", (0.0, 0.0, 1.0), (-1.0, 0.0, 0.0)),
        view_from("oblique", "oblique view, from ahead on the left", (1.0, 0.62, 0.55), (0.0, 0.0, 1.0)),
    )
}
"""The four views; the left wheel is on the right in front and top view, so that the three stand to each other in third-angle projection."""
