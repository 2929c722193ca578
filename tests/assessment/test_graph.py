"""Values are worked out once, with descent, basis and root causes."""

from dataclasses import dataclass
from datetime import date

import pytest

from readiness.assessment.causes import assumed_roots, why_not_measured
from readiness.assessment.definition import Definition, Measured, one_of_techniques
from readiness.assessment.records import Gone, Input, Ref, Value
from readiness.errors import CatalogueError, OutsideValidity
from readiness.quantities import Table, Uncertain
from tests.assessment.small import graph, item, program, small_catalogue

ROOM = Ref("room", "a")


def headroom(*, ceiling_height_cm: float, isocentre_height_cm: float) -> float:
    """Return the height above the isocentre."""
    return ceiling_height_cm - isocentre_height_cm


HEADROOM = Definition(
    "room.headroom_cm", "Height above the isocentre.", by=headroom,
    takes={"ceiling_height_cm": "room.ceiling_height_cm", "isocentre_height_cm": "room.isocentre_height_cm"},
)  # fmt: skip


def test_a_stated_field_is_a_value_with_its_place() -> None:
    """A field of the folder is a stated value."""
    got = graph(program(item("room", "a", ceiling_height_cm=300.0))).get("room.ceiling_height_cm", ROOM)
    assert isinstance(got, Value)
    assert (300.0, "cm", "stated", "room.yaml") == (got.value, got.unit, got.basis, got.where.file)


def test_a_calculated_value_names_its_inputs() -> None:
    """A calculated value carries what it came from."""
    got = graph(program(item("room", "a", ceiling_height_cm=300.0, isocentre_height_cm=130.0)), HEADROOM).get(
        "room.headroom_cm", ROOM
    )
    assert isinstance(got, Value)
    assert got.value == 170.0
    assert got.inputs[0] == Input("ceiling_height_cm", "room.ceiling_height_cm", ROOM)


def test_absence_travels_as_root_causes() -> None:
    """What is missing is named by field, never by an intermediate name."""
    chained = Definition("room.double_headroom_cm", "Twice the headroom.", by=lambda *, headroom_cm: 2 * headroom_cm,
                         takes={"headroom_cm": "room.headroom_cm"})  # fmt: skip
    got = graph(program(item("room", "a", ceiling_height_cm=300.0)), HEADROOM, chained).get(
        "room.double_headroom_cm", ROOM
    )
    assert isinstance(got, Gone)
    assert [cause.what for cause in got.causes] == ["room.isocentre_height_cm"]
    assert got.causes[0].words == (
        "State isocentre height (cm) of room a in rooms.yaml: height of the isocentre above the floor."
    )


def test_numbers_keep_six_significant_digits() -> None:
    """A number is rounded once, when it becomes a value."""
    third = Definition("room.third_cm", "A third.", by=lambda *, ceiling_height_cm: ceiling_height_cm / 3,
                       takes={"ceiling_height_cm": "room.ceiling_height_cm"})  # fmt: skip
    got = graph(program(item("room", "a", ceiling_height_cm=100.0)), third).get("room.third_cm", ROOM)
    assert isinstance(got, Value)
    assert got.value == 33.3333


def test_a_model_is_predicted_and_an_assumption_is_weaker_still() -> None:
    """A model's result is predicted; one assumed input makes it assumed."""
    model = Definition("room.model_ratio", "A model.", by=lambda *, air_changes_per_h: 1.0, model=True,
                       takes={"air_changes_per_h": "room.air_changes_per_h"})  # fmt: skip
    stated = graph(program(item("room", "a", air_changes_per_h=8.0)), model).get("room.model_ratio", ROOM)
    assumed = graph(program(item("room", "a")), model).get("room.model_ratio", ROOM)
    assert isinstance(stated, Value)
    assert isinstance(assumed, Value)
    assert (stated.basis, assumed.basis) == ("predicted", "assumed")


def test_an_assumption_is_traced_to_what_has_to_be_stated() -> None:
    """Whatever rests on a default names the field that would replace it."""
    model = Definition("room.model_ratio", "A model.", by=lambda *, air_changes_per_h: 1.0,
                       takes={"air_changes_per_h": "room.air_changes_per_h"})  # fmt: skip
    roots = assumed_roots(graph(program(item("room", "a")), model), "room.model_ratio", ROOM)
    assert [root.what for root in roots] == ["room.air_changes_per_h"]


