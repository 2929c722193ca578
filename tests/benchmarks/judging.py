"""
How long 40,000 findings take, against reading one attribute as often.

Run: python -m tests.benchmarks.judging
"""

import time

from readiness.assessment.judge import judge
from tests.assessment.small import graph, item, program, rule

ITEMS, RULES = 4000, 10


def main() -> None:
    """Print seconds and the ratio."""
    of = program(*(item("instrument", f"i{number}", pieces=number) for number in range(ITEMS)))
    rules = [
        rule(id=f"r{number}", subject="instrument.pieces", limit=number * 10, message="{item} has {observed} of {limit}.")
        for number in range(RULES)
    ]
    values = graph(of)
    start = time.perf_counter()
    findings = judge(rules, values)
    took = time.perf_counter() - start
    start = time.perf_counter()
    for _ in range(RULES):
        for each in of.items:
            _ = each.fields.get("pieces")
    bare = time.perf_counter() - start
    print(f"{len(findings)} findings in {took:.2f} s; {took / bare:.0f} times reading the field as often")


if __name__ == "__main__":
    main()
