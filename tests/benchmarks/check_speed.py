"""
How long reading a program folder takes, against a bare cerberus script that does no more than it must.

    python tests/benchmarks/check_speed.py [FOLDER] [RUNS]

The bare script imports yaml and cerberus, loads the same files with the C parser and the csv module, and
validates each file with a ready-made cerberus schema: no places, no messages of its own, no references, no
geometry. Each run is a new process. The ratio of the medians is to stay below 1.5. A second ratio compares with
a script that also skips cerberus's check of the schema itself, as the reader does (tests make that check).
"""

import json
import os
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

from readiness.program.field_schema import KindSchema
from readiness.program.fields import schemas
from readiness.program.limits import cerberus_schema
from readiness.program.measurement_kinds import measurement_kind, measurement_kinds

ROOT = Path(__file__).parents[2]
OURS = "import sys; from pathlib import Path; from readiness.program.reading import read_folder, questions; {}"
BARE = """
import csv, json, sys
from pathlib import Path
import yaml, cerberus
from cerberus.schema import UnvalidatedSchema
unchecked = UnvalidatedSchema if sys.argv[3] == "unchecked" else dict
schemas = json.loads(Path(sys.argv[2]).read_text())
wrong = 0
for path in sorted(Path(sys.argv[1]).glob("*.yaml")):
    with path.open("rb") as stream:
        data = yaml.load(stream, Loader=yaml.CSafeLoader) or {}
    wrong += not cerberus.Validator(unchecked(schemas[path.name])).validate(data)
for path in sorted(Path(sys.argv[1]).glob("measurements/*.csv")):
    lines = path.read_text().splitlines()
    header = dict(line[2:].split(": ", 1) for line in lines if line.startswith("# "))
    rows = list(csv.DictReader(line for line in lines if not line.startswith("# ")))
    data = {"header": header, "rows": rows}
    wrong += not cerberus.Validator(unchecked(schemas[header["kind"]])).validate(data)
"""
NUMBERS = {"number": "float", "integer": "int"}


def bare_schema(kind: KindSchema) -> dict:
    """Return the cerberus schema of one kind and everything written inside it."""
    rules = plain(cerberus_schema(kind.fields))
    for key, section in kind.sections.items():
        rules[key] = {"type": "dict", "schema": bare_schema(section)}
    for key, listed in kind.lists.items():
        entry = {"id": {"type": "string", "required": True}, **bare_schema(listed)}
        rules[key] = {"type": "list", "schema": {"type": "dict", "schema": entry}}
    return rules


def plain(rules: object) -> object:
    """Return rules without what cerberus alone does not know."""
    if isinstance(rules, dict):
        return {key: plain(value) for key, value in rules.items() if not (key == "above" and not isinstance(value, dict))}
    return rules


def bare_schemas() -> dict:
    """Return the schemas by file name and, for measurements, by kind."""
    found = {name: bare_schema(file.top) for name, file in schemas().files.items()}
    for name in measurement_kinds():
        kind = measurement_kind(name)
        header = {key: {"type": "string"} for key in kind.header}
        row = {key: {"type": "string"} for key in kind.columns}
        rows = {"type": "list", "schema": {"type": "dict", "schema": row}}
        found[name] = {"header": {"type": "dict", "schema": header}, "rows": rows}
    return found


def seconds(code: str, cache: str, *arguments: str) -> float:
    """Return how long a new process takes to run some code, with every module compiled before."""
    environment = {**os.environ, "PYTHONPYCACHEPREFIX": cache}
    environment.pop("PYTHONDONTWRITEBYTECODE", None)
    start = time.perf_counter()
    subprocess.run([sys.executable, "-c", code, *arguments], cwd=ROOT, check=True, env=environment)
    return time.perf_counter() - start


def main() -> None:
    """Print the medians and their ratio."""
    folder = sys.argv[1] if len(sys.argv) > 1 else str(ROOT / "sample_program")
    runs = int(sys.argv[2]) if len(sys.argv) > 2 else 15
    ours = OURS.format("questions(read_folder(Path(sys.argv[1])))")
    with tempfile.TemporaryDirectory() as cache:
        ready_made = Path(cache) / "schemas.json"
        ready_made.write_text(json.dumps(bare_schemas()), encoding="utf-8")
        scripts = ((ours, ""), (BARE, "checked"), (BARE, "unchecked"))
        times = [
            [seconds(code, cache, folder, str(ready_made), how) for code, how in scripts] for _ in range(runs + 1)
        ]
    times = times[1:]  # the first run compiles
    reader, bare, barest = (statistics.median(column) * 1000 for column in zip(*times, strict=True))
    print(f"reader {reader:.0f} ms, bare yaml and cerberus {bare:.0f} ms: ratio {reader / bare:.2f}")
    print(f"without cerberus's check of the schema {barest:.0f} ms: ratio {reader / barest:.2f}")


if __name__ == "__main__":
    main()
