"""Paints a scene with matplotlib alone: parallel projection, parts sorted by depth, bars and balls shaded in three tones.

Needs no OpenGL, and gives vector files. The same parts as everywhere, so that lines end where the joints are.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from toewright.core.types import FloatArray
from toewright.views.projection import View
from toewright.views.scene import palette
from toewright.views.scene.meshes import path_colours
from toewright.views.scene.parts import Ball, Floor, Part, Path, Revolution, Scene, Tube, ring_points
from toewright.views.style import QUIET

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Polygon = tuple[float, FloatArray, FloatArray]
"""Depth toward the viewer, outline (N, 2) mm, colour (4,)."""

PIECES = 14
"""A bar is sorted by depth in at most so many pieces."""

TONES = ((1.0, 0.0, -0.26), (0.74, 0.10, 0.0), (0.26, 0.30, 0.34))
"""Shading of a round part: share of the radius, shift to the light as a share of the radius, lightening (- darkening)."""

LIGHT = np.array([-0.45, 0.89])
"""Where the light comes from in the picture."""

EDGE_ON, SQUARE_ON = 0.05, 0.99
"""The road is a line where the view is flatter than the first (sine of the angle), and a bare grid where it is steeper than the second."""


def tone(colour: FloatArray, lightening: float) -> FloatArray:
    """A colour (4,) mixed with white, or with black where ``lightening`` is negative."""
    target = 1.0 if lightening > 0.0 else 0.0
    share = abs(lightening)
    return np.array([*(colour[:3] * (1.0 - share) + target * share), colour[3]])


def pale(part: Part) -> FloatArray:
    """Colour (4,) of a ghost on paper: opaque, so that overlaps do not add up."""
    from matplotlib.colors import to_rgba

    assert not isinstance(part, Path)
    colour = np.array(to_rgba(part.colour))
    return tone(colour, 1.0 - palette.GHOST * 1.5)


def colour_of(part: Tube | Ball | Revolution) -> FloatArray:
    """Colour (4,) of a solid part."""
    from matplotlib.colors import to_rgba

    return np.array(to_rgba(part.colour))


def bar_outline(
    start: FloatArray, end: FloatArray, radius: float, caps: tuple[bool, bool] = (True, True)
) -> FloatArray:
    """Outline (N, 2) of a round bar between two projected points (3,).

    Its ends are the ellipses of the end faces, or straight where the bar goes on (``caps``: start, end).
    """
    along = end[:2] - start[:2]
    length, depth = float(np.linalg.norm(along)), float(end[2] - start[2])
    whole = float(np.hypot(length, depth))
    direction = along / length if length > 1e-9 else np.array([1.0, 0.0])
    normal = np.array([-direction[1], direction[0]])
    roundness = abs(depth) / whole if whole > 0.0 else 1.0
    angle = np.linspace(-0.5 * np.pi, 0.5 * np.pi, 9)
    cap = np.sin(angle)[:, np.newaxis] * normal + roundness * np.cos(angle)[:, np.newaxis] * direction
    straight = np.stack([-normal, normal])
    first, second = (radius * (cap if capped else straight) for capped in caps)
    return np.concatenate([end[:2] + second, start[:2] - first])


def circle(centre: FloatArray, radius: float) -> FloatArray:
    """Outline (N, 2) of a circle."""
    angle = np.linspace(0.0, 2.0 * np.pi, 28, endpoint=False)
    return centre[:2] + radius * np.column_stack([np.cos(angle), np.sin(angle)])


def tube_polygons(part: Tube, view: View, ghost: bool) -> Iterator[Polygon]:
    """A bar in pieces, each in three tones; a ghost in one piece and one tone."""
    start, end = view.project(part.start), view.project(part.end)
    if ghost:
        yield float(0.5 * (start[2] + end[2])), bar_outline(start, end, part.radius), pale(part)
        return
    colour = colour_of(part)
    depth_range = abs(float(end[2] - start[2]))
    count = int(np.clip(np.ceil(depth_range / (4.0 * part.radius)), 1, PIECES))
    along = end[:2] - start[:2]
    length = float(np.linalg.norm(along))
    normal = np.array([-along[1], along[0]]) / length if length > 1e-9 else LIGHT
    normal = normal if normal @ LIGHT >= 0.0 else -normal
    stops = np.linspace(start, end, count + 1)
    lap = 0.03 * (end - start) / count
    for number, (first, second) in enumerate(pairwise(stops)):
        caps = number == 0, number == count - 1
        depth = float(0.5 * (first[2] + second[2]))
        second = second if caps[1] else second + lap
        for share, shift, lightening in TONES:
            moved = np.array([*(shift * part.radius * normal), 0.0])
            yield depth, bar_outline(first + moved, second + moved, share * part.radius, caps), tone(colour, lightening)


def ball_polygons(part: Ball, view: View, ghost: bool) -> Iterator[Polygon]:
    """A ball in three tones; a little nearer than its centre, so that the ends of the links stay beneath."""
    centre = view.project(part.centre)
    depth = float(centre[2]) + 1.5 * part.radius
    if ghost:
        yield depth, circle(centre, part.radius), pale(part)
        return
    for share, shift, lightening in TONES:
        moved = centre[:2] + shift * part.radius * LIGHT
        yield depth, circle(moved, share * part.radius), tone(colour_of(part), lightening)


def path_polygons(part: Path, view: View, scene: Scene) -> Iterator[Polygon]:
    """A curve in the colours of its numbers."""
    if scene.scale is None:
        return
    colours = path_colours(part, scene.scale)
    points = view.project(part.points)
    for a in range(len(points) - 1):
        depth = float(max(points[a, 2], points[a + 1, 2])) + 6.0 * part.radius
        caps = a == 0, a == len(points) - 2
        yield depth, bar_outline(points[a], points[a + 1], part.radius, caps), 0.5 * (colours[a] + colours[a + 1])


def outline_of(body: Revolution, view: View) -> FloatArray:
    """Silhouette (N, 2) of a body of revolution that has no waist."""
    from scipy.spatial import ConvexHull

    points = view.project(ring_points(body, np.arange(len(body.profile)), 72))[..., :2].reshape(-1, 2)
    silhouette: FloatArray = points[ConvexHull(points).vertices]
    return silhouette


def paint_floor(axes: Axes, floor: Floor, view: View) -> None:
    """The road: a rectangle with a grid, or a line where it is seen from the edge."""
    from matplotlib.collections import LineCollection
    from matplotlib.patches import Polygon as PolygonPatch

    corners = view.project(floor.corners)[:, :2]
    if abs(view.toward[2]) < EDGE_ON:
        low, high = corners.min(axis=0), corners.max(axis=0)
        axes.plot([low[0], high[0]], [low[1], low[1]], color=QUIET, linewidth=1.0, zorder=0.5)
        return
    if abs(view.toward[2]) < SQUARE_ON:
        axes.add_patch(PolygonPatch(corners, facecolor=palette.FLOOR, edgecolor="none", zorder=0.0))
    lines = [view.project(np.stack(ends))[:, :2] for ends in floor.lines()]
    axes.add_collection(LineCollection(lines, colors=palette.GRID, linewidths=0.6, zorder=0.1))


def paint_polygons(axes: Axes, polygons: list[Polygon], zorder: float) -> None:
    """Outlines from the farthest to the nearest; all of one part keep their order."""
    from matplotlib.collections import PolyCollection

    ordered = sorted(polygons, key=lambda polygon: polygon[0])
    if ordered:
        outlines = [outline for _, outline, _ in ordered]
        colours = [tuple(colour) for _, _, colour in ordered]
        axes.add_collection(PolyCollection(outlines, facecolors=colours, edgecolors="none", zorder=zorder))


def paint_wheels(axes: Axes, parts: Sequence[Part], view: View, ghost: bool) -> None:
    """Tyres and rims: pale bodies beneath the linkage, and their edges as thin lines, above it where they are no ghosts."""
    from matplotlib.collections import LineCollection, PolyCollection

    for body in (part for part in parts if isinstance(part, Revolution)):
        outline = outline_of(body, view)
        if ghost:
            lines = LineCollection([closed(outline)], colors=[tuple(pale(body))], linewidths=1.0, zorder=0.9)
            axes.add_collection(lines)
        else:
            fill = (*colour_of(body)[:3], 0.16)
            axes.add_collection(PolyCollection([outline], facecolors=[fill], edgecolors="none", zorder=1.0))
    if not ghost:
        paint_wheel_edges(axes, parts, view, 0.75)


def paint_wheel_edges(axes: Axes, parts: Sequence[Part], view: View, strength: float) -> None:
    """Silhouettes and circles of tyres and rims as thin lines."""
    from matplotlib.collections import LineCollection

    for body in (part for part in parts if isinstance(part, Revolution)):
        rings = view.project(ring_points(body, np.array(body.rings), 72))[..., :2]
        curves = [closed(outline_of(body, view)), *(closed(ring) for ring in rings)]
        widths = [1.1, *([0.6] * len(rings))]
        colour = (*colour_of(body)[:3], strength)
        axes.add_collection(LineCollection(curves, colors=[colour], linewidths=widths, zorder=3.0))


def closed(curve: FloatArray) -> FloatArray:
    """A curve (N, 2) with its first point once more at the end."""
    return np.concatenate([curve, curve[:1]])


def paint(axes: Axes, scene: Scene, view: View) -> None:
    """Paint the scene's parts into axes whose coordinates are the view's picture coordinates, mm."""
    paint_floor(axes, scene.floor, view)
    for parts, ghost in ((scene.ghosts, True), (scene.parts, False)):
        polygons: list[Polygon] = []
        for part in parts:
            match part:
                case Tube():
                    if not part.edge:
                        polygons += tube_polygons(part, view, ghost)
                case Ball():
                    polygons += ball_polygons(part, view, ghost)
                case Path():
                    polygons += path_polygons(part, view, scene)
                case Revolution():
                    pass
        paint_wheels(axes, parts, view, ghost)
        paint_polygons(axes, polygons, 0.95 if ghost else 2.0)
