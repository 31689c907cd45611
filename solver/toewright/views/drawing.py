"""A drawing: views of a scene on a sheet, with names, scale, axes, key and figures; a painter fills in the parts.

Sizes are px of a sheet at 100 dpi. The text is written by matplotlib whatever the painter, so that it is sharp everywhere.
"""

from __future__ import annotations

import textwrap
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from toewright.core.types import FloatArray
from toewright.views.annotations import (
    add_axes_triad,
    add_kingpin_axes,
    add_labels,
    add_scale_bar,
    add_scale_colours,
    add_view_name,
    text_width,
)
from toewright.views.projection import VIEWS, View
from toewright.views.scene import palette
from toewright.views.scene.parts import Bounds, Scene
from toewright.views.style import INK, PAPER, QUIET, styled

if TYPE_CHECKING:
    from matplotlib.artist import Artist
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

Paint = Callable[["Axes", Scene, View], None]
"""Fills axes, whose coordinates are a view's picture coordinates in mm, with the parts of a scene."""

DPI = 100
WIDTH = 1600
HEAD = 66
MARGIN = 24
TEXT = 13.5
LINE = 21.0
LEAST_TITLE = 14.0
ROOM = 118.0
"""Room (px) above, below and beside a view, shared by both ends, where names can go."""

LEFT_SHARE = 0.575
"""Share of the sheet's width for top and front view."""

SHEET = (("top", "oblique"), ("front", "side"))
"""The four-view sheet: rows of views."""

VIEW_NAMES = tuple(VIEWS)


@dataclass(frozen=True)
class Cell:
    """A view's place on the sheet: px from the left and from the top, px per mm, and the mm in the middle of it."""

    view: View
    left: float
    top: float
    width: float
    height: float
    scale: float
    centre: FloatArray


def flat_size(view: View, bounds: Bounds) -> tuple[FloatArray, FloatArray]:
    """Size (2,) of a box in a view, and its middle (2,); mm."""
    corners = view.project(bounds.corners)[:, :2]
    low, high = corners.min(axis=0), corners.max(axis=0)
    return high - low, 0.5 * (low + high)


def sheet_cells(bounds: Bounds) -> tuple[list[Cell], float]:
    """Cells of the four-view sheet, the three square-on views at one scale, and the height that they take."""
    size = {name: flat_size(view, bounds) for name, view in VIEWS.items()}
    inner = WIDTH - 2 * MARGIN
    columns = (LEFT_SHARE * inner, (1.0 - LEFT_SHARE) * inner)
    scale = min((columns[0] - 40.0) / size["front"][0][0], (columns[1] - 240.0) / size["side"][0][0],
                430.0 / size["front"][0][1])  # fmt: skip
    rows = [scale * size["top"][0][1] + ROOM, scale * size["front"][0][1] + ROOM]
    cells = []
    top = float(HEAD)
    for names, height in zip(SHEET, rows, strict=True):
        left = float(MARGIN)
        for name, width in zip(names, columns, strict=True):
            extent, centre = size[name]
            own = scale
            if name == "oblique":
                own = min((width - 50.0) / extent[0], (height - 50.0) / extent[1])
            cells.append(Cell(VIEWS[name], left, top, width, height, own, centre))
            left += width
        top += height
    return cells, top


def single_cell(name: str, bounds: Bounds) -> tuple[list[Cell], float]:
    """The cell of one view, and the height that it takes."""
    view = VIEWS[name]
    extent, centre = flat_size(view, bounds)
    inner = WIDTH - 2 * MARGIN
    scale = min((inner - (40.0 if name == "oblique" else 260.0)) / extent[0], 680.0 / extent[1])
    height = scale * extent[1] + 1.3 * ROOM
    return [Cell(view, MARGIN, HEAD, inner, height, scale, centre)], HEAD + height


