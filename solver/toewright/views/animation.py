"""Moving pictures of a rack or travel sweep: .gif through Pillow, .mp4 through matplotlib where ffmpeg is at hand."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.views.drawing import DPI, Paint, draw
from toewright.views.scene import palette
from toewright.views.scene.build import Pose, build_scene
from toewright.views.scene.parts import Scene
from toewright.views.style import styled

if TYPE_CHECKING:
    from PIL.Image import Image

FRAMES_PER_SECOND = 16
WIDTHS = {".gif": 1000, ".mp4": 1600}
"""Width (px) of each kind of film."""

COLOURS = 96
"""Colours of an animated .gif that are taken from a frame; the tones of the palette join them."""

NEAR_WHITE = 248
"""Colours lighter than this are left to white, so that paper stays white."""

Picture = np.ndarray[Any, np.dtype[np.uint8]]


def swept_scenes(
    axle: Axle, along: str, values: Sequence[float], pose: Pose, *, sides: Sequence[str], travel_at: str
) -> list[Scene]:
    """One scene for each value of rack or wheel travel (mm) from the first to the last; the other one is the pose's.

    Without names of joints, which would jump about.

    Raises:
        InputError: if the linkage cannot reach one of them.
        ValueError: if ``along`` is neither "rack" nor "travel".
    """
    if along not in ("rack", "travel"):
        raise ValueError(f"along is {along!r}; allowed are 'rack' and 'travel'")
    poses = [Pose(value, pose.travel) if along == "rack" else Pose(pose.rack, value) for value in values]
    return [replace(build_scene(axle, [one], sides=sides, travel_at=travel_at), labels=()) for one in poses]


def pictures(scenes: Sequence[Scene], paint: Paint, view: str | None, width: int) -> Iterable[Picture]:
    """Each scene as pixels (H, W, 3), all at the same scale and on the same spot."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    bounds = scenes[0].bounds
    for scene in scenes[1:]:
        bounds = bounds.joined(scene.bounds)
    for scene in scenes:
        figure = draw(scene, paint, view=view, bounds=bounds)
        figure.set_dpi(DPI * width / (figure.get_figwidth() * DPI))
        canvas: Any = FigureCanvasAgg(figure)
        with styled():
            canvas.draw()
        yield np.asarray(canvas.buffer_rgba())[..., :3].copy()


def there_and_back(count: int) -> list[int]:
    """Order of the frames: from the first to the last and back, without doubling the ends."""
    return [*range(count), *range(count - 2, 0, -1)]


def colour_table(image: Image, count: int) -> Image:
    """A table of colours for ``Image.quantize``: the tones of the palette, which a table made from areas alone would lose, and the
    ``count`` most usual ones of a picture; 256 in all at most.
    """
    from PIL import Image as Pillow

    tones = palette.tones()
    usual = image.quantize(min(count, 256 - len(tones) // 3), dither=Pillow.Dither.NONE).getpalette() or []
    table = Pillow.new("P", (1, 1))
    other = [usual[k : k + 3] for k in range(0, len(usual), 3)]
    kept = [value for colour in other if min(colour) < NEAR_WHITE for value in colour]
    table.putpalette([*tones, *kept][:768])
    return table


def write_gif(place: Path, frames: Sequence[Picture]) -> None:
    """An endless .gif that runs there and back."""
    from PIL import Image as Pillow

    images = [Pillow.fromarray(frame) for frame in frames]
    table = colour_table(images[len(images) // 2], COLOURS)
    small = [image.quantize(palette=table, dither=Pillow.Dither.NONE) for image in images]
    order = there_and_back(len(small))
    small[order[0]].save(
        place, format="GIF", save_all=True, append_images=[small[k] for k in order[1:]], loop=0,
        duration=round(1000 / FRAMES_PER_SECOND), optimize=False,
    )  # fmt: skip


def check_encoder() -> None:
    """Refuse .mp4 before any work is done.

    Raises:
        InputError: if there is no ffmpeg on the path.
    """
    from matplotlib.animation import FFMpegWriter

    if not FFMpegWriter.isAvailable():
        raise InputError("an .mp4 needs ffmpeg, which is not on the path; install it, or write a .gif instead")


def write_mp4(place: Path, frames: Sequence[Picture]) -> None:
    """An .mp4 (H.264) that runs there and back four times.

    Raises:
        InputError: if ffmpeg is missing or fails.
    """
    import subprocess

    from matplotlib.animation import FFMpegWriter
    from matplotlib.figure import Figure

    check_encoder()
    height, width = (2 * (size // 2) for size in frames[0].shape[:2])
    figure = Figure(figsize=(width / DPI, height / DPI), dpi=DPI)
    image = figure.figimage(frames[0][:height, :width])
    writer = FFMpegWriter(fps=FRAMES_PER_SECOND, extra_args=["-pix_fmt", "yuv420p", "-movflags", "+faststart"])
    try:
        with writer.saving(figure, str(place), DPI):
            for k in 4 * there_and_back(len(frames)):
                image.set_data(frames[k][:height, :width])
                writer.grab_frame()
    except (subprocess.CalledProcessError, BrokenPipeError) as error:
        if isinstance(error.__context__, KeyboardInterrupt):
            raise KeyboardInterrupt from error
        raise InputError(
            "ffmpeg broke off while it wrote the .mp4; see that it runs and knows H.264, or write a .gif"
        ) from error


WRITERS: dict[str, Callable[[Path, Sequence[Picture]], None]] = {".gif": write_gif, ".mp4": write_mp4}
"""How to write each kind of film."""
