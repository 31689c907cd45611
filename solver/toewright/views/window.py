"""A window on the linkage: turn it with the mouse, move it with two sliders, read the figures as it moves."""

from __future__ import annotations

import textwrap
from collections.abc import Callable, Sequence
from typing import Any

import numpy as np

from toewright.kinematics.sweep import default_travel
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.views.projection import VIEWS
from toewright.views.render_gl import add_floor, add_lights, add_scene
from toewright.views.scene import palette
from toewright.views.scene.build import Pose, build_scene
from toewright.views.scene.parts import Scene
from toewright.views.style import INK, PAPER, QUIET

SIZE = (1280, 860)

TRAVEL_FACTOR = 1.6
"""Reach of the slider of wheel travel over the usual range of a sweep."""

VIEW_KEYS = "5678"
"""Keys of the views; VTK itself takes 3 for a stereo picture."""

HELP = "drag: turn   shift + drag: shift   wheel: nearer   n: names   5 6 7 8: front, side, top, oblique   q: close"


def figures_text(scene: Scene) -> str:
    """Pose and figures, in columns for a fixed-width face."""
    rows = scene.caption.rows
    wide = max(len(name) for name, _ in rows)
    head = " " * wide + "".join(f"{side:>10}" for side in scene.caption.sides)
    lines = [f"{name:<{wide}}" + "".join(f"{value:>10}" for value in values) for name, values in rows]
    return "\n".join([scene.caption.title, scene.caption.pose, "", head, *lines])


class LinkageWindow:
    """The window and its state; only after ``opengl.use_window`` or, off-screen, ``opengl.use_offscreen`` has said yes."""

    def __init__(
        self, axle: Axle, pose: Pose, *, sides: Sequence[str], travel_at: str, off_screen: bool = False
    ) -> None:
        """Build the window without showing it.

        Raises:
            InputError: if the linkage cannot reach the pose.
        """
        import pyvista

        self.axle, self.pose, self.sides, self.travel_at = axle, pose, tuple(sides), travel_at
        self.names_shown = True
        self.sliders: list[Any] = []
        self.scene = build_scene(axle, [pose], sides=self.sides, travel_at=travel_at)
        made: Any = pyvista.Plotter
        self.plotter: Any = made(
            off_screen=off_screen, window_size=list(SIZE), lighting="none", title=f"toewright: {axle.title}"
        )
        self.plotter.set_background(PAPER)
        add_lights(self.plotter)
        self.plotter.render_window.SetMultiSamples(0)
        self.plotter.render_window.SetAlphaBitPlanes(1)
        self.plotter.enable_depth_peeling(6)
        if not off_screen:
            self.plotter.enable_anti_aliasing("fxaa")
        self.plotter.enable_parallel_projection()
        self.plotter.add_text(HELP, position=(12, 8), font_size=8, color=QUIET, name="help")
        self.show_pose()
        self.look_from("oblique")
        self._add_sliders()
        for key, name in zip(VIEW_KEYS, VIEWS, strict=True):
            self.plotter.add_key_event(key, lambda name=name: self.look_from(name))
        self.plotter.add_key_event("n", self.toggle_names)

    def _add_sliders(self) -> None:
        reach = TRAVEL_FACTOR * float(default_travel(self.axle)[-1])
        reach = max(reach, abs(self.pose.travel))
        sliders: list[tuple[str, float, float, Callable[[float], None], float]] = [
            ("wheel travel, mm (bump +)", reach, self.pose.travel, self.move_travel, 0.62)
        ]
        if self.axle.rack is not None:
            stroke = max(self.axle.rack.stroke, abs(self.pose.rack))
            sliders.append(("rack travel, mm (along the rack axis +)", stroke, self.pose.rack, self.move_rack, 0.28))
        for title, most, value, moved, left in sliders:
            made = self.plotter.add_slider_widget(
                moved, rng=(-most, most), value=value, title=title, pointa=(left, 0.1), pointb=(left + 0.3, 0.1),
                title_height=0.018, fmt="%+.1f", style="modern", color=INK, title_color=INK,
                interaction_event="always",
            )  # fmt: skip
            self.sliders.append(made)

    def show_pose(self) -> None:
        """Put the present scene into the window."""
        add_floor(self.plotter, self.scene)
        add_scene(self.plotter, self.scene, axes_too=True)
        self._show_names()
        self._show_text(figures_text(self.scene), INK)

    def _show_text(self, text: str, colour: str) -> None:
        self.plotter.add_text(text, position="upper_left", font_size=9, color=colour, font="courier", name="figures")

    def _show_names(self) -> None:
        self.plotter.remove_actor("names", render=False)
        if self.names_shown:
            self.plotter.add_point_labels(
                np.array([label.at for label in self.scene.labels]), [label.text for label in self.scene.labels],
                name="names", font_size=12, text_color=INK, shape_color=PAPER, shape_opacity=0.6,
                show_points=False, bold=False, shadow=False, always_visible=True, margin=2, reset_camera=False,
            )  # fmt: skip

    def toggle_names(self) -> None:
        """Show or hide the joints' names."""
        self.names_shown = not self.names_shown
        self._show_names()
        self.plotter.render()

    def look_from(self, name: str) -> None:
        """Look from one of VIEWS at all of the linkage."""
        view = VIEWS[name]
        middle = self.scene.bounds.centre
        self.plotter.camera.focal_point = tuple(middle)
        self.plotter.camera.position = tuple(middle + 3000.0 * view.toward)
        self.plotter.camera.up = tuple(view.up)
        self.plotter.reset_camera()
        self.plotter.camera.parallel_scale *= 1.05

    def move_rack(self, rack: float) -> None:
        """Move the rack to a travel in mm."""
        self.move(Pose(round(float(rack), 1), self.pose.travel))

    def move_travel(self, travel: float) -> None:
        """Move the wheels to a travel in mm."""
        self.move(Pose(self.pose.rack, round(float(travel), 1)))

    def move(self, pose: Pose) -> None:
        """Show a pose; one that cannot be reached leaves the picture as it is and says why."""
        if pose == self.pose:
            return
        try:
            self.scene = build_scene(self.axle, [pose], sides=self.sides, travel_at=self.travel_at)
        except InputError as error:
            reason = str(error).removeprefix(f"{self.axle.path or self.axle.title}: ")
            self._show_text("\n".join(textwrap.wrap(reason, 70)), palette.TIE_ROD)
            return
        self.pose = pose
        self.show_pose()

    def show(self) -> None:
        """Open the window and come back when it is closed."""
        self.plotter.show()
