"""The documents: numbers with their basis, blanks where they are missing, never an MU to deliver."""

import re
from dataclasses import replace
from html import unescape

import pytest

from readiness.assessment.catalogue import catalogue
from readiness.assessment.document_heads import TECHNIQUES, document_heads
from readiness.assessment.records import Assessment, Finding, Input, Ref, Value
from readiness.assessment.ruleset import load_rules
from readiness.errors import CatalogueError, UsageError
from readiness.outputs.critical import CRITICAL
from readiness.outputs.documents import RenderedDocument, render_bodies, wording_problems
from readiness.outputs.fonts import missing_characters
from readiness.outputs.form_fields import FormFields
from readiness.outputs.frame import article
from readiness.outputs.holes import Holes, to_html
from readiness.outputs.lookup import Lookup
from readiness.outputs.showing import CAUSES, Blank, Showing
from readiness.quantities import Table
from tests.outputs import fakes

_MU_NUMBER = re.compile(r"\d[\d ,.]*\s*MU\b(?!/)")


def _plain(html: str) -> str:
    return unescape(re.sub(r"<[^>]+>", "", html))


def _by_number(rendered: tuple[RenderedDocument, ...]) -> dict[str, RenderedDocument]:
    return {document.number: document for document in rendered}


@pytest.fixture(scope="module")
def full() -> dict[str, RenderedDocument]:
    """Return the documents of a program in which everything is known."""
    return _by_number(render_bodies(fakes.full()))


@pytest.fixture(scope="module")
def empty() -> dict[str, RenderedDocument]:
    """Return the documents of a program in which nothing is known."""
    return _by_number(render_bodies(fakes.empty()))


def test_every_document_is_rendered_when_nothing_is_known(empty: dict[str, RenderedDocument]) -> None:
    """Without a technique every document is there, and not one of them holds a value."""
    assert [head.number for head in document_heads()] == list(empty)
    assert [] == [document.number for document in empty.values() if document.values]


@pytest.mark.parametrize("technique", TECHNIQUES)
def test_only_documents_of_the_technique_are_rendered(technique: str) -> None:
    """Another technique's procedure does not appear."""
    numbers = {document.number for document in render_bodies(fakes.full(technique))}
    wanted = {head.number for head in document_heads() if head.shown_for(technique)}
    assert wanted == numbers
    treating = {"six-position": "3.2", "rotating-platform": "3.5", "moving-couch": "3.6"}
    assert {treating[technique]} == numbers & set(treating.values())


def test_every_name_in_a_template_is_in_the_catalogue() -> None:
    """A template that asks for a value nobody defines is our own defect."""
    known = catalogue()
    assert [] == sorted(name for name in fakes.names_in_templates() if not known.has(name))


def test_every_critical_name_is_in_the_catalogue() -> None:
    """The numbers that are held back, and what must be met for them, exist."""
    known = catalogue()
    subjects = {subject for each in CRITICAL.values() for subject in each.subjects}
    assert [] == sorted(name for name in {*CRITICAL, *subjects} if not known.has(name))


def test_every_critical_number_has_rules_that_judge_it() -> None:
    """What must be met for a critical number is really judged, its proof by measurement alone."""
    rules = load_rules(catalogue())
    for name, critical in CRITICAL.items():
        for subject in critical.subjects:
            assert [rule for rule in rules if rule.subject == subject], (name, subject)
        proving = [rule for rule in rules if rule.subject == critical.proof]
        assert {"measured"} == {rule.basis for rule in proving}, name
        assert {"must"} == {rule.strength for rule in proving}, name


def test_no_template_shows_what_changes_by_itself() -> None:
    """Ages and the day of the assessment would end an approval overnight."""
    changing = re.compile(r"_age_|days_since|as_of|program\.phase")
    assert [] == [name for name in fakes.names_in_templates() if changing.search(name)]


