"""The hardpoint file as it is written: a pydantic model, in the file's own axes and units."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import AfterValidator, BaseModel, ConfigDict, Field

LARGEST = 1e6
"""No number of a car is larger, in any unit."""


def _one_line(text: str) -> str:
    if not text.isprintable():
        raise ValueError("is not one line of printable text; write it in one line")
    return text


Title = Annotated[str, Field(max_length=200), AfterValidator(_one_line)]
Number = Annotated[float, Field(ge=-LARGEST, le=LARGEST, allow_inf_nan=False)]
Positive = Annotated[float, Field(gt=0.0, le=LARGEST, allow_inf_nan=False)]
Point = Annotated[list[Number], Field(min_length=3, max_length=3)]


class Table(BaseModel):
    """Every table refuses keys that it does not know."""

    model_config = ConfigDict(extra="forbid", strict=True)


class VehicleTable(Table):
    axle: Literal["front", "rear"] = Field("front", description="which axle this is")
    wheelbase: Positive | None = Field(None, description="distance to the other axle, length unit")
    other_axle: str | None = Field(None, description="file of the other axle, relative to this one")
    cg_height: Positive | None = Field(None, description="centre of gravity above the road, length unit")
    brake_share: Annotated[float, Field(ge=0.0, le=1.0, allow_inf_nan=False)] | None = Field(
        None, description="share of the braking force at this axle, 0 to 1"
    )
    brakes: Literal["outboard", "inboard"] | None = Field(None, description="where brake torque is reacted")
    drive: Literal["outboard", "inboard"] | None = Field(None, description="where drive torque is reacted")
    front_overhang: Positive | None = Field(None, description="front axle to the foremost body corner, length unit")
    body_width: Positive | None = Field(None, description="width of the body at that corner, length unit")


class WheelTable(Table):
    loaded_radius: Positive = Field(description="wheel centre to road at rest, length unit")
    tyre_width: Positive | None = Field(None, description="length unit")
    rim_diameter: Positive | None = Field(
        None, description="diameter across which workshop toe is measured, length unit"
    )
    rim_width: Positive | None = Field(None, description="length unit")


class SetupTable(Table):
    toe_in: Annotated[float, Field(gt=-20.0, lt=20.0, allow_inf_nan=False)] = Field(
        0.0, description="deg each wheel, toe-in +"
    )
    camber: Annotated[float, Field(gt=-20.0, lt=20.0, allow_inf_nan=False)] = Field(
        0.0, description="deg, top outboard +"
    )


class RackTable(Table):
    axis: Point | None = Field(None, description="direction of the rack in the file's axes; to the left when left out")
    stroke: Positive = Field(description="travel each way, length unit")
    travel_per_turn: Positive | None = Field(
        None, description="rack travel for one turn of the hand wheel, length unit"
    )


class DoubleWishbonePoints(Table):
    upper_pivot_front: Point
    upper_pivot_rear: Point
    upper_ball_joint: Point
    lower_pivot_front: Point
    lower_pivot_rear: Point
    lower_ball_joint: Point
    tie_rod_inner: Point
    tie_rod_outer: Point
    wheel_centre: Point


class StrutPoints(Table):
    lower_pivot_front: Point
    lower_pivot_rear: Point
    lower_ball_joint: Point
    strut_top_mount: Point
    strut_axis_point: Point = Field(description="any point of the strut's axis, fixed to the upright")
    tie_rod_inner: Point
    tie_rod_outer: Point
    wheel_centre: Point


class DoubleWishboneCorner(Table):
    type: Literal["double-wishbone"]
    points: DoubleWishbonePoints


class StrutCorner(Table):
    type: Literal["strut"]
    points: StrutPoints


AnyCorner = Annotated[DoubleWishboneCorner | StrutCorner, Field(discriminator="type")]


class HardpointFile(Table):
    """One file, one axle."""

    file_schema: Literal[1] = Field(1, alias="schema", description="version of this format")
    title: Title = ""
    axes: Literal["iso-8855", "sae-j670"] = Field(
        "iso-8855", description="iso-8855: x forward, y left, z up; sae-j670: x forward, y right, z down"
    )
    length_unit: Literal["mm", "m", "in"] = "mm"
    vehicle: VehicleTable = Field(default_factory=lambda: VehicleTable.model_validate({}))
    wheel: WheelTable
    setup: SetupTable = Field(default_factory=lambda: SetupTable.model_validate({}))
    rack: RackTable | None = Field(None, description="leave out where the inner tie rod joint is fixed to the body")
    left: AnyCorner
    right: AnyCorner | None = Field(None, description="leave out for the mirror image of the left")
    targets: dict[str, Any] | None = Field(None, description="limits that `toewright check` tests")
    tolerance: dict[str, Any] | None = Field(None, description="build scatter of the points")
    adjusters: dict[str, Any] | None = Field(None, description="what the workshop can turn and shim")


def json_schema() -> dict[str, Any]:
    """JSON schema of the hardpoint file, for editors."""
    schema = HardpointFile.model_json_schema(by_alias=True)
    return {"$schema": "https://json-schema.org/draft/2020-12/schema", **schema, "title": "toewright hardpoint file"}
