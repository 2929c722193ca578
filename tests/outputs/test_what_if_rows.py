"""What-if tables of the report page: every number with its basis, what is not known said so, no script needed."""

from dataclasses import replace
from datetime import date

from readiness.assessment.difference import TurnedFinding
from readiness.assessment.records import Ref
from readiness.assessment.what_if import Variant
from readiness.outputs.page import make_page
from readiness.outputs.what_if_rows import questions
from tests.outputs import fakes

ITEM = Ref("arrangement", "chosen")
PRESENT = Variant("plane distance", "400 cm", True, "ready when gaps close", "feasible", date(2027, 6, 9),
                  (("arrangement.vertical_uniformity_percent", 4.8, "measured"),), ())  # fmt: skip
NEARER = Variant(
    "plane distance", "350 cm", False, "ready when gaps close", "feasible", None,
    (("arrangement.vertical_uniformity_percent", 6.2, "predicted"), ("program.wait_weeks", 2.0, "predicted")),
    tuple(TurnedFinding(f"rule-{number}", ITEM, "met", "not met", "must", "") for number in range(14)),
)  # fmt: skip


def test_numbers_carry_their_basis_and_blanks_say_so() -> None:
    """A figure that only one variant has is a column for all; what is the same in all has none."""
    (question,) = questions((PRESENT, NEARER))
    assert ("First patient not before", "Uniformity along the height", "Mean wait for a start") == question.heads
    assert ("verdict: ready when gaps close", "feasibility: feasible") == question.alike
    first, second = question.lines
    assert ("2027-06-09", "4.8 % (measured)", "not known") == first.cells
    assert ("-", "6.2 % (predicted)", "2 weeks (predicted)") == second.cells


def test_a_wait_without_end_is_not_called_unknown() -> None:
    """Nobody starts in time because more are referred than there are places."""
    figures = (("program.started_in_time_percent", 0.0, "predicted"),)
    crowded = replace(NEARER, figures=figures)
    (question,) = questions((NEARER, crowded))
    assert "grows without end" in question.lines[1].cells


def test_what_turns_is_listed_and_the_rest_counted() -> None:
    """Twelve are named."""
    (question,) = questions((PRESENT, NEARER))
    assert "rule-0 (must): met, then not met" == question.lines[1].turned[0]
    assert (12, 2) == (len(question.lines[1].turned), question.lines[1].more)


def test_the_page_shows_every_variant_without_script() -> None:
    """A table for each question, the present choice marked; without variants no such part."""
    page = make_page(fakes.empty(), {}, (PRESENT, NEARER)).decode()
    part = page[page.index('<section aria-labelledby="what-if">') :]
    part = part[: part.index("</section>")]
    assert "350 cm" in part
    assert '<span class="mark date">as it is</span>' in part
    assert "14 findings" in part
    assert "<script" not in part
    assert 'id="what-if"' not in make_page(fakes.empty(), {}).decode()
