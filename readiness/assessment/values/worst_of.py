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