def test_outside_validity_is_a_cause_and_not_a_crash() -> None:
    """A calculation outside its range says so in words."""

    def refuse(*, ceiling_height_cm: float) -> float:
        raise OutsideValidity("the table ends at 200 cm")

    value = Definition(
        "room.refused_cm", "Refused.", by=refuse, takes={"ceiling_height_cm": "room.ceiling_height_cm"}
    )
    got = graph(program(item("room", "a", ceiling_height_cm=300.0)), value).get("room.refused_cm", ROOM)
    assert isinstance(got, Gone)
    assert got.causes[0].words == "the table ends at 200 cm"


def test_each_collects_over_the_nearest_list() -> None:
    """A room asks for its own obstructions, not for those of another room."""
    tops = Definition(
        "room.tops", "Tops.", by=lambda *, tops_cm: max(tops_cm), takes={"tops_cm": "each obstruction.top_cm"}
    )
    of = program(
        item("room", "a"), item("room", "b"),
        item("obstruction", "a/x", {"room": "a"}, top_cm=70.0), item("obstruction", "b/x", {"room": "b"}, top_cm=90.0),
    )  # fmt: skip
    got = graph(of, tops).get("room.tops", ROOM)
    assert isinstance(got, Value)
    assert got.value == 70.0


def test_an_unknown_list_is_a_cause_and_an_empty_list_is_empty() -> None:
    """Nothing is known of a list that is not there; a list that is there, even empty, is complete."""
    count = Definition(
        "program.instrument_count", "Count.", by=lambda *, ids: len(ids), takes={"ids": "each instrument.id"}
    )
    unknown = graph(program(), count).get("program.instrument_count", Ref("program", "program"))
    empty = graph(program(lists=("instrument",)), count).get(
        "program.instrument_count", Ref("program", "program")
    )
    assert isinstance(unknown, Gone)
    assert "dosimetry.yaml" in unknown.causes[0].words
    assert isinstance(empty, Value)
    assert empty.value == 0


def test_rows_make_a_table_of_items() -> None:
    """Fields of listed items become the rows of a table, optional ones blank."""
    table = Definition(
        "program.table",
        "Table.",
        by=lambda *, tools: tools,
        takes={"tools": "rows instrument: id type pieces?"},
    )
    of = program(item("instrument", "i", type="film"))
    got = graph(of, table).get("program.table", Ref("program", "program"))
    assert isinstance(got, Value)
    assert got.value == Table(("id", "type", "pieces"), (("i", "film", None),))


def _measurement(name: str, **fields: object) -> object:
    stated = {"kind": "single-profile", "room": "a", "machine": "m", "beam": "m/e6", "instrument": "film",
              "date": date(2026, 10, 1), **fields}  # fmt: skip
    owners = {"room": "a", "machine": "m", "beam": "m/e6", "instrument": str(stated["instrument"])}
    return item("measurement", name, owners, **stated)


SPREAD = Definition(
    "beam.foil_spread", "Spread.",
    measured=Measured("single-profile", takes={"x": "measurement.fitted"}),
)  # fmt: skip
FITTED = Definition(
    "measurement.fitted", "Fit.", by=lambda *, day: Uncertain(0.2, 0.01), takes={"day": "measurement.date"}
)


def _of_measurements(*measurements: object, due: date = date(2027, 1, 1)) -> object:
    parts = (
        item("room", "a", changed_on=date(2025, 1, 1)), item("machine", "m", {"room": "a"}),
        item("beam", "m/e6", {"machine": "m"}, foil_spread=0.25),
        item("instrument", "film", calibrated_on=date(2026, 1, 1), calibration_due_on=due),
    )  # fmt: skip
    return graph(program(*parts), SPREAD, FITTED, made=measurements)  # type: ignore[arg-type]


