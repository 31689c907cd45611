"""What is written into a view of a drawing: its name, axes, scale, joints' names, kingpin axes, colour scale."""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from toewright.core.types import FloatArray
from toewright.views.labels import Box, place_labels
from toewright.views.projection import View
from toewright.views.scene import palette
from toewright.views.scene.parts import Ball, ColourScale, Label, Revolution, Scene, Tube, ring_points
from toewright.views.style import INK, PAPER, QUIET

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

TEXT = 13.0
HEIGHT = 16.0
"""Size of small text and of its line, px."""

ARM = 34.0
"""Length of the axes' arrows, px."""

CLOSE = 10.0
"""Joints nearer than this (px) to each other in a view share one name."""


@lru_cache(maxsize=512)
def text_width(text: str, size: float) -> float:
    """Width of a text, px."""
    from matplotlib.textpath import TextPath

    return float(TextPath((0.0, 0.0), text, size=size).get_extents().width)


def _points(size: float) -> float:
    """Size in points of a text of so many px on a sheet of 100 dpi."""
    return 0.72 * size


def _pixels(axes: Axes) -> tuple[FloatArray, FloatArray, float]:
    """The mm at the lower left corner, the size in px, and the px per mm of a view's axes."""
    figure = axes.get_figure(root=True)
    assert figure is not None
    box = axes.get_position()
    size = np.array([figure.bbox.width * box.width, figure.bbox.height * box.height])
    (left, right), (low, _) = axes.get_xlim(), axes.get_ylim()
    return np.array([left, low]), size, float(size[0] / (right - left))


def _at(x: float, y: float) -> tuple[float, float]:
    """A place in points; ``x`` and ``y`` in px of a sheet of 100 dpi. Points hold at any dpi, as in vector files and films."""
    return _points(float(x)), _points(float(y))


def add_view_name(axes: Axes, view: View) -> Box:
    """Name of the view in the upper left corner; the rectangle it takes, px."""
    _, size, _ = _pixels(axes)
    axes.annotate(
        view.words, (0, 1), _at(10, -8), "axes fraction", "offset points", ha="left", va="top", fontsize=_points(TEXT + 1),
        color=QUIET, zorder=8, bbox={"boxstyle": "square,pad=0.2", "facecolor": PAPER, "edgecolor": "none"},
    )  # fmt: skip
    return Box(8.0, size[1] - 28.0, text_width(view.words, TEXT + 1) + 8.0, 24.0)


def add_axes_triad(axes: Axes, view: View) -> Box:
    """Arrows of x, y and z in the lower left corner; the rectangle they take, px."""
    arms = view.project(np.eye(3))
    origin = np.array([24.0, 24.0]) + ARM * np.maximum(-arms[:, :2].min(axis=0), 0.0)
    for name, arm in zip("xyz", arms, strict=True):
        tip = origin + ARM * arm[:2]
        if np.linalg.norm(arm[:2]) < 0.05:
            continue
        axes.annotate(
            "", _at(*tip), _at(*origin), "axes points", "axes points", zorder=8,
            arrowprops={"arrowstyle": "-|>", "color": INK, "linewidth": 1.3, "shrinkA": 0, "shrinkB": 0, "mutation_scale": 9},
        )  # fmt: skip
        away = arm[:2] / np.linalg.norm(arm[:2])
        axes.annotate(
            name, _at(*(tip + 10.0 * away)), xycoords="axes points", ha="center", va="center", fontsize=_points(TEXT),
            color=INK, zorder=8,
        )  # fmt: skip
    return Box(8.0, 8.0, 2.0 * ARM + 24.0, 2.0 * ARM + 24.0)


def add_scale_bar(axes: Axes, scale: float, words: str) -> Box:
    """A bar of a round length in the lower right corner; the rectangle it takes, px."""
    _, size, _ = _pixels(axes)
    length = next((mm for mm in (50, 100, 200, 250, 500, 1000) if mm * scale >= 90.0), 1000)
    right, low, wide = size[0] - 14.0, 14.0, length * scale
    left = right - wide
    for a, b in (((left, low), (right, low)), ((left, low - 4), (left, low + 4)), ((right, low - 4), (right, low + 4))):
        axes.annotate(
            "", _at(*b), _at(*a), "axes points", "axes points", zorder=8,
            arrowprops={"arrowstyle": "-", "color": INK, "linewidth": 1.4, "shrinkA": 0, "shrinkB": 0},
        )  # fmt: skip
    text = f"{length} mm" + (f" ({words})" if words else "")
    axes.annotate(
        text, _at(right, low + 8.0), xycoords="axes points", ha="right", va="bottom", fontsize=_points(TEXT),
        color=INK, zorder=8,
    )  # fmt: skip
    need = max(wide, text_width(text, TEXT))
    return Box(right - need - 4.0, 4.0, need + 8.0, 36.0)


