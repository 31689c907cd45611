"""The options that draw plots, and drawing them: the file asked for and those laid over it."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.console import warn
from toewright_cli.outputs import check_out
from toewright_cli.progress import working

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from toewright.model.axle import Axle

FINE = 61
"""Positions of a curve in a picture when none are asked for."""

Plot = Annotated[
    Path | None,
    typer.Option("--plot", metavar="FILE", help="Draw the results, angles in deg per wheel: .png, .svg or .pdf."),
]
Overlay = Annotated[
    list[Path] | None,
    typer.Option("--overlay", metavar="FILE", help="Lay this hardpoint file over the plot; may be given again."),
]


def check_plot(plot: Path | None, overlays: Sequence[Path] | None, force: bool) -> list[Axle]:
    """Refuse a picture before any work is done, and read the files that are laid over.

    Raises:
        InputError: for an unknown extension, a file that exists (without force), files to lay over without a plot, or a bad file.
    """
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.views.style import FORMATS

    check_out(plot, force, FORMATS, "--plot")
    if overlays and plot is None:
        raise InputError(f"--overlay {overlays[0]}: lays a file over a plot, and there is none; add --plot FILE.png")
    return [load(path) for path in overlays or ()]


def draw(path: Path, force: bool, figure: Callable[[], Figure]) -> None:
    """Draw a figure and save it, and say so on stderr."""
    with working(f"drawing {path}"):
        from toewright.views.style import save_figure

        save_figure(figure(), path, force=force)
    warn(f"wrote {path}")
