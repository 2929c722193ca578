"""What a calculation takes, gathered from the values of items: one, each of a list, or rows of a table."""

from abc import abstractmethod
from datetime import date
from typing import Any

from readiness.assessment.absence import unknown_list
from readiness.assessment.catalogue import Catalogue
from readiness.assessment.definition import Take
from readiness.assessment.item_index import ItemIndex
from readiness.assessment.records import Cause, Gone, Got, Input, Ref, Value
from readiness.program.items import Item, Program
from readiness.quantities import Table


class InputGathering(ItemIndex):
    """Finds inputs with their bases, and the causes of those that cannot be had."""

    def __init__(
        self, program: Program, made: tuple[Item, ...], catalogue: Catalogue, as_of: date
    ) -> None:  # fmt: skip
        """Take the program, the items that the assessment made, what each value means, and the day."""
        super().__init__(program, made, catalogue.kinds)
        self.catalogue = catalogue
        self.as_of = as_of
        self._choices: dict[str, bool] = {}
        self._internal = {name for name, each in catalogue.definitions.items() if each.internal}

    @abstractmethod
    def get(self, name: str, asking: Ref) -> Got:
        """Return a value of an item, or of what it belongs to."""

    def _is_choice(self, name: str) -> bool:
        known = self._choices.get(name)
        if known is None:
            known = self._choices[name] = self.catalogue.is_choice(name)
        return known

    def _is_internal(self, name: str) -> bool:
        return name in self._internal

    def _gather(
        self, takes: tuple[tuple[str, Take], ...], ref: Ref, measurement: Ref | None
    ) -> tuple[dict[str, Any], tuple[Input, ...], list[str], list[Cause]]:
        given: dict[str, Any] = {}
        inputs: list[Input] = []
        bases: list[str] = []
        causes: list[Cause] = []
        for keyword, take in takes:
            asking = measurement if measurement is not None and take.kind == "measurement" else ref
            if take.form == "one":
                got = self.get(take.name, asking)
                given[keyword] = self._taken(keyword, take, got, inputs, bases, causes)
            elif take.form == "each":
                given[keyword] = self._each(keyword, take, asking, inputs, bases, causes)
            else:
                given[keyword] = self._rows(keyword, take, asking, inputs, bases, causes)
        return given, tuple(dict.fromkeys(inputs)), bases, causes

    def _taken(
        self, keyword: str, take: Take, got: Got, inputs: list[Input], bases: list[str], causes: list[Cause]
    ) -> Any:
        if isinstance(got, Gone):
            if not take.optional:
                causes.extend(got.causes)
            return None
        inputs.extend(self._shown_inputs(keyword, got))
        if not self._is_choice(got.name):
            bases.append(got.basis)
        return got.value

    def _shown_inputs(self, keyword: str, got: Value) -> tuple[Input, ...]:
        """Return a value as an input; of a record that is never shown, what it was worked out from."""
        return got.inputs if self._is_internal(got.name) else (Input(keyword, got.name, got.item),)

    def _listed(self, kind: str, ref: Ref) -> tuple[list[Ref], Cause | None]:
        anchor = self.catalogue.kinds.anchor(ref.kind, kind)
        owner = Ref(anchor or "program", self.owners(ref).get(anchor or "program", "program"))
        found = self.children(kind, owner)
        if found or self.list_is_known(kind, owner):
            return found, None
        return [], unknown_list(kind, owner, self.catalogue.kinds)

    def _each(
        self, keyword: str, take: Take, ref: Ref, inputs: list[Input], bases: list[str], causes: list[Cause]
    ) -> tuple[Any, ...]:
        found, unknown = self._listed(take.kind, ref)
        if unknown:
            causes.append(unknown)
        return tuple(
            self._taken(keyword, take, self.get(take.name, each), inputs, bases, causes) for each in found
        )

    def _rows(
        self, keyword: str, take: Take, ref: Ref, inputs: list[Input], bases: list[str], causes: list[Cause]
    ) -> Table:
        found, unknown = self._listed(take.name, ref)
        if unknown and not take.optional:
            causes.append(unknown)
        columns = [
            (column, Take("one", f"{take.name}.{column}", optional)) for column, optional in take.columns
        ]
        rows = [
            tuple(
                self._taken(keyword, column, self.get(column.name, each), inputs, bases, causes)
                for _, column in columns
            )
            for each in found
        ]
        return Table(tuple(name for name, _ in columns), tuple(rows))
