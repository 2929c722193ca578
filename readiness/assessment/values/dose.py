"""
Monitor units of a cycle, for limits, minutes and checks; and the x-ray dose of a course.

Monitor units stay inside: no value shows a number that could be set on a machine.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.beam_field import upper_share
from readiness.calculations.course_xray_dose import course_xray_dose, highest_composite_xray_percent
from readiness.calculations.day_one_gate import expected_day_one_percent
from readiness.calculations.monitor_units import (
    ON_EACH,
    TOTAL_OF_BOTH,
    MonitorUnits,
    beam_against_limit,
    dual_field_mu,
    rotating_mu,
)
from readiness.calculations.prescription_depth import fraction_at_prescription
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ROTATING, LYING = "rotating-platform", "moving-couch"
NO_QUESTION = "none"
_DEPTHS = ("at_4_mm_percent", "at_10_mm_percent", "at_20_mm_percent")
_COURSES = "rows course: id dose_per_cycle_gy sessions_per_cycle prescription_depth_mm"


@dataclass(frozen=True)
class PlannedCycles:
    """The monitor units of a cycle of each course, with its sessions; never shown."""

    courses: tuple[tuple[str, int, MonitorUnits], ...]

    @property
    def largest_beam_mu(self) -> int:
        """Return the largest beam of any course."""
        return max(units.largest_beam_mu for _, _, units in self.courses)


def output_for_both(*, pair_output_cgy_per_mu: float, mu_convention: str) -> float:
    """Return the output per MU of both beams together, whatever the convention."""
    if mu_convention not in (TOTAL_OF_BOTH, ON_EACH):
        raise ValueError(f"pair convention {mu_convention!r} is not {TOTAL_OF_BOTH} or {ON_EACH}")
    return pair_output_cgy_per_mu / (2 if mu_convention == ON_EACH else 1)


def planned_cycles(
    *,
    technique: str,
    courses: Table,
    b_factor: float,
    total_output_cgy_per_mu: float,
    mu_share_upper: float | None,
    definition_confirmed: bool | None,
    at_4_mm_percent: float | None,
    at_10_mm_percent: float | None,
    at_20_mm_percent: float | None,
) -> PlannedCycles:
    """Return the monitor units of a cycle of each course, by a standing technique."""
    if technique == LYING:
        raise OutsideValidity("a lying technique has no B: its monitor units follow from passes and speed")
    if not courses.rows:
        raise OutsideValidity("there is no course to calculate a cycle of")
    depth_doses = (at_4_mm_percent, at_10_mm_percent, at_20_mm_percent)
    by = rotating_mu if technique == ROTATING else dual_field_mu
    return PlannedCycles(
        tuple(
            (
                str(course["id"]),
                int(course["sessions_per_cycle"] or 0),
                by(
                    dose_per_cycle_gy=float(course["dose_per_cycle_gy"] or 0),
                    b_factor=b_factor,
                    pair_output_cgy_per_mu=total_output_cgy_per_mu,
                    mu_convention=TOTAL_OF_BOTH,
                    depth_dose_fraction=_fraction(float(course["prescription_depth_mm"] or 0), depth_doses),
                    mu_share_upper=upper_share(mu_share_upper),
                    sessions_per_cycle=int(course["sessions_per_cycle"] or 0),
                    definition_confirmed=definition_confirmed is True,
                ),
            )
            for course in courses.records()
        )
    )


def _fraction(depth_mm: float, depth_doses: Sequence[float | None]) -> float:
    """Return the depth-dose fraction; at the skin no depth dose is needed."""
    if depth_mm == 0:
        return 1.0
    known = [dose for dose in depth_doses if dose is not None]
    if len(known) < len(_DEPTHS):
        raise OutsideValidity(f"a prescription at {depth_mm:g} mm needs the composite depth dose")
    return fraction_at_prescription(prescription_depth_mm=depth_mm, **dict(zip(_DEPTHS, known, strict=True)))


def part_of_limit(*, cycles: PlannedCycles, largest_mu_per_beam_mu: float) -> float:
    """Return the largest beam over what the mode allows in one."""
    return cycles.largest_beam_mu / largest_mu_per_beam_mu


def parts_of_beam(*, cycles: PlannedCycles, largest_mu_per_beam_mu: float) -> int:
    """Return the parts in which the largest beam would have to be given."""
    return beam_against_limit(
        largest_beam_mu=cycles.largest_beam_mu, mode_limit_mu=largest_mu_per_beam_mu
    ).parts


def factor_is_understood(*, b_factor_question: str, definition_confirmed: bool | None) -> bool:
    """Return whether a factor raises no question, or its definition has been confirmed."""
    return b_factor_question == NO_QUESTION or definition_confirmed is True


def second_difference(*, second_check_percent: float) -> float:
    """Return how far the second calculation is from the first, either way."""
    return abs(second_check_percent)


def second_check_day(*, second_check_on: date) -> date:
    """Return the day of the second calculation."""
    return second_check_on


def part_of_first_day(*, technique: str, b_factor: float) -> float | None:
    """Return the part of a cycle's dose that the front gets on day 1 of six positions."""
    return expected_day_one_percent(b_factor=b_factor) if technique == "six-position" else None


def highest_course_dose(*, totals_gy: Sequence[float]) -> float | None:
    """Return the total dose of the course with the highest; none without a course."""
    return max(totals_gy, default=None)


def worst_course_xray_dose(*, highest_course_dose_gy: float, composite_xray_percent: float) -> float:
    """Return the x-ray dose to the body of the course with the highest dose."""
    return course_xray_dose(
        total_dose_gy=highest_course_dose_gy, composite_xray_percent=composite_xray_percent
    )


