"""What is odd is asked about, what cannot be is refused, and what is right passes in silence."""

import pytest
from folder_texts import problems, read, room

from readiness.program.reading import questions

FLOOR = "[[-365, -420], [330, -420], [330, 270], [-365, 270]]"
BARRIER = "barriers:\n  - id: west\n    room: vault-a\n    role: primary\n    surface: x-min-wall\n"


def barrier(**fields: object) -> str:
    return BARRIER + "".join(f"    {name}: {value}\n" for name, value in fields.items())


def program(**fields: object) -> str:
    return "format: 1\n" + "".join(f"{name}: {value}\n" for name, value in fields.items())


def course(**fields: object) -> str:
    return program(courses="[{id: standard, " + ", ".join(f"{name}: {value}" for name, value in fields.items()) + "}]")


def beam(**fields: object) -> str:
    inner = ", ".join(f"{name}: {value}" for name, value in fields.items())
    return f"machines: [{{id: linac-1, beams: [{{id: e6, {inner}}}]}}]\n"


SOUND = {
    "a vault": {"rooms": room(floor_polygon_cm=FLOOR, isocentre_height_cm=130, ceiling_height_cm=300)},
    "a stand against the wall": {
        "rooms": room(
            floor_polygon_cm=FLOOR,
            obstructions="[{id: s, x_min_cm: -110, x_max_cm: 110, y_min_cm: 130, y_max_cm: 270, bottom_cm: 0, top_cm: 300}]",
        )
    },
    "a beam": {"equipment": beam(r50_cm=2.36, rp_cm=2.92, mode_gantry_range_deg="[70, 110, 250, 290]")},
    "a course": {"program": course(total_dose_gy=36, dose_per_cycle_gy=2, cycles=18, break_after_cycle=10)},
    "a course of thirds": {"program": course(total_dose_gy=10, dose_per_cycle_gy=0.83333, cycles=12)},
    "a wall": {
        "rooms": room(floor_polygon_cm=FLOOR),
        "shielding": barrier(
            inner_face_cm=-365, distance_m=7.1, layers="[{material: concrete, thickness_cm: 215, density_g_per_cm3: 2.35}]"
        ),
    },
    "a door without layers": {"rooms": room(), "shielding": BARRIER.replace("role: primary", "role: door") + "    layers: []\n"},
    "a limit": {"local_rules": 'limits: [{id: l, rule: r, limit: 0.02, unit: "mSv/week", source: law}]\n'},
    "tasks in a row": {"program": program(tasks="[{id: a, working_days: 1}, {id: b, working_days: 2, waits_for: [a]}, {id: dry-run, waits_for: [a, b, train-staff]}]")},
    "a calibration": {"dosimetry": "instruments: [{id: c, calibrated_on: 2026-02-10, calibration_due_on: 2028-02-10}]\n"},
    "costs": {"program": program(costs="[{id: stand, low: 1, likely: 1, high: 3}]")},
    "days off": {"program": program(closed_dates="[2026-12-24]", target_first_patient_date="2027-05-17")},
}

