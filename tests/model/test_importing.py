"""Points with any axes, unit and side come back exactly, or are asked about; never silently wrong."""

from __future__ import annotations

import re
from itertools import permutations, product

import numpy as np
import pytest
from corners import PLAIN, SAMPLES
from files_for_tests import MM, RADIUS
from hypothesis import given, settings
from hypothesis import strategies as st

from toewright.model import InputError, load, loads
from toewright.model.axis_maps import ALL_AXIS_MAPS, AxisMap, parse_axes
from toewright.model.axle import Axle
from toewright.model.importing import UNDER_WHEEL, Reading, conclude
from toewright.model.pointtable import PointTable
from toewright.model.starters import STARTERS, starter_text

VARIANTS = [
    (order, signs, unit, side)
    for order in permutations(range(3))
    for signs in product((1.0, -1.0), repeat=3)
    for unit in MM
    for side in ("left", "right")
]
"""All 48 axis and sign variants x 3 units x both sides: column i of the table is signs[i] times the car's coordinate order[i]."""

AXLES: dict[str, Axle] = {path.stem: load(path) for path in SAMPLES if path.stem in ("marten_front", "ibex_front")}
AXLES |= {kind: loads(starter_text(kind)) for kind in STARTERS}
DIFFERENT = ("marten_front", "ibex_front", "strut")
"""A small car, an axle whose sides differ, a strut."""

Variant = tuple[tuple[int, ...], tuple[float, ...], str, str]


def table_of(
    axle: Axle, variant: Variant, words: str = "", origin: tuple[float, float, float] = (0.0, 0.0, 0.0)
) -> PointTable:
    """The corner as a table in the variant's axes and unit; the table's origin is at ``origin`` (mm) of the car."""
    order, signs, unit, side = variant
    points = axle.corner(side).points
    values = (np.array(list(points.values())) - origin)[:, list(order)] * signs / MM[unit]
    return PointTable(tuple(words + name for name in points), values, "comma", "point", (), None)


def right_axes(variant: Variant) -> AxisMap:
    """The map that undoes the variant: car's coordinate order[i] is signs[i] times column i."""
    order, signs, _, _ = variant
    parts: list[tuple[int, str]] = [(1, "x")] * 3
    for column, (coordinate, sign) in enumerate(zip(order, signs, strict=True)):
        parts[coordinate] = (int(sign), "xyz"[column])
    return AxisMap(tuple(parts))


def assert_exact(reading: Reading, axle: Axle, side: str) -> None:
    """1e-9 mm: the coordinates go through one division and one multiplication by the unit."""
    assert reading.corner.side == side
    for name, point in axle.corner(side).points.items():
        np.testing.assert_allclose(reading.corner.points[name], point, rtol=0.0, atol=1e-9)


def attempt(axle: Axle, variant: Variant, words: str = "", **options: object) -> tuple[Reading, ...] | str:
    """The readings, or the sentence of the refusal."""
    try:
        return conclude(table_of(axle, variant, words), "t.csv", loaded_radius=axle.wheel.loaded_radius, **options)  # type: ignore[arg-type]
    except InputError as error:
        return str(error)


def test_there_are_288_variants() -> None:
    assert len(set(VARIANTS)) == 288
    assert len({right_axes(variant).text for variant in VARIANTS}) == len(ALL_AXIS_MAPS) == 48
    assert sum(axes.mirrors for axes in ALL_AXIS_MAPS) == 24


@pytest.mark.parametrize("axle", [AXLES[name] for name in DIFFERENT], ids=DIFFERENT)
def test_with_the_right_options_every_variant_is_recovered(axle: Axle) -> None:
    for variant in VARIANTS:
        found = attempt(axle, variant, axes=right_axes(variant), unit=variant[2], side=variant[3])
        assert isinstance(found, tuple), (variant, found)
        assert_exact(found[0], axle, variant[3])
        assert all("type" in word for word in found[0].concluded)


@pytest.mark.parametrize("axle", [AXLES[name] for name in DIFFERENT], ids=DIFFERENT)
@pytest.mark.parametrize("given_axes", [False, True])
@pytest.mark.parametrize("given_unit", [False, True])
@pytest.mark.parametrize("given_side", ["", "option", "names"])
def test_with_some_options_none_is_silently_wrong(
    axle: Axle, given_axes: bool, given_unit: bool, given_side: str
) -> None:
    recovered = 0
    for variant in VARIANTS:
        options: dict[str, object] = {}
        if given_axes:
            options["axes"] = right_axes(variant)
        if given_unit:
            options["unit"] = variant[2]
        if given_side == "option":
            options["side"] = variant[3]
        found = attempt(axle, variant, f"{variant[3]} " if given_side == "names" else "", **options)
        if isinstance(found, str):
            assert "--axes=" in found
            # the reading that is true stands among those offered
            assert f"--axes={right_axes(variant).text}" in found, (variant, found)
            continue
        recovered += 1
        assert_exact(found[0], axle, variant[3])
        assert found[0].axes == right_axes(variant)
        assert found[0].unit == variant[2]
    # without axes, a left-handed table is asked about, and without a side every table
    expected = 288 if given_axes else 144 if given_side else 0
    assert recovered == expected


