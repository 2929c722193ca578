"""What each value means and which calculation gives it, one module a subject."""

from readiness.assessment.definition import Definition
from readiness.assessment.values import (
    arrangement_choices,
    beam_depth,
    beam_energy,
    beam_evenness,
    beam_factor,
    beam_field,
    beam_foil,
    beam_output,
    beam_plan,
    beam_profiles,
    beam_study,
    beam_uncertainty,
    capacity,
    costs,
    courses,
    patient_flow,
    risk,
    staff_time,
)

ALL: tuple[Definition, ...] = (
    *arrangement_choices.DEFINITIONS,
    *beam_depth.DEFINITIONS,
    *beam_energy.DEFINITIONS,
    *beam_evenness.DEFINITIONS,
    *beam_factor.DEFINITIONS,
    *beam_field.DEFINITIONS,
    *beam_foil.DEFINITIONS,
    *beam_output.DEFINITIONS,
    *beam_plan.DEFINITIONS,
    *beam_profiles.DEFINITIONS,
    *beam_study.DEFINITIONS,
    *beam_uncertainty.DEFINITIONS,
    *capacity.DEFINITIONS,
    *costs.DEFINITIONS,
    *courses.DEFINITIONS,
    *patient_flow.DEFINITIONS,
    *risk.DEFINITIONS,
    *staff_time.DEFINITIONS,
)
