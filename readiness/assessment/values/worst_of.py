"""The worse of two numbers that one rule asks of: both directions, both sides, both floors and ceilings."""

from readiness.assessment.definition import Definition, derived

NOTHING = "nothing"


def outside_range(*, energy_mev: float, lowest_mev: float, highest_mev: float) -> float:
    """Return how far an energy lies outside a range, 0 within it."""
    return max(lowest_mev - energy_mev, energy_mev - highest_mev, 0.0)


def smaller(*, one_cm: float, other_cm: float) -> float:
    """Return the smaller of two lengths."""
    return min(one_cm, other_cm)


def larger(*, along_percent: float, across_percent: float) -> float:
    """Return the larger of two deviations."""
    return max(along_percent, across_percent)


def monitor_faults(
    *, linearity_percent: float, repeat_percent: float, backup_percent: float,
    most_linearity_percent: float, most_repeat_percent: float, most_backup_percent: float,
) -> str:  # fmt: skip
    """Return what of the monitor in the mode departs by more than it may."""
    found = (
        ("dose per MU over the numbers of MU in use", linearity_percent, most_linearity_percent),
        ("repeated exposures", repeat_percent, most_repeat_percent),
        ("both monitor channels", backup_percent, most_backup_percent),
    )
    return (
        ", ".join(f"{words} by {seen:.3g} % ({most:g} %)" for words, seen, most in found if seen > most)
        or NOTHING
    )


def calibration_faults(*, names_beam: bool, age_days: float, longest_days: float) -> str:
    """Return why a reference calibration does not stand for a beam."""
    faults = [] if names_beam else ["done for another machine or beam"]
    if age_days > longest_days:
        faults.append(f"{age_days:g} days old ({longest_days:g})")
    return ", ".join(faults) or NOTHING


def too_few(
    *, physicists: int, oncologists: int, physicists_persons: float, oncologists_persons: float
) -> str:  # fmt: skip
    """Return the professions of which too few people are qualified, with how many there are."""
    found = {
        "physicists": (physicists, physicists_persons),
        "radiation oncologists": (oncologists, oncologists_persons),
    }
    return (
        ", ".join(f"{who} ({there} of {asked:g})" for who, (there, asked) in found.items() if there < asked)
        or NOTHING
    )


DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "arrangement.energy_outside_mev",
        "How far the energy at the plane lies outside the usual range, 0 within it.",
        outside_range,
        {
            "energy_mev": "arrangement.energy_at_plane_mev",
            "lowest_mev": "criterion.lowest_energy_mev",
            "highest_mev": "criterion.highest_energy_mev",
        },
    ),
    derived(
        "arrangement.degrader_to_spare_cm",
        "By how much the degrader exceeds what it has to shadow, in width or height, whichever is less.",
        smaller,
        {
            "one_cm": "arrangement.degrader_width_to_spare_cm",
            "other_cm": "arrangement.degrader_height_to_spare_cm",
        },
    ),
    derived(
        "arrangement.in_air_percent",
        "Uniformity in air along the height or across, whichever is worse.",
        larger,
        {
            "along_percent": "arrangement.vertical_in_air_percent",
            "across_percent": "arrangement.horizontal_in_air_percent",
        },
    ),
    derived(
        "arrangement.head_clear_cm",
        "Clearance of the treatment head above the floor or below the ceiling, whichever is less.",
        smaller,
        {"one_cm": "arrangement.head_above_floor_cm", "other_cm": "arrangement.head_below_ceiling_cm"},
    ),
    derived(
        "arrangement.couch_to_spare_cm",
        "What the couch has beyond what it needs, of clear run in the room as it is or of travel.",
        smaller,
        {"one_cm": "arrangement.couch_run_to_spare_cm", "other_cm": "arrangement.couch_travel_to_spare_cm"},
    ),
    derived(
        "arrangement.reference_calibration_faults",
        "Why the reference calibration does not stand for the beam of the arrangement.",
        calibration_faults,
        {
            "names_beam": "arrangement.reference_calibration_names_beam",
            "age_days": "reference_dosimetry.days_since_calibration_days",
            "longest_days": "criterion.yearly_interval_days",
        },
    ),
    derived(
        "program.professions_too_few",
        "Professions of which too few people are qualified.",
        too_few,
        {
            "physicists": "program.qualified_physicists",
            "oncologists": "program.qualified_oncologists",
            "physicists_persons": "criterion.physicists_persons",
            "oncologists_persons": "criterion.oncologists_persons",
        },
    ),
    derived(
        "beam.mode_monitor_faults",
        "What of the monitor in the mode departs by more than it may.",
        monitor_faults,
        {
            "linearity_percent": "beam.mode_linearity_percent",
            "repeat_percent": "beam.mode_repeat_percent",
            "backup_percent": "beam.mode_backup_percent",
            "most_linearity_percent": "criterion.mode_linearity_percent",
            "most_repeat_percent": "criterion.mode_repeat_percent",
            "most_backup_percent": "criterion.monthly_output_percent",
        },
    ),
)