def add_kingpin_axes(axes: Axes, scene: Scene, view: View) -> None:
    """Kingpin axes as dash-dotted centre lines over what is drawn."""
    for part in scene.parts:
        if isinstance(part, Tube) and part.edge:
            ends = view.project(np.stack([part.start, part.end]))[:, :2]
            axes.plot(ends[:, 0], ends[:, 1], color=PAPER, linewidth=2.6, alpha=0.55, zorder=5.0)
            axes.plot(ends[:, 0], ends[:, 1], color=part.colour, linewidth=1.1, dashes=(9, 3, 2, 3), zorder=5.1)


def _drawn_points(scene: Scene, view: View) -> FloatArray:
    """Points (N, 2) mm of the picture on what is drawn, close enough to each other to tell where it is."""
    found = []
    for part in scene.parts:
        if isinstance(part, Tube):
            share = np.linspace(0.0, 1.0, 40)[:, np.newaxis]
            middle = part.start + share * (part.end - part.start)
            for shift in (-part.radius, 0.0, part.radius):
                found += [view.project(middle)[:, :2] + shift * np.array([a, b]) for a, b in ((1, 0), (0, 1))]
        elif isinstance(part, Revolution):
            found.append(view.project(ring_points(part, np.array(part.rings), 90)).reshape(-1, 3)[:, :2])
        elif isinstance(part, Ball):
            found.append(view.project(part.centre)[np.newaxis, :2])
    return np.concatenate(found)


def merged_labels(labels: Sequence[Label], places: FloatArray) -> tuple[list[str], FloatArray]:
    """Names and px places; joints that fall on each other in this view share one name."""
    texts: list[list[str]] = []
    kept: list[FloatArray] = []
    for label, place in zip(labels, places, strict=True):
        for texts_there, there in zip(texts, kept, strict=True):
            if np.linalg.norm(there - place) < CLOSE:
                if label.text not in texts_there:
                    texts_there.append(label.text)
                break
        else:
            texts.append([label.text])
            kept.append(place)
    return [common_name(group) for group in texts], np.array(kept).reshape(-1, 2)


def common_name(names: Sequence[str]) -> str:
    """Several names as one, without saying twice what two in a row begin with: ``lower pivot front, rear``."""
    said = [names[0]]
    for before, name in pairwise(names):
        stem = before.rpartition(" ")[0]
        said.append(name.removeprefix(f"{stem} ") if stem and name.startswith(f"{stem} ") else name)
    return ", ".join(said)


def add_labels(axes: Axes, scene: Scene, view: View, labels: Sequence[Label], taken: Sequence[Box]) -> None:
    """Names of joints with leaders."""
    if not labels:
        return
    origin, size, scale = _pixels(axes)
    anchors = (view.project(np.array([label.at for label in labels]))[:, :2] - origin) * scale
    texts, anchors = merged_labels(labels, anchors)
    sizes = np.array([[text_width(text, TEXT) + 4.0, HEIGHT] for text in texts])
    drawn = (_drawn_points(scene, view) - origin) * scale
    boxes = place_labels(anchors, sizes, drawn, (float(size[0]), float(size[1])), taken)
    for text, anchor, box in zip(texts, anchors, boxes, strict=True):
        end = box.nearest(anchor)
        axes.annotate(
            "", _at(*anchor), _at(*end), "axes points", "axes points", zorder=6,
            arrowprops={"arrowstyle": "-", "color": QUIET, "linewidth": 0.8, "shrinkA": 0, "shrinkB": 2},
        )  # fmt: skip
        axes.annotate(
            text, _at(box.left + 0.5 * box.width, box.low + 0.5 * box.height), xycoords="axes points", ha="center",
            va="center_baseline", fontsize=_points(TEXT), color=INK, zorder=7,
            bbox={"boxstyle": "square,pad=0.12", "facecolor": PAPER, "edgecolor": "none", "alpha": 0.78},
        )  # fmt: skip


def add_scale_colours(figure: Figure, scale: ColourScale, corner: tuple[float, float], total: float) -> None:
    """A bar of the colours with its numbers; ``corner`` is its upper left one, px from the left and from the top."""
    width = float(figure.bbox.width)
    bar = figure.add_axes((corner[0] / width, 1.0 - (corner[1] + 16.0) / total, 320.0 / width, 14.0 / total))
    edges = np.linspace(-scale.limit, scale.limit, 129)
    middles = 0.5 * (edges[1:] + edges[:-1]) / scale.limit
    bar.pcolormesh(
        edges,
        [0.0, 1.0],
        middles[np.newaxis],
        cmap=palette.bump_steer_colours(),
        edgecolors="face",
        vmin=-1.0,
        vmax=1.0,
    )
    bar.grid(False)
    bar.set_yticks([])
    bar.tick_params(labelsize=_points(TEXT), colors=INK, length=3)
    bar.set_xticks(np.linspace(-scale.limit, scale.limit, 5))
    bar.xaxis.set_major_formatter(lambda value, _: "0" if abs(value) < 1e-9 else f"{value:+.3f}")
    bar.set_xlabel(scale.label, fontsize=_points(TEXT), color=INK, labelpad=3)
    for spine in bar.spines.values():
        spine.set_visible(False)