ASKED = {
    "isocentre height of 80 cm is unusual (90 to 160 cm); check it": {"rooms": room(isocentre_height_cm=80)},
    "site pressure of 55 kPa is unusual (60 to 106 kPa); check it": {"rooms": room(site_pressure_kpa=55)},
    "it reaches 40 cm beyond the walls of vault-a": {
        "rooms": room(
            floor_polygon_cm=FLOOR,
            obstructions="[{id: s, x_min_cm: 0, x_max_cm: 370, y_min_cm: 0, y_max_cm: 10, bottom_cm: 0, top_cm: 3}]",
        )
    },
    "the practical range is 2 times R50; 1.2 to 1.3 times is usual": {"equipment": beam(r50_cm=2, rp_cm=4)},
    "its top at 320 cm is above every ceiling (at most 300 cm)": {
        "rooms": room(ceiling_height_cm=300),
        "equipment": "degraders: [{id: sheet, foot_height_cm: 115, height_cm: 205}]\n",
    },
    "an internal eye shield thicker than 10 mm fits under no lid": {
        "equipment": "patient_shields: [{id: eye, organ: eyes-internal, thickness_mm: 20}]\n"
    },
    "fraction may mean a cycle or a session; say which of them": {"program": course(title='"36 fractions"')},
    "2027-05-16 is a Sunday": {"program": program(target_first_patient_date="2027-05-16")},
    "2027-05-17 is a day on which nobody is treated": {
        "program": program(target_first_patient_date="2027-05-17", closed_dates="[2027-05-17]")
    },
    "all closed days are in 2024, but the first patient comes in 2027": {
        "program": program(target_first_patient_date="2027-05-17", closed_dates="[2024-12-24]")
    },
    "competency was checked on 2025-01-01, before training was given on 2026-01-01": {
        "staffing": "people: [{id: P1, trained_on: 2026-01-01, competency_on: 2025-01-01}]\n"
    },
    "its calibration would hold 10 years; check the year": {
        "dosimetry": "instruments: [{id: c, calibrated_on: 2026-02-10, calibration_due_on: 2036-02-10}]\n"
    },
    "2 full-time equivalents, but the people described are 1": {
        "staffing": "roles: [{id: physicist, available_fte: 2}]\npeople: [{id: P1, role: physicist}]\n"
    },
    "it is 2150 cm thick; were the layers given in millimetres?": {
        "rooms": room(),
        "shielding": barrier(layers="[{material: concrete, thickness_cm: 950}, {material: earth, thickness_cm: 1000}, {material: earth, thickness_cm: 200}]"),
    },
    "lead of 2.35 g/cm³ is unusual (10.5 to 11.5 g/cm³)": {
        "rooms": room(),
        "shielding": barrier(layers="[{material: lead, thickness_cm: 5, density_g_per_cm3: 2.35}]"),
    },
    "leakage has a use factor of 1, not 0.25": {
        "rooms": room(),
        "shielding": barrier(existing_workload="[{energy_mv: 6, kind: leakage, workload_gy_per_week: 200, use_factor: 0.25}]"),
    },
    "its inner face is at -300 cm, the floor ends at -365 cm": {
        "rooms": room(floor_polygon_cm=FLOOR),
        "shielding": barrier(inner_face_cm=-300),
    },
    "6.1 m, but face, thickness and 0.3 m add up to 7.1 m": {
        "rooms": room(),
        "shielding": barrier(inner_face_cm=-365, distance_m=6.1, layers="[{material: concrete, thickness_cm: 215}]"),
    },
    "25 MV lies outside the tables of tenth-value layers (4 to 18 MV)": {
        "rooms": room(),
        "shielding": barrier(existing_workload="[{energy_mv: 25, kind: leakage, workload_gy_per_week: 200}]"),
    },
    "7500 µSv/h is far from usual limits, 0.1 to 1000: off by 1000?": {
        "shielding": "protection: {instantaneous_limit_usv_per_h: 7500}\n"
    },
    "20 mSv/week is far from usual limits, 0.001 to 4: off by 1000?": {
        "local_rules": 'limits: [{id: l, rule: r, limit: 20, unit: "mSv/week", source: law}]\n'
    },
}

PLAN = "[{id: p, room: vault-a, plane_distance_cm: 400, tilt_deg: 18}]"
ASKED |= {
    "goes into the floor at 400 cm and 18°, 2.476 cm below it": {"rooms": room(isocentre_height_cm=95), "program": program(plans=PLAN)},
    "goes into the ceiling at 400 cm and 18°, 17.48 cm above it": {
        "rooms": room(isocentre_height_cm=150, ceiling_height_cm=230), "program": program(plans=PLAN)
    },
}

