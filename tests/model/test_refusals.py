"""Each thing that is refused says in one sentence: file, key, value, remedy."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from files_for_tests import changed, file_text

from toewright.model import InputError, load, loads

TEXT = file_text(right=True)
LEFT = file_text()
STRUT = file_text("strut")


def without(text: str, *lines: str) -> str:
    for line in lines:
        text = changed(text, line, "")
    return text


def scaled(text: str, factor: float) -> str:
    """All points of the file multiplied."""

    def point(match: re.Match[str]) -> str:
        return "= [" + ", ".join(repr(float(v) * factor) for v in match.group(1).split(",")) + "]"

    head, tail = text.split("[left.points]")
    return head + "[left.points]" + re.sub(r"= \[([^\]]*)\]", point, tail)


# what, the text, what must be in the sentence: key, value, remedy
CASES: list[tuple[str, str, tuple[str, ...]]] = [
    (
        "unknown key with a likeness",
        changed(LEFT, "camber", "chamber = -1.5"),
        ("setup.chamber = -1.5", "did you mean 'camber'?"),
    ),
    (
        "unknown key of another table",
        changed(LEFT, "brake_share", "stroke = 30"),
        ("vehicle.stroke = 30", "belongs under [rack]"),
    ),
    (
        "unknown key",
        changed(LEFT, "brake_share", "zzz = 30"),
        ("vehicle.zzz", "remove it", "allowed here: axle, wheelbase"),
    ),
    ("unknown table", LEFT + "\n[tolerances]\nx = 1\n", ("tolerances", "did you mean 'tolerance'?")),
    (
        "unknown point",
        changed(LEFT, "upper_ball_joint", "uper_ball_joint = [1, 2, 3]"),
        ("left.points.uper_ball_joint", "did you mean 'upper_ball_joint'?"),
    ),
    (
        "point of another type",
        changed(LEFT, "upper_ball_joint", "strut_top_mount = [1, 2, 3]"),
        ("left.points.strut_top_mount", 'belongs to type = "strut"'),
    ),
    (
        "missing point",
        without(LEFT, "wheel_centre"),
        ("left.points: wheel_centre is missing", "add wheel_centre = [x, y, z]"),
    ),
    (
        "missing points",
        without(LEFT, "wheel_centre", "tie_rod_inner"),
        ("left.points: tie_rod_inner, wheel_centre are missing", "each as name = [x, y, z]"),
    ),
    ("missing side", LEFT.split("[left]")[0], ("left: is missing", "add [left]")),
    ("missing wheel", re.sub(r"\[wheel\][^[]*", "", LEFT), ("wheel: is missing", "add [wheel] with loaded_radius")),
    (
        "missing radius",
        without(LEFT, "loaded_radius"),
        ("wheel.loaded_radius: is missing", "add loaded_radius under [wheel]"),
    ),
    ("missing type", without(LEFT, "type"), ("left.type: is missing", 'type = "double-wishbone"')),
    (
        "wrong type",
        changed(LEFT, "type", 'type = "double wishbone"'),
        ('left.type = "double wishbone"', 'did you mean "double-wishbone"?'),
    ),
    (
        "quite wrong type",
        changed(LEFT, "type", 'type = "beam"'),
        ('left.type = "beam"', 'write "double-wishbone" or "strut"'),
    ),
    ("wrong axes", changed(LEFT, "axes", 'axes = "sae"'), ('axes = "sae"', '"sae-j670"')),
    ("wrong unit", changed(LEFT, "length_unit", 'length_unit = "cm"'), ('length_unit = "cm"', '"mm"', '"in"')),
    ("wrong axle", changed(LEFT, "axle", 'axle = "frnt"'), ('vehicle.axle = "frnt"', 'did you mean "front"?')),
    ("wrong brakes", changed(LEFT, "brakes", 'brakes = "hub"'), ('vehicle.brakes = "hub"', '"outboard" or "inboard"')),
    ("wrong version", changed(LEFT, "schema", "schema = 2"), ("schema = 2", "schema = 1")),
    (
        "two numbers",
        changed(LEFT, "wheel_centre", "wheel_centre = [0.0, 602.0]"),
        ("left.points.wheel_centre", "has 2 numbers", "write three"),
    ),
    (
        "four numbers",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 602, 228, 1]"),
        ("left.points.wheel_centre", "has 4 numbers", "write three"),
    ),
    (
        "decimal commas in a point",
        changed(LEFT, "wheel_centre", "wheel_centre = [0,5, 602,5, 228,0]"),
        ("left.points.wheel_centre", "has 6 numbers", "with decimal points"),
    ),
    (
        "text for a number",
        changed(LEFT, "wheel_centre", 'wheel_centre = [0, "602", 228]'),
        ("left.points.wheel_centre, y", '"602"', "without quotes"),
    ),
    (
        "text for a point",
        changed(LEFT, "wheel_centre", 'wheel_centre = "0 602 228"'),
        ("left.points.wheel_centre", '"0 602 228"', "[x, y, z]"),
    ),
    (
        "true for a number",
        changed(LEFT, "loaded_radius", "loaded_radius = true"),
        ("wheel.loaded_radius = true", "true or false where a number"),
    ),
    (
        "a date for a number",
        changed(LEFT, "loaded_radius", "loaded_radius = 2026-01-01"),
        ("wheel.loaded_radius", "a date", "number is wanted"),
    ),
    ("number for text", changed(LEFT, "title", "title = 4"), ("title = 4", "a whole number where text", "quotes")),
    (
        "a number for a table",
        LEFT.replace("[rack]", "[rack2]", 1)
        .replace("schema = 1", "schema = 1\nrack = 3", 1)
        .replace("[rack2]", "[adjusters]"),
        ("rack = 3", "write [rack]"),
    ),
    ("a list for a corner", LEFT.split("[left]")[0] + "[[left]]\n", ("left", "a table")),
    (
        "nan",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, nan, 228]"),
        ("left.points.wheel_centre, y = nan", "finite", "write a number"),
    ),
    ("inf", changed(LEFT, "wheelbase", "wheelbase = inf"), ("vehicle.wheelbase = inf", "finite", "write a number")),
    (
        "huge",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 602, 1e300]"),
        ("left.points.wheel_centre, z = 1e+300", "at most 1000000"),
    ),
    ("huge whole number", changed(LEFT, "stroke", "stroke = 1" + "0" * 400), ("rack.stroke = 1000", "correct")),
    (
        "number of thousands of digits",
        changed(LEFT, "stroke", "stroke = 1" + "0" * 5000),
        ("number of thousands of digits", "correct it"),
    ),
    (
        "negative length",
        changed(LEFT, "wheelbase", "wheelbase = -1550"),
        ("vehicle.wheelbase = -1550", "must be above 0"),
    ),
    (
        "zero radius",
        changed(LEFT, "loaded_radius", "loaded_radius = 0"),
        ("wheel.loaded_radius = 0", "must be above 0"),
    ),
    ("share above one", changed(LEFT, "brake_share", "brake_share = 62"), ("vehicle.brake_share = 62", "at most 1")),
    ("toe out of proportion", changed(LEFT, "toe_in", "toe_in = 60"), ("setup.toe_in = 60", "must be below 20")),
    (
        "rack axis zero",
        changed(LEFT, "axis", "axis = [0.0, 0.0, 0.0]"),
        ("rack.axis = [0.0, 0.0, 0.0]", "no direction", "[0.0, 1.0, 0.0]"),
    ),
    (
        "left point on the right",
        changed(LEFT, "upper_ball_joint", "upper_ball_joint = [-9, -528, 312]"),
        ("left.points.upper_ball_joint = [-9, -528, 312]", "where y > 0", "change the sign"),
    ),
    (
        "right point on the left",
        TEXT.replace("wheel_centre = [0.0, -602.0", "wheel_centre = [0.0, 602.0"),
        ("right.points.wheel_centre = [0, 602, 228]", "where y < 0", "change the sign"),
    ),
    (
        "left point on the right, SAE",
        changed(file_text(axes="sae-j670"), "upper_ball_joint", "upper_ball_joint = [-9, 528, -312]"),
        ("left.points.upper_ball_joint = [-9, 528, -312]", "where y < 0 (sae-j670)"),
    ),
    (
        "wheel on the centre plane",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 0, 228]"),
        ("left.points.wheel_centre", "not on the left side"),
    ),
    (
        "coincident joints",
        changed(LEFT, "upper_ball_joint", "upper_ball_joint = [5, 561, 116]"),
        ("left.points.upper_ball_joint = [5, 561, 116]", "lower_ball_joint coincide", "correct one"),
    ),
    (
        "tie rod without length",
        changed(LEFT, "tie_rod_inner", "tie_rod_inner = [71, 548, 152]"),
        ("left.points.tie_rod_inner = [71, 548, 152]", "tie rod has no length", "correct one"),
    ),
    (
        "pivot axis without length",
        changed(LEFT, "lower_pivot_rear", "lower_pivot_rear = [131, 214, 124]"),
        ("left.points.lower_pivot_front", "lower arm has no pivot axis", "correct one"),
    ),
    (
        "strut without direction",
        changed(STRUT, "strut_axis_point", "strut_axis_point = [-37, 566, 806]"),
        ("left.points.strut_top_mount", "strut has no direction", "correct one"),
    ),
    (
        "arm without length",
        changed(LEFT, "lower_ball_joint", "lower_ball_joint = [-5.5, 217.5, 121.0]"),
        ("left.points.lower_ball_joint", "lower arm has no length", "correct one"),
    ),
    (
        "tie rod on the steering axis",
        changed(LEFT, "tie_rod_outer", "tie_rod_outer = [-2, 544.5, 214]"),
        ("left.points.tie_rod_outer = [-2, 544.5, 214]", "can't steer", "move it off"),
    ),
    (
        "tie rod pointing at the steering axis",
        changed(LEFT, "tie_rod_inner", "tie_rod_inner = [139.31, 540.45, 155.61]"),
        ("left.points.tie_rod_inner", "locked", "correct tie_rod_inner or"),
    ),
    (
        "ball joints exchanged",
        changed(
            changed(LEFT, "upper_ball_joint", "upper_ball_joint = [5, 561, 116]"),
            "lower_ball_joint",
            "lower_ball_joint = [-9, 528, 312]",
        ),
        ("left.points.upper_ball_joint", "196 mm below lower_ball_joint", "exchange them"),
    ),
    (
        "steering axis lies flat",
        changed(LEFT, "upper_ball_joint", "upper_ball_joint = [-9, 828, 130]"),
        ("left.points.upper_ball_joint", "does not stand up", "correct the z"),
    ),
    ("metres in a mm file", scaled(LEFT, 0.001), ('length_unit = "mm"', "look like m:", 'set length_unit = "m"')),
    ("inches in a mm file", scaled(LEFT, 1 / 25.4), ('length_unit = "mm"', "look like in:", 'set length_unit = "in"')),
    (
        "mm in a metre file",
        scaled(file_text(unit="m"), 1000.0),
        ('length_unit = "m"', "look like mm:", 'set length_unit = "mm"'),
    ),
    ("points of no car", scaled(LEFT, 50.0), ('length_unit = "mm"', "no car has", "correct the points")),
    (
        "wheelbase in metres",
        changed(LEFT, "wheelbase", "wheelbase = 1.55"),
        ("vehicle.wheelbase = 1.55", "looks like m", "write it in mm"),
    ),
    (
        "radius in metres",
        changed(LEFT, "loaded_radius", "loaded_radius = 0.228"),
        ("wheel.loaded_radius = 0.228", "looks like m", "write it in mm"),
    ),
    (
        "rim in inches",
        changed(LEFT, "rim_diameter", "rim_diameter = 10"),
        ("wheel.rim_diameter = 10", "looks like in", "write it in mm"),
    ),
    (
        "stroke in metres",
        changed(LEFT, "stroke", "stroke = 0.03"),
        ("rack.stroke = 0.03", "looks like m", "write it in mm"),
    ),
    (
        "no equals sign",
        changed(LEFT, "camber", "camber -1.5"),
        ("line 25, column 8 is not TOML: 'camber -1.5'", "mend that line"),
    ),
    (
        "decimal comma",
        changed(LEFT, "camber", "camber = -1,5"),
        ("line 25", "'camber = -1,5'", "write a decimal point"),
    ),
    ("key twice", changed(LEFT, "camber", "camber = 1\ncamber = 2"), ("line 26", "'camber = 2'", "mend that line")),
    ("open string", changed(LEFT, "title", 'title = "Polecat'), ("line 3", "Polecat", "mend that line")),
    ("open list at the end", LEFT.rstrip().rstrip("]"), ("is not TOML", "at the end", "mend that line")),
    ("empty file", "", ("wheel, left: are missing", "add [wheel]")),
]


@pytest.mark.parametrize(("what", "text", "parts"), CASES, ids=[case[0] for case in CASES])
def test_sentence_names_file_key_value_and_remedy(what: str, text: str, parts: tuple[str, ...]) -> None:
    with pytest.raises(InputError) as caught:
        loads(text, file="stoat.toml")
    sentence = str(caught.value)
    assert sentence.startswith("stoat.toml: ")
    assert "\n" not in sentence
    assert len(sentence) < 400
    for part in parts:
        assert part in sentence, sentence


def test_more_faults_are_counted() -> None:
    with pytest.raises(InputError, match=r"chamber.*\(and 1 more fault\)$"):
        loads(changed(changed(LEFT, "camber", "chamber = -1.5"), "wheelbase", "wheelbase = -1"))


def test_unreadable_files(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"none\.toml: there is no such file; check the name"):
        load(tmp_path / "none.toml")
    with pytest.raises(InputError, match="is a folder; give a file"):
        load(tmp_path)
    latin = tmp_path / "latin.toml"
    latin.write_bytes(LEFT.replace("Polecat", "Iltis \xfc").encode("latin-1"))
    with pytest.raises(InputError, match=r"latin\.toml: line 3 is no UTF-8 text; save the file as UTF-8"):
        load(latin)
    large = tmp_path / "large.toml"
    large.write_text("# " + "x" * 4_000_000)
    with pytest.raises(InputError, match="is it the right file"):
        load(large)
    deep = tmp_path / "deep.toml"
    deep.write_text("a = " + "[" * 5000 + "]" * 5000)
    with pytest.raises(InputError, match=r"deep\.toml: "):
        load(deep)


def test_whole_axles_of_extreme_but_real_size_load() -> None:
    model = scaled(LEFT, 0.2)
    for old, new in (
        ("loaded_radius", 45),
        ("tyre_width", 38),
        ("rim_diameter", 51),
        ("rim_width", 36),
        ("wheelbase", 310),
    ):
        model = changed(model, old, f"{old} = {new}")
    assert loads(model).wheel.loaded_radius == 45.0
    assert loads(scaled(changed(LEFT, "loaded_radius", "loaded_radius = 520"), 2.2)).wheel.loaded_radius == 520.0
