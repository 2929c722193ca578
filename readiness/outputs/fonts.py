"""The fonts of every PDF: DejaVu as matplotlib ships it, found by file, so that no machine adds its own."""

import os
import shutil
from functools import cache
from importlib.util import find_spec
from pathlib import Path
from tempfile import TemporaryDirectory

FACES = ("DejaVuSans.ttf", "DejaVuSans-Bold.ttf", "DejaVuSans-Oblique.ttf", "DejaVuSansMono.ttf")
_CONFIGURATION = """<?xml version="1.0"?>
<!DOCTYPE fontconfig SYSTEM "fonts.dtd">
<fontconfig>
  <dir>{folder}</dir>
  <cachedir>{folder}/cache</cachedir>
</fontconfig>
"""


@cache
def shipped_faces() -> tuple[Path, ...]:
    """Return the font files; matplotlib is looked for, not imported."""
    found = find_spec("matplotlib")
    if found is None or found.origin is None:
        raise FileNotFoundError(
            "the installation is incomplete: matplotlib, which ships the fonts, is missing"
        )
    folder = Path(found.origin).parent / "mpl-data" / "fonts" / "ttf"
    return tuple(folder / face for face in FACES)


@cache
def use_only_ours() -> TemporaryDirectory[str]:
    """Make fontconfig see these fonts alone; must run before the first use of Pango."""
    folder = TemporaryDirectory(prefix="readiness-fonts-")
    for face in shipped_faces():
        shutil.copyfile(face, Path(folder.name) / face.name)
    configuration = Path(folder.name) / "fonts.conf"
    configuration.write_text(_CONFIGURATION.format(folder=folder.name), encoding="utf-8")
    os.environ["FONTCONFIG_FILE"] = str(configuration)
    os.environ.pop("FONTCONFIG_PATH", None)
    return folder


@cache
def _known_characters() -> frozenset[int]:
    from fontTools.ttLib import TTFont  # type: ignore[import-untyped]

    characters = []
    for face in shipped_faces()[:3]:
        with TTFont(face, lazy=True) as font:
            characters.append(set(font.getBestCmap()))
    return frozenset(set.intersection(*characters))


def missing_characters(text: str) -> tuple[str, ...]:
    """Return the characters of a text that the fonts cannot show, each once, in order."""
    known = _known_characters()
    return tuple(sorted({each for each in text if ord(each) not in known and not each.isspace()}))