@pytest.mark.parametrize("axle", [AXLES[name] for name in DIFFERENT], ids=DIFFERENT)
def test_what_is_offered_can_be_pasted(axle: Axle) -> None:
    for variant in VARIANTS[::7]:
        sentence = attempt(axle, variant)
        assert isinstance(sentence, str)
        offered = re.findall(r"--axes=(\S+) --unit (\S+) --side (left|right)", sentence)
        assert len(offered) == 2
        exact = 0
        for axes, unit, side in offered:
            found = attempt(axle, variant, axes=parse_axes(axes), unit=unit, side=side)
            assert isinstance(found, tuple)
            exact += side == variant[3]
            if side == variant[3]:
                assert_exact(found[0], axle, side)
        assert exact == 1


def test_a_wrong_option_is_refused_for_right_handed_tables() -> None:
    axle = AXLES["marten_front"]
    for variant in VARIANTS:
        other_side = "right" if variant[3] == "left" else "left"
        right = right_axes(variant)
        for unit in MM:
            if unit != variant[2]:
                assert isinstance(attempt(axle, variant, axes=right, unit=unit, side=variant[3]), str)
                assert isinstance(attempt(axle, variant, unit=unit, side=variant[3]), str)
        assert isinstance(attempt(axle, variant, axes=right, unit=variant[2], side=other_side), str)
        if not right.mirrors:
            assert isinstance(attempt(axle, variant, unit=variant[2], side=other_side), str)


def test_every_wrong_axis_map_is_refused() -> None:
    axle = AXLES["ibex_front"]
    for variant in VARIANTS[::13]:
        accepted = [
            axes
            for axes in ALL_AXIS_MAPS
            if isinstance(attempt(axle, variant, axes=axes, unit=variant[2], side=variant[3]), tuple)
        ]
        assert accepted == [right_axes(variant)]


@pytest.mark.parametrize("unit", MM)
def test_both_sides_in_one_table(unit: str) -> None:
    axle = AXLES["ibex_front"]
    for variant in VARIANTS:
        if variant[2] != unit or variant[3] != "left":
            continue
        left, right = table_of(axle, variant, "left "), table_of(axle, (*variant[:3], "right"), "right ")
        table = PointTable(left.names + right.names, np.vstack([left.values, right.values]), "comma", "point", (), None)
        if right_axes(variant).mirrors:
            with pytest.raises(
                InputError,
                match=f"--axes={re.escape(right_axes(variant).text)} .* exchange left and right in the names",
            ):
                conclude(table, "t.csv", loaded_radius=395.0)
            readings = conclude(table, "t.csv", loaded_radius=395.0, axes=right_axes(variant))
        else:
            readings = conclude(table, "t.csv", loaded_radius=395.0)
        for reading, side in zip(readings, ("left", "right"), strict=True):
            assert_exact(reading, axle, side)


LETTERS = [("L_", "R_"), ("FL ", "FR "), ("rl-", "rr-"), ("LF ", "RF ")]


@pytest.mark.parametrize("words", LETTERS)
@pytest.mark.parametrize("given", [{}, {"side": "left"}, {"side": "right"}, {"axes": "iso"}])
def test_sides_by_letters_are_recovered_or_asked_about(words: tuple[str, str], given: dict[str, str]) -> None:
    axle = AXLES["ibex_front"]  # its sides differ
    for variant in VARIANTS[::7]:
        tables = [
            table_of(axle, (*variant[:3], side), word) for side, word in zip(("left", "right"), words, strict=True)
        ]
        names, values = tables[0].names + tables[1].names, np.vstack([tables[0].values, tables[1].values])
        options: dict[str, object] = {**given}
        if "axes" in given:
            options["axes"] = right_axes(variant)
        table = PointTable(names, values, "comma", "point", (), None)
        if right_axes(variant).mirrors and "axes" not in given:
            with pytest.raises(InputError, match="mirror image"):
                conclude(table, "t.csv", loaded_radius=395.0, **options)  # type: ignore[arg-type]
            continue
        readings = conclude(table, "t.csv", loaded_radius=395.0, **options)  # type: ignore[arg-type]
        assert [r.corner.side for r in readings] == ([given["side"]] if "side" in given else ["left", "right"])
        for reading in readings:
            assert_exact(reading, axle, reading.corner.side)
            assert reading.axle == (None if words == LETTERS[0] else "rear" if words[0] == "rl-" else "front")


