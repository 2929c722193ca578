"""The gap list as a workbook and as CSV: what, for which item, who, when, and which rules it closes."""

import csv
import io
from datetime import datetime

from readiness.assessment.records import Assessment, Gap
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.words import date_words, item_words

HEADINGS = (
    "Gap", "What is to be done", "Item", "Owner", "Task", "Earliest date", "Progress", "Strength", "Phase",
    "When due", "Subject", "Closes rules", "Where",
)  # fmt: skip
_WIDTHS = (34, 70, 26, 20, 24, 13, 22, 10, 12, 12, 18, 36, 22)
_RISKY = ("=", "+", "-", "@", "\t", "\r")


def rows(assessment: Assessment) -> list[tuple[str, ...]]:
    """Return the gap list as rows of text, in the order of the gaps."""
    return [_row(gap) for gap in assessment.gaps]


def _row(gap: Gap) -> tuple[str, ...]:
    return (
        gap.id,
        gap.what,
        item_words(gap.item),
        gap.owner,
        gap.task,
        date_words(gap.earliest),
        gap.progress,
        gap.strength,
        gap.phase,
        "due later" if gap.due_later else "due now",
        gap.topic,
        ", ".join(dict.fromkeys(rule for rule, _ in gap.findings)),
        str(gap.where) if gap.where else "",
    )


def to_csv(assessment: Assessment) -> bytes:
    """Return the gap list as CSV (UTF-8 with BOM, CRLF); cells that a spreadsheet would run are defused."""
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\r\n")
    writer.writerow(HEADINGS)
    writer.writerows([_defused(cell) for cell in row] for row in rows(assessment))
    for note in _notes(assessment):
        writer.writerow([note])
    return b"\xef\xbb\xbf" + stream.getvalue().encode("utf-8")


def _defused(cell: str) -> str:
    return f"'{cell}" if cell.startswith(_RISKY) and cell != "-" else cell


def _notes(assessment: Assessment) -> list[str]:
    first = f"{assessment.program}, as of {assessment.as_of.isoformat()}. {CAUTION}"
    return [first, INVENTED] if assessment.invented else [first]


def to_xlsx(assessment: Assessment) -> bytes:
    """Return the gap list as a workbook, the same bytes for the same assessment."""
    import xlsxwriter

    stream = io.BytesIO()
    options = {"in_memory": True, "strings_to_formulas": False, "strings_to_urls": False,
               "strings_to_numbers": False}  # fmt: skip
    with xlsxwriter.Workbook(stream, options) as book:
        created = datetime(assessment.as_of.year, assessment.as_of.month, assessment.as_of.day)
        book.set_properties({"title": "Gap list", "created": created})
        sheet = book.add_worksheet("Gaps")
        head = book.add_format({"bold": True, "bottom": 1, "text_wrap": True, "valign": "top"})
        body = book.add_format({"text_wrap": True, "valign": "top"})
        notes = _notes(assessment)
        for line, note in enumerate(notes):
            sheet.write_string(line, 0, note)
        top = len(notes) + 1
        for column, (heading, width) in enumerate(zip(HEADINGS, _WIDTHS, strict=True)):
            sheet.set_column(column, column, width)
            sheet.write_string(top, column, heading, head)
        for line, row in enumerate(rows(assessment), start=top + 1):
            for column, cell in enumerate(row):
                sheet.write_string(line, column, cell, body)
        sheet.autofilter(top, 0, top + max(1, len(assessment.gaps)), len(HEADINGS) - 1)
        sheet.freeze_panes(top + 1, 1)
        sheet.set_landscape()
        sheet.fit_to_pages(1, 0)
        sheet.repeat_rows(top)
    return stream.getvalue()
