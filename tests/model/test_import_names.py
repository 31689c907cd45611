from __future__ import annotations

from pathlib import Path

import pytest

from toewright.model import POINT_NAMES, InputError
from toewright.model.import_names import match_names, parse_names

WISHBONE, STRUT = POINT_NAMES["double-wishbone"], POINT_NAMES["strut"]


@pytest.mark.parametrize(
    "spelling",
    [
        str,
        str.upper,
        lambda name: name.replace("_", " "),
        lambda name: name.replace("_", "-").title(),
        lambda name: "".join(word.title() for word in name.split("_")),
        lambda name: " ".join(reversed(name.split("_"))),
        lambda name: f"{name.replace('centre', 'center')}",
    ],
)
@pytest.mark.parametrize("kind", POINT_NAMES)
def test_spellings(kind: str, spelling: object) -> None:
    assert callable(spelling)
    names = POINT_NAMES[kind]
    matched = match_names([spelling(name) for name in names], {}, None, None, "t.csv")
    assert (matched.kind, matched.unused) == (kind, ())
    assert matched.rows == {None: {name: row for row, name in enumerate(names)}}


@pytest.mark.parametrize(
    "words", [("left ", "right "), ("LH-", "RH-"), ("lhs.", "rhs."), ("L_", "R_"), ("FL ", "FR "), ("rl.", "rr.")]
)
def test_sides_in_names(words: tuple[str, str]) -> None:
    labels = [word + name for word in words for name in WISHBONE]
    both = match_names([*labels, "spring seat"], {}, None, None, "t.csv")
    assert list(both.rows) == ["left", "right"]
    assert both.rows["right"]["wheel_centre"] == 2 * len(WISHBONE) - 1
    assert both.unused == (len(labels),)
    one = match_names(labels, {}, None, "right", "t.csv")
    assert one.rows == {"right": both.rows["right"]}
    assert match_names(labels[:9], {}, None, None, "t.csv").rows == {"left": both.rows["left"]}


def test_side_in_the_options_only_and_names_in_part() -> None:
    matched = match_names(WISHBONE, {}, None, "right", "t.csv")
    assert list(matched.rows) == ["right"]
    labels = [f"left {name}" if "pivot" in name else name for name in WISHBONE]
    assert list(match_names(labels, {}, None, None, "t.csv").rows) == ["left"]


@pytest.mark.parametrize("ends", [("_L", "_R"), (" FL", " FR"), (" left", " right")])
def test_one_pair_serves_both_sides(ends: tuple[str, str]) -> None:
    theirs = {name: f"P{number}x" for number, name in enumerate(WISHBONE)}
    labels = [theirs[name] + end for end in ends for name in WISHBONE]
    with pytest.raises(InputError, match=r"name them with --names theirs=ours \(one pair serves both sides\)"):
        match_names(labels, {}, None, None, "t.csv")
    expected = {
        "left": dict(zip(WISHBONE, range(9), strict=True)),
        "right": dict(zip(WISHBONE, range(9, 18), strict=True)),
    }
    for of in (0, 1):  # whichever side the pairs were written for
        names = {theirs[name] + ends[of]: name for name in WISHBONE}
        assert match_names(labels, names, None, None, "t.csv").rows == expected
        assert match_names(labels, names, None, "left", "t.csv").rows == {"left": expected["left"]}
    both = parse_names([f"{theirs[name]}{end}={name}" for end in ends for name in WISHBONE])
    assert match_names(labels, both, None, None, "t.csv").rows == expected


def test_advice_for_a_table_of_both_sides_leads_to_both() -> None:
    labels = [f"{name.replace('wheel_centre', 'wheel_cntr')}_{side}" for side in "LR" for name in WISHBONE]
    with pytest.raises(InputError) as caught:
        match_names(labels, {}, None, None, "t.csv")
    advice = str(caught.value)
    assert advice.endswith("(one pair serves both sides)")
    (pair,) = [word for word in advice.split() if "=" in word]
    matched = match_names(labels, parse_names([pair]), None, None, "t.csv")
    assert {side: sorted(rows.values()) for side, rows in matched.rows.items()} == {
        "left": list(range(9)),
        "right": list(range(9, 18)),
    }


