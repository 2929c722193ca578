"""
What no single entry shows to be wrong: geometry, dates and numbers that cannot be, or that smell.

One subject a module, one fact a function. What cannot be is a problem; what is odd is a question, which is
shown but stops nothing.
"""

from dataclasses import replace

from readiness.errors import Place, Problem
from readiness.program.fields import Schemas
from readiness.program.items import Program
from readiness.program.plausibility import (
    course_parts,
    courses,
    equipment,
    measurements,
    plans,
    records,
    rooms,
    shielding,
    tasks,
)
from readiness.program.plausibility.stated import QUESTION, Check
from readiness.program.plausibility.units import MISTAKEN, mistaken_units

JUDGED_WHOLE = frozenset({"local_rule", "local_limit"})  # kinds whose checks ask for what is not there

CHECKS: tuple[Check, ...] = (
    *rooms.CHECKS,
    *equipment.CHECKS,
    *courses.CHECKS,
    *course_parts.CHECKS,
    *plans.CHECKS,
    *tasks.CHECKS,
    *records.CHECKS,
    *shielding.CHECKS,
    *measurements.CHECKS,
)


def implausible(program: Program, schemas: Schemas) -> list[Problem]:
    """
    Return everything in a program that cannot be, and everything that is odd.

    A number in another unit is told once; what would follow from it elsewhere is not.
    """
    mistaken = [*mistaken_units(program, schemas)]
    usable = _without({problem.place for problem in mistaken if problem.kind == MISTAKEN}, program)
    found = [problem for check in CHECKS for problem in check(usable)]
    return [*found, *mistaken]


def _without(places: set[Place], program: Program) -> Program:
    """Return a program without the entries at some places."""
    if not places:
        return program
    kept = []
    for item in program.items:
        fields = {name: stated for name, stated in item.fields.items() if stated.place not in places}
        kept.append(replace(item, fields=fields))
    return replace(program, items=tuple(kept))


def is_question(problem: Problem) -> bool:
    """Return whether a problem is only a question, which stops nothing."""
    return problem.kind == QUESTION
