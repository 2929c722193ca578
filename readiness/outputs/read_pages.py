"""Pages of a PDF that was opened again: what is drawn on them, by hash, and what was added to them."""

from collections.abc import Mapping
from typing import Any

from readiness.assessment.unaltered import PageMark
from readiness.outputs.binder_manifest import page_mark
from readiness.outputs.page_words import Drawn, PageWords, words_hash

_DEEPEST = 4
_ORDINARY_NOTES = ("/Link", "/Widget", "/Popup")


def read_pages(reader: Any, known: Mapping[str, str]) -> tuple[PageMark, ...]:
    """Return every page; words that another program wrote anew are read in pypdf's way as well."""
    words = PageWords()
    cache: dict[Any, Any] = {}
    marks = []
    for page in reader.pages:
        notes = _annotations(page)
        fields = sum(1 for note in notes if note.get("/Subtype") == "/Widget" and not _is_signature(note))
        mark = page_mark("", _drawn(page, cache, 0), fields, words)
        if known and mark.words not in known:
            again = words_hash(page.extract_text())
            mark = PageMark(mark.part, again, mark.drawing, fields) if again in known else mark
        marks.append(mark)
    return tuple(marks)


def _drawn(holder: Any, cache: dict[Any, Any], depth: int) -> Drawn:
    content = holder["/Contents"].get_object() if "/Contents" in holder else None
    resources = _at(holder, "/Resources")
    parts = {}
    if depth < _DEEPEST:
        for name, part in _at(resources, "/XObject").items():
            key = (getattr(part, "idnum", None) or id(part), depth)
            if key not in cache:
                drawing = part.get_object()
                is_form = drawing.get("/Subtype") == "/Form"
                cache[key] = _form(drawing, cache, depth + 1) if is_form else Drawn(b"")
            parts[name[1:]] = cache[key]
    return Drawn(_content(content), _fonts(resources, cache), parts)


def _form(drawing: Any, cache: dict[Any, Any], depth: int) -> Drawn:
    inner = _drawn(drawing, cache, depth)
    return Drawn(drawing.get_data(), inner.fonts, inner.parts)


def _at(holder: Any, key: str) -> Any:
    entry = holder.get(key) if hasattr(holder, "get") else None
    entry = entry.get_object() if entry is not None else {}
    return entry if isinstance(entry, dict) else {}


def _content(entry: Any) -> bytes:
    if entry is None:
        return b""
    if isinstance(entry, list):
        return b"\n".join(each.get_object().get_data() for each in entry)
    data: bytes = entry.get_data() if hasattr(entry, "get_data") else b""
    return data


def _fonts(resources: Any, cache: dict[Any, Any]) -> dict[str, bytes]:
    entry = resources.get("/Font")
    key = ("fonts", getattr(resources.get("/Font"), "idnum", None) or id(entry))
    if entry is not None and key not in cache:
        cache[key] = {
            name[1:]: table.get_data()
            for name, font in _at(resources, "/Font").items()
            if hasattr(table := _font_table(font), "get_data")
        }
    found: dict[str, bytes] = cache.get(key, {})
    return found


def _font_table(font: Any) -> Any:
    font = font.get_object()
    table = font.get("/ToUnicode") if hasattr(font, "get") else None
    return None if table is None else table.get_object()


def _annotations(page: Any) -> list[Any]:
    notes = page.get("/Annots")
    listed = notes.get_object() if notes is not None else []
    each = [note.get_object() for note in listed] if isinstance(listed, list) else []
    return [note for note in each if hasattr(note, "get")]


def _is_signature(note: Any) -> bool:
    return bool(note.get("/FT") == "/Sig")


def added_notes(reader: Any) -> tuple[str, ...]:
    """Return one line for each page with notes or comments on it; links and form fields are none."""
    found = []
    for number, page in enumerate(reader.pages, 1):
        kinds = [str(note.get("/Subtype", "note"))[1:] for note in _annotations(page)]
        added = [kind for kind in kinds if f"/{kind}" not in _ORDINARY_NOTES]
        if added:
            found.append(f"page {number}: {', '.join(sorted(set(added)))}")
    return tuple(found)
