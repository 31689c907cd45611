"""The one plotting style: colours, type, figures without global state, and saving them."""

from __future__ import annotations

import io
import re
import warnings
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.colors import LinearSegmentedColormap
    from matplotlib.figure import Figure

FORMATS = (".png", ".svg", ".pdf")
"""Extensions of picture files."""

INK = "#1c2630"
QUIET = "#5c6872"
PAPER = "#ffffff"
RULE = "#d5dadf"
"""Text and axes, remarks, background, grid."""

MAP_INK = "#1d2731"
"""Lines and labels on the fill of a map, whose colours stay as they are on a dark page."""

SERIES = ("#2e73b8", "#cc7a1f", "#138a7c", "#a8589f", "#8a7340", "#b5483d")
"""Lines of several files: told apart in the common kinds of colour blindness, readable on white and on dark."""

MARKERS = ("o", "s", "^", "D", "v", "P")
"""A second mark of the same files, for those who see no colours."""

TOE_STOPS = ("#28588f", "#6f9cc9", "#c6d9ea", "#f6f4ef", "#f2d3a8", "#dc9a4e", "#a6601a")
"""Toe-out blue, none pale, toe-in amber."""

FAMILY = ("#1f4f8a", "#5a8fc4", "#6d7780", "#d39447", "#a2590f")
"""Rack positions from right to left."""

DARK = {
    INK: "#e6eaee",
    QUIET: "#a3adb6",
    PAPER: "#161c22",
    RULE: "#37414b",
    FAMILY[0]: "#a8cdf2",
    FAMILY[2]: "#9aa5ae",
    FAMILY[4]: "#f3c58d",
    SERIES[0]: "#5b9ee0",
    SERIES[3]: "#c583bd",
    SERIES[5]: "#dd7d72",
}
"""What text, background and the darker lines become on a dark page."""

_SETTINGS: Mapping[str, Any] = {
    "font.family": ["DejaVu Sans"],
    "font.size": 9.0,
    "text.color": INK,
    "text.parse_math": False,
    "axes.edgecolor": QUIET,
    "axes.labelcolor": INK,
    "axes.facecolor": PAPER,
    "axes.titlesize": 9.5,
    "axes.titleweight": "bold",
    "axes.titlelocation": "left",
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.grid": True,
    "axes.axisbelow": True,
    "axes.unicode_minus": False,
    "axes.linewidth": 0.8,
    "grid.color": RULE,
    "grid.linewidth": 0.6,
    "xtick.color": QUIET,
    "ytick.color": QUIET,
    "xtick.labelcolor": INK,
    "ytick.labelcolor": INK,
    "lines.linewidth": 1.8,
    "lines.markersize": 4.5,
    "legend.frameon": False,
    "legend.fontsize": 8.5,
    "figure.facecolor": PAPER,
    "figure.dpi": 125.0,
    "savefig.facecolor": PAPER,
    "hatch.color": QUIET,
    "hatch.linewidth": 0.6,
    "svg.fonttype": "path",
    "svg.hashsalt": "toewright",
    "pdf.fonttype": 42,
}


@contextmanager
def styled() -> Iterator[None]:
    """Matplotlib with this style inside; its settings are as before afterwards. A character without glyph is drawn as a box."""
    import matplotlib

    settings: Any = dict(_SETTINGS)
    with matplotlib.rc_context(settings), warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing from font")
        yield


WIDTH = 9.6
"""Inches of a whole figure; 1200 px at the style's resolution."""

PAGE_WIDTH = 8.2
"""Inches of a figure on a page, so that its letters keep their size in print."""

PAGE_SHARE = 0.8
"""Height of a figure on a page as a share of its usual height, so that two find room on a sheet."""

ROW = 3.6
"""Inches of a row of panels."""


def results_figure(height: float, title: str, footer: str, *, plain: bool = False) -> Figure:
    """``new_figure`` of the usual width, with panels ``height`` inches high; ``plain``: for a page that has title and foot already."""
    if plain:
        return new_figure(PAGE_WIDTH, PAGE_SHARE * height, "", "")
    return new_figure(WIDTH, height + 0.9, title, footer)


def new_figure(width: float, height: float, title: str, footer: str) -> Figure:
    """An empty figure in inches, title on top, where the numbers come from at the foot. Call it inside ``styled``."""
    from matplotlib.figure import Figure

    figure = Figure(figsize=(width, height), layout="constrained")
    engine: Any = figure.get_layout_engine()
    engine.set(w_pad=0.08, h_pad=0.08, wspace=0.03, hspace=0.04)
    if title:
        figure.suptitle(title, x=0.012, ha="left", fontsize=12.0, fontweight="bold")
    if footer:
        figure.supxlabel(footer, x=0.012, ha="left", fontsize=7.5, color=QUIET)
    return figure


def toe_colours() -> LinearSegmentedColormap:
    """Colours of signed toe: blue for toe-out, amber for toe-in."""
    from matplotlib.colors import LinearSegmentedColormap

    return LinearSegmentedColormap.from_list("toewright-toe", TOE_STOPS)


def label_y(axes: Axes, label: str) -> None:
    """Label of the upright axis: what it is, and below that unit and sign, so that it is no longer than its panel."""
    axes.set_ylabel(label.replace(" (", "\n(", 1))


def zero_lines(axes: Axes, *, x: bool = False, y: bool = True) -> None:
    """The lines of zero, a little stronger than the grid."""
    if x:
        axes.axvline(0.0, color=QUIET, linewidth=0.9, zorder=1.5)
    if y:
        axes.axhline(0.0, color=QUIET, linewidth=0.9, zorder=1.5)


def save_figure(figure: Figure, path: Path, *, force: bool = False) -> None:
    """Write a figure as .png, .svg or .pdf; nothing half-written is left, and the same figure gives the same file.

    Raises:
        InputError: if the target is refused or can't be written.
        ValueError: for another extension.
    """
    from toewright.model.writing import write_safely

    kind = path.suffix.lower()
    if kind not in FORMATS:
        raise ValueError(f"{path}: the extension {path.suffix!r} is unknown; use {', '.join(FORMATS)}")
    undated = {".png": None, ".svg": {"Date": None}, ".pdf": {"CreationDate": None}}[kind]

    def write(place: Path) -> None:
        with styled():
            figure.savefig(place, format=kind[1:], metadata=undated)

    write_safely(path, write, force=force)


def svg_for_page(figure: Figure) -> str:
    """A figure as SVG text whose ink and paper follow the reader's choice of light or dark."""
    stream = io.StringIO()
    with styled():
        figure.savefig(stream, format="svg", metadata={"Date": None})
    text = stream.getvalue()
    for k, colour in enumerate(DARK):
        text = text.replace(colour, f"var(--c{k})")
    light = ";".join(f"--c{k}:{colour}" for k, colour in enumerate(DARK))
    dark = ";".join(f"--c{k}:{colour}" for k, colour in enumerate(DARK.values()))
    rules = (
        f"<style>:root{{{light}}}@media screen and (prefers-color-scheme: dark){{:root{{{dark}}}}}"
        "*{stroke-linejoin:round;stroke-linecap:butt}</style>"
    )
    return re.sub(r"(<svg\b[^>]*>)", lambda found: found.group(1) + rules, text, count=1)
