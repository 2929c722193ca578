"""From an assessment to every output: the order in which documents, pictures, page and binder are made."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date

from readiness.assessment.assessment import assess
from readiness.assessment.records import Assessment
from readiness.assessment.what_if import what_ifs
from readiness.outputs import gap_list
from readiness.outputs.calendar_file import calendar_files
from readiness.outputs.charts import make_charts
from readiness.outputs.contract import to_json
from readiness.outputs.documents import render_bodies
from readiness.outputs.page import make_page
from readiness.outputs.pictures import make_pictures
from readiness.outputs.press_cache import PrintCache
from readiness.outputs.survey_sheet import NAME as SURVEY_SHEET
from readiness.outputs.survey_sheet import survey_sheet
from readiness.program.items import Program


@dataclass(frozen=True)
class Made:
    """Files by name, and a sentence for each that could not be written."""

    files: dict[str, bytes]
    not_written: tuple[str, ...]


def assessed(program: Program, as_of: date) -> Assessment:
    """Return the assessment of a program with the bodies of its documents compared with their approvals."""

    def bodies(assessment: Assessment) -> Mapping[str, str]:
        rendered = render_bodies(assessment, program.texts, {})
        return {each.number: each.body_sha256 for each in rendered}

    return assess(program, as_of, bodies)


def make_all(
    assessment: Assessment, program: Program, as_of: date, say: Callable[[str], None],
    kept: PrintCache | None = None, *, with_what_ifs: bool = True,
) -> Made:  # fmt: skip
    """
    Return every output; if Pango is missing, everything but the PDFs.

    Args:
        assessment: What the outputs show.
        program: Where its texts and files come from.
        as_of: The date in the files.
        say: Told what is being done.
        kept: Printed files of earlier runs; without it every page is laid out.
        with_what_ifs: Assess the program again with single choices changed, for the report page.
    """
    from readiness.outputs import binder, press

    files = {
        "assessment.json": to_json(assessment).encode("utf-8"),
        "gaps.csv": gap_list.to_csv(assessment),
        "gaps.xlsx": gap_list.to_xlsx(assessment),
    }
    sheet = survey_sheet(assessment)
    files |= {SURVEY_SHEET: sheet} if sheet is not None else {}
    files |= calendar_files(assessment)
    say("drawing")
    pictures = {**make_pictures(assessment), **make_charts(assessment)}
    say("writing documents")
    rendered = render_bodies(assessment, program.texts, pictures)
    variants = what_ifs(program, as_of, say) if with_what_ifs else ()
    files["report.html"] = make_page(assessment, pictures, variants)
    inside = {f"program/{name}": content for name, content in sorted(program.contents.items())}
    inside |= {name: files[name] for name in ("assessment.json", "gaps.csv")}
    try:
        files |= binder.make(assessment, rendered, inside, as_of, say, kept)
    except press.PressMissing as missing:
        files |= binder.html_files(assessment, rendered)
        return Made(files, (str(missing), "not written: binder.pdf, documents/*.pdf"))
    return Made(files, ())
