"""The scene: its parts end where the solved joints are, at any pose, for every sample."""

from __future__ import annotations

from itertools import combinations
from pathlib import Path

import numpy as np
import pytest

import toewright as tw
from toewright.kinematics.joints import UPRIGHT_POINTS
from toewright.kinematics.sheet import LINKS
from toewright.model.axle import POINT_NAMES
from toewright.views.scene import palette
from toewright.views.scene.build import Pose, build_scene
from toewright.views.scene.meshes import part_surface
from toewright.views.scene.parts import Ball, Revolution, Scene, Tube
from toewright.views.scene.parts import Path as Curve
from toewright.views.scene.wheel import rim_profile, tyre_profile, wheel_size

HARDPOINTS = Path(__file__).parents[2] / "hardpoints"
SAMPLES = sorted(path.stem for path in HARDPOINTS.glob("*.toml"))
EXACT = 1e-9
"""mm; the scene copies solved positions, so that only rounding may separate them."""


def axle_of(sample: str) -> tw.Axle:
    return tw.load(HARDPOINTS / f"{sample}.toml")


def pose_for(axle: tw.Axle) -> Pose:
    return Pose(0.0 if axle.rack is None else 0.6 * axle.rack.stroke, -14.0)


def tube(scene: Scene, name: str) -> Tube:
    part = scene.part(name)
    assert isinstance(part, Tube)
    return part


def ball(scene: Scene, name: str) -> Ball:
    part = scene.part(name)
    assert isinstance(part, Ball)
    return part


@pytest.mark.parametrize("sample", SAMPLES)
def test_links_end_in_the_solved_joints(sample: str) -> None:
    axle = axle_of(sample)
    pose = pose_for(axle)
    scene = build_scene(axle, [pose])
    maps = tw.sweep(axle, [pose.rack], [pose.travel])
    for s, side in enumerate(maps.sides):
        joints = {name: values[0, 0] for name, values in maps.joints[s].items()}
        for words, start, end in LINKS[axle.corner(side).kind]:
            if not words.startswith("ball joint"):
                link = tube(scene, f"{side} {words.replace(',', '')}")
                np.testing.assert_allclose(link.start, joints[start], rtol=0.0, atol=EXACT)
                np.testing.assert_allclose(link.end, joints[end], rtol=0.0, atol=EXACT)
                points = part_surface(link, None).points
                for joint in (joints[start], joints[end]):
                    assert np.min(np.linalg.norm(points - joint, axis=1)) < EXACT
        for name in POINT_NAMES[axle.corner(side).kind]:
            there = ball(scene, f"{side} {name.replace('_', ' ')}").centre
            np.testing.assert_allclose(there, joints[name], rtol=0.0, atol=EXACT)
        for words, vector in (("contact point", "contact_point"), ("kingpin axis at ground", "kingpin_ground_point")):
            there = ball(scene, f"{side} {words}").centre
            np.testing.assert_allclose(there, maps[vector][s, 0, 0], rtol=0.0, atol=EXACT)


@pytest.mark.parametrize("sample", SAMPLES)
def test_the_kingpin_axis_runs_through_its_joints_down_to_the_ground(sample: str) -> None:
    axle = axle_of(sample)
    pose = pose_for(axle)
    scene = build_scene(axle, [pose])
    maps = tw.sweep(axle, [pose.rack], [pose.travel])
    for s, side in enumerate(maps.sides):
        axis = tube(scene, f"{side} kingpin axis")
        np.testing.assert_allclose(axis.start, maps["kingpin_ground_point"][s, 0, 0], rtol=0.0, atol=EXACT)
        top = "upper_ball_joint" if axle.corner(side).kind == "double-wishbone" else "strut_top_mount"
        along = (axis.end - axis.start) / np.linalg.norm(axis.end - axis.start)
        for name in ("lower_ball_joint", top):
            joint = maps.joints[s][name][0, 0]
            assert np.linalg.norm(np.cross(joint - axis.start, along)) < 1e-8
            assert 0.0 < (joint - axis.start) @ along < np.linalg.norm(axis.end - axis.start)


def test_the_rack_joins_the_inner_joints_and_its_housing_stays() -> None:
    axle = axle_of("marten_front")
    assert axle.rack is not None
    here, there = build_scene(axle, [Pose()]), build_scene(axle, [Pose(rack=25.0)])
    for side in ("left", "right"):
        end = tube(there, f"{side} rack end").end
        np.testing.assert_allclose(end, ball(there, f"{side} tie rod inner").centre, rtol=0.0, atol=EXACT)
        np.testing.assert_allclose(
            end - tube(here, f"{side} rack end").end, 25.0 * axle.rack.axis, rtol=0.0, atol=EXACT
        )
    for scene in (here, there):
        np.testing.assert_array_equal(tube(scene, "rack housing").start, tube(here, "rack housing").start)


