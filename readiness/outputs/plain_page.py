"""A page of its own without script: one file, no request to anywhere, the caution at its head."""

from collections.abc import Sequence

from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.holes import plain
from readiness.resources import template_file

_POLICY = "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'"


def section(name: str, heading: str, body: str) -> str:
    """Return a part of a page under its heading; the body is HTML."""
    return f'<section aria-labelledby="{name}"><h2 id="{name}">{plain(heading)}</h2>{body}</section>\n'


def table(label: str, heads: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """Return a table that scrolls by itself; the first cell of each row is its heading."""
    head = "".join(f'<th scope="col">{plain(each)}</th>' for each in heads)
    lines = "".join(_row(row) for row in rows)
    return (
        f'<div class="scroll" tabindex="0" role="region" aria-label="Table: {plain(label)}">'
        f'<table class="wide"><thead><tr>{head}</tr></thead><tbody>\n{lines}</tbody></table></div>'
    )


def _row(row: Sequence[str]) -> str:
    cells = "".join(f"<td>{plain(cell)}</td>" for cell in row[1:])
    return f'<tr><th scope="row">{plain(row[0])}</th>{cells}</tr>\n'


def whole_page(title: str, body: str, *, invented: bool = False) -> bytes:
    """Return a page; the body is HTML."""
    css = template_file("page", "report.css").read_text(encoding="utf-8")
    notes = f"<p><b>Caution.</b> {plain(CAUTION)}</p>"
    if invented:
        notes += f"<p><b>Invented.</b> {plain(INVENTED)}</p>"
    return (
        '<!DOCTYPE html>\n<html lang="en"><head><meta charset="utf-8">'
        '<meta name="viewport" content="width=device-width, initial-scale=1">'
        f'<meta http-equiv="Content-Security-Policy" content="{_POLICY}">'
        f"<title>{plain(title)}</title><style>{css}</style></head>\n"
        f'<body><header><h1>{plain(title)}</h1><div class="note">{notes}</div></header>\n'
        f"<main>{body}</main></body></html>\n"
    ).encode()
