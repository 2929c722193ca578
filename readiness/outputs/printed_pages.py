"""Pages that are about to be written, as what is drawn on them; reads the objects of a PDF in the making."""

from typing import Any

from readiness.outputs.page_words import Drawn

_DEEPEST = 4


def printed_pages(pdf: Any) -> list[tuple[Drawn, int]]:
    """Return what is drawn on each page of an unwritten PDF, and its number of form fields."""
    made = _Made(pdf)
    return [made.page(made.at(reference)) for reference in pdf.page_references]


class _Made:
    """The objects of an unwritten PDF, each font and drawing read once."""

    def __init__(self, pdf: Any) -> None:
        self._objects = pdf.objects
        self._fonts: dict[Any, dict[str, bytes]] = {}
        self._parts: dict[Any, Drawn] = {}

    def at(self, entry: Any) -> Any:
        """Return the object that an entry is or refers to."""
        if isinstance(entry, bytes) and entry.endswith(b" R"):
            return self._objects[int(entry.split()[0])]
        return entry

    def page(self, page: Any) -> tuple[Drawn, int]:
        """Return what is drawn on a page, and its number of form fields."""
        resources = self.at(page["Resources"])
        drawn = Drawn(
            _content(self.at(page["Contents"])), self._fonts_of(resources), self._drawings(resources, 0)
        )
        notes = [self.at(each) for each in page.get("Annots", ())]
        return drawn, sum(1 for note in notes if note.get("Subtype") == "/Widget")

    def _fonts_of(self, resources: Any) -> dict[str, bytes]:
        entry = resources.get("Font")
        if entry is None:
            return {}
        key = entry if isinstance(entry, bytes) else id(entry)
        if key not in self._fonts:
            fonts = {name: self.at(font) for name, font in self.at(entry).items()}
            self._fonts[key] = {
                name: _content(self.at(font["ToUnicode"]))
                for name, font in fonts.items()
                if hasattr(font, "get") and "ToUnicode" in font
            }
        return self._fonts[key]

    def _drawings(self, resources: Any, depth: int) -> dict[str, Drawn]:
        entry = resources.get("XObject")
        if entry is None or depth >= _DEEPEST:
            return {}
        return {name: self._part(part, depth) for name, part in self.at(entry).items()}

    def _part(self, entry: Any, depth: int) -> Drawn:
        key = entry if isinstance(entry, bytes) else id(entry)
        if key not in self._parts:
            stream = self.at(entry)
            if stream.extra.get("Subtype") != "/Form":
                return Drawn(b"")  # a picture made of points; its words are not read
            resources = self.at(stream.extra.get("Resources", {}))
            self._parts[key] = Drawn(
                _content(stream), self._fonts_of(resources), self._drawings(resources, depth + 1)
            )
        return self._parts[key]


def _content(stream: Any) -> bytes:
    return b"\n".join(each if isinstance(each, bytes) else _written(each) for each in stream.stream)


def _written(entry: Any) -> bytes:
    return entry.data if hasattr(entry, "data") else str(entry).encode("ascii")