def test_every_link_between_documents_leads_to_a_document(empty: dict[str, RenderedDocument]) -> None:
    """No document points to a number that does not exist."""
    pattern = re.compile(r'href="binder:([0-9.]+)"')
    targets = {number for document in empty.values() for number in pattern.findall(document.html_body)}
    assert targets <= set(empty)
    assert len(targets) > 30


def test_a_value_stands_with_unit_and_basis(full: dict[str, RenderedDocument]) -> None:
    """A number is printed with its unit, and how it was had beside it."""
    assert (
        '<span class="value">12.5\u00a0kg</span><span class="basis">measured</span>' in full["1.1"].html_body
    )


def test_a_criterion_is_no_statement_of_the_department(full: dict[str, RenderedDocument]) -> None:
    """A limit is marked as what is asked for, a convention as one; neither is called stated."""
    assessment = fakes.full()
    asked = {
        "criterion.vertical_uniformity_percent": "limit",
        "criterion.uniformity_half_length_cm": "convention",
    }
    for name, mark in asked.items():
        holes = Holes()
        said = holes.fill(str(Showing(Lookup(assessment), {}, holes).show(name)))
        assert f'<span class="basis">{mark}</span>' in said
    assert 'class="basis">limit<' in full["4.2"].html_body


def test_a_table_of_publications_has_no_basis_of_its_own(full: dict[str, RenderedDocument]) -> None:
    """Where each row says how it is known, nothing below the table calls all of them stated."""
    assessment = fakes.full()
    item = Ref("in_vivo", "in_vivo")
    rows = Table.of(("title", "from_figure", "known"), [("Sole", "low", "read")])
    others = tuple(each for each in assessment.values if each.name != "in_vivo.expected_doses")
    changed = replace(assessment, values=(*others, Value("in_vivo.expected_doses", item, rows, "", "stated")))
    holes = Holes()
    showing = Showing(Lookup(changed), {}, holes)
    whole = holes.fill(str(showing.table("in_vivo.expected_doses")))
    assert "basis-line" not in whole
    assert "basis-line" in holes.fill(str(showing.table("in_vivo.expected_doses", "title from_figure")))


def test_a_heading_says_its_unit_once() -> None:
    """A column of persons is not headed twice, a ratio has no word for itself, PMMA is written as it is."""
    assessment = fakes.full()
    item = Ref("in_vivo", "in_vivo")
    rows = Table.of(("persons", "part_of_goal_ratio", "pmma_cm", "xray_dose_gy"), [(2, 0.5, 1.0, 0.7)])
    others = tuple(each for each in assessment.values if each.name != "in_vivo.expected_doses")
    changed = replace(assessment, values=(*others, Value("in_vivo.expected_doses", item, rows, "", "stated")))
    holes = Holes()
    table = holes.fill(str(Showing(Lookup(changed), {}, holes).table("in_vivo.expected_doses")))
    heads = re.findall(r'<th scope="col">(.*?)</th>', table)
    assert ["Persons", "Part of goal", "PMMA [cm]", "X-ray dose [Gy]"] == heads


def test_nothing_of_ours_stands_on_the_sheet_that_a_patient_takes_home() -> None:
    """The patient sheet comes after the requirements and blanks of its document."""
    assessment = fakes.empty()
    document = _by_number(render_bodies(assessment))["2.2"]
    whole = article(document, assessment)
    assert 1 == whole.count('class="part-patient-sheet"')
    sheet = whole.partition('class="part-patient-sheet"')[2]
    assert 'class="around"' in whole
    assert 'class="around"' not in sheet


def test_the_gate_after_the_first_session_stops_before_a_factor_of_two(
    full: dict[str, RenderedDocument],
) -> None:
    """Procedure and form hold at the same place, short of a doubled or halved dose."""
    assert "A mean below 0.7 or above 1.4 times what is expected" in _plain(full["4.4"].html_body)
    assert "Mean is 0.7 to 1.4 times what is expected" in _plain(full["6.4"].html_body)


