"""What is asked for together and answered one by one: a rule asks for nothing missing and names what is."""

import inspect
from collections.abc import Callable, Mapping
from dataclasses import replace

from readiness.assessment.definition import Definition, derived

NOTHING = "nothing"
Answer = bool | None  # None: nobody has said


def named(answers: Mapping[str, Answer]) -> str:
    """Return the words whose answer is no, then those without an answer; nothing where no answer is no."""
    missing = ", ".join(words for words, answer in answers.items() if answer is False)
    unsaid = ", ".join(words for words, answer in answers.items() if answer is None)
    return f"{missing}; not stated: {unsaid}" if missing and unsaid else missing or NOTHING


def _list(name: str, meaning: str, by: Callable[..., str], takes: Mapping[str, str]) -> Definition:
    """Return a list of what is not there: a known no decides, whatever else is not stated."""
    return replace(derived(name, meaning, by, takes), complete=NOTHING)


def lacking(words: Mapping[str, str]) -> Callable[..., str]:
    """Return a function that names, of answers by keyword, those that are no."""

    def missing(**answers: Answer) -> str:
        """Return the words of every answer that is no, nothing if there is none."""
        return named({words[key]: answer for key, answer in answers.items()})

    missing.__signature__ = inspect.Signature(  # type: ignore[attr-defined]
        [inspect.Parameter(key, inspect.Parameter.KEYWORD_ONLY, annotation=bool) for key in words]
    )
    return missing


def _missing(name: str, meaning: str, words: Mapping[str, str]) -> Definition:
    """Return the list of what is not there; ``words`` name each field, which is yes or no."""
    kind = name.partition(".")[0]
    fields = {entry if "." in entry else f"{kind}.{entry}": said for entry, said in words.items()}
    by_key = {entry.partition(".")[2]: said for entry, said in fields.items()}
    return _list(name, meaning, lacking(by_key), {entry.partition(".")[2]: entry for entry in fields})


def feet_and_sound(*, camera_shows_feet: Answer, intercom: str | None) -> str:
    """Return what is missing, beside two views, to see and hear a patient who is alone in the room."""
    two_way = None if intercom is None else intercom == "two-way"
    return named({"a view of the feet": camera_shows_feet, "two-way sound": two_way})


def against_falls(
    *, rails: Answer, grip: Answer, non_slip: Answer, steps: int | None, steps_needed: int | None
) -> str:
    """Return what a stand lacks of what keeps a patient from falling."""
    known = steps is not None and steps_needed is not None
    return named({
        "rails": rails,
        "a grip in every position": grip,
        "a surface that does not slip": non_slip,
        f"steps ({steps} of {steps_needed})" if known else "steps":
            steps >= steps_needed if steps is not None and steps_needed is not None else None,
    })  # fmt: skip


def control_of_mode(*, own_key: Answer, enabled_by: str | None) -> str:
    """Return what is missing before the mode can be entered on purpose only; who enables it must be known."""
    who = None if enabled_by is None else True
    return named({"a key or code of its own": own_key, "who enables it": who})


def rules_of_documents(
    *, review_interval_months: float | None, longest_months: float, retention_years: float | None,
    read_and_understood: Answer, withdrawn_copies_removed: Answer,
) -> str:  # fmt: skip
    """Return what is missing in the control of documents; how long records are kept must be known."""
    return named({
        f"review every {longest_months:g} months": _holds(
            review_interval_months, lambda months: months <= longest_months
        ),
        "a time for which records are kept": _holds(retention_years, lambda years: years > 0),
        "signatures that each revision was read": read_and_understood,
        "removal of superseded copies": withdrawn_copies_removed,
    })  # fmt: skip


def _holds(number: float | None, condition: Callable[[float], bool]) -> Answer:
    return None if number is None else condition(number)


def rules_when_something_fails(
    *, interrupted_cycle: Answer, machine_down: Answer, physicist_absent: Answer, lapse_days: float | None
) -> str:
    """Return which rules for the day when something fails are missing; the days of a lapse must be known."""
    return named({
        "an interrupted cycle": interrupted_cycle,
        "a machine that fails between the days of a cycle": machine_down,
        "an absent physicist": physicist_absent,
        "a lapse": _holds(lapse_days, lambda days: days > 0),
    })  # fmt: skip