def test_an_axle_without_a_rack_has_none() -> None:
    names = [part.name for part in build_scene(axle_of("marten_rear")).parts]
    assert not [name for name in names if "rack" in name.split()]


def test_the_strut_slides_and_its_body_keeps_its_length() -> None:
    axle = axle_of("linnet_front")
    scenes = [build_scene(axle, [Pose(travel=travel)]) for travel in (-30.0, 30.0)]
    bodies = [tube(scene, "left damper body") for scene in scenes]
    rods = [tube(scene, "left damper rod") for scene in scenes]
    lengths = [float(np.linalg.norm(part.end - part.start)) for part in (*bodies, *rods)]
    assert lengths[0] == pytest.approx(lengths[1], abs=1e-9)
    assert lengths[2] - lengths[3] > 40.0
    for scene, body, rod in zip(scenes, bodies, rods, strict=True):
        np.testing.assert_array_equal(body.end, rod.start)
        np.testing.assert_allclose(rod.end, ball(scene, "left strut top mount").centre, rtol=0.0, atol=EXACT)


@pytest.mark.parametrize("sample", SAMPLES)
def test_wheels_have_the_sizes_of_the_file_and_stand_on_the_road(sample: str) -> None:
    axle = axle_of(sample)
    scene = build_scene(axle)
    tyre = scene.part("left tyre")
    assert isinstance(tyre, Revolution)
    assert np.max(tyre.profile[:, 1]) == pytest.approx(axle.wheel.loaded_radius)
    assert np.ptp(tyre.profile[:, 0]) == pytest.approx(axle.wheel.tyre_width)
    rim = scene.part("left rim")
    assert isinstance(rim, Revolution)
    assert 2.0 * np.max(rim.profile[:, 1]) == pytest.approx(axle.wheel.rim_diameter)
    assert np.ptp(rim.profile[:, 0]) == pytest.approx(axle.wheel.rim_width)
    assert scene.floor.height == pytest.approx(ball(scene, "left contact point").centre[2], abs=1e-6)
    lowest = part_surface(tyre, None).points[:, 2].min()
    assert lowest == pytest.approx(scene.floor.height, abs=0.06 * axle.wheel.loaded_radius)


def test_sizes_that_the_file_leaves_out_are_guessed_and_said() -> None:
    text = (HARDPOINTS / "marten_front.toml").read_text(encoding="utf-8")
    bare = "\n".join(
        line
        for line in text.splitlines()
        if not line.startswith(("tyre_width", "rim_diameter", "rim_width", "other_axle"))
    )
    axle = tw.loads(bare)
    size = wheel_size(axle.wheel)
    assert size.guessed == ("tyre width", "rim diameter", "rim width")
    assert size.rim_diameter < 2.0 * size.radius
    assert np.all(np.isfinite(tyre_profile(size)))
    assert np.all(rim_profile(size)[:, 1] > 0.0)
    notes = build_scene(axle).caption.notes
    assert any("no tyre width and no rim diameter and no rim width" in note for note in notes)
    assert not any("file gives no" in note for note in build_scene(axle_of("marten_front")).caption.notes)


def test_a_symmetric_axle_straight_ahead_is_its_own_mirror_image() -> None:
    scene = build_scene(axle_of("linnet_front"), [Pose(travel=12.0)])
    mirror = np.array([1.0, -1.0, 1.0])
    for part in scene.parts:
        if isinstance(part, Tube) and part.name.startswith("left "):
            other = tube(scene, part.name.replace("left", "right", 1))
            np.testing.assert_allclose(other.start, part.start * mirror, rtol=0.0, atol=1e-7)
            np.testing.assert_allclose(other.end, part.end * mirror, rtol=0.0, atol=1e-7)


def test_the_curves_pass_through_the_solved_joints_and_carry_bump_steer() -> None:
    axle = axle_of("marten_front")
    travels = np.linspace(-20.0, 20.0, 9)
    scene = build_scene(axle, [Pose(rack=10.0)], locus=list(travels))
    maps = tw.sweep(axle, [10.0], travels)
    largest = 0.0
    for s, side in enumerate(maps.sides):
        for name in UPRIGHT_POINTS[axle.corner(side).kind]:
            curve = scene.part(f"{side} path of {name.replace('_', ' ')}")
            assert isinstance(curve, Curve)
            np.testing.assert_allclose(curve.points, maps.joints[s][name][0], rtol=0.0, atol=EXACT)
            np.testing.assert_array_equal(curve.values, maps["bump_steer"][s, 0])
        curve = scene.part(f"{side} path of contact point")
        assert isinstance(curve, Curve)
        np.testing.assert_allclose(curve.points, maps["contact_point"][s, 0], rtol=0.0, atol=EXACT)
        largest = max(largest, float(np.abs(maps["bump_steer"][s, 0]).max()))
    assert scene.scale is not None
    assert scene.scale.limit == largest
    assert scene.scale.label == "bump steer (deg, toe-in +)"