def test_a_measurement_replaces_a_claim_and_keeps_it_visible() -> None:
    """What was measured is measured, and the claim stands beside it."""
    got = _of_measurements(_measurement("one")).get("beam.foil_spread", Ref("beam", "m/e6"))  # type: ignore[attr-defined]
    assert isinstance(got, Value)
    assert ("measured", 0.2) == (got.basis, got.value)
    assert got.instead_of is not None
    assert got.instead_of.value == 0.25


def test_a_claim_that_a_measurement_would_replace_may_be_stated_as_well() -> None:
    """Where neither is had, both ways to supply the value are named."""
    only_measured = Definition(
        "beam.rp_cm", "Range.", measured=Measured("depth-dose-single", takes={"of": "measurement.tilt_deg"})
    )
    of = graph(program(item("beam", "m/e6", {"machine": "m"})), only_measured)
    got = of.get("beam.rp_cm", Ref("beam", "m/e6"))
    assert isinstance(got, Gone)
    assert ["field", "measurement"] == [cause.kind for cause in got.causes]


def test_a_measurement_with_an_expired_instrument_does_not_count() -> None:
    """An instrument out of calibration that day makes a measurement void, and the cause says so."""
    of = _of_measurements(_measurement("one"), due=date(2026, 9, 1))
    got = of.get("beam.foil_spread", Ref("beam", "m/e6"))  # type: ignore[attr-defined]
    assert isinstance(got, Value)
    assert got.basis == "stated"
    causes = why_not_measured(of, "beam.foil_spread", Ref("beam", "m/e6"))  # type: ignore[attr-defined]
    assert any("out of calibration on 2026-10-01" in cause.words for cause in causes)


def test_a_measurement_of_a_day_to_come_does_not_count() -> None:
    """Readings dated after the day of the assessment are none yet."""
    of = _of_measurements(_measurement("one", date=date(2026, 12, 2)))
    got = of.get("beam.foil_spread", Ref("beam", "m/e6"))  # type: ignore[attr-defined]
    assert isinstance(got, Value)
    assert "stated" == got.basis
    causes = why_not_measured(of, "beam.foil_spread", Ref("beam", "m/e6"))  # type: ignore[attr-defined]
    assert any("it is dated 2026-12-02, later than 2026-12-01" in cause.words for cause in causes)


def test_a_measurement_older_than_a_change_does_not_count() -> None:
    """The room changed after the measurement, so that the claim stays."""
    got = _of_measurements(_measurement("one", date=date(2024, 1, 1))).get(  # type: ignore[attr-defined]
        "beam.foil_spread", Ref("beam", "m/e6")
    )
    assert isinstance(got, Value)
    assert got.basis == "stated"


@pytest.mark.parametrize(
    ("broken", "words"),
    [
        (Definition("room.x_cm", "X.", by=headroom, takes={"ceiling_height_cm": "room.ceiling_height_cm"}), "keywords"),
        (Definition("room.x_cm", "X.", by=lambda *, a_cm: a_cm, takes={"a_cm": "room.ceiling"}), "does not exist"),
        (Definition("room.x_cm", "X.", by=lambda *, a_m: a_m, takes={"a_m": "room.ceiling_height_cm"}), "same unit"),
        (Definition("room.x_cm", "X.", by=lambda *, a_cm: a_cm, takes={"a_cm": "stand.width_cm"}), "does not belong"),
        (Definition("room.x_cm", "X.", by=lambda *, x_cm: x_cm, takes={"x_cm": "room.y_cm"}), "does not exist"),
        (Definition("room.x_cm", "X", by=lambda: 1), "not a sentence"),
        (Definition("room.x_cm", "X."), "says nothing"),
        (Definition("room.x_cm", "X.", by=lambda: 1, source="tg-25, nowhere", known="memory"), "not exist: nowhere"),
        (Definition("room.x_cm", "X.", by=lambda: 1, source="tg-25", known="heard"), "not exist: heard"),
        (Definition("room.x_cm", "X.", by=lambda: 1, source="tg-25"), "not exist: how it is known"),
        (Definition("nothing.x_cm", "X.", by=lambda: 1), "kind that does not exist"),
    ],
)  # fmt: skip
def test_a_catalogue_that_does_not_fit_is_refused(broken: Definition, words: str) -> None:
    """Loading proves names, keywords, units and owners."""
    with pytest.raises(CatalogueError, match=words):
        small_catalogue(broken)


