"""Reading a program must start fast: nothing heavy is loaded."""

import subprocess
import sys

HEAVY = {"numpy", "scipy", "shapely", "jinja2", "pypdf", "weasyprint", "matplotlib", "markdown_it", "xlsxwriter"}


def test_the_reader_loads_nothing_heavy():
    """Reading a folder loads neither numpy, shapely, jinja2 nor any other large library."""
    code = "import sys, readiness.program.reading, readiness.program.starter; print(*sys.modules)"
    loaded = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout.split()
    assert not HEAVY & {name.split(".")[0] for name in loaded}
