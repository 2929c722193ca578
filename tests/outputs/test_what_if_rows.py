"""What-if tables of the report page: every number with its basis, what is not known said so, no script needed."""

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
    """A figure that only one variant has is a column for all."""
    (question,) = questions((PRESENT, NEARER))
    assert "Wait for a start" in question.heads
    first, second = question.lines
    assert ("feasible", "2027-06-09", "4.8 % (measured)", "not known") == first.cells
    assert ("feasible", "-", "6.2 % (predicted)", "2 weeks (predicted)") == second.cells


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
    assert '<span class="mark">as it is</span>' in part
    assert "14 findings" in part
    assert "<script" not in part
    assert "what-if" not in make_page(fakes.empty(), {}).decode()