REFUSED = {
    "corner 2 is written twice in a row": {"rooms": room(floor_polygon_cm="[[-9, -300], [300, -300], [300, -300], [0, 300]]")},
    "the corners lie on one line": {"rooms": room(floor_polygon_cm="[[-300, 0], [0, 0], [300, 0]]")},
    "a stop lies from 0 to below 360 degrees, not at 360": {"equipment": "stands: [{id: t, stops_deg: [0, 60, 360]}]\n"},
    "the stop at 60 degrees is written twice": {"equipment": "stands: [{id: t, stops_deg: [0, 60, 60]}]\n"},
    "no gantry turns from 0 to 900 degrees": {"equipment": "machines: [{id: l, gantry_range_deg: [0, 900]}]\n"},
    "its width (1 cm) is not above its thickness": {"equipment": "degraders: [{id: s, thickness_cm: 1, width_cm: 1}]\n"},
    "a break of 2 weeks has no cycle after which it begins": {"program": course(break_after_cycle=0, break_weeks=2)},
    "the shortest patient (200 cm) exceeds the tallest (190 cm)": {
        "program": program(shortest_patient_cm=200, tallest_patient_cm=190)
    },
    "2026-12-24 is written twice": {"program": program(closed_dates="[2026-12-24, 2026-12-24]")},
    "write the two-letter code of the country, not Germany": {"program": program(holidays_country="Germany")},
    "it waits for itself: a waits for a": {"program": program(tasks="[{id: a, working_days: 1, waits_for: [a]}]")},
    "the low figure 5 exceeds the high one, 3": {"program": program(costs="[{id: stand, low: 5, high: 3}]")},
    "its calibration is due on the day it was made": {
        "dosimetry": "instruments: [{id: c, calibrated_on: 2026-02-10, calibration_due_on: 2026-02-10}]\n"
    },
    "it is not a SHA-256 hash: 64 digits 0-9 a-f": {
        "approvals": 'approvals: [{id: a, document: "1.1", role: chief, name: N, approved_on: 2026-01-01, body_sha256: abc}]\n'
    },
    "nobody covers for themselves": {"staffing": "people: [{id: P1, cover_for: P1}]\n"},
    "a course stops at 5 %, before 10 % is investigated": {
        "dosimetry": "in_vivo: {investigate_beyond_percent: 10, stop_beyond_percent: 5}\n"
    },
    "a recess of 20 cm goes through its 10 cm": {
        "rooms": room(),
        "shielding": barrier(recess_cm=20, layers="[{material: steel, thickness_cm: 10}]"),
    },
    "name the rule or the criterion that it replaces, not both": {
        "local_rules": "limits: [{id: l, rule: r, criterion: c, limit: 20, unit: cm, source: law}]\n"
    },
    "one_of needs limits, a list": {
        "local_rules": "rules: [{id: r, title: t, strength: must, source: law, subject: s, condition: one_of}]\n"
    },
    "is_yes has no limit; leave it out": {
        "local_rules": "rules: [{id: r, title: t, strength: must, source: law, subject: s, condition: is_yes, limit: 3}]\n"
    },
    "its thickness": {"equipment": "degraders: [{id: s, thickness_cm: 2, width_cm: 1}]\n"},
    "were the corners given in millimetres?": {
        "rooms": room(floor_polygon_cm="[[-3650, -4200], [3300, -4200], [3300, 2700], [-3650, 2700]]")
    },
}


@pytest.mark.parametrize("texts", SOUND.values(), ids=SOUND)
def test_what_is_right_passes_in_silence(texts):
    """A sound description gives neither a problem nor a question."""
    assert problems(**texts) == []


@pytest.mark.parametrize(("words", "texts"), ASKED.items())
def test_what_is_odd_is_asked_about(words, texts):
    """An odd number is asked about, and the program is read all the same."""
    (question,) = questions(read(**texts))
    assert words in question.message
    assert question.kind == "question"


@pytest.mark.parametrize(("words", "texts"), REFUSED.items())
def test_what_cannot_be_is_refused(words, texts):
    """What cannot be stops the reading."""
    (problem,) = problems(**texts)
    assert words in problem
    assert problem.endswith("[impossible]")


def test_a_length_far_outside_is_refused():
    """A height that makes sense only in metres is no question: it was given in metres."""
    (problem,) = problems(rooms=room(isocentre_height_cm="1.3"))
    assert problem.endswith("did you mean 130 (cm)? [unit]")


def test_a_number_in_a_plan_is_asked_about():
    """A choice outside its plausible range is asked about, at its own place."""
    (problem,) = problems(program="format: 1\nplans:\n  - id: first\n    tilt_deg: 3\n")
    assert problem == "program.yaml:4:15: plan first: tilt of 3 ° is unusual (8 to 25 °); check it [question]"


def test_a_number_in_another_unit_is_told_once():
    """A ceiling of 3.1 is in metres; that isocentre and boxes lie above it is not told beside it."""
    box = "[{id: s, x_min_cm: 0, x_max_cm: 9, y_min_cm: 0, y_max_cm: 9, bottom_cm: 0, top_cm: 200}]"
    found = problems(rooms=room(isocentre_height_cm=130, ceiling_height_cm="3.1", obstructions=box))
    assert 1 == len(found)
    assert "did you mean 310 (cm)? [unit]" in found[0]
