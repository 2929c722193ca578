"""
Values of items, worked out when asked for, once, with their descent.

For one value the order is: a measurement that agrees, what the department stated, the calculation,
a default that nobody stated. What a measurement replaced stays visible.
"""

from collections.abc import Mapping
from dataclasses import replace
from datetime import date
from typing import Any

from readiness.assessment.absence import (
    for_standing_only,
    is_for_standing_only,
    unknown_field,
    unknown_owner,
)
from readiness.assessment.catalogue import Catalogue
from readiness.assessment.definition import Definition, Measured, Take
from readiness.assessment.measurement_search import MeasurementSearch
from readiness.assessment.records import Cause, Gone, Got, Input, Ref, Value, weakest
from readiness.assessment.rounding import settled
from readiness.errors import OutsideValidity
from readiness.program.items import Item, Program
from readiness.quantities import Uncertain
from readiness.units import unit_of, words_of

Memory = dict[Any, Any]


class Graph(MeasurementSearch):
    """All values of one program on one day."""

    def __init__(
        self,
        program: Program,
        made: tuple[Item, ...],
        catalogue: Catalogue,
        as_of: date,
        limits: Mapping[str, Value],
        memory: Memory | None = None,
    ) -> None:
        """
        Take the program, the items that the assessment made, and local limits of criteria.

        ``memory`` holds what calculations gave for which inputs; graphs of programs that are nearly the same
        share it.
        """
        self._memory = memory
        super().__init__(program, made, catalogue, as_of)
        self._limits = limits
        self._known: dict[tuple[str, Ref], Got] = {}
        self._asked: dict[tuple[str, Ref], Got] = {}  # the same by who asks, so that owners are found once
        self._sections = catalogue.kinds.sections
        self.assumed_below: dict[tuple[str, Ref], frozenset[Cause]] = {}  # kept by causes.py

    # -- values --------------------------------------------------------------------------------

    def supply(self, name: str, item: Ref, value: Any) -> None:
        """Give a value that only a later step can know (a document's approval)."""
        self._known[(name, item)] = Value(name, item, value, unit_of(name), "stated")
        self._asked.clear()

    def get(self, name: str, asking: Ref) -> Got:
        """Return a value of an item, or of what it belongs to."""
        known = self._asked.get((name, asking))
        if known is None:
            known = self._asked[(name, asking)] = self._found(name, asking)
        return known

    def _found(self, name: str, asking: Ref) -> Got:
        kind = name.partition(".")[0]
        if kind == "criterion":
            return self._limit(name)
        owners = self.owners(asking)
        owner = owners.get(kind) or (kind if kind in self._sections else None)
        if owner is None:
            return Gone((unknown_owner(kind, asking, owners),))
        ref = Ref(kind, owner)
        key = (name, ref)
        known = self._known.get(key)
        if known is None:
            known = self._known[key] = self._work_out(name, ref)
        return known

    def values(self) -> tuple[Value, ...]:
        """Return every value known so far that is fit to be shown, in order of name and item."""
        shown = [
            value
            for (name, _), value in self._known.items()
            if isinstance(value, Value) and not self._is_internal(name)
        ]
        return tuple(sorted(shown, key=lambda value: (value.name, value.item)))

    def _limit(self, name: str) -> Value:
        if name in self._limits:
            return self._limits[name]
        criterion = self.catalogue.criteria[name]
        return Value(
            name, Ref("criterion", "criterion"), criterion.value, unit_of(name), "stated",
            source=criterion.source, known=criterion.known,
        )  # fmt: skip

    def _work_out(self, name: str, ref: Ref) -> Got:
        definition = self.catalogue.definitions.get(name)
        if definition is not None and definition.by_technique:
            return self._by_technique(definition, ref)
        stated = self._stated(name, ref)
        claim: Got | None = stated
        if definition is not None and claim is None and (definition.by or definition.of):
            claim = self._calculated(definition, ref)
        if definition is not None and definition.otherwise and not isinstance(claim, Value):
            claim = self._otherwise(definition, ref, claim)
        if claim is None or isinstance(claim, Gone):
            default = self._assumed(name, ref)
            claim = default or claim
        if claim is None and self.catalogue.kinds.field(name) is not None:
            claim = self._absent(name, ref)
        if definition is not None and definition.measured is not None:
            return self._measured(definition, definition.measured, ref, claim)
        return claim if claim is not None else self._absent(name, ref)

    def _stated(self, name: str, ref: Ref) -> Value | None:
        field = name.partition(".")[2]
        item = self._items.get(ref)
        if field == "id":
            return Value(name, ref, ref.id, "", "stated", where=item.place if item else None)
        if name == "program.as_of_date":
            return Value(name, ref, self.as_of, "", "stated")
        stated = item.fields.get(field) if item else None
        if stated is None:
            return None
        return Value(name, ref, stated.value, unit_of(name), "stated", where=stated.place)

    def _assumed(self, name: str, ref: Ref) -> Value | None:
        field = self.catalogue.kinds.field(name)
        exists = ref in self._items or ref.kind in self.kinds.sections
        if field is None or field.assumed is None or not exists:
            return None
        assumed = field.assumed
        return Value(
            name, ref, assumed.value, unit_of(name), "assumed", source=assumed.source, known=assumed.known
        )

    def _absent(self, name: str, ref: Ref) -> Gone:
        item = self.item(ref)
        if item is not None and is_for_standing_only(name, item):
            return Gone((for_standing_only(),))
        return Gone((unknown_field(name, ref, self.catalogue.kinds),))

    # -- calculations --------------------------------------------------------------------------

    def _calculated(self, definition: Definition, ref: Ref) -> Got:
        if definition.of:
            whole = self.get(definition.of, ref)
            if isinstance(whole, Gone):
                return whole
            result = getattr(whole.value, definition.part)
            if result is None:
                return self._no_answer(definition, ref)
            inputs = whole.inputs if self._is_internal(definition.of) else (
                Input("record", definition.of, whole.item),
            )  # fmt: skip
            return self._value(definition, ref, result, inputs, whole.basis, None)
        return self._run(definition, definition.by, self.catalogue.takes[definition.name], ref, None)

    def _no_answer(self, definition: Definition, ref: Ref, measurement: Ref | None = None) -> Gone:
        """Return that a value cannot be had from what is there; of a file of readings, that it lacks it."""
        item = self._items.get(measurement) if measurement else None
        if definition.measured is not None and item is not None:
            words = f"{item.place.file} does not give {words_of(definition.name)} of {ref}."
            return Gone((Cause("measurement", definition.measured.kind, ref, words),))
        words = f"{definition.meaning} It has no answer here."
        return Gone((Cause("validity", definition.name, ref, words),))

    def _otherwise(self, definition: Definition, ref: Ref, claim: Gone | None) -> Got:
        stands_in = self.get(definition.otherwise, ref)
        own = claim.causes if claim is not None else ()
        if isinstance(stands_in, Gone):
            return Gone(tuple(sorted({*own, *stands_in.causes})))
        inputs = self._shown_inputs("otherwise", stands_in)
        return replace(stands_in, name=definition.name, item=ref, inputs=inputs)

    def _by_technique(self, definition: Definition, ref: Ref) -> Got:
        technique = self.get("arrangement.technique", ref)
        if isinstance(technique, Gone):
            return technique
        stands_for = definition.by_technique.get(str(technique.value))
        found = self.get(stands_for, ref) if stands_for else self._no_answer(definition, ref)
        if isinstance(found, Gone):
            return found
        inputs = self._shown_inputs("by technique", found)
        return replace(found, name=definition.name, item=ref, inputs=inputs, instead_of=None)

    def _run(
        self,
        definition: Definition,
        by: Any,
        takes: tuple[tuple[str, Take], ...],
        ref: Ref,
        measurement: Ref | None,
        part: str = "",
    ) -> Got:
        given, inputs, bases, causes = self._gather(takes, ref, measurement)
        if causes and not definition.complete:
            return Gone(tuple(sorted(set(causes))))
        try:
            result = self._worked_out(by, given)
            if causes and result == definition.complete:
                return Gone(tuple(sorted(set(causes))))
        except OutsideValidity as outside:
            return Gone((Cause("validity", definition.name, ref, str(outside)),))
        except ValueError as contradiction:
            return Gone((Cause("contradiction", definition.name, ref, f"{contradiction} ({ref})"),))
        if result is not None and part:
            result = getattr(result, part)
        if result is None:
            return self._no_answer(definition, ref, measurement)
        basis = "measured" if measurement else weakest(bases + (["predicted"] if definition.model else []))
        return self._value(definition, ref, result, inputs, basis, measurement)

    def _worked_out(self, by: Any, given: dict[str, Any]) -> Any:
        """Return what a calculation gives, from the memory where the same inputs were worked out before."""
        if self._memory is None:
            return by(**given)
        try:
            key = (by, tuple(given.items()))
            if key not in self._memory:
                self._memory[key] = by(**given)
            return self._memory[key]
        except TypeError:  # an input that has no hash
            return by(**given)

    def _value(
        self,
        definition: Definition,
        ref: Ref,
        result: Any,
        inputs: tuple[Input, ...],
        basis: str,
        measurement: Ref | None,
    ) -> Value:
        sd = None
        if isinstance(result, Uncertain):
            result, sd = result.value, settled(result.sd)
        if not definition.internal:
            result = settled(result)
        item = self._items.get(measurement) if measurement else None
        return Value(
            definition.name, ref, result, unit_of(definition.name), basis, sd, inputs,
            item.place if item else None, definition.source, definition.known,
        )  # fmt: skip

    def _measured(self, definition: Definition, measured: Measured, ref: Ref, claim: Got | None) -> Got:
        found, near = self.measurements(measured, ref)
        for measurement in reversed(found):
            got = self._analysed(definition, measured, ref, measurement)
            if isinstance(got, Value):
                replaced = claim if isinstance(claim, Value) else None
                return Value(**{**got.__dict__, "instead_of": replaced})
            near += got.causes
        if isinstance(claim, Value):
            return claim
        own = claim.causes if claim is not None else ()
        return Gone(tuple(sorted({*own, *self.wanted(measured, ref, near)})))

    def _analysed(self, definition: Definition, measured: Measured, ref: Ref, measurement: Ref) -> Got:
        takes = self.catalogue.measured_takes[definition.name]
        if measured.by is not None:
            return self._run(definition, measured.by, takes, ref, measurement, measured.part)
        ((_, take),) = takes
        got = self.get(take.name, measurement)
        if isinstance(got, Gone):
            return got
        value = getattr(got.value, measured.part) if measured.part else got.value
        if value is None:
            return self._no_answer(definition, ref, measurement)
        inputs = self._shown_inputs("measurement", got)
        return self._value(definition, ref, value, inputs, "measured", measurement)
