"""A survey to fill in: the CSV that comes back as a measurement, with every place and field already in it."""

import csv
import io

from readiness.assessment.matching import required_header
from readiness.assessment.records import Assessment, Value
from readiness.outputs.lookup import Lookup
from readiness.quantities import Table

NAME = "survey-to-fill.csv"
_KIND = "survey"
_CHOICES = ("degrader", "side_deg")  # what the readings depend on, written in if the plan states it


def survey_sheet(assessment: Assessment) -> bytes | None:
    """Return the file, or None if no place to survey is known; readings and conditions are left blank."""
    lookup = Lookup(assessment)
    spots = lookup.get("arrangement.field_spots")
    row = lookup.row
    if row is None or not isinstance(spots, Value) or not isinstance(spots.value, Table):
        return None
    ending = f" from {row.item.id}"
    places = [
        (value.item.id.removesuffix(ending), str(value.value))
        for value in assessment.values
        if value.name == "exposure.title" and value.item.id.endswith(ending)
    ]
    if not places:
        return None
    gantries = dict.fromkeys(entry["gantry_deg"] for entry in spots.value.records())
    side = lookup.get("arrangement.side_deg")
    known = {kind: item.rpartition("/")[2] for kind, item in row.parts} | {"kind": _KIND}
    if isinstance(side, Value):
        known["side_deg"] = str(side.value)
    stream = io.StringIO()
    for key in (*required_header(_KIND), *(each for each in _CHOICES if each in known)):
        stream.write(f"# {key}: {known.get(key, '')}".rstrip() + "\n")
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(("barrier", "gantry_deg", "reading_usv_per_h", "place"))
    for barrier, title in places:
        writer.writerows((barrier, gantry, "", title) for gantry in gantries)
    return stream.getvalue().encode("utf-8")
