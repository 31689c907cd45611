"""What a scene is made of: plain data in mm, ISO 8855 axes, without any renderer."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray


@dataclass(frozen=True)
class Tube:
    """A round bar from ``start`` to ``end`` (3,), mm; ``edge`` marks an axis: a thin line that is never shaded."""

    name: str
    colour: str
    start: FloatArray
    end: FloatArray
    radius: float
    opacity: float = 1.0
    edge: bool = False


@dataclass(frozen=True)
class Ball:
    """A joint: a ball at ``centre`` (3,), mm."""

    name: str
    colour: str
    centre: FloatArray
    radius: float
    opacity: float = 1.0


@dataclass(frozen=True)
class Revolution:
    """A body of revolution about ``axis`` (3,) through ``centre`` (3,).

    ``profile`` (N, 2): distance along the axis and radius, mm. ``rings``: the profile's points that are drawn as circles where the
    body is shown as an outline.
    """

    name: str
    colour: str
    centre: FloatArray
    axis: FloatArray
    profile: FloatArray
    rings: tuple[int, ...]
    opacity: float = 1.0


@dataclass(frozen=True)
class Path:
    """A curve through ``points`` (N, 3), mm, each with a number of the scene's colour scale: ``values`` (N,)."""

    name: str
    points: FloatArray
    values: FloatArray
    radius: float


Part = Tube | Ball | Revolution | Path


@dataclass(frozen=True)
class Floor:
    """The road: a level rectangle with grid lines every ``spacing`` mm."""

    height: float
    low: tuple[float, float]
    high: tuple[float, float]
    spacing: float

    def lines(self) -> Iterator[tuple[FloatArray, FloatArray]]:
        """Both ends (3,) of each grid line."""
        (x0, y0), (x1, y1), z = self.low, self.high, self.height
        for x in np.arange(x0, x1 + 0.5 * self.spacing, self.spacing):
            yield np.array([x, y0, z]), np.array([x, y1, z])
        for y in np.arange(y0, y1 + 0.5 * self.spacing, self.spacing):
            yield np.array([x0, y, z]), np.array([x1, y, z])

    @property
    def corners(self) -> FloatArray:
        """(4, 3) mm, counterclockwise seen from above."""
        (x0, y0), (x1, y1), z = self.low, self.high, self.height
        return np.array([[x0, y0, z], [x1, y0, z], [x1, y1, z], [x0, y1, z]])


@dataclass(frozen=True)
class Label:
    """A joint's name at its place (3,), mm."""

    text: str
    side: str
    at: FloatArray


@dataclass(frozen=True)
class ColourScale:
    """Colours from ``-limit`` to ``+limit``; ``label`` has unit and sign in words."""

    label: str
    limit: float


@dataclass(frozen=True)
class Caption:
    """The words under the picture.

    Attributes:
        title: of the axle.
        pose: the pose that is drawn solid.
        rows: figures, each its name with unit and sign, and one number in words for every side.
        sides: headings of the numbers.
        notes: what else the reader must know, one sentence each.
    """

    title: str
    pose: str
    rows: tuple[tuple[str, tuple[str, ...]], ...]
    sides: tuple[str, ...]
    notes: tuple[str, ...]


@dataclass(frozen=True)
class Bounds:
    """Corners of a box, (3,) mm."""

    low: FloatArray
    high: FloatArray

    def joined(self, other: Bounds) -> Bounds:
        """The box around both."""
        return Bounds(np.minimum(self.low, other.low), np.maximum(self.high, other.high))

    @property
    def centre(self) -> FloatArray:
        """Middle (3,) mm."""
        return 0.5 * (self.low + self.high)

    @property
    def corners(self) -> FloatArray:
        """(8, 3) mm."""
        both = np.stack([self.low, self.high])
        grid = np.array(np.meshgrid([0, 1], [0, 1], [0, 1], indexing="ij")).reshape(3, -1).T
        corners: FloatArray = both[grid, np.arange(3)]
        return corners


@dataclass(frozen=True)
class Scene:
    """Everything to be drawn.

    Attributes:
        parts: the pose that is drawn solid, and the curves.
        ghosts: further poses, drawn pale.
        labels: names of the joints of the solid pose.
        key: colour and words of the kinds of parts there are.
    """

    parts: tuple[Part, ...]
    ghosts: tuple[Part, ...]
    labels: tuple[Label, ...]
    floor: Floor
    scale: ColourScale | None
    caption: Caption
    key: tuple[tuple[str, str], ...]

    def part(self, name: str) -> Part:
        """A part of the solid pose by name.

        Raises:
            KeyError: if there is none; the message lists the names.
        """
        for part in self.parts:
            if part.name == name:
                return part
        raise KeyError(f"{name!r} is not a part; there are {', '.join(p.name for p in self.parts)}")

    @property
    def bounds(self) -> Bounds:
        """The box around all parts and ghosts; the road does not count."""
        corners = np.concatenate([extent(part) for part in (*self.parts, *self.ghosts)])
        return Bounds(corners.min(axis=0), corners.max(axis=0))


def extent(part: Part) -> FloatArray:
    """Points (N, 3) mm whose box holds the part."""
    match part:
        case Tube():
            reach = np.full(3, part.radius)
            return np.array([part.start - reach, part.start + reach, part.end - reach, part.end + reach])
        case Ball():
            reach = np.full(3, part.radius)
            return np.array([part.centre - reach, part.centre + reach])
        case Revolution():
            return ring_points(part, np.arange(len(part.profile)), 24).reshape(-1, 3)
        case Path():
            return part.points


def across(axis: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Two unit vectors (3,) that form a right-handed triad with the unit vector ``axis`` (3,)."""
    helper = np.eye(3)[int(np.argmin(np.abs(axis)))]
    first = np.cross(axis, helper)
    first /= np.linalg.norm(first)
    return first, np.cross(axis, first)


def ring_points(body: Revolution, which: np.ndarray[tuple[int], np.dtype[np.intp]], sectors: int) -> FloatArray:
    """Circles of a body of revolution through points of its profile: (len(which), sectors, 3) mm."""
    first, second = across(body.axis)
    angle = np.linspace(0.0, 2.0 * np.pi, sectors, endpoint=False)
    spoke = np.cos(angle)[:, np.newaxis] * first + np.sin(angle)[:, np.newaxis] * second
    along, radius = body.profile[which, 0], body.profile[which, 1]
    circles: FloatArray = (
        body.centre + along[:, np.newaxis, np.newaxis] * body.axis + radius[:, np.newaxis, np.newaxis] * spoke
    )
    return circles