def test_exchanged_sides_in_the_names_are_asked_about() -> None:
    axle = AXLES["ibex_front"]
    variant = ((0, 1, 2), (1.0, 1.0, 1.0), "mm", "left")
    left, right = table_of(axle, variant, "right "), table_of(axle, (*variant[:3], "right"), "left ")
    table = PointTable(left.names + right.names, np.vstack([left.values, right.values]), "comma", "point", (), None)
    with pytest.raises(InputError, match="exchange left and right in the names"):
        conclude(table, "t.csv", loaded_radius=395.0)


@pytest.mark.parametrize("kind", PLAIN)
@settings(max_examples=60)
@given(variant=st.sampled_from(VARIANTS), shift=st.tuples(*[st.floats(-900.0, 900.0)] * 3))
def test_origin(kind: str, variant: Variant, shift: tuple[float, float, float]) -> None:
    axle = AXLES[kind]
    order, signs, unit, side = variant
    radius = axle.wheel.loaded_radius
    table = table_of(axle, variant, origin=shift)
    # where the car's origin is, in the table's own columns and unit
    place = -np.array(shift)[list(order)] * signs / MM[unit]
    (reading,) = conclude(
        table,
        "t.csv",
        loaded_radius=radius,
        axes=right_axes(variant),
        unit=unit,
        side=side,
        origin=place,  # type: ignore[arg-type]
    )
    assert_exact(reading, axle, side)
    try:
        (found,) = conclude(table, "t.csv", loaded_radius=radius, side=side, origin=place)  # type: ignore[arg-type]
        assert_exact(found, axle, side)
    except InputError:
        assert right_axes(variant).mirrors
    try:
        (blind,) = conclude(table, "t.csv", loaded_radius=radius, side=side)  # type: ignore[arg-type]
    except InputError:
        return
    # without an origin the table's own is taken: only where it leaves the wheel near the road
    assert abs(shift[2]) <= 0.2 * radius + 1e-9
    np.testing.assert_allclose(
        blind.corner.points["wheel_centre"], axle.corner(side).points["wheel_centre"] - shift, atol=1e-9
    )


def test_origin_under_the_wheel() -> None:
    axle = AXLES["marten_front"]
    for variant in VARIANTS[::5]:
        table = table_of(axle, variant, origin=(-700.0, 0.0, 120.0))
        options = {"axes": right_axes(variant), "side": variant[3], "origin": UNDER_WHEEL}
        (reading,) = conclude(table, "t.csv", loaded_radius=228.0, unit=variant[2], **options)  # type: ignore[arg-type]
        wheel = axle.corner(variant[3]).points["wheel_centre"]
        for name, point in axle.corner(variant[3]).points.items():
            expected = point - [wheel[0], 0.0, wheel[2] - 228.0]
            np.testing.assert_allclose(reading.corner.points[name], expected, rtol=0.0, atol=1e-9)
        with pytest.raises(InputError, match="--origin under-wheel leaves the unit open; give --unit mm, m or in"):
            conclude(table, "t.csv", loaded_radius=228.0, **options)  # type: ignore[arg-type]


def test_a_unit_of_none_of_the_three_is_refused_without_a_header() -> None:
    axle = AXLES["marten_front"]
    table = table_of(axle, ((0, 1, 2), (1.0, 1.0, 1.0), "mm", "left"))
    for factor in (0.1, 0.01, 1 / 304.8):  # cm, dm, ft
        odd = PointTable(table.names, table.values * factor, "comma", "point", (), None)
        with pytest.raises(InputError, match="--unit"):
            conclude(odd, "t.csv", loaded_radius=228.0, side="left")
        with pytest.raises(InputError, match="--unit"):
            conclude(odd, "t.csv", loaded_radius=228.0, side="left", origin=np.zeros(3))


def test_header_unit_and_options() -> None:
    axle = AXLES["marten_front"]
    plain = table_of(axle, ((0, 1, 2), (1.0, 1.0, 1.0), "in", "left"))

    def with_unit(unit: str | None, words: tuple[str, ...] = ()) -> PointTable:
        return PointTable(plain.names, plain.values, "comma", "point", (), unit, words)

    (reading,) = conclude(with_unit("in"), "t.csv", loaded_radius=228.0, side="left")
    assert "unit in (from the header)" in reading.concluded
    for table, unit, sentence in (
        (with_unit("in"), "mm", "--unit mm: but the header says in; correct one"),
        (with_unit("mm"), None, "no reading"),
        (with_unit(None, ("cm",)), "mm", "header says cm; only mm, m and in"),
        (with_unit(None, ("car",)), None, "says 'car' where a unit would stand; give the true one: --unit"),
    ):
        with pytest.raises(InputError, match=sentence):
            conclude(table, "t.csv", loaded_radius=228.0, side="left", unit=unit)
    assert_exact(
        conclude(with_unit(None, ("car",)), "t.csv", loaded_radius=228.0, side="left", unit="in")[0], axle, "left"
    )


