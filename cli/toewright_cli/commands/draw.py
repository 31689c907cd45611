"""``toewright draw``: pictures, films and solids of the linkage."""

from __future__ import annotations

from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.console import print_remarks, warn
from toewright_cli.options import (
    Force,
    HardpointFile,
    RackList,
    SideChoice,
    SideOption,
    TravelAt,
    TravelAtOption,
    TravelList,
    parse_list,
    parse_pose,
    parse_rack,
)
from toewright_cli.outputs import check_out
from toewright_cli.progress import notice_compilation, working

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.views.drawing import Paint
    from toewright.views.scene.build import Pose

STILLS = (".png", ".svg", ".pdf")
FILMS = (".gif", ".mp4")
SOLIDS = (".glb", ".stl")

FRAMES = 21
"""Positions of a film when no LIST is given."""

MOST_FRAMES = 500
MOST_POSES = 12
MOST_PLACES = 2001


class ViewChoice(StrEnum):
    """Where to look from."""

    FRONT = "front"
    SIDE = "side"
    TOP = "top"
    OBLIQUE = "oblique"


class Along(StrEnum):
    """What moves in a film."""

    RACK = "rack"
    TRAVEL = "travel"


class Renderer(StrEnum):
    """Who draws."""

    AUTO = "auto"
    OPENGL = "opengl"
    VECTOR = "vector"


def draw(
    file: HardpointFile,
    out_file: Annotated[
        Path | None,
        typer.Option(
            "--out", "-o", metavar="FILE",
            help="Picture .png, .svg or .pdf; film .gif or .mp4; solids .glb or .stl. Without it a window opens.",
        ),
    ] = None,
    view: Annotated[
        ViewChoice | None, typer.Option("--view", help="One view. Default: a sheet of all four.", show_default=False)
    ] = None,
    pose: Annotated[
        list[str] | None,
        typer.Option(
            "--pose", metavar="POSE",
            help="Where the linkage stands: rack=20,travel=-10 (mm). Again for more poses: they are drawn pale over the first.",
        ),
    ] = None,
    locus: Annotated[
        bool,
        typer.Option("--locus", help="Draw the paths of the moving joints over --travel, coloured by bump steer."),
    ] = False,
    animate: Annotated[
        Along | None, typer.Option("--animate", help="What moves in a film: the rack, or the wheels up and down.")
    ] = None,
    rack: RackList = None,
    travel: TravelList = None,
    travel_at: TravelAtOption = TravelAt.WHEEL_CENTRE,
    side: SideOption = SideChoice.BOTH,
    renderer: Annotated[
        Renderer, typer.Option("--renderer", help="Who draws pixels: OpenGL, or the vector renderer that needs none.")
    ] = Renderer.AUTO,
    force: Force = False,
) -> None:  # fmt: skip
    """Draw the linkage: a four-view sheet with joints, angles and scale, a film of it moving, or solids with named parts.

    --rack is the LIST of a film that moves the rack, --travel that of a film that moves the wheels, and of --locus.

    Example: toewright draw hardpoints/marten_front.toml --pose rack=20 --pose travel=25 --locus -o marten.png
    """
    check_out(out_file, force, (*STILLS, *FILMS, *SOLIDS))
    kind = None if out_file is None else out_file.suffix.lower()
    along = animate if animate is not None or kind not in FILMS else Along.RACK
    _check_together(kind, view, pose or [], locus, animate, renderer)
    _check_means(kind)
    from toewright.model.files import load
    from toewright.views.scene.build import Pose

    axle = load(file)
    if animate is None and along is Along.RACK and axle.rack is None:
        along = Along.TRAVEL
    racks, travels = parse_rack(rack, axle), parse_list(travel, "--travel")
    _check_lists(axle, rack, travel, along, locus, len(racks or ()), len(travels or ()))
    poses = [Pose(*parse_pose(text, axle)) for text in pose or ["travel=0"]]
    print_remarks(axle.remarks)
    _warn_of_stroke(axle, [*(racks or ()), *(one.rack for one in poses)])
    notice_compilation()
    if out_file is None:
        _open_window(axle, poses[0], side, travel_at)
    elif along is not None:
        values = racks if along is Along.RACK else travels
        _write_film(axle, out_file, force, along, values, poses[0], view, side, travel_at, renderer)
    else:
        _write_still_or_solid(
            axle, out_file, force, poses, travels if locus else None, locus, view, side, travel_at, renderer
        )


def _check_together(
    kind: str | None, view: ViewChoice | None, poses: list[str], locus: bool, animate: Along | None, renderer: Renderer
) -> None:
    """Refuse options that do not go together."""
    from toewright.model.errors import InputError

    if animate is not None and kind not in FILMS:
        got = "no -o FILE was given" if kind is None else f"{kind} does not move"
        raise InputError(f"--animate {animate.value}: {got}; give -o FILE with .gif or .mp4")
    if kind in FILMS and len(poses) > 1:
        raise InputError(
            f"--pose: a film takes one, for what does not move, and got {len(poses)}; leave the others out"
        )
    if kind in (*FILMS, ".stl", None) and locus:
        place = "the window" if kind is None else kind
        raise InputError(f"--locus: {place} does not show it; use .png, .svg, .pdf or .glb")
    if view is not None and (kind is None or kind in SOLIDS):
        place = "the window can be turned to any view" if kind is None else f"{kind} holds the whole linkage"
        raise InputError(f"--view {view.value}: {place}; leave --view out")
    if kind is None and len(poses) > 1:
        raise InputError(f"--pose: the window shows one pose and got {len(poses)}; give -o FILE, or one --pose")
    if len(poses) > MOST_POSES:
        raise InputError(f"--pose: {len(poses)} poses over each other can't be told apart; give {MOST_POSES} or fewer")
    if renderer is Renderer.OPENGL and kind in (".svg", ".pdf", *SOLIDS):
        raise InputError(f"--renderer opengl: makes pixels only, not {kind}; use .png, .gif or .mp4, or leave it out")


