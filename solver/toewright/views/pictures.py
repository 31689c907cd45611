"""Still pictures of a scene as files, and who paints pixels on this machine."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from toewright.views.drawing import Paint, draw
from toewright.views.scene.parts import Scene
from toewright.views.style import save_figure

VECTOR_FORMATS = (".svg", ".pdf")
"""Kinds that only the vector painter can make."""


def write_picture(scene: Scene, path: Path, paint: Paint, view: str | None = None, *, force: bool = False) -> None:
    """Draw the scene into a file whose extension is one of ``style.FORMATS``; ``view`` as in ``drawing.draw``.

    Raises:
        InputError: if the target is refused or can't be written.
        ValueError: for another extension.
    """
    save_figure(draw(scene, paint, view=view), path, force=force)


def offscreen_painter(say: Callable[[str], None], *, film: bool = False) -> Paint:
    """The best painter for pixels on this machine: OpenGL where it works, else the vector painter, and then ``say`` is told why.

    A ``film`` is drawn quicker and less finely.
    """
    from toewright.views import opengl, render_vector

    if opengl.use_offscreen():
        from toewright.views.render_gl import FINE, Painter

        return Painter(1 if film else FINE)
    say(f"no OpenGL that works was found, so the picture is drawn without it; {opengl.REMEDY}")
    return render_vector.paint
