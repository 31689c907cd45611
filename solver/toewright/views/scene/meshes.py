"""Triangles of the parts, for renderers and files that want surfaces."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

import numpy as np

from toewright.core.types import FloatArray
from toewright.views.scene.palette import bump_steer_colours
from toewright.views.scene.parts import Ball, ColourScale, Floor, Part, Path, Revolution, Tube, across, ring_points

Indices = np.ndarray[Any, np.dtype[np.int64]]
Colours = np.ndarray[Any, np.dtype[np.uint8]]

TUBE_SECTORS = 20
WHEEL_SECTORS = 72
BALL_RINGS = 12


@dataclass(frozen=True)
class Triangles:
    """A surface: points (N, 3) mm, triangles (M, 3) of their indices counterclockwise from outside, colours (N, 4) 0 to 255."""

    points: FloatArray
    triangles: Indices
    colours: Colours


def rgba(colour: str, opacity: float) -> Colours:
    """(4,) 0 to 255."""
    from matplotlib.colors import to_rgba

    return np.round(255.0 * np.array(to_rgba(colour, opacity))).astype(np.uint8)


def _grid_triangles(rows: int, columns: int) -> Indices:
    """Triangles of a surface of ``rows`` circles of ``columns`` points each."""
    row, column = np.meshgrid(np.arange(rows - 1), np.arange(columns), indexing="ij")
    here = row * columns + column
    beside = row * columns + (column + 1) % columns
    first = np.stack([here, beside, here + columns], axis=-1)
    second = np.stack([beside, beside + columns, here + columns], axis=-1)
    return np.concatenate([first.reshape(-1, 3), second.reshape(-1, 3)])


def tube_surface(start: FloatArray, end: FloatArray, radius: float, sectors: int) -> tuple[FloatArray, Indices]:
    """A closed bar. The middle of each end is a point of it: exactly ``start`` and ``end``, the last two points."""
    axis = (end - start) / np.linalg.norm(end - start)
    body = Revolution("", "", start, axis, np.array([[0.0, radius], [float(np.linalg.norm(end - start)), radius]]), ())
    rings = ring_points(body, np.arange(2), sectors)
    wall = rings.reshape(-1, 3)
    caps = rings.reshape(-1, 3)
    around = np.arange(sectors)
    following = (around + 1) % sectors
    n = 2 * sectors
    bottom = np.stack([np.full(sectors, 2 * n), n + following, n + around], axis=-1)
    top = np.stack([np.full(sectors, 2 * n + 1), n + sectors + around, n + sectors + following], axis=-1)
    points = np.concatenate([wall, caps, [start, end]])
    return points, np.concatenate([_grid_triangles(2, sectors), bottom, top])


def ball_surface(centre: FloatArray, radius: float) -> tuple[FloatArray, Indices]:
    """A sphere by rings of latitude."""
    latitude = np.linspace(-0.5 * np.pi, 0.5 * np.pi, BALL_RINGS + 1)
    profile = radius * np.column_stack([np.sin(latitude), np.cos(latitude)])
    profile[[0, -1], 1] = 0.0
    body = Revolution("", "", centre, np.array([0.0, 0.0, 1.0]), profile, ())
    return revolution_surface(body, TUBE_SECTORS)


def revolution_surface(body: Revolution, sectors: int) -> tuple[FloatArray, Indices]:
    """A body of revolution, open where its profile ends off the axis."""
    rings = ring_points(body, np.arange(len(body.profile)), sectors)
    triangles = _grid_triangles(len(body.profile), sectors)
    corners = rings.reshape(-1, 3)[triangles]
    area = np.linalg.norm(np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0]), axis=-1)
    return rings.reshape(-1, 3), triangles[area > 1e-9 * float(np.max(area))]


def path_colours(path: Path, scale: ColourScale) -> FloatArray:
    """Colours (N, 4), 0 to 1, of a curve's points."""
    colours: FloatArray = np.asarray(bump_steer_colours()(0.5 + 0.5 * path.values / scale.limit))
    return colours


def part_surface(part: Part, scale: ColourScale | None) -> Triangles:
    """Triangles of a part; a curve becomes a chain of thin bars in the colours of the scale."""
    match part:
        case Tube():
            points, triangles = tube_surface(part.start, part.end, part.radius, TUBE_SECTORS)
        case Ball():
            points, triangles = ball_surface(part.centre, part.radius)
        case Revolution():
            points, triangles = revolution_surface(part, WHEEL_SECTORS)
        case Path():
            return _path_surface(part, scale or ColourScale("", 1.0))
    return Triangles(points, triangles, np.tile(rgba(part.colour, part.opacity), (len(points), 1)))


def _path_surface(path: Path, scale: ColourScale) -> Triangles:
    colours = path_colours(path, scale)
    pieces = []
    for a in range(len(path.points) - 1):
        points, triangles = tube_surface(path.points[a], path.points[a + 1], path.radius, 8)
        colour = np.round(255.0 * 0.5 * (colours[a] + colours[a + 1])).astype(np.uint8)
        pieces.append(Triangles(points, triangles, np.tile(colour, (len(points), 1))))
    return joined(pieces)


def joined(pieces: Iterable[Triangles]) -> Triangles:
    """Several surfaces as one."""
    listed = list(pieces)
    starts = np.cumsum([0, *(len(piece.points) for piece in listed[:-1])])
    return Triangles(
        np.concatenate([piece.points for piece in listed]),
        np.concatenate([piece.triangles + start for piece, start in zip(listed, starts, strict=True)]),
        np.concatenate([piece.colours for piece in listed]),
    )


def floor_surface(floor: Floor, colour: str) -> Triangles:
    """The road as one rectangle."""
    points = floor.corners
    return Triangles(points, np.array([[0, 1, 2], [0, 2, 3]]), np.tile(rgba(colour, 1.0), (4, 1)))


__all__ = ["Triangles", "across", "floor_surface", "joined", "part_surface", "path_colours", "rgba"]