def test_letters_that_mean_rear_are_no_side() -> None:
    theirs = {
        "upper_pivot_front": "UCA F",
        "upper_pivot_rear": "UCA R",
        "lower_pivot_front": "LCA F",
        "lower_pivot_rear": "LCA R",
    }
    labels = [theirs.get(name, name) for name in WISHBONE]
    matched = match_names(labels, {label: name for name, label in theirs.items()}, None, None, "t.csv")
    assert matched.rows == {None: {name: row for row, name in enumerate(WISHBONE)}}
    for mark in ("{side}_{name}", "{name} {side}"):  # side letters before and behind, beside letters that mean rear
        both = [mark.format(side=side, name=label) for side in "LR" for label in labels]
        pairs = {mark.format(side="L", name=label): name for name, label in theirs.items()}
        rows = match_names(both, pairs, None, None, "t.csv").rows
        assert {side: list(group.values()) for side, group in rows.items()} == {
            "left": list(range(9)),
            "right": list(range(9, 18)),
        }
    sided = [f"left {label}" for label in labels]
    assert list(match_names(sided, {f"left {t}": o for o, t in theirs.items()}, None, None, "t.csv").rows) == ["left"]


@pytest.mark.parametrize("ends", [(" 1", " 2"), (".001", ".002"), ("_A", "_B")])
def test_two_corners_that_names_do_not_tell_apart_are_refused(ends: tuple[str, str]) -> None:
    labels = [name + end for end in ends for name in WISHBONE]
    with pytest.raises(
        InputError, match=r"more than one corner \('upper_pivot_front.*write left or right in the names"
    ):
        match_names(labels, {}, None, None, "t.csv")
    first = {name + ends[0]: name for name in WISHBONE}
    with pytest.raises(InputError, match="more than one corner"):
        match_names(labels, first, None, None, "t.csv")
    assert match_names(labels, first, None, "right", "t.csv").rows == {
        "right": dict(zip(WISHBONE, range(9), strict=True))
    }


def test_numbered_points_of_one_corner_are_no_second_corner() -> None:
    theirs = dict(
        zip(WISHBONE, ("uca 1", "uca 2", "ubj", "lca 1", "lca 2", "lbj", "tie 1", "tie 2", "hub"), strict=True)
    )
    labels = [theirs[name] for name in WISHBONE]
    with pytest.raises(InputError, match="name them with --names"):
        match_names(labels, {}, None, None, "t.csv")
    assert None in match_names([*labels, "hub 2"], {t: o for o, t in theirs.items()}, None, None, "t.csv").rows
    plain = [f"pt {number}" for number in range(12)]
    assert None in match_names(plain, dict(zip(plain, WISHBONE, strict=False)), None, None, "t.csv").rows


def test_axle_in_the_names() -> None:
    assert match_names([f"RL {n}" for n in WISHBONE], {}, None, None, "t.csv").axle == "rear"
    assert match_names([f"LF {n}" for n in WISHBONE], {}, None, None, "t.csv").axle == "front"
    assert match_names(WISHBONE, {}, None, None, "t.csv").axle is None
    whole_car = [f"{word} {n}" for word in ("FL", "FR", "RL", "RR") for n in WISHBONE]
    with pytest.raises(
        InputError, match="'FL upper_pivot_front' and 'RL upper_pivot_front'; leave the rows of one axle"
    ):
        match_names(whole_car, {}, None, None, "t.csv")
    with pytest.raises(InputError, match="the names state front and rear; leave the rows of one axle"):
        match_names([f"{'FL' if 'arm' in n or 'upper' in n else 'RL'} {n}" for n in WISHBONE], {}, None, None, "t.csv")
    with pytest.raises(InputError, match="'left wheel_centre R' states both sides"):
        match_names(["left wheel_centre R"], {}, None, None, "t.csv")


def test_name_map_comes_first() -> None:
    labels = ["UBJ" if name == "upper_ball_joint" else name for name in WISHBONE] + ["pt 7"]
    matched = match_names(labels, {"UBJ": "upper_ball_joint"}, None, None, "t.csv")
    assert matched.rows[None]["upper_ball_joint"] == labels.index("UBJ")
    assert matched.unused == (len(labels) - 1,)


def test_both_kinds_in_one_table_must_be_chosen() -> None:
    labels = dict.fromkeys([*WISHBONE, *STRUT])
    with pytest.raises(InputError, match="--type double-wishbone or --type strut"):
        match_names(list(labels), {}, None, None, "t.csv")
    assert match_names(list(labels), {}, "strut", None, "t.csv").kind == "strut"


