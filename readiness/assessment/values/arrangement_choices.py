"""What the department chooses for an arrangement, from the plan that fits it."""

from readiness.assessment.definition import Definition
from readiness.errors import OutsideValidity


def chosen_plane_distance(*, plane_distance_cm: float) -> float:
    """Return the plan's plane distance."""
    return plane_distance_cm


def chosen_tilt(*, tilt_deg: float) -> float:
    """Return the plan's tilt."""
    return tilt_deg


def chosen_gap(*, degrader_gap_cm: float) -> float:
    """Return the plan's degrader gap."""
    return degrader_gap_cm


def smallest_gap(*, turning_radius_cm: float, clearance_cm: float) -> float:
    """Return the smallest gap between degrader and plane that clears the turning patient."""
    return turning_radius_cm + clearance_cm


def mu_ratio(*, mu_share_upper: float) -> float:
    """Return the MU of the field aimed at the head divided by the MU of the one aimed at the feet."""
    if not 0 < mu_share_upper < 1:
        raise OutsideValidity("both fields of a pair need a part of the MU")
    return mu_share_upper / (1 - mu_share_upper)


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.plane_distance_cm",
        "Chosen horizontal distance from the source to the treatment plane.",
        by=chosen_plane_distance,
        takes={"plane_distance_cm": "plan.plane_distance_cm"},
        part="choice",
        critical=True,
    ),
    Definition(
        "arrangement.tilt_deg",
        "Chosen gantry angle of each field from the horizontal.",
        by=chosen_tilt,
        takes={"tilt_deg": "plan.tilt_deg"},
        part="choice",
        critical=True,
    ),
    Definition(
        "arrangement.degrader_gap_cm",
        "Chosen distance from the degrader's exit face to the treatment plane.",
        by=chosen_gap,
        takes={"degrader_gap_cm": "plan.degrader_gap_cm"},
        part="choice",
        critical=True,
    ),
    Definition(
        "arrangement.mu_ratio",
        "MU of the field aimed at the head divided by the MU of the field aimed at the feet.",
        by=mu_ratio,
        takes={"mu_share_upper": "plan.mu_share_upper"},
        part="choice",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.study_distance_cm",
        "Plane distance for which the field is predicted: the chosen one, else the farthest in the room.",
        by=chosen_plane_distance,
        takes={"plane_distance_cm": "arrangement.plane_distance_cm"},
        otherwise="arrangement.farthest_plane_distance_cm",
    ),
    Definition(
        "arrangement.smallest_gap_cm",
        "Smallest gap between degrader and plane that clears the turning patient.",
        by=smallest_gap,
        takes={
            "turning_radius_cm": "stand.turning_radius_cm",
            "clearance_cm": "criterion.turning_clearance_cm",
        },
        source="practice",
        known="practice",
    ),
    Definition(
        "arrangement.study_gap_cm",
        "Gap between degrader and plane for which the field is predicted: the chosen one, else the smallest.",
        by=chosen_gap,
        takes={"degrader_gap_cm": "arrangement.degrader_gap_cm"},
        otherwise="arrangement.smallest_gap_cm",
    ),
)