def test_beyond_tolerance_nobody_is_treated_without_a_release(full: dict[str, RenderedDocument]) -> None:
    """Charter, procedure and form say the same of a test beyond its tolerance."""
    assert "Beyond it nobody is treated until" in _plain(full["4.5"].html_body)
    assert "Output in the mode beyond the daily tolerance" in _plain(full["1.1"].html_body)
    assert "Beyond tolerance: BEAM HELD" in _plain(full["6.6"].html_body)
    assert not any("go on today" in _plain(document.html_body) for document in full.values())


def test_a_missing_value_is_a_blank_with_its_unit(empty: dict[str, RenderedDocument]) -> None:
    """What is not known is a line to fill in, with what to supply."""
    text = _plain(empty["1.1"].html_body)
    assert "________\u00a0kg (to supply: heaviest patient)" in text
    assert "program.heaviest_patient_kg" in {blank.name for blank in empty["1.1"].missing}


def test_the_causes_of_a_missing_value_are_told() -> None:
    """Where a rule has said what is missing, the blank says the same."""
    assessment = fakes.full()
    words = "State air changes in rooms.yaml."
    lacking = [value for value in assessment.values if value.name != "room.air_changes_per_h"]
    gone = replace(assessment, values=tuple(lacking))
    changed = replace(gone.findings[-1], causes=(replace(gone.findings[-1].causes[0], words=words),))
    gone = replace(gone, findings=(*gone.findings[:-1], changed))
    document = _by_number(render_bodies(gone))["4.7"]
    assert words in [blank.words for blank in document.missing]


def test_values_are_never_read_as_markup(full: dict[str, RenderedDocument]) -> None:
    """A department's text with stars and angle brackets is printed as it was written."""
    assert "as *written* &lt;here&gt; &amp; there" in full["1.1"].html_body
    assert "<here>" not in "".join(document.html_body for document in full.values())


@pytest.mark.parametrize("name", sorted(CRITICAL))
def test_a_critical_number_is_blank_without_findings(name: str) -> None:
    """A number that nobody has judged is not printed, whatever its basis."""
    assessment = replace(fakes.full(), findings=(), rules=())
    text = _shown(assessment, name)
    assert "12.5" not in text
    assert "________" in text
    assert "until it has been measured here" in text


@pytest.mark.parametrize("name", [each for each in sorted(CRITICAL) if not each.startswith("patient_shield")])
def test_a_critical_number_is_printed_when_everything_is_met(name: str) -> None:
    """Chosen, found as built, and its rules met: the number stands in the document."""
    text = _shown(fakes.full(), name)
    assert re.match(r"1?2\.5", text)
    assert "until" not in text


@pytest.mark.parametrize("name", [each for each in sorted(CRITICAL) if not each.startswith("patient_shield")])
@pytest.mark.parametrize("outcome", ["not met", "not assessed", "excepted"])
def test_a_critical_number_is_blank_when_one_rule_is_open(name: str, outcome: str) -> None:
    """One rule that is not met holds the number back, and is named; an exception does not help."""
    assessment = fakes.full()
    subjects = CRITICAL[name].subjects
    rules = {rule.id for rule in assessment.rules if rule.subject == subjects[-1]}
    findings = tuple(
        replace(each, outcome=outcome) if each.rule in rules else each for each in assessment.findings
    )
    text = _shown(replace(assessment, findings=findings), name)
    assert "________" in text
    assert "2.5" not in text
    assert all(f"until rule {rule} is met" in text for rule in rules)


def test_an_exception_to_a_should_rule_lets_a_critical_number_stand() -> None:
    """What the department has excepted in writing does not blank its documents, unless it is a must."""
    assessment = fakes.full()
    for strength, printed in (("should", True), ("must", False)):
        rules = tuple(
            replace(each, strength=strength) if each.subject == "arrangement.plane_distance_cm" else each
            for each in assessment.rules
        )
        excepted = {each.id for each in rules if each.subject == "arrangement.plane_distance_cm"}
        findings = tuple(
            replace(each, outcome="excepted") if each.rule in excepted else each
            for each in assessment.findings
        )
        changed = replace(assessment, rules=rules, findings=findings)
        assert printed == ("12.5" in _shown(changed, "arrangement.plane_distance_cm"))