def test_road_is_asked_about() -> None:
    axle = AXLES["marten_front"]
    table = table_of(axle, ((0, 1, 2), (1.0, 1.0, 1.0), "mm", "left"), origin=(0.0, 0.0, 228.0))
    options = {"axes": parse_axes("x,y,z"), "side": "left"}
    sentence = r"wheel_centre would be 0\.0 mm above z = 0 .* give --origin X,Y,Z.* or --origin under-wheel"
    with pytest.raises(InputError, match=sentence + r" \(or --unit, if it is not mm\)"):
        conclude(table, "t.csv", loaded_radius=228.0, **options)  # type: ignore[arg-type]
    with pytest.raises(InputError, match=sentence + "$"):
        conclude(table, "t.csv", loaded_radius=228.0, unit="mm", **options)  # type: ignore[arg-type]


def test_unclear_axes_are_asked_about_and_taken_when_given() -> None:
    points = {name: np.array(point) for name, point in PLAIN["double-wishbone"].items()}
    points["lower_ball_joint"] = np.array([300.0, 561.0, 116.0])  # an arm swept far forward
    values = np.array(list(points.values()))
    table = PointTable(tuple(points), values, "comma", "point", (), "mm")
    with pytest.raises(
        InputError, match=r"no reading .* clearly where their names say .* give --axes, --unit and --side"
    ):
        conclude(table, "t.csv", loaded_radius=228.0, side="left")
    (reading,) = conclude(table, "t.csv", loaded_radius=228.0, side="left", axes=parse_axes("x,y,z"))
    np.testing.assert_array_equal(reading.corner.points["lower_ball_joint"], points["lower_ball_joint"])


def test_exchanged_points_are_refused() -> None:
    for one, other in (
        ("lower_pivot_front", "lower_pivot_rear"),
        ("upper_ball_joint", "lower_ball_joint"),
        ("tie_rod_inner", "tie_rod_outer"),
    ):
        points = dict(PLAIN["double-wishbone"])
        points[one], points[other] = points[other], points[one]
        table = PointTable(tuple(points), np.array(list(points.values())), "comma", "point", (), "mm")
        for axes, sentence in (
            (None, "exchanged|where their names say"),
            (parse_axes("x,y,z"), "where their names say"),
        ):
            with pytest.raises(InputError, match=sentence):
                conclude(table, "t.csv", loaded_radius=228.0, side="left", axes=axes)


def test_sources_unused_and_words() -> None:
    axle = AXLES["strut"]
    table = table_of(axle, ((0, 1, 2), (1.0, -1.0, -1.0), "mm", "right"))
    named = tuple("hub" if name == "wheel_centre" else name for name in table.names)
    table = PointTable((*named, "spring seat"), np.vstack([table.values, [1.0, 2.0, 3.0]]), "comma", "point", (), None)
    (reading,) = conclude(table, "t.csv", loaded_radius=RADIUS["strut"], side="right", names={"hub": "wheel_centre"})
    assert_exact(reading, axle, "right")
    assert reading.sources["wheel_centre"][0] == "hub"
    assert reading.unused == ("spring seat",)
    assert [word.split()[0] for word in reading.concluded] == ["axes", "unit", "type"]


@pytest.mark.parametrize("text", ["", "x,y", "x,y,y", "x,y,w", "x y z", "x,-,z", "--x,y,z", "x,y,z,x", "sae"])
def test_bad_axis_maps(text: str) -> None:
    with pytest.raises(InputError, match=r"--axes .*: is no axis map; write which columns .*--axes=-y,x,z"):
        parse_axes(text)


def test_axis_maps() -> None:
    assert parse_axes(" -Y, +x ,Z").text == "-y,x,z"
    assert parse_axes("SAE-J670").text == "x,-y,-z"
    np.testing.assert_array_equal(parse_axes("-y,x,z").matrix @ [1.0, 2.0, 3.0], [-2.0, 1.0, 3.0])
    for axes in ALL_AXIS_MAPS:
        assert parse_axes(axes.text) == axes
        assert axes.mirrors is bool(np.linalg.det(axes.matrix) < 0)
