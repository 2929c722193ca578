"""What all charts share: size, font, and SVG with title and description, the same every time."""

import io
import re
from typing import Any

_WIDE_IN = 6.5


def figure_of(panels: int, *, height_in: float) -> tuple[Any, list[Any]]:
    """Return a figure and its panels, one below the other."""
    from matplotlib import rc_context
    from matplotlib.figure import Figure

    with rc_context({"font.family": "DejaVu Sans", "font.size": 9}):
        figure = Figure(figsize=(_WIDE_IN, height_in), layout="constrained")
        return figure, [figure.add_subplot(panels, 1, number + 1) for number in range(panels)]


def svg_of(figure: Any, name: str, title: str, words: str) -> str:
    """Return a figure as SVG: no date, no random names, title and description inside."""
    from matplotlib import rc_context

    stream = io.StringIO()
    with rc_context({"svg.fonttype": "none", "svg.hashsalt": name, "font.family": "DejaVu Sans"}):
        figure.savefig(stream, format="svg", metadata={"Date": None, "Creator": None})
    text = stream.getvalue()
    text = text[text.index("<svg") :]
    text = re.sub(r"<metadata>.*?</metadata>", "", text, flags=re.DOTALL)
    text = re.sub(r'(id="|url\(#|href="#)', rf"\1{name}-", text)
    head = f"<title>{title}</title><desc>{words}</desc>"
    return re.sub(r"(<svg[^>]*>)", lambda found: found[1] + head, text, count=1)