@pytest.mark.parametrize("name", [each for each in sorted(CRITICAL) if not each.startswith("patient_shield")])
@pytest.mark.parametrize("basis", ["stated", "predicted", "assumed"])
def test_a_critical_number_needs_a_measured_proof(name: str, basis: str) -> None:
    """A rule that is met by a statement or a prediction proves nothing."""
    assessment = fakes.full()
    findings = tuple(replace(each, basis=basis) for each in assessment.findings)
    text = _shown(replace(assessment, findings=findings), name)
    assert "________" in text
    assert "2.5" not in text


def test_a_shield_is_judged_by_its_own_findings(full: dict[str, RenderedDocument]) -> None:
    """The thickness of a shield that was measured is printed, that of its neighbour is not."""
    blanks = [blank.name for blank in full["3.2"].missing]
    assert ["patient_shield.thickness_mm of patient shield patient_shield-2"] == blanks


def test_a_template_cannot_show_a_critical_number_as_any_other() -> None:
    """A critical number is asked for by its own name for it, else the program stops."""
    with pytest.raises(CatalogueError, match="critical number"):
        _showing(fakes.full()).show("arrangement.tilt_deg")


@pytest.mark.parametrize("technique", ["", *TECHNIQUES])
def test_no_document_states_monitor_units_to_deliver(technique: str) -> None:
    """The only MU in the documents are the limit of the mode and the crossed-out example."""
    assessment = fakes.full(technique) if technique else fakes.empty()
    for document in render_bodies(assessment):
        for paragraph in re.split(r"</(?:p|li|tr|h2|h3)>", document.html_body):
            text = _plain(paragraph)
            if "Not for treatment" not in text and _MU_NUMBER.search(text):
                allowed = ("above", "Highest MU", "MU for tests", "MU in the busiest", "for each MU")
                assert any(each in text for each in allowed), (document.number, text)


def test_the_worked_example_is_crossed_out(full: dict[str, RenderedDocument]) -> None:
    """The example fits no machine and says so twice."""
    example = next(each for each in full["4.3"].html_body.split("<blockquote>") if "4000" in each)
    assert re.search(r"<s>[^<]*4000</s>", example)
    assert 2 == example.count("Not for treatment.")


def test_the_hash_changes_with_a_number_and_with_nothing_else(full: dict[str, RenderedDocument]) -> None:
    """An approval ends when a number in the document changes; day, version and drawings do not end it."""
    assessment = fakes.full()
    later = replace(assessment, as_of=assessment.as_of.replace(year=2031), phase="operate", gaps=())
    same = _by_number(render_bodies(later, {}, {"room-plan": "<svg><title>x</title></svg>"}))
    assert {number: each.body_sha256 for number, each in full.items()} == {
        number: each.body_sha256 for number, each in same.items()
    }
    heavier = tuple(
        replace(each, value=140.0) if each.name == "program.heaviest_patient_kg" else each
        for each in assessment.values
    )
    changed = _by_number(render_bodies(replace(assessment, values=heavier)))
    differing = {number for number in full if full[number].body_sha256 != changed[number].body_sha256}
    assert {"1.1", "2.1"} == differing


def test_field_names_are_unique_in_the_binder(empty: dict[str, RenderedDocument]) -> None:
    """No two fields of the binder share a name, so none fills another."""
    names = [name for document in empty.values() for name in document.fields]
    assert len(names) == len(set(names)) > 1500


