"""The lines on measurement files: what each gives, or why it does not count, and what must be said."""

from dataclasses import dataclass

from readiness.assessment.records import Assessment, MeasurementUse
from readiness.outputs.words import value_title

_IN_SWEEP, _POINTS = "_in_sweep", "measured "  # a value and its points as the sweep has them
NOTHING_ASKED = "Counts; no value that is worked out here takes it."
ONLY_POINTS = "Gives points for the drawings only."


@dataclass(frozen=True)
class MeasurementRow:
    """One measurement file as it is printed."""

    file: str
    kind: str
    done_on: str
    use: str
    remarks: tuple[str, ...]


def measurement_rows(assessment: Assessment) -> tuple[MeasurementRow, ...]:
    """Return one line for each measurement file of the folder."""
    return tuple(
        MeasurementRow(
            file=each.file.removeprefix("measurements/"),
            kind=each.kind,
            done_on=each.done_on.isoformat() if each.done_on else "not dated",
            use=_use(each),
            remarks=each.remarks,
        )
        for each in assessment.measurements
    )


def _use(measurement: MeasurementUse) -> str:
    if measurement.gives:
        titles = dict.fromkeys(value_title(name.replace(_IN_SWEEP, "")).lower() for name in measurement.gives)
        kept = [title for title in titles if not title.startswith(_POINTS)]
        return f"Gives {', '.join(kept)}." if kept else ONLY_POINTS
    if measurement.why_not:
        reasons = "; ".join(measurement.why_not)
        return f"Does not count here: {reasons}" + ("" if reasons.endswith("?") else ".")
    return NOTHING_ASKED
