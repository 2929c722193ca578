"""
How long local rules take to check, good ones and misspelt ones, in growing numbers: the ratio stays that of the numbers.

Run: python -m tests.benchmarks.local_rules
"""

import contextlib
import time

from readiness.assessment.catalogue import catalogue
from readiness.assessment.local_rules import with_local
from readiness.assessment.ruleset import load_rules
from readiness.errors import ProgramProblems
from tests.assessment.small import item, program

COUNTS = (1250, 2500, 5000)


def seconds(count: int, subject: str) -> float:
    """Return how long so many local rules take."""
    fields = {
        "title": "Own", "strength": "must", "source": "Own", "condition": "at_least", "limit": 300,
        "message": "{observed} of {limit}.",
    }  # fmt: skip
    own = [item("local_rule", f"own-{each}", subject=subject.format(each), **fields) for each in range(count)]
    of, rules, known = program(*own), load_rules(catalogue()), catalogue()
    start = time.perf_counter()
    with contextlib.suppress(ProgramProblems):
        with_local(rules, of, known)
    return time.perf_counter() - start


def main() -> None:
    """Print seconds and how they grow."""
    for words, subject in (("good", "room.ceiling_height_cm"), ("misspelt", "room.celing_height_{}_cm")):
        took = [seconds(count, subject) for count in COUNTS]
        growth = took[-1] / took[0] / (COUNTS[-1] / COUNTS[0])
        print(f"{COUNTS[-1]} {words} rules: {took[-1]:.2f} s; {growth:.1f} times what their number explains")


if __name__ == "__main__":
    main()