def test_refusals() -> None:
    def refused(
        sentence: str,
        labels: list[str],
        names: dict[str, str] | None = None,
        kind: str | None = None,
        side: str | None = None,
    ) -> None:
        with pytest.raises(InputError, match=sentence) as caught:
            match_names(labels, names or {}, kind, side, "t.csv")
        assert "\n" not in str(caught.value)

    short = [name for name in WISHBONE if name != "wheel_centre"]
    refused(r"^t\.csv: wheel_centre not found for a double-wishbone corner; add the missing rows$", short)
    refused(
        r"not understood: whel centr\); if they are these, add --names 'whel centr=wheel_centre'",
        [*short, "whel centr"],
    )
    refused(r"not understood: hub\); name them with --names theirs=ours", [*short, "hub"])
    refused("upper_pivot_front.* not found for a double-wishbone", list(STRUT), kind="double-wishbone")
    refused("strut_axis_point not found for a strut", [n for n in STRUT if n != "strut_axis_point"])
    refused("wheel_centre comes from both 'wheel_centre' and 'Wheel Centre'; remove one", [*WISHBONE, "Wheel Centre"])
    refused(
        "wheel_centre comes from both 'left wheel_centre' and 'wheel_centre'; remove", [*WISHBONE, "left wheel_centre"]
    )
    refused(
        "'wheel_centre' states no side but others do",
        ["wheel_centre", *(f"{s} {n}" for s in ("left", "right") for n in short)],
    )
    refused(
        r"--side right: but the names say left \('left upper_pivot_front'\); correct",
        [f"left {n}" for n in WISHBONE],
        side="right",
    )
    refused("--names hub=wheel_centre: there is no such point; the table has", list(WISHBONE), {"hub": "wheel_centre"})
    refused(
        "--names Wheel=wheel_centre: there is no such point; did you mean 'wheel x'",
        [*short, "wheel x"],
        {"Wheel": "wheel_centre"},
    )
    refused("--type beam: there is no such corner; write double-wishbone or strut", list(WISHBONE), kind="beam")


def test_parse_names(tmp_path: Path) -> None:
    table, toml = tmp_path / "a.csv", tmp_path / "b.toml"
    table.write_text("# ours\ntheirs,ours\nUBJ,upper_ball_joint\n\n")
    toml.write_text('"Pt 7" = "lower_ball_joint"\n')
    assert parse_names(["hub=wheel_centre", str(table), str(toml)]) == {
        "hub": "wheel_centre",
        "UBJ": "upper_ball_joint",
        "Pt 7": "lower_ball_joint",
    }
    table.write_text("UBJ;upper_ball_joint\n")
    assert parse_names([str(table)]) == {"UBJ": "upper_ball_joint"}
    assert parse_names([]) == {}


@pytest.mark.parametrize(
    ("entries", "sentence"),
    [
        (["hub"], "--names hub: is no pair; write theirs=ours"),
        (["=wheel_centre"], "is no pair"),
        (["hub=wheel_center"], "'wheel_center' is none of our points; did you mean 'wheel_centre'"),
        (["hub=zzz"], "'zzz' is none of our points; ours are upper_pivot_front"),
        (["wheel_centre=hub"], "write theirs first: hub=wheel_centre"),
        (["a=wheel_centre", "b=wheel_centre"], "--names b=wheel_centre: b or wheel_centre is in two pairs"),
        (["a=wheel_centre", "a=upper_ball_joint"], "is in two pairs; leave one"),
        (["none.csv"], "none.csv: there is no such file"),
    ],
)
def test_bad_entries(entries: list[str], sentence: str) -> None:
    with pytest.raises(InputError, match=sentence):
        parse_names(entries)


@pytest.mark.parametrize(
    ("name", "text", "sentence"),
    [
        ("a.toml", "x = ", r"a\.toml: is not TOML .* write lines such as"),
        ("a.toml", "x = 3", r"a\.toml: x = 3: is no name; write \"x\" = \"ours\""),
        ("a.csv", "x,y,z", r"a\.csv: line 1 is no pair: 'x,y,z'; write theirs,ours"),
        ("a.csv", "UBJ,upper", "'upper' is none of our points"),
    ],
)
def test_bad_files(name: str, text: str, sentence: str, tmp_path: Path) -> None:
    (tmp_path / name).write_text(text)
    with pytest.raises(InputError, match=sentence):
        parse_names([str(tmp_path / name)])
