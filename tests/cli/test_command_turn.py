from __future__ import annotations

import csv
import json
from pathlib import Path

import numpy as np
import pytest
import xarray as xr
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

import toewright as tw

FRONT = HARDPOINTS / "marten_front.toml"
STEERED = [path for path in SAMPLES if "rear" not in path.stem]

FIRST_COLUMNS = (
    "rack_travel,hand_wheel_angle,status,steer_left,steer_right,mean_steer,ideal_inner_steer,ackermann_error,ackermann_percent,"
    "normals_meet_x,normals_meet_y,centre_x,centre_y,slip_front_left,slip_front_right,slip_rear_left,slip_rear_right,turn_radius,"
    "kerb_circle,steering_ratio,camber_left,camber_right,scrub_radius_left,scrub_radius_right,mechanical_trail_left,"
    "mechanical_trail_right"
).split(",")


@pytest.mark.parametrize("sample", STEERED, ids=lambda p: p.stem)
def test_every_steered_sample_turns(cli: Cli, sample: Path) -> None:
    result = cli("turn", sample)
    assert result.code == 0
    assert "Largest Ackermann error: " in result.out
    assert "Ackermann percent by ideal-inner: " in result.out
    assert "Most slip at walking pace: " in result.out
    assert "kerb to kerb" in result.out
    assert "Limits, " in result.out
    assert "below, static toe dominates" in result.out


def test_reverse_ackermann_is_said_in_words(cli: Cli) -> None:
    assert "(reverse Ackermann)" in cli("turn", FRONT).out
    assert "the inner more elsewhere" in cli("turn", FRONT).out


@pytest.mark.parametrize("definition", ["ideal-inner", "ideal-outer", "single-track"])
def test_the_definition_is_printed(cli: Cli, definition: str) -> None:
    result = cli("turn", FRONT, "--ackermann", definition)
    assert f"Ackermann percent by {definition}: " in result.out
    found = json.loads(cli("turn", FRONT, "--ackermann", definition, "--rack", "20", "--json").out)
    assert found["definition"] == definition
    assert found["columns"]["ackermann_percent"][0] == pytest.approx(
        tw.turn(tw.load(FRONT), [20.0], ackermann=definition)["ackermann_percent"][0]
    )


def test_a_missing_other_axle_is_named_with_its_key(cli: Cli, tmp_path: Path) -> None:
    file = tmp_path / "front.toml"
    file.write_text(FRONT.read_text())
    result = cli("turn", file)
    assert result.code == 2
    for words in (str(file), "vehicle.other_axle", "there is no file", "marten_rear.toml", "leave it out"):
        assert words in result.err
    (tmp_path / "marten_rear.toml").write_text("schema = 1\ntitle =")
    result = cli("turn", file)
    assert result.code == 2
    for words in (str(file), "vehicle.other_axle", "marten_rear.toml", "TOML"):
        assert words in result.complaint


def test_a_roll_that_no_car_has_is_refused(cli: Cli) -> None:
    for command in ("turn", "ride"):
        result = cli(command, FRONT, "--roll", "60")
        assert result.code == 2
        assert "--roll 60: angles of 45 deg and more" in result.complaint


def test_sentences_and_rows_at_the_border_of_what_is_shown(cli: Cli) -> None:
    van = HARDPOINTS / "linnet_front.toml"
    out = cli("turn", van).out
    assert "at mean steer 3.0 to 6.0 deg, the inner more elsewhere" in out
    row = next(line for line in out.splitlines() if line.split()[:1] == ["-7.2"])
    assert row.split()[4] == "+3.00"  # 2.9999 deg reads as 3: its figures are there
    assert "-" not in row.split()
    out = cli("turn", van, "--rack=-72,-43.2,-14.4,0").out
    assert "at mean steer 6.0 deg, the inner more elsewhere" in out
    assert "hand wheel: to the left +" in out


def test_csv_has_the_columns_and_full_precision(cli: Cli, tmp_path: Path) -> None:
    target = tmp_path / "turn.csv"
    assert cli("turn", FRONT, "--rack", "-80,-10,0,10", "--out", target).code == 0
    rows = list(csv.reader(target.read_text().splitlines()))
    assert rows[0][: len(FIRST_COLUMNS)] == FIRST_COLUMNS
    turned = tw.turn(tw.load(FRONT), [-80.0, -10.0, 0.0, 10.0])
    assert rows[1][2] == "locked"
    assert rows[1][3] == ""
    assert float(rows[2][3]) == turned["steer_left"][1]
    assert rows[3][FIRST_COLUMNS.index("ackermann_percent")] == ""  # straight ahead


def test_json_and_netcdf_files(cli: Cli, tmp_path: Path) -> None:
    for name in ("turn.json", "turn.nc"):
        assert cli("turn", FRONT, "--rack=-20:20:5", "--out", tmp_path / name).code == 0
    document = json.loads((tmp_path / "turn.json").read_text())
    assert document["quantities"]["steer_left"]["unit"] == "deg"
    with xr.open_dataset(tmp_path / "turn.nc", engine="scipy") as data:
        assert np.array_equal(data["steer_left"].values, np.array(document["steer_left"]))
        assert data["steer_left"].attrs["sign"] == "to the left +"


def test_roll_and_travel(cli: Cli) -> None:
    assert "roll +2 deg (right side down +)" in cli("turn", FRONT, "--roll", "2").out
    assert "wheel travel +10 mm" in cli("turn", FRONT, "--travel", "10").out


def test_explain_defines_what_is_shown(cli: Cli) -> None:
    out = cli("turn", FRONT, "--explain").out
    assert "Definitions" in out
    assert "Ackermann error" in out


@pytest.mark.parametrize("width", [80, 100])
def test_tables_keep_to_the_width(cli: Cli, monkeypatch: pytest.MonkeyPatch, width: int) -> None:
    monkeypatch.setenv("COLUMNS", str(width))
    for arguments in (
        ["turn", FRONT],
        ["ride", FRONT, "--toe-unit", "min"],
        ["ride", HARDPOINTS / "linnet_front.toml", "--rack", "30"],
    ):
        done = cli(*arguments)
        tables = [line for line in done.out.splitlines() if line.startswith(" ")]
        assert tables
        assert max(len(line) for line in tables) <= width
        assert not any("…" in line for line in tables)


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["--travel", "5", "--roll", "1"], "--travel and --roll"),
        (["--rack", "3,1"], "does not ascend"),
        (["--rack", ""], "the list is empty"),
        (["--ackermann", "best"], "ideal-inner"),
        (["--roll", "60"], "ask for less"),
        (["--travel", "nan"], "not a number"),
        (["--out", "x.xls"], "is unknown"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("turn", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint


def test_missing_wheelbase_and_other_axle(cli: Cli, tmp_path: Path) -> None:
    text = FRONT.read_text()
    (tmp_path / "none.toml").write_text(text.replace("wheelbase = 1550.0\n", ""))
    result = cli("turn", tmp_path / "none.toml")
    assert result.code == 2
    assert "vehicle.wheelbase" in result.complaint
    (tmp_path / "lonely.toml").write_text(text)
    result = cli("turn", tmp_path / "lonely.toml")
    assert result.code == 2
    assert "marten_rear.toml" in result.complaint
    result = cli("turn", FRONT, "--other-rack", "0.2")
    assert result.code == 2
    assert "has no [rack]" in result.complaint
