"""What a measurement file must hold stands in schemas/measurements."""

import pytest
import yaml

from readiness.errors import CatalogueError
from readiness.program.fields import schemas
from readiness.program.measurement_kinds import load_measurement_kind, measurement_kind, measurement_kinds
from readiness.resources import schema_file

SURVEY = schema_file("measurements", "survey.yaml").read_text(encoding="utf-8")


@pytest.mark.parametrize("kind", measurement_kinds())
def test_every_kind_that_ships_fits_together(kind):
    """Every description loads, has readings, and says in its first header line what it is."""
    loaded = measurement_kind(kind)
    assert next(iter(loaded.header)) == "kind"
    assert list(loaded.header["kind"].words) == [kind]
    assert loaded.columns
    assert loaded.min_rows >= 1


def test_a_beam_is_that_of_the_machine_beside_it():
    """The beam in a header is found within the machine of the same header."""
    header = measurement_kind("survey").header
    assert header["beam"].within == "machine"
    assert header["room"].within == ""


@pytest.mark.parametrize(
    ("before", "after", "complaint"),
    [
        ("to: room,", "to: cellar,", "refers to kind 'cellar', which does not exist"),
        ("min_rows: 1", "", "min_rows is missing or unknown"),
        ("kind: survey\n", "kind: surveys\n", "describes 'surveys'; name it after that kind"),
        ("attaches_to: room", "attaches_to: cellar", "attaches to 'cellar', which does not exist"),
        ("agrees_on: [room,", "agrees_on: [tilt_deg,", "agrees on 'tilt_deg', which the header does not hold"),
        ("place: {type: text", "place: {type: texts", "place cannot be of type 'texts'"),
    ],
)
def test_a_wrong_description_is_refused(tmp_path, before, after, complaint):
    """A description that does not fit together is named when it is loaded."""
    assert before in SURVEY
    path = tmp_path / "survey.yaml"
    path.write_text(SURVEY.replace(before, after, 1), encoding="utf-8")
    with pytest.raises(CatalogueError, match=complaint):
        load_measurement_kind(path, schemas())


def test_a_kind_attaches_by_what_its_header_holds():
    """Each description agrees on keys that its header asks for or may hold."""
    for path in schema_file("measurements").glob("*.yaml"):
        described = yaml.safe_load(path.read_text(encoding="utf-8"))
        assert set(described["agrees_on"]) <= set(described["header"]), path.name