def draw(scene: Scene, paint: Paint, *, view: str | None = None, bounds: Bounds | None = None) -> Figure:
    """A drawing of the scene.

    Args:
        scene: what to draw.
        paint: fills in the parts: ``render_vector.paint`` or a ``render_gl.Painter``.
        view: one of VIEW_NAMES; None for the four-view sheet.
        bounds: the box that must fit, when several drawings are to have the same scale; the scene's own by default.

    Raises:
        KeyError: if there is no such view.
    """
    from matplotlib.figure import Figure

    box = bounds or scene.bounds
    cells, height = sheet_cells(box) if view is None else single_cell(view, box)
    notes = wrapped_notes(scene)
    foot = 34.0 + LINE * max(len(scene.caption.rows) + 1, len(notes) + 2.0 + 1.3 * -(-len(scene.key) // 4))
    total = float(np.ceil((height + foot) / 2.0) * 2.0)
    with styled():
        figure = Figure(figsize=(WIDTH / DPI, total / DPI), dpi=DPI, facecolor=PAPER)
        for cell in cells:
            axes = add_cell(figure, cell, total)
            paint(axes, scene, cell.view)
            annotate(axes, scene, cell, sheet=view is None)
        add_words(figure, scene, notes, height, total)
    return figure


def add_cell(figure: Figure, cell: Cell, total: float) -> Axes:
    """Empty axes of a cell, in mm."""
    place = (cell.left / WIDTH, 1.0 - (cell.top + cell.height) / total, cell.width / WIDTH, cell.height / total)
    axes = figure.add_axes(place)
    axes.set_axis_off()
    half = 0.5 * np.array([cell.width, cell.height]) / cell.scale
    axes.set_xlim(cell.centre[0] - half[0], cell.centre[0] + half[0])
    axes.set_ylim(cell.centre[1] - half[1], cell.centre[1] + half[1])
    axes.set_autoscale_on(False)
    return axes


def annotate(axes: Axes, scene: Scene, cell: Cell, *, sheet: bool) -> None:
    """Names, axes, scale and kingpin axes of one view."""
    view = cell.view
    taken = [add_view_name(axes, view), add_axes_triad(axes, view)]
    add_kingpin_axes(axes, scene, view)
    if view.name != "oblique" and (not sheet or view.name == "front"):
        taken.append(add_scale_bar(axes, cell.scale, "front, side and top view" if sheet else ""))
    labels = scene.labels
    if view.name == "side" and "left" in scene.caption.sides:
        labels = tuple(label for label in labels if label.side == "left")
    if sheet and view.name == "oblique":
        labels = ()
    add_labels(axes, scene, view, labels, taken)


def wrapped_notes(scene: Scene) -> list[str]:
    """Lines of the notes."""
    lines: list[str] = []
    for note in scene.caption.notes:
        lines += textwrap.wrap(note, 100)
    return lines


def add_words(figure: Figure, scene: Scene, notes: Sequence[str], height: float, total: float) -> None:
    """Title, table of figures, key, colour scale and notes."""
    caption = scene.caption

    def write(x: float, y: float, text: str, size: float = TEXT, **how: object) -> None:
        """Text at px from the left and from the top."""
        style: dict[str, object] = {"color": INK, "va": "baseline", "fontsize": 72.0 * size / DPI, **how}
        figure.text(x / WIDTH, 1.0 - y / total, text, **style)  # type: ignore[arg-type]

    title, size = fitted(caption.title, 22.0, WIDTH - 2 * MARGIN - 60.0 - text_width(caption.pose, 16.0))
    write(MARGIN + 8, 36, title, size, weight="bold")
    write(WIDTH - MARGIN - 8, 36, caption.pose, 16.0, ha="right")
    figure.add_artist(_rule(MARGIN, WIDTH - MARGIN, 52, total))
    figure.add_artist(_rule(MARGIN, WIDTH - MARGIN, height + 4, total))
    names = max(text_width(name, TEXT) for name, _ in caption.rows)
    columns = [MARGIN + 8 + names + 10.0 + 108.0 * (k + 1) for k in range(len(caption.sides))]
    y = height + 30.0
    for x, side in zip(columns, caption.sides, strict=True):
        write(x, y, f"{side} wheel", ha="right", weight="bold")
    for name, numbers in caption.rows:
        y += LINE
        write(MARGIN + 8, y, name)
        for x, number in zip(columns, numbers, strict=True):
            write(x, y, number, ha="right")
    left = columns[-1] + 70.0
    y = add_key(figure, scene, left, height + 26.0, total)
    if scene.scale is not None:
        add_scale_colours(figure, scene.scale, (WIDTH - MARGIN - 356.0, height + 18.0), total)
    y += 6.0
    for line in notes:
        y += LINE
        write(left, y, line, color=QUIET)


def fitted(text: str, size: float, room: float) -> tuple[str, float]:
    """A bold text and its size, px, made smaller and at last shorter until it fits into so much room."""
    bold = 1.18
    size = float(np.clip(size * room / max(bold * text_width(text, size), 1.0), LEAST_TITLE, size))
    while text and bold * text_width(text, size) > room:
        text = text.removesuffix("...")[:-1].rstrip() + "..."
    return text, size


def _rule(left: float, right: float, y: float, total: float) -> Artist:
    from matplotlib.lines import Line2D

    place = [left / WIDTH, right / WIDTH], [1.0 - y / total] * 2
    return Line2D(*place, color=palette.GRID, linewidth=1.0)


def add_key(figure: Figure, scene: Scene, left: float, top: float, total: float) -> float:
    """Which colour is what: swatches with words, rows of up to four; the lower edge, px from the top."""
    from matplotlib.patches import Rectangle

    room = WIDTH - MARGIN - left - (380.0 if scene.scale is not None else 0.0)
    x, y = left, top
    for colour, words in scene.key:
        need = 46.0 + text_width(words, TEXT)
        if x + need > left + room:
            x, y = left, y + 1.25 * LINE
        figure.add_artist(
            Rectangle((x / WIDTH, 1.0 - (y + 5.0) / total), 20.0 / WIDTH, 11.0 / total, color=colour, linewidth=0)
        )
        figure.text(
            (x + 27.0) / WIDTH,
            1.0 - (y + 4.5) / total,
            words,
            color=INK,
            va="baseline",
            fontsize=72.0 * TEXT / DPI,
        )
        x += need
    return y + 0.4 * LINE