def test_every_form_can_be_filled_in(empty: dict[str, RenderedDocument]) -> None:
    """Each form has fields, and each field says what it is for."""
    for document in empty.values():
        if document.kind == "form":
            assert document.fields, document.number
        for field in re.findall(r"<(?:input|textarea)[^>]*>", document.html_body):
            assert re.search(r'title="[^"]+"', field), field


def test_two_fields_of_one_form_cannot_share_a_name() -> None:
    """A form that asks twice for the same thing is our own defect."""
    with pytest.raises(CatalogueError, match="two fields"):
        FormFields("6.1", Holes()).lines("Date", "Date")


def test_signs_tell_heights_apart() -> None:
    """Plus ten and minus ten are two fields."""
    fields = FormFields("6.7", Holes())
    fields.lines("+10", "-10", "10")
    assert ["f6-7-plus-10", "f6-7-minus-10", "f6-7-10"] == list(fields.names)


def test_our_words_have_a_glyph_each(
    full: dict[str, RenderedDocument], empty: dict[str, RenderedDocument]
) -> None:
    """Nothing that we write falls back to a font of the machine."""
    for document in (*full.values(), *empty.values()):
        assert () == missing_characters(_plain(document.html_body)), document.number


def test_no_document_says_nothing(empty: dict[str, RenderedDocument]) -> None:
    """No empty section, no filler, no name of a product."""
    for document in empty.values():
        for section in re.findall(r"<section[^>]*>(.*?)</section>", document.html_body, re.DOTALL):
            body = re.sub(r"<h2>.*?</h2>", "", section, flags=re.DOTALL)
            assert _plain(body).strip() or "<input" in body, document.number
        assert not re.search(
            r"lorem|TBD|TODO|to be defined|as appropriate", document.html_body, re.IGNORECASE
        )


def test_the_department_replaces_a_part() -> None:
    """Its own words stand in the part, marked as its own, with values in their holes."""
    texts = {("1.1", "scope"): "Only **adults** up to {{ program.heaviest_patient_kg }}.\n\n- one\n- two"}
    document = _by_number(render_bodies(fakes.full(), texts))["1.1"]
    assert ("Scope",) == document.own_wording
    assert "<strong>adults</strong>" in document.html_body
    assert "<li>two</li>" in document.html_body
    assert '<span class="value">12.5\u00a0kg</span>' in document.html_body
    assert "The department's own wording." in document.html_body
    assert "It does not cover" not in document.html_body


def test_own_wording_is_data_and_no_template() -> None:
    """Markup, code and unknown names in the department's words are not carried out but told."""
    texts = {
        ("1.1", "scope"): "{{ program.colour }} {% for x in y %}",
        ("1.1", "poem"): "x",
        ("9.9", "scope"): "x",
    }
    problems = "\n".join(wording_problems(texts))
    assert "texts/1.1/scope.md: there is no value program.colour" in problems
    assert "nothing else in braces" in problems
    assert "document 1.1 has no part poem; its parts are scope, what-is-offered" in problems
    assert "there is no document 9.9" in problems
    with pytest.raises(UsageError, match="own wording cannot be used"):
        render_bodies(fakes.full(), texts)


@pytest.mark.parametrize(
    "hostile",
    [
        "<script>alert(1)</script>",
        '<img src="file:///etc/passwd">',
        "![x](file:///etc/passwd)",
        "[x](javascript:alert(1))",
        "[x](file:///etc/passwd)",
        '<a rel="attachment" href="file:///etc/passwd">x</a>',
        "\ue0000\ue001",
    ],
)
def test_own_wording_brings_no_markup(hostile: str) -> None:
    """Raw HTML, pictures, scripts and file links in the department's words are plain words."""
    html = _by_number(render_bodies(fakes.full(), {("1.1", "scope"): hostile}))["1.1"].html_body
    scope = html.split("</section>")[0]
    assert not re.search(r"<(script|img|a)\b", scope)