def highest_fraction(*, highest_course_dose_gy: float, limit_gy: float) -> float:
    """Return the highest F with which the course with the highest dose keeps the limit."""
    return highest_composite_xray_percent(total_dose_gy=highest_course_dose_gy, xray_limit_gy=limit_gy)


def doses_of_courses(
    *, courses: Table, composite_xray_percent: float | None, at_4_mm_percent: float | None
) -> Table:
    """Return skin dose, dose at 4 mm and x-ray dose of each course, blank where not known."""
    rows = []
    for course in courses.records():
        total = float(course["dose_from_cycles_gy"] or 0)
        at_4_mm = None if at_4_mm_percent is None else total * at_4_mm_percent / 100
        xrays = None
        if composite_xray_percent is not None:
            xrays = course_xray_dose(total_dose_gy=total, composite_xray_percent=composite_xray_percent)
        rows.append((course["id"], total, at_4_mm, xrays))
    return Table.of(("course", "skin_dose_gy", "dose_at_4_mm_gy", "xray_dose_gy"), rows)


def lowest_full_dose_at_4_mm(
    *, totals_gy: Sequence[float], at_4_mm_percent: float, full_course_gy: float
) -> float | None:
    """Return the lowest dose at 4 mm of the full courses; none if there is no full course."""
    full = [total * at_4_mm_percent / 100 for total in totals_gy if total >= full_course_gy]
    return min(full, default=None)


_LIMIT = {
    "cycles": "arrangement.planned_cycles",
    "largest_mu_per_beam_mu": "beam.largest_mu_per_beam_mu",
}
_TOTALS = {"totals_gy": "each course.dose_from_cycles_gy"}
_HIGHEST = {"highest_course_dose_gy": "program.highest_course_dose_gy"}

UNITS: tuple[Definition, ...] = (
    Definition(
        "arrangement.total_output_cgy_per_mu",
        "Dose per MU of both beams together: measured, stated or else predicted; for limits and minutes.",
        by=output_for_both,
        takes={
            "pair_output_cgy_per_mu": "arrangement.pair_output_cgy_per_mu",
            "mu_convention": "plan.mu_convention",
        },
        otherwise="arrangement.predicted_pair_output_cgy_per_mu",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.planned_cycles",
        "Monitor units of a cycle of each course.",
        by=planned_cycles,
        takes={
            "technique": "arrangement.technique",
            "courses": _COURSES,
            "b_factor": "arrangement.b_factor",
            "total_output_cgy_per_mu": "arrangement.total_output_cgy_per_mu",
            "mu_share_upper": "plan.mu_share_upper?",
            "definition_confirmed": "plan.b_definition_confirmed?",
            "at_4_mm_percent": "arrangement.dose_at_4_mm_percent?",
            "at_10_mm_percent": "arrangement.dose_at_10_mm_percent?",
            "at_20_mm_percent": "arrangement.dose_at_20_mm_percent?",
        },
        internal=True,
    ),
    derived(
        "arrangement.mode_limit_ratio",
        "Largest beam of a cycle over what the mode allows for one beam.",
        part_of_limit,
        _LIMIT,
    ),
    derived(
        "arrangement.beam_parts",
        "Parts in which the largest beam would have to be given under the mode's limit.",
        parts_of_beam,
        _LIMIT,
    ),
    derived(
        "arrangement.b_factor_understood",
        "The multiple-field factor is of the expected size, or its definition has been confirmed.",
        factor_is_understood,
        {
            "b_factor_question": "arrangement.b_factor_question",
            "definition_confirmed": "plan.b_definition_confirmed?",
        },
    ),
    derived(
        "arrangement.second_check_percent",
        "Difference of the second, independent calculation from the first, either way.",
        second_difference,
        {"second_check_percent": "plan.second_check_percent"},
    ),
    derived(
        "arrangement.second_check_date",
        "Day of the second, independent calculation.",
        second_check_day,
        {"second_check_on": "plan.second_check_on"},
    ),
    derived(
        "arrangement.day_one_percent",
        "Part of a cycle's dose that the front of the trunk is expected to have after day 1.",
        part_of_first_day,
        {"technique": "arrangement.technique", "b_factor": "arrangement.b_factor"},
    ),
)

COURSES: tuple[Definition, ...] = (
    derived(
        "program.highest_course_dose_gy",
        "Total skin dose of the course with the highest.",
        highest_course_dose,
        _TOTALS,
    ),
    derived(
        "arrangement.course_xray_dose_gy",
        "X-ray dose to the body over the course with the highest dose.",
        worst_course_xray_dose,
        {**_HIGHEST, "composite_xray_percent": "arrangement.composite_xray_percent"},
    ),
    derived(
        "arrangement.highest_composite_xray_percent",
        "Highest x-ray fraction F of all dual fields with which that course keeps the limit.",
        highest_fraction,
        {**_HIGHEST, "limit_gy": "criterion.course_xray_dose_gy"},
    ),
    derived(
        "arrangement.course_doses",
        "Skin dose, dose at 4 mm and x-ray dose of each course.",
        doses_of_courses,
        {
            "courses": "rows course: id dose_from_cycles_gy",
            "composite_xray_percent": "arrangement.composite_xray_percent?",
            "at_4_mm_percent": "arrangement.dose_at_4_mm_percent?",
        },
    ),
    derived(
        "arrangement.full_course_dose_at_4_mm_gy",
        "Lowest dose at 4 mm of the courses that count as full.",
        lowest_full_dose_at_4_mm,
        {
            **_TOTALS,
            "at_4_mm_percent": "arrangement.dose_at_4_mm_percent",
            "full_course_gy": "criterion.full_course_dose_gy",
        },
    ),
)

DEFINITIONS: tuple[Definition, ...] = (*UNITS, *COURSES)
