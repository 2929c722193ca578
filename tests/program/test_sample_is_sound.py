"""The sample program is sound, so that what it shows are gaps and not slips of the pen."""

from pathlib import Path

from readiness.program.reading import questions, read_folder

SAMPLE = Path(__file__).parents[2] / "sample_program"


def test_the_sample_has_no_problems_and_no_questions():
    """Every file of the sample is read without a problem or question."""
    assert questions(read_folder(SAMPLE)) == ()
