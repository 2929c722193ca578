"""Which measurements stand for an item, why others do not, and which one is asked for."""

from datetime import date

from readiness.assessment.definition import Measured
from readiness.assessment.input_gathering import InputGathering
from readiness.assessment.matching import disagreements, void
from readiness.assessment.records import PROGRAM, Cause, Ref
from readiness.program.measurement_kinds import measurement_kind


class MeasurementSearch(InputGathering):
    """Finds measurements among the items."""

    def measurements(self, measured: Measured, ref: Ref) -> tuple[list[Ref], tuple[Cause, ...]]:
        """Return the measurements that stand for an item, oldest first, and why others do not."""
        found: list[tuple[date, Ref]] = []
        near: list[Cause] = []
        owners = self.owners(ref)
        for candidate in self.refs("measurement"):
            item = self._items[candidate]
            if item.get("kind") != measured.kind:
                continue
            reasons = list(disagreements(item, owners, ref, self.get, measured.ignores))
            invalid = void(item, self.program, self.as_of)
            if invalid:
                reasons.append(invalid)
            done = item.get("date")
            if not reasons and isinstance(done, date):
                found.append((done, candidate))
            elif len(reasons) <= 2:
                words = f"{item.place.file} does not count for {ref}: {'; '.join(reasons)}."
                near.append(Cause("measurement", measured.kind, ref, words))
        found.sort()
        return [candidate for _, candidate in found], tuple(near)

    def wanted(self, measured: Measured, ref: Ref, near: tuple[Cause, ...]) -> tuple[Cause, ...]:
        """Return the measurement that is asked for, and why those at hand do not count."""
        asked = measurement_kind(measured.kind)
        kind = asked.attaches_to
        whole = Ref(kind, self.owners(ref).get(kind, ref.id))
        of = "" if whole == PROGRAM else f" for {whole}"
        title = asked.title[0].lower() + asked.title[1:]
        words = f"Measure {title}{of} (a file of the kind {measured.kind})."
        return tuple(sorted({Cause("measurement", measured.kind, whole, words), *near}))
