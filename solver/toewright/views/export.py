"""A scene as a file of solids with named parts, through trimesh: .glb and .stl."""

from __future__ import annotations

from pathlib import Path as FilePath
from typing import Any

import numpy as np

from toewright.views.scene import palette
from toewright.views.scene.meshes import Triangles, floor_surface, part_surface
from toewright.views.scene.parts import Scene

GLTF_AXES = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0], [1.0, 0.0, 0.0]])
"""From ISO 8855 (x forward, y left, z up) to glTF 2.0, sec. 3.4: +Y up, +Z forward, -X right; right-handed both."""

METRE = 1e-3
"""glTF's unit over ours."""


def named_surfaces(scene: Scene, *, curves: bool) -> dict[str, Triangles]:
    """Surfaces of all parts and ghosts by name; ``curves``: the paths and the road as well."""
    from toewright.views.scene.parts import Path

    found = {
        part.name: part_surface(part, scene.scale)
        for part in (*scene.parts, *scene.ghosts)
        if curves or not isinstance(part, Path)
    }
    if curves:
        found["ground"] = floor_surface(scene.floor, palette.FLOOR)
    return found


def mesh_of(surface: Triangles, colours: bool) -> Any:
    """A trimesh of a surface as it is, no points merged."""
    import trimesh

    return trimesh.Trimesh(
        vertices=surface.points,
        faces=surface.triangles,
        vertex_colors=surface.colours if colours else None,
        process=False,
    )


def write_glb(scene: Scene, place: FilePath) -> None:
    """Binary glTF 2.0: metres, y up, front toward +z; each part a node of its name with its colour."""
    import trimesh

    whole: Any = trimesh.Scene()
    visual: Any = trimesh.visual
    for name, surface in named_surfaces(scene, curves=True).items():
        mesh = mesh_of(surface, colours=False)
        mesh.vertices = METRE * (surface.points @ GLTF_AXES.T)
        alike = bool(np.all(surface.colours == surface.colours[0]))
        if alike:
            mesh.visual = visual.TextureVisuals(material=_material(surface.colours[0]))
        else:
            mesh.visual = visual.ColorVisuals(mesh, vertex_colors=surface.colours)
        whole.add_geometry(mesh, node_name=name, geom_name=name)
    place.write_bytes(bytes(whole.export(file_type="glb")))


def _material(colour: Any) -> Any:
    from trimesh.visual import material

    made: Any = material.PBRMaterial
    clear = int(colour[3]) < 255
    linear = np.array([*np.round(255.0 * (np.asarray(colour[:3]) / 255.0) ** 2.2), colour[3]], dtype=np.uint8)
    return made(
        baseColorFactor=linear, metallicFactor=0.0, roughnessFactor=0.6, alphaMode="BLEND" if clear else "OPAQUE", doubleSided=True
    )  # fmt: skip


def write_stl(scene: Scene, place: FilePath) -> None:
    """ASCII STL, the kind that can hold names: one solid for each part, mm, ISO 8855 axes. Paths and road are left out."""
    from trimesh.exchange.stl import export_stl_ascii

    with place.open("w", encoding="ascii", newline="\n") as stream:
        for name, surface in named_surfaces(scene, curves=False).items():
            words = name.replace(" ", "_")
            body = export_stl_ascii(mesh_of(surface, colours=False)).strip().splitlines()
            stream.write("\n".join([f"solid {words}", *body[1:-1], f"endsolid {words}"]) + "\n")


WRITERS = {".glb": write_glb, ".stl": write_stl}
"""How to write each kind of solid file."""
