"""Rooms drawn at random (seeded): the exact answers agree with trying every place, or every ray, one by one."""

from math import cos, pi, sin
from random import Random
from typing import Any

import pytest
from sample_rooms import table
from shapely import LineString, Polygon, box, union_all

from readiness.calculations.beam_geometry import plane_x_cm, source_position, tilted_gantry_angles
from readiness.calculations.beam_path import beam_path
from readiness.calculations.obstructions import Box, boxes_of
from readiness.calculations.plane_reach import farthest_plane
from readiness.calculations.room_plan import WayPlan, floor_fault

STAND = {
    "source_axis_distance_cm": 100,
    "isocentre_height_cm": 130,
    "stand_width_cm": 90,
    "stand_depth_cm": 90,
    "stand_outline_turns": False,
    "stand_off_cm": 20,
    "access_width_cm": 80,
    "access_headroom_cm": 210,
    "patient_top_cm": 260,
}
TINY = 1e-4


def drawn_room(seed: int) -> tuple[Any, Any]:
    """Return a star-shaped room of four to nine corners with up to four boxes in it."""
    random = Random(seed)
    while True:
        turns = sorted(random.uniform(0, 2 * pi) for _ in range(random.randint(4, 9)))
        floor = tuple((random.uniform(120, 450) * cos(a), random.uniform(120, 450) * sin(a)) for a in turns)
        if floor_fault(floor_polygon_cm=floor) == "":
            break
    rows = []
    for number in range(random.randint(0, 4)):
        x, y = random.uniform(-400, 400), random.uniform(-300, 300)
        heights = random.choice([(0, 100), (0, 300), (220, 300), (250, 300), (262, 300)])
        rows.append((f"box {number}", x, x + random.uniform(5, 80), y, y + random.uniform(5, 80), *heights))
    return floor, table(*rows)


def end_of_axis(floor: Any, boxes: tuple[Box, ...], sign: int) -> float:
    """Return how far the level axis gets from the isocentre."""
    ray = LineString([(0, 0), (sign * 1000, 0)])
    meets = [part.bounds for part in getattr(ray.intersection(floor.boundary), "geoms", [ray & floor.boundary])]
    ends = [min(abs(bounds[0]), abs(bounds[2])) for bounds in meets]
    for one in boxes:
        shadow = ray.intersection(box(one.x_min_cm, one.y_min_cm, one.x_max_cm, one.y_max_cm))
        if one.bottom_cm < 130 < one.top_cm and not shadow.is_empty:
            ends.append(min(abs(shadow.bounds[0]), abs(shadow.bounds[2])))
    return min(ends)


@pytest.mark.parametrize("seed", range(40))
def test_farthest_plane_is_the_farthest_place_found_by_trying(seed: int) -> None:
    """No place 1 cm farther is free, and the one found is."""
    corners, obstructions = drawn_room(seed)
    side, sign = ((90, -1), (270, 1))[seed % 2]
    floor, boxes = Polygon(corners), boxes_of(obstructions=obstructions)
    stop = end_of_axis(floor, boxes, sign)

    def standing(height: float) -> Any:
        low = [one for one in boxes if one.bottom_cm < height]
        return union_all([box(one.x_min_cm, one.y_min_cm, one.x_max_cm, one.y_max_cm) for one in low])

    body, staff = standing(260), standing(210)
    way = WayPlan(corners, [one for one in boxes if one.bottom_cm < 210], 80)

    def free(shape: Any, things: Any) -> bool:
        inner = shape.buffer(-TINY, join_style="mitre")
        return bool(floor.contains(inner) and not things.intersects(inner))

    def fits(u: float) -> bool:
        back, front = sorted((sign * (u - 45), sign * (u + 65)))
        if u > stop or not free(box(back, -45, front, 45), body):
            return False
        stand = box(sign * u - 45, -45, sign * u + 45, 45)
        return any(
            free(box(sign * u - 45, min(0, far), sign * u + 45, max(0, far)), staff)
            and way.is_clear(list(stand.exterior.coords), (sign * u, far / 125 * 85), None)
            for far in (-125, 125)
        )

    tried = [u for u in range(int(stop) + 1) if fits(u)]
    found = farthest_plane(
        side_deg=side, floor_polygon_cm=corners, obstructions=obstructions, **STAND
    ).farthest_plane_distance_cm
    if found is None:
        assert tried == []
    else:
        assert max(tried, default=0) - 0.01 <= found - 100 <= max(tried, default=0) + 1.01
        assert fits(max(0.0, found - 100 - 0.01))


def is_cut(source: Any, target: tuple[float, float, float], boxes: tuple[Box, ...]) -> bool:
    """Return whether a straight ray from source to target runs through any box (slab by slab)."""
    for one in boxes:
        enters, leaves = 0.0, 1.0
        slabs = (
            (one.x_min_cm, one.x_max_cm),
            (one.y_min_cm, one.y_max_cm),
            (one.bottom_cm - 130, one.top_cm - 130),
        )
        for start, end, (low, high) in zip(source, target, slabs, strict=True):
            run = end - start
            if abs(run) < 1e-12:
                enters, leaves = (enters, leaves) if low < start < high else (1.0, 0.0)
                continue
            first, last = sorted(((low - start) / run, (high - start) / run))
            enters, leaves = max(enters, first), min(leaves, last)
        if enters < leaves:
            return True
    return False


@pytest.mark.parametrize("seed", range(12))
def test_cut_is_the_share_of_rays_that_meet_something(seed: int) -> None:
    """Of 60 x 80 rays from each source over the patient the cut share is as calculated, within 1.5 %."""
    random = Random(seed)
    side, sign = ((90, -1), (270, 1))[seed % 2]
    rows = []
    for number in range(3):
        x, y = sign * random.uniform(100, 240), random.uniform(-18, 10)
        bottom = random.choice((50, 90, 140))
        rows.append((f"box {number}", x, x + 20, y, y + random.uniform(3, 20), bottom, bottom + random.uniform(20, 90)))
    obstructions = table(*rows)
    room = ((-400.0, -400.0), (400.0, -400.0), (400.0, 400.0), (-400.0, 400.0))
    found = beam_path(
        side_deg=side, tilt_deg=16, plane_distance_cm=400, source_axis_distance_cm=100, opening_cm=40,
        collimator_angle_deg=0, floor_polygon_cm=room, obstructions=obstructions, isocentre_height_cm=130,
        stand_height_cm=40, patient_top_cm=260, patient_width_cm=80,
    )  # fmt: skip
    plane = plane_x_cm(side_deg=side, distance_cm=400, source_axis_distance_cm=100)
    targets = [(plane, -40 + 80 * (i + 0.5) / 60, -90 + 220 * (j + 0.5) / 80) for i in range(60) for j in range(80)]
    boxes = boxes_of(obstructions=obstructions)
    shares = []
    for gantry in tilted_gantry_angles(side_deg=side, tilt_deg=16):
        source = source_position(gantry_angle_deg=gantry, source_axis_distance_cm=100)
        shares.append(sum(is_cut(source, target, boxes) for target in targets) / 48)
    assert max(shares) == pytest.approx(found.cut_percent, abs=1.5)
    assert found.cut_percent > 0