def test_own_wording_cannot_get_round_a_critical_number() -> None:
    """A critical number named in the department's words is as blank as in ours."""
    texts = {("1.1", "scope"): "Stand at {{ arrangement.plane_distance_cm }}."}
    assessment = replace(fakes.full(), findings=())
    scope = _by_number(render_bodies(assessment, texts))["1.1"].html_body.split("</section>")[0]
    assert "________\u00a0cm" in scope
    assert "12.5" not in scope


def test_links_of_ours_survive_markdown() -> None:
    """A link into the binder stays a link; any other scheme loses it."""
    assert '<p><a href="binder:3.1">x</a></p>\n' == to_html("[x](binder:3.1)")
    assert "<p><a>x</a></p>\n" == to_html("[x](ftp://a.b)")


def test_a_table_heading_tells_its_direction() -> None:
    """Headings of Markdown tables are headings of columns for a screen reader."""
    html = to_html("| a | b |\n|---|---|\n| 1 | 2 |\n")
    assert 2 == html.count('<th scope="col">')
    assert "<thead>" in html


def test_each_thing_that_fills_a_blank_is_said_once(full: dict[str, RenderedDocument]) -> None:
    """Two blanks that wait for the same measurement name it once; a sentence ends with one full stop."""
    blanks = (Blank("a", CAUSES, "Measure it."), Blank("b", CAUSES, "Measure it."), Blank("b", CAUSES, "State that."))
    html = article(replace(full["1.1"], missing=blanks), fakes.full())
    assert f"<p><b>{CAUSES}:</b> Measure it; State that.</p>" in html


def test_a_list_of_items_leaves_out_another_room() -> None:
    """The barriers of a room that was not chosen do not stand in the document."""
    assessment = fakes.full()
    other = tuple(
        replace(each, value="vault-b")
        if each.name == "barrier.room" and each.item.id == "barrier-2"
        else each
        for each in assessment.values
    )
    html = _by_number(render_bodies(replace(assessment, values=other)))["4.7"].html_body
    assert "barrier-1" in html
    assert "barrier-2" not in html


def test_a_predicted_number_in_a_list_says_so() -> None:
    """Also in a table of items a number that was not stated carries its basis."""
    assessment = fakes.full()
    predicted = tuple(
        replace(each, basis="predicted") if each.name == "course.total_dose_gy" else each
        for each in assessment.values
    )
    html = _by_number(render_bodies(replace(assessment, values=predicted)))["1.1"].html_body
    assert 'class="basis">predicted</span>' in html


def test_the_plan_is_found_through_the_descent_of_a_choice() -> None:
    """The plan of the chosen arrangement is the one that its plane distance came from."""
    assessment = fakes.full()
    plans = tuple(
        Value("plan.mu_convention", Ref("plan", name), words, "", "stated")
        for name, words in (("plan-a", "on-each-beam"), ("plan-b", "total-of-both-beams"))
    )
    descent = (Input("plane_distance_cm", "plan.plane_distance_cm", Ref("plan", "plan-b")),)
    values = tuple(
        replace(each, inputs=descent) if each.name == "arrangement.plane_distance_cm" else each
        for each in assessment.values
    )
    found = Lookup(replace(assessment, values=(*values, *plans))).get("plan.mu_convention")
    assert isinstance(found, Value)
    assert "total-of-both-beams" == found.value


def _showing(assessment: Assessment) -> Showing:
    return Showing(Lookup(assessment), {}, Holes())


def _shown(assessment: Assessment, name: str) -> str:
    holes = Holes()
    return _plain(holes.fill(str(Showing(Lookup(assessment), {}, holes).critical(name))))


def test_findings_of_another_arrangement_prove_nothing() -> None:
    """An as-built record of another arrangement does not release the numbers of this one."""
    assessment = fakes.full()
    other = Ref("arrangement", "another")
    findings: tuple[Finding, ...] = tuple(
        replace(each, item=other) if each.item == fakes.ARRANGEMENT else each for each in assessment.findings
    )
    assert "________" in _shown(replace(assessment, findings=findings), "arrangement.tilt_deg")