def _check_means(kind: str | None) -> None:
    """Refuse what this machine has no means for: a window without a display, a film without its encoder."""
    import os

    from toewright.model.errors import InputError
    from toewright.views import animation, opengl

    if kind is None and not opengl.has_display(os.environ):
        raise InputError("draw: there is no display to open a window on; give -o FILE, such as -o linkage.png")
    if kind == ".mp4":
        animation.check_encoder()


def _check_lists(
    axle: Axle, rack: str | None, travel: str | None, along: Along | None, locus: bool, racks: int, travels: int
) -> None:
    """Refuse LISTs that nothing uses or that are out of proportion."""
    from toewright.model.errors import InputError

    if rack is not None and along is not Along.RACK:
        raise InputError(f"--rack {rack}: is the LIST of --animate rack; for one place write --pose rack=...")
    if travel is not None and along is not Along.TRAVEL and not locus:
        raise InputError(
            f"--travel {travel}: is the LIST of --animate travel and of --locus; for one place write --pose travel=..."
        )
    if along is Along.RACK and axle.rack is None:
        raise InputError(f"{axle.path}: has no [rack], so nothing can move it; use --animate travel")
    count, most = (racks if along is Along.RACK else travels), (MOST_FRAMES if along is not None else MOST_PLACES)
    option = "--rack" if along is Along.RACK else "--travel"
    if count > most:
        raise InputError(f"{option}: {count:,} positions are more than the {most:,} that can be drawn; ask for fewer")
    if count == 1:
        raise InputError(f"{option} {rack or travel}: a single position does not move; write two or more")


def _warn_of_stroke(axle: Axle, racks: list[float]) -> None:
    if axle.rack is not None and max(abs(value) for value in racks) > axle.rack.stroke * (1.0 + 1e-9):
        warn(f"remark: the rack is drawn beyond its stroke of {axle.rack.stroke:g} mm each way")


def _painter(renderer: Renderer, *, film: bool = False) -> Paint:
    """Who draws pixels."""
    from toewright.model.errors import InputError
    from toewright.views import opengl, render_vector
    from toewright.views.pictures import offscreen_painter

    if renderer is Renderer.VECTOR:
        return render_vector.paint
    if renderer is Renderer.OPENGL and not opengl.use_offscreen():
        raise InputError(f"--renderer opengl: no OpenGL that works was found; {opengl.REMEDY}, or leave --renderer out")
    return offscreen_painter(warn, film=film)


def _write_still_or_solid(
    axle: Axle, path: Path, force: bool, poses: list[Pose], travels: list[float] | None, locus: bool,
    view: ViewChoice | None, side: SideChoice, travel_at: TravelAt, renderer: Renderer,
) -> None:  # fmt: skip
    from toewright.kinematics.sweep import default_travel
    from toewright.model.writing import write_safely
    from toewright.views import export, render_vector
    from toewright.views.pictures import VECTOR_FORMATS, write_picture
    from toewright.views.scene.build import build_scene

    kind = path.suffix.lower()
    over = (travels or [float(v) for v in default_travel(axle)]) if locus else None
    scene = build_scene(axle, poses, sides=side.sides, travel_at=travel_at.value, locus=over)
    with working(f"drawing {path.name}"):
        if kind in SOLIDS:
            write_safely(path, lambda place: export.WRITERS[kind](scene, place), force=force)
        else:
            paint = render_vector.paint if kind in VECTOR_FORMATS else _painter(renderer)
            write_picture(scene, path, paint, None if view is None else view.value, force=force)
    warn(f"wrote {path}")


def _write_film(
    axle: Axle, path: Path, force: bool, along: Along, values: list[float] | None, pose: Pose,
    view: ViewChoice | None, side: SideChoice, travel_at: TravelAt, renderer: Renderer,
) -> None:  # fmt: skip
    from toewright.kinematics.sweep import default_rack, default_travel
    from toewright.model.writing import write_safely
    from toewright.views import animation

    kind = path.suffix.lower()
    if values is None:
        default = default_rack if along is Along.RACK else default_travel
        values = [float(value) for value in default(axle, FRAMES)]
    scenes = animation.swept_scenes(axle, along.value, values, pose, sides=side.sides, travel_at=travel_at.value)
    paint = _painter(renderer, film=True)
    width = animation.WIDTHS[kind]
    frames = []
    with working(f"drawing {path.name}", len(scenes)) as advance:
        for frame in animation.pictures(scenes, paint, None if view is None else view.value, width):
            frames.append(frame)
            advance(1)
        write_safely(path, lambda place: animation.WRITERS[kind](place, frames), force=force)
    warn(f"wrote {path}")


def _open_window(axle: Axle, pose: Pose, side: SideChoice, travel_at: TravelAt) -> None:
    from toewright.model.errors import InputError
    from toewright.views import opengl

    if not opengl.use_window():
        raise InputError(
            f"draw: OpenGL does not work on this display; give -o FILE, such as -o linkage.png; {opengl.REMEDY}"
        )
    from toewright.views.window import LinkageWindow

    LinkageWindow(axle, pose, sides=side.sides, travel_at=travel_at.value).show()
