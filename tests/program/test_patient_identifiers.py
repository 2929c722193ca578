"""Files that could identify a patient are refused, and messages do not repeat what they found."""

from pathlib import Path

import pytest

from readiness.errors import ProgramProblems
from readiness.program.csv_text import parse_csv
from readiness.program.files import from_mapping
from readiness.program.measurement_kinds import measurement_kind
from readiness.program.patient_identifiers import identifier_problems, looks_like
from readiness.program.reading import known_yaml, read_program

HEADER = "# kind: in-vivo-readings\n# subject: patient\n# date: 2026-11-05\n"
COLUMNS = "cycle,day,site,point,dose_cgy"
KIND = measurement_kind("in-vivo-readings")


def problems(text: str, name: str = "measurements/in-vivo-1.csv") -> list[str]:
    """Return what is found in a file, as printed."""
    csv, _ = parse_csv(name, text.encode())
    assert csv is not None
    return [str(problem) for problem in identifier_problems(csv, KIND.header, KIND.columns)]


def test_file_without_identity_is_clean() -> None:
    """Cycle, day, site and dose, with an ordinary note and detector number, identify nobody."""
    note = "# note: Dosimeters of batch 12-B, repeat of 2026-10-20 after 1800 MU, read by 2 persons.\n"
    assert problems(f"{HEADER}{note}{COLUMNS}\n1,1,umbilicus,1,74.2\n") == []


@pytest.mark.parametrize(
    ("text", "what"),
    [
        ("measured on Mrs Berg", "name"),
        ("Dr. Amsel present", "name"),
        ("patient Berg, first cycle", "name"),
        ("Berg, Anna", "name"),
        ("Anna Berg", "name"),
        ("MRN 004711", "number"),
        ("patient no. 4711", "number"),
        ("see 20041177 in the archive", "number"),
        ("123-45-6789", "number"),
        ("DOB 12/03/56", "date of birth"),
        ("1956-03-12", "date of birth"),
        ("12 Mar 1956", "date of birth"),
        ("12.03.1956", "date of birth"),
        ("anna.berg@example.org", "address"),
    ],
)
def test_note_that_looks_like_an_identity_is_refused_without_repeating_it(text: str, what: str) -> None:
    """A note with a name, number or date of birth is a located problem that does not show it again."""
    (found,) = problems(f"{HEADER}# note: {text}\n{COLUMNS}\n1,1,umbilicus,1,74.2\n")
    assert found.startswith(f"measurements/in-vivo-1.csv:4:9: this looks like a patient's {what}: ")
    assert found.endswith("[identifier]")
    assert text not in found


@pytest.mark.parametrize(
    ("column", "what"),
    [
        ("patient_name", "name"),
        ("initials", "name"),
        ("MRN", "number"),
        ("patientId", "name"),
        ("id", "number"),
        ("date_of_birth", "date of birth"),
        ("DOB", "date of birth"),
        ("phone", "address"),
    ],
)
def test_column_that_asks_for_an_identity_is_refused(column: str, what: str) -> None:
    """A column or header key named after an identity is refused whatever it holds."""
    (found,) = problems(f"{HEADER}{COLUMNS},{column}\n1,1,umbilicus,1,74.2,x\n")
    assert f".csv:4:{len(COLUMNS) + 2}: this seems to hold a patient's {what}: " in found
    (key,) = problems(f"{HEADER}# {column}: x\n{COLUMNS}\n1,1,umbilicus,1,74.2\n")
    assert f".csv:4:3: this seems to hold a patient's {what}: " in key


def test_cells_of_an_unknown_column_are_looked_at() -> None:
    """Names in a column that no description knows are found in their row."""
    found = problems(f"{HEADER}{COLUMNS},remark\n1,1,umbilicus,1,74.2,Anna Berg\n1,2,umbilicus,1,126.0,ok\n")
    assert len(found) == 1
    assert ":5:" in found[0]


def test_numbers_in_described_columns_are_no_identity() -> None:
    """A large reading in a described column is a matter for its limits, not an identity."""
    assert problems(f"{HEADER}{COLUMNS}\n1,1,umbilicus,1,1234567\n") == []


@pytest.mark.parametrize("name", ["patient-berg", "mrn004711", "readings-4711004"])
def test_file_named_after_a_patient_is_refused(name: str) -> None:
    """A file whose name holds a patient's name or number is refused."""
    (found,) = problems(f"{HEADER}{COLUMNS}\n1,1,umbilicus,1,74.2\n", f"measurements/{name}.csv")
    assert "the name of this file seems to hold a patient's name or number" in found


def test_file_named_after_a_day_is_not() -> None:
    """A file named after a day of this century is read."""
    assert problems(f"{HEADER}{COLUMNS}\n1,1,umbilicus,1,74.2\n", "measurements/in-vivo-20261105.csv") == []


@pytest.mark.parametrize(
    "text",
    [
        "Invented numbers of an invented department; nothing was measured.",
        "water-equivalent cylinder of 30 cm diameter",
        "Running mean over 5 readings",
        "readings at 1.5, 2.0 and 3.125 mm after 40000 MU",
        "film scanned 24 h after exposure",
        "patient support removed",
    ],
)
def test_ordinary_texts_look_like_nobody(text: str) -> None:
    """Ordinary notes are not taken for an identity."""
    assert looks_like(text, alone=True) == ""


def test_sample_files_are_clean() -> None:
    """No measurement of the sample looks like a patient."""
    folder = Path(__file__).parents[2] / "sample_program" / "measurements"
    for path in sorted(folder.glob("*.csv")):
        csv, _ = parse_csv(f"measurements/{path.name}", path.read_bytes())
        assert csv is not None
        assert identifier_problems(csv, {}, {}) == [], path.name


def test_program_with_such_a_file_is_not_read() -> None:
    """A program folder is refused as long as one of its measurements names a patient."""
    text = f"{HEADER}# note: Anna Berg\n{COLUMNS}\n1,1,umbilicus,1,74.2\n"
    files = {"program.yaml": b"format: 1\n", "measurements/in-vivo-1.csv": text.encode()}
    contents, found = from_mapping(files, {}, known_yaml())
    with pytest.raises(ProgramProblems) as refused:
        read_program(contents, found)
    told = [problem for problem in refused.value.problems if problem.kind == "identifier"]
    assert ["this looks like a patient's name"] == [problem.message.split(":")[0] for problem in told]
    assert not any("Berg" in str(problem) for problem in refused.value.problems)