def test_a_circle_is_refused_and_printed() -> None:
    """Values that wait for each other are refused when loaded."""
    one = Definition("room.one_cm", "One.", by=lambda *, a_cm: a_cm, takes={"a_cm": "room.two_cm"})
    two = Definition("room.two_cm", "Two.", by=lambda *, a_cm: a_cm, takes={"a_cm": "room.one_cm"})
    with pytest.raises(CatalogueError, match="room.one_cm <- room.two_cm <- room.one_cm"):
        small_catalogue(one, two)


CHOSEN_HEADROOM = Definition(
    "room.chosen_headroom_cm", "Headroom that plans are made with.", by=lambda *, headroom_cm: headroom_cm,
    takes={"headroom_cm": "room.headroom_cm"}, otherwise="room.guessed_headroom_cm",
)  # fmt: skip
GUESSED_HEADROOM = Definition(
    "room.guessed_headroom_cm", "Guess from the door.", by=lambda *, door_clear_width_cm: 2 * door_clear_width_cm, model=True,
    takes={"door_clear_width_cm": "room.door_clear_width_cm"},
)  # fmt: skip


def test_a_prediction_stands_in_with_its_own_basis_only_where_nothing_better_is_had() -> None:
    """What is stated counts as stated; a prediction is used, and named as one, only without it."""
    values = (HEADROOM, CHOSEN_HEADROOM, GUESSED_HEADROOM)
    stated = {"ceiling_height_cm": 300.0, "isocentre_height_cm": 130.0}
    known = graph(program(item("room", "a", **stated, door_clear_width_cm=90.0)), *values)
    guessed = graph(program(item("room", "a", door_clear_width_cm=90.0)), *values)
    one, other = (each.get("room.chosen_headroom_cm", ROOM) for each in (known, guessed))
    assert isinstance(one, Value)
    assert isinstance(other, Value)
    assert ((170.0, "stated"), (180.0, "predicted")) == ((one.value, one.basis), (other.value, other.basis))
    assert [each.name for each in other.inputs] == ["room.guessed_headroom_cm"]


def test_without_either_both_roots_are_named() -> None:
    """Where even the prediction is missing, each thing that would help is a cause."""
    got = graph(
        program(item("room", "a", isocentre_height_cm=130.0)), HEADROOM, CHOSEN_HEADROOM, GUESSED_HEADROOM
    ).get("room.chosen_headroom_cm", ROOM)
    assert isinstance(got, Gone)
    assert [cause.what for cause in got.causes] == ["room.ceiling_height_cm", "room.door_clear_width_cm"]


@dataclass(frozen=True)
class Pair:
    """Two parts, one of them blank."""

    first: float
    second: float | None


def test_a_part_that_a_record_does_not_have_is_no_value() -> None:
    """A record's blank is not known; it is never a value of its own."""
    whole = Definition("room.pair", "A pair.", by=lambda *, ceiling_height_cm: Pair(ceiling_height_cm, None), internal=True,
                       takes={"ceiling_height_cm": "room.ceiling_height_cm"})  # fmt: skip
    first = Definition("room.first_cm", "Its first part.", of="room.pair", part="first")
    second = Definition("room.second_cm", "Its second part.", of="room.pair", part="second")
    of = graph(program(item("room", "a", ceiling_height_cm=300.0)), whole, first, second)
    assert isinstance(of.get("room.first_cm", ROOM), Value)
    assert isinstance(of.get("room.second_cm", ROOM), Gone)


MEASURED_TILT = Definition(
    "arrangement.best_tilt_deg", "Best tilt.", measured=Measured("angle-sweep", takes={"of": "measurement.tilt_deg"}),
    otherwise="arrangement.guessed_tilt_deg",
)  # fmt: skip
GUESSED_TILT = Definition(
    "arrangement.guessed_tilt_deg", "Guessed tilt.", by=lambda *, thickness_cm: 16.0, model=True,
    takes={"thickness_cm": "degrader.thickness_cm"},
)  # fmt: skip
DOUBLE_TILT = Definition(
    "arrangement.between_axes_deg", "Angle between the axes.", by=lambda *, best_tilt_deg: 2 * best_tilt_deg,
    takes={"best_tilt_deg": "arrangement.best_tilt_deg"},
)  # fmt: skip


