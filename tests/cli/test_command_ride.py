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

FIRST_COLUMNS = (
    "motion,bump,roll_angle,status,wheel_travel_left,wheel_travel_right,toe_in_left,toe_in_right,axle_steer,camber_left,camber_right,"
    "camber_road_left,camber_road_right,track_change,recession_left,recession_right,roll_centre_y,roll_centre_z,swing_arm_left,"
    "swing_arm_right,bump_steer_rate_left,bump_steer_rate_right,anti_dive_left,anti_dive_right,anti_lift_left,anti_lift_right,"
    "anti_squat_left,anti_squat_right"
).split(",")


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_rides(cli: Cli, sample: Path) -> None:
    result = cli("ride", sample)
    assert result.code == 0
    for words in (
        "Bump: both wheels together",
        "Roll: the body rolls",
        "The left wheel alone",
        "Worst place: ",
        "roll steer",
        "Signs: ",
    ):
        assert words in result.out


def test_one_motion_only(cli: Cli) -> None:
    out = cli("ride", FRONT, "--motion", "single", "--side", "right", "--travel=-10:10:5").out
    assert "The right wheel alone" in out
    assert "Roll:" not in out
    assert "Bump:" not in out


def test_the_legend_explains_what_is_shown_and_no_more(cli: Cli) -> None:
    roll = cli("ride", FRONT, "--motion", "roll").out
    assert "roll: right side down +" in roll
    for words in ("Braking", "anti-dive", "swing arm", "recession", "track change"):
        assert words not in roll
    bump = cli("ride", FRONT, "--motion", "bump").out
    for words in ("Braking: 62 %", "anti-dive: braking lifts the nose +", "swing arm: instant", "recession rearward +"):
        assert words in bump
    assert "right side down" not in bump


def test_both_ends_of_what_is_not_reached_are_named(cli: Cli) -> None:
    out = cli("ride", FRONT, "--motion", "bump", "--travel=-300:350:14").out
    assert (
        "Not reached: from +350.0 mm of bump up (out-of-reach) and from -300.0 mm of bump down (out-of-reach)." in out
    )
    one = cli("ride", FRONT, "--motion", "bump", "--travel=-300:100:9").out
    assert "Not reached: from -300.0 mm of bump down (out-of-reach)." in one


def test_toe_is_in_the_unit_asked_for(cli: Cli) -> None:
    out = cli("ride", FRONT, "--motion", "bump", "--toe-unit", "mm").out
    assert "mm per wheel across the 254 mm rim" in out
    assert "mm toe-in per wheel across the 254 mm rim" in out


def test_csv_has_the_columns(cli: Cli, tmp_path: Path) -> None:
    target = tmp_path / "ride.csv"
    assert cli("ride", FRONT, "--travel=-20:20:3", "--roll=-2,0,2", "--out", target).code == 0
    rows = list(csv.reader(target.read_text().splitlines()))
    assert rows[0][: len(FIRST_COLUMNS)] == FIRST_COLUMNS
    assert [row[0] for row in rows[1:]] == ["bump"] * 3 + ["roll"] * 3 + ["single"] * 3
    ridden = tw.ride(tw.load(FRONT), travel=[-20.0, 0.0, 20.0], roll=[-2.0, 0.0, 2.0])
    k = FIRST_COLUMNS.index("roll_centre_z")
    assert [float(row[k]) for row in rows[1:]] == ridden["roll_centre_z"].tolist()


def test_json_and_netcdf(cli: Cli, tmp_path: Path) -> None:
    for name in ("ride.json", "ride.nc"):
        assert cli("ride", FRONT, "--motion", "roll", "--out", tmp_path / name).code == 0
    document = json.loads((tmp_path / "ride.json").read_text())
    with xr.open_dataset(tmp_path / "ride.nc", engine="scipy") as data:
        assert np.array_equal(data["axle_steer"].values, np.array(document["axle_steer"]))
    summary = json.loads(cli("ride", FRONT, "--motion", "roll", "--json").out)
    assert summary["columns"]["motion"][0] == "roll"
    assert "roll steer" in summary["sentences"]["roll"][0]


def test_anti_figures_say_what_they_assume(cli: Cli, tmp_path: Path) -> None:
    assert "torque reacted at the upright (outboard)" in cli("ride", FRONT).out
    (tmp_path / "plain.toml").write_text(
        FRONT.read_text().replace("cg_height = 285.0\n", "").replace("other_axle", "# other_axle")
    )
    assert "vehicle.cg_height" in cli("ride", tmp_path / "plain.toml").out


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["--motion", "heave"], "bump"),
        (["--roll", "50"], "--roll 50"),
        (["--motion", "roll", "--roll", "40"], "ask for less"),
        (["--motion", "bump", "--travel", "900"], "ask for less"),
        (["--travel", "1:0:3"], "does not ascend"),
        (["--toe-diameter", "-3", "--toe-unit", "mm"], "--toe-diameter"),
        (["--rack", "inf"], "not a number"),
    ],
)
def test_refusals_are_one_sentence(cli: Cli, arguments: list[str], words: str) -> None:
    result = cli("ride", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint


def test_rack_on_an_axle_without_one(cli: Cli) -> None:
    result = cli("ride", HARDPOINTS / "marten_rear.toml", "--rack", "5")
    assert result.code == 2
    assert "has no [rack]" in result.complaint