def test_ghosts_are_further_poses_and_pale() -> None:
    axle = axle_of("marten_front")
    scene = build_scene(axle, [Pose(), Pose(20.0, -10.0), Pose(-20.0, 10.0)])
    alone = build_scene(axle, [Pose(20.0, -10.0)])
    assert {part.name.split()[1] for part in scene.ghosts} == {"1", "2"}
    ghost = next(part for part in scene.ghosts if part.name == "ghost 1 left tie rod")
    assert isinstance(ghost, Tube)
    np.testing.assert_array_equal(ghost.end, tube(alone, "left tie rod").end)
    assert all(part.opacity < 0.5 for part in scene.ghosts if not isinstance(part, Curve))
    assert (
        "Pale: rack travel +20 mm, wheel travel -10 mm (rebound); rack travel -20 mm, wheel travel +10 mm (bump)."
        in (scene.caption.notes)
    )


def test_the_caption_has_units_and_sign_words_and_the_solved_figures() -> None:
    axle = axle_of("marten_front")
    caption = build_scene(axle, [Pose(20.0, -10.0)]).caption
    maps = tw.sweep(axle, [20.0], [-10.0])
    rows = dict(caption.rows)
    assert caption.pose == "rack travel +20 mm, wheel travel -10 mm (rebound)"
    assert rows["toe-in (deg, toe-in +)"] == tuple(f"{value:+.2f}" for value in maps["toe_in"][:, 0, 0])
    assert {"steer angle (deg, to the left +)", "camber (deg, top outboard +)", "caster (deg, top rearward +)",
            "kingpin inclination (deg, top inboard +)", "scrub radius (mm, steering axis inboard +)"} <= rows.keys()  # fmt: skip


def test_one_side_alone() -> None:
    scene = build_scene(axle_of("ibex_front"), sides=["right"])
    assert not [part for part in scene.parts if part.name.startswith("left ") and "rack" not in part.name]
    assert {label.side for label in scene.labels} == {"right"}
    assert scene.caption.sides == ("right",)


def test_a_pose_out_of_reach_is_refused_with_its_reason() -> None:
    with pytest.raises(tw.InputError, match=r"marten_front.toml: rack travel \+200 mm.* cannot be drawn: .*lock"):
        build_scene(axle_of("marten_front"), [Pose(rack=200.0)])


def test_a_locus_that_reaches_nothing_is_refused() -> None:
    with pytest.raises(tw.InputError, match="the locus needs two or more wheel travels that can be reached"):
        build_scene(axle_of("marten_front"), locus=[700.0, 800.0])


MACHADO = {
    "usual": np.eye(3),
    "no red": np.array(
        [[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]]
    ),
    "no green": np.array(
        [[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.011820, 0.042940, 0.968881]]
    ),
    "no blue": np.array(
        [[1.255528, -0.076749, -0.178779], [-0.078411, 0.930809, 0.147602], [0.004733, 0.691367, 0.303900]]
    ),
}
"""What people with each kind of colour vision see, on linear RGB.

G. M. Machado, M. M. Oliveira, L. A. F. Fernandes, A
physiologically-based model for simulation of color vision deficiency, IEEE TVCG 15 (2009), severity 1.0; numbers from memory."""


def lab(colour: str, matrix: np.ndarray) -> np.ndarray:
    """CIE 1976 L*a*b* (3,) of an sRGB colour as it is seen."""
    from matplotlib.colors import to_rgb

    code = np.array(to_rgb(colour))
    linear = np.clip(matrix @ np.where(code <= 0.04045, code / 12.92, ((code + 0.055) / 1.055) ** 2.4), 0.0, 1.0)
    white = np.array([0.9505, 1.0, 1.089])
    xyz = np.array([[0.4124, 0.3576, 0.1805], [0.2126, 0.7152, 0.0722], [0.0193, 0.1192, 0.9505]]) @ linear / white
    f = np.where(xyz > 0.008856, np.cbrt(xyz), 7.787 * xyz + 16.0 / 116.0)
    return np.array([116.0 * f[1] - 16.0, 500.0 * (f[0] - f[1]), 200.0 * (f[1] - f[2])])


@pytest.mark.parametrize("vision", MACHADO)
def test_colours_are_told_apart_with_any_colour_vision(vision: str) -> None:
    """A difference of 2.3 can just be seen; bars side by side want several times that."""
    colours = (palette.UPPER_ARM, palette.LOWER_ARM, palette.TIE_ROD, palette.RACK, palette.HOUSING, palette.UPRIGHT)
    for first, second in combinations(colours, 2):
        assert np.linalg.norm(lab(first, MACHADO[vision]) - lab(second, MACHADO[vision])) > 15.0, (first, second)