def test_what_is_worked_out_from_a_prediction_asks_for_the_measurement_of_what_it_rests_on() -> None:
    """A sum of predicted tilts is measured once the tilt is: that measurement is asked for, not the sum."""
    made = item("arrangement", "x", {"degrader": "sheet"})
    of = graph(
        program(item("degrader", "sheet", thickness_cm=1.0)),
        MEASURED_TILT,
        GUESSED_TILT,
        DOUBLE_TILT,
        made=(made,),
    )
    causes = why_not_measured(of, "arrangement.between_axes_deg", Ref("arrangement", "x"))
    assert ["Measure profiles at several tilts for arrangement x (a file of the kind angle-sweep)."] == [cause.words for cause in causes]


def test_one_question_is_answered_by_the_technique_of_each_arrangement() -> None:
    """A standing arrangement is asked of its stand, a lying one of its couch; what is missing is named there."""
    load = one_of_techniques(
        "arrangement.tested_load_kg",
        "Tested load.",
        standing="stand.tested_load_kg",
        lying="couch.tested_load_kg",
    )
    made = tuple(
        item("arrangement", name, {"stand": "s", "couch": "c"}, technique=technique)
        for name, technique in (("up", "six-position"), ("turning", "rotating-platform"), ("down", "moving-couch"))
    )
    of = graph(program(item("stand", "s", tested_load_kg=150.0), item("couch", "c")), load, made=made)
    for name in ("up", "turning"):
        got = of.get("arrangement.tested_load_kg", Ref("arrangement", name))
        assert isinstance(got, Value)
        assert (150.0, "stated", "arrangement.tested_load_kg") == (got.value, got.basis, got.name)
        assert ["stand.tested_load_kg"] == [each.name for each in got.inputs]
    missing = of.get("arrangement.tested_load_kg", Ref("arrangement", "down"))
    assert isinstance(missing, Gone)
    assert ["couch.tested_load_kg"] == [cause.what for cause in missing.causes]


def test_what_follows_from_choices_alone_weakens_no_basis() -> None:
    """The dose of a course is as much a choice as its cycles: with a measured number the result is measured."""
    dose = Definition("course.dose_from_cycles_gy", "Dose.", by=lambda *, dose_per_cycle_gy, cycles: dose_per_cycle_gy * cycles,
                      takes={"dose_per_cycle_gy": "course.dose_per_cycle_gy", "cycles": "course.cycles"})  # fmt: skip
    claim = Definition("beam.rp_doubled_cm", "Twice.", by=lambda *, rp_cm: 2 * rp_cm, takes={"rp_cm": "beam.rp_cm"})
    known = graph(program(), dose, claim).catalogue
    assert known.is_choice("course.dose_from_cycles_gy")
    assert not known.is_choice("beam.rp_doubled_cm")
    modelled = Definition("course.predicted_gy", "Model.", by=lambda *, cycles: cycles, takes={"cycles": "course.cycles"}, model=True)
    assert not graph(program(), modelled).catalogue.is_choice("course.predicted_gy")


def test_a_file_that_lacks_a_number_is_named_with_it() -> None:
    """A measurement of the right kind that does not hold what is asked says so, and the kind is asked for again."""
    parts = (
        item("room", "a"), item("machine", "m", {"room": "a"}), item("beam", "m/e6", {"machine": "m"}),
        item("instrument", "film", calibrated_on=date(2026, 1, 1), calibration_due_on=date(2027, 1, 1)),
    )  # fmt: skip
    part = Definition("beam.r50_cm", "Depth.",
                      measured=Measured("single-profile", by=lambda *, day: None, takes={"day": "measurement.date"}))  # fmt: skip
    of = graph(program(*parts), part, made=(_measurement("one"),))  # type: ignore[arg-type]
    got = of.get("beam.r50_cm", Ref("beam", "m/e6"))
    assert isinstance(got, Gone)
    assert "measurement.yaml does not give r50 of beam m/e6." in [cause.words for cause in got.causes]