DEFINITIONS: tuple[Definition, ...] = (
    _list(
        "stand.fall_protection_missing",
        "What it lacks of what keeps a patient from falling.",
        against_falls,
        {
            "rails": "stand.rails",
            "grip": "stand.grip",
            "non_slip": "stand.non_slip",
            "steps": "stand.steps",
            "steps_needed": "stand.steps_needed",
        },
    ),
    _list(
        "room.watching_missing",
        "What is missing, beside two camera views, to see and hear the patient.",
        feet_and_sound,
        {
            "camera_shows_feet": "room.camera_shows_feet",
            "intercom": "room.intercom",
        },
    ),
    _list(
        "beam.mode_control_missing",
        "What is missing before the mode can be entered on purpose only.",
        control_of_mode,
        {"own_key": "beam.mode_own_key", "enabled_by": "beam.mode_enabled_by"},
    ),
    _list(
        "document_control.rules_missing",
        "What is missing in the control of documents.",
        rules_of_documents,
        {
            "review_interval_months": "document_control.review_interval_months",
            "longest_months": "criterion.review_interval_months",
            "retention_years": "document_control.retention_years",
            "read_and_understood": "document_control.read_and_understood",
            "withdrawn_copies_removed": "document_control.withdrawn_copies_removed",
        },
    ),
    _list(
        "contingency.rules_missing",
        "Rules that are missing for the day when something fails.",
        rules_when_something_fails,
        {
            "interrupted_cycle": "contingency.interrupted_cycle_rule",
            "machine_down": "contingency.machine_down_rule",
            "physicist_absent": "contingency.physicist_absent_rule",
            "lapse_days": "program.lapse_days",
        },
    ),
    _missing(
        "room.safety_devices_missing",
        "Safety devices that the room lacks.",
        {
            "door_interlock": "a door interlock that was tested in the mode",
            "last_person_out_button": "a search button",
            "emergency_off_reachable": "an emergency off at the stand",
            "beam_on_light": "a beam-on light inside and outside",
        },
    ),
    _missing(
        "patient_safety.stop_rule_missing",
        "What the stop rule lacks.",
        {
            "stop_rule": "anyone may stop, and when the beam must be stopped",
            "lost_view_stops_beam": "beam off when sight or sound is lost",
        },
    ),
    _missing(
        "patient_safety.dignity_missing",
        "What is missing for the patient's dignity.",
        {"no_recording": "no recording and shaded screens", "chaperone": "the offer of a chaperone"},
    ),
    _missing(
        "clinical.course_record_missing",
        "What is missing of the record that goes along with a course.",
        {
            "lymphoma_board": "decision at a lymphoma board",
            "skin_score_and_photographs": "skin score and photographs",
            "lifetime_skin_dose_record": "earlier radiation to the skin",
        },
    ),
    _missing(
        "clinical.physicians_part_missing",
        "What of the physician's part is missing.",
        {
            "staging_and_biopsy": "staging and biopsy before the directive",
            "weekly_review": "a look at the skin every week",
        },
    ),
    _missing(
        "patient_safety.session_checks_missing",
        "Checks of a session that are not made.",
        {
            "time_out": "a time-out with a written checklist before it",
            "shields_counted": "shields counted in and out",
            "return_check": "the machine back in ordinary use, its output checked",
        },
    ),
    _missing(
        "clinical.excluded_or_covered_missing",
        "Written procedures that are missing for pregnancy and implants.",
        {"pregnancy_procedure": "pregnancy is excluded", "device_procedure": "pacemakers and other implants"},
    ),
    _missing(
        "clinical.fit_missing",
        "What is not looked at before a patient is planned and before each session.",
        {
            "patient_fit_check": "height, reach, weight, standing time, sight and hearing",
            "patient_safety.fall_risk_check": "risk of a fall, before the course and before each session",
            "patient_safety.dressings_rule": "dressings, ointment, piercings and lines",
        },
    ),
    _missing(
        "contingency.referral_missing",
        "What is not agreed with another center.",
        {
            "referral_agreement": "a written agreement on who takes over a started course",
            "lying_referral_route": "a route for patients who cannot stand",
            "clinical.anaesthesia_procedure": "children and patients under anaesthesia",
        },
    ),
    _missing(
        "quality.incident_learning_missing",
        "What is missing to learn from incidents.",
        {
            "incident_system": "reports of incidents and near misses",
            "corrective_actions_closed": "owner, date and closure of each corrective action",
        },
    ),
    _missing(
        "patient_safety.two_persons_missing",
        "Where two persons are not planned.",
        {
            "two_persons_at_console": "two qualified persons at the console whenever the beam is on",
            "two_persons_can_enter": "two persons who can enter within seconds",
        },
    ),
    _missing(
        "in_vivo.occasions_missing",
        "Occasions on which the dose on the patient is not measured.",
        {"first_cycle_measured": "the first full cycle", "repeat_after_change": "the cycle after a change"},
    ),
    _missing(
        "in_vivo.holds_missing",
        "Holds until readings are seen that are missing.",
        {"day_one_gate": "before day 2 of the first cycle", "signed_by_both": "before the next cycle"},
    ),
    _missing(
        "records_security.measures_missing",
        "What is missing to keep patients' records whole and private.",
        {
            "access_limited": "access for named roles only",
            "photographs_protected": "photographs in the clinical record only",
            "in_vivo_readings_in_record": "in-vivo readings in the patient's record",
        },
    ),
    _missing(
        "quality.chart_checks_missing",
        "Checks of the chart that are not made.",
        {
            "chart_check_before_start": "before the first session",
            "chart_check_weekly": "every week",
            "chart_check_at_end": "at the end",
        },
    ),
)
