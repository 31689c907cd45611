"""Paints a scene with pyvista into an off-screen picture. Only after ``opengl.use_offscreen`` has said yes."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.projection import View
from toewright.views.render_vector import EDGE_ON, SQUARE_ON, paint_floor, paint_wheel_edges
from toewright.views.scene import palette
from toewright.views.scene.meshes import Triangles, floor_surface, joined, part_surface
from toewright.views.scene.parts import Part, Scene, Tube
from toewright.views.style import PAPER

if TYPE_CHECKING:
    from matplotlib.axes import Axes

FINE = 2
"""Pixels drawn for each pixel shown, each way: smooth edges without the help of the driver."""


def poly_data(surface: Triangles) -> Any:
    """A surface as pyvista's mesh, with its colours as the point array ``colours``."""
    import pyvista

    faces = np.column_stack([np.full(len(surface.triangles), 3), surface.triangles])
    mesh = pyvista.PolyData(surface.points, faces.ravel())
    mesh.point_data["colours"] = surface.colours[:, :3]
    return mesh


def surfaces(scene: Scene, axes_too: bool) -> dict[str, tuple[Triangles, float]]:
    """Surfaces of all parts that share an opacity as one, with that opacity; the kingpin axes where ``axes_too`` says."""
    groups: dict[float, list[Part]] = {}
    for part in (*scene.parts, *scene.ghosts):
        if axes_too or not (isinstance(part, Tube) and part.edge):
            groups.setdefault(round(getattr(part, "opacity", 1.0), 3), []).append(part)
    return {
        f"opacity {opacity:g}": (joined(part_surface(part, scene.scale) for part in parts), opacity)
        for opacity, parts in sorted(groups.items(), reverse=True)
    }


def add_scene(plotter: Any, scene: Scene, *, axes_too: bool) -> None:
    """Put the scene into a plotter; what is there of an earlier scene is replaced."""
    for name, (surface, opacity) in surfaces(scene, axes_too).items():
        plotter.add_mesh(
            poly_data(surface),
            scalars="colours",
            rgb=True,
            opacity=opacity,
            smooth_shading=True,
            split_sharp_edges=True,
            feature_angle=50.0,
            specular=0.25,
            specular_power=18.0,
            ambient=0.22,
            diffuse=0.86,
            name=name,
            show_scalar_bar=False,
            reset_camera=False,
            render=False,
        )


def add_floor(plotter: Any, scene: Scene, line_width: float = 1.0) -> None:
    """The road with its grid, whose lines are ``line_width`` px."""
    import pyvista

    plotter.add_mesh(
        poly_data(floor_surface(scene.floor, palette.FLOOR)), color=palette.FLOOR, lighting=False, name="floor",
        reset_camera=False, render=False,
    )  # fmt: skip
    ends = np.concatenate([np.stack(line) for line in scene.floor.lines()]) + np.array([0.0, 0.0, 0.5])
    segments = np.column_stack([np.full(len(ends) // 2, 2), np.arange(len(ends)).reshape(-1, 2)])
    grid = pyvista.PolyData(ends, lines=segments.ravel())
    plotter.add_mesh(
        grid, color=palette.GRID, line_width=line_width, lighting=False, name="grid", reset_camera=False, render=False
    )


def add_lights(plotter: Any) -> None:
    """A soft key light from above the viewer's left, and a weak one from the right."""
    import pyvista

    plotter.remove_all_lights()
    for place, strength in (((-0.5, 0.9, 1.2), 0.78), ((0.9, 0.1, 0.8), 0.30)):
        light = pyvista.Light(light_type="camera light", intensity=strength)
        light.position = place
        light.focal_point = (0.0, 0.0, 0.0)
        plotter.add_light(light)


def pixels(window: Any) -> Any:
    """Render a VTK window and read its pixels (H, W, 3), the upper row first."""
    from pyvista import wrap
    from vtkmodules.vtkRenderingCore import vtkWindowToImageFilter

    window.Render()
    reader = vtkWindowToImageFilter()
    reader.SetInput(window)
    reader.SetInputBufferTypeToRGB()
    reader.ReadFrontBufferOff()
    reader.ShouldRerenderOff()
    reader.Update()
    image = wrap(reader.GetOutput())
    width, height, _ = image.dimensions
    return np.asarray(image.active_scalars).reshape(height, width, 3)[::-1]


class Painter:
    """Paints views of scenes, like ``render_vector.paint``, with one off-screen plotter that is kept from view to view."""

    def __init__(self, oversampling: int = FINE) -> None:
        self.oversampling = oversampling
        self._plotter: Any = None
        self._shown: Scene | None = None

    def __call__(self, axes: Axes, scene: Scene, view: View) -> None:
        """Paint the scene's parts into axes whose coordinates are the view's picture coordinates, mm."""
        picture = self.picture(scene, view, axes)
        (left, right), (low, high) = axes.get_xlim(), axes.get_ylim()
        axes.imshow(picture, extent=(left, right, low, high), interpolation="antialiased", zorder=0.0, aspect="auto")
        paint_wheel_edges(axes, scene.parts, view, 0.5)
        if abs(view.toward[2]) < EDGE_ON:
            paint_floor(axes, scene.floor, view)

    def picture(self, scene: Scene, view: View, axes: Axes) -> Any:
        """The view as pixels (H, W, 3), finer than the axes by the oversampling."""
        import pyvista

        figure = axes.get_figure(root=True)
        assert figure is not None
        box = axes.get_position()
        width, height = (
            self.oversampling * round(size) for size in (figure.bbox.width * box.width, figure.bbox.height * box.height)
        )
        if self._plotter is None:
            self._plotter = pyvista.Plotter(off_screen=True, window_size=[width, height], lighting="none")
            self._plotter.set_background(PAPER)
            add_lights(self._plotter)
            self._plotter.render_window.SetMultiSamples(0)
            self._plotter.render_window.SetAlphaBitPlanes(1)
            self._plotter.enable_depth_peeling(6)
            self._plotter.enable_parallel_projection()
        plotter = self._plotter
        plotter.window_size = [width, height]
        paper = abs(view.toward[2]) > SQUARE_ON
        if scene is not self._shown:
            add_floor(plotter, scene, 0.75 * self.oversampling)
            add_scene(plotter, scene, axes_too=False)
            self._shown = scene
        plotter.actors["floor"].SetVisibility(not paper)
        (left, right), (low, high) = axes.get_xlim(), axes.get_ylim()
        focus = 0.5 * (left + right) * view.right + 0.5 * (low + high) * view.up
        bounds = scene.bounds
        middle = float(view.project(bounds.centre)[2])
        reach = 2.0 * float(np.linalg.norm(bounds.high - bounds.low))
        focus = focus + middle * view.toward
        plotter.camera.position = tuple(focus + reach * view.toward)
        plotter.camera.focal_point = tuple(focus)
        plotter.camera.up = tuple(view.up)
        plotter.camera.parallel_scale = 0.5 * (high - low)
        plotter.camera.clipping_range = (0.05 * reach, 3.0 * reach)
        return pixels(plotter.render_window)

    def close(self) -> None:
        """Free the plotter."""
        if self._plotter is not None:
            self._plotter.close()
            self._plotter = None
