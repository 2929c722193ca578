"""Ozone in the room at the end of a session."""

from readiness.assessment.definition import Definition
from readiness.calculations.air_transport import pencil_beam_in_air
from readiness.calculations.ozone import Ozone, ozone_after_session
from readiness.calculations.room_plan import floor_area_m2
from readiness.calculations.stopping_power import collision_stopping_power
from readiness.errors import OutsideValidity

GY_PER_MEV_PER_G = 1.602177e-10  # one MeV in a gram, in gray
SECONDS = 60.0
DUAL_FIELDS = 6


def ozone(
    *, technique: str, energy_mev: float, plane_distance_cm: float, pressure_kpa: float,
    temperature_celsius: float, dose_per_cycle_gy: float, b_factor: float, sessions_per_cycle: int,
    lit_width_cm: float, upper_axis_height_cm: float, lower_axis_height_cm: float, beam_min: float,
    floor_polygon_cm: tuple[tuple[float, float], ...], ceiling_height_cm: float, air_changes_per_h: float,
    ozone_yield: float, life_min: float,
) -> Ozone:  # fmt: skip
    """Return the ozone after a session of a standing technique; the beam current follows from the dose."""
    if technique == "moving-couch":
        raise OutsideValidity("the path in air of a vertical beam is short; ozone is not calculated for it")
    plane = pencil_beam_in_air(
        energy_at_source_mev=energy_mev, path_cm=plane_distance_cm, pressure_kpa=pressure_kpa,
        temperature_celsius=temperature_celsius,
    )  # fmt: skip
    stopping = collision_stopping_power(material="water", energy_mev=plane.mean_energy_mev)
    height_cm = lit_width_cm + upper_axis_height_cm - lower_axis_height_cm
    return ozone_after_session(
        plane_dose_gy=DUAL_FIELDS * dose_per_cycle_gy / b_factor / sessions_per_cycle,
        fluence_per_cm2_per_gy=1 / (GY_PER_MEV_PER_G * stopping),
        field_area_m2=lit_width_cm * height_cm / 1e4,
        energy_lost_mev=energy_mev - plane.mean_energy_mev,
        duration_s=SECONDS * beam_min,
        volume_m3=floor_area_m2(floor_polygon_cm=floor_polygon_cm) * ceiling_height_cm / 100,
        air_changes_per_h=air_changes_per_h, yield_per_100ev=ozone_yield, decomposition_min=life_min,
    )  # fmt: skip


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.ozone_record",
        "Ozone after a session.",
        by=ozone,
        takes={
            "technique": "arrangement.technique",
            "energy_mev": "beam.energy_at_source_mev",
            "plane_distance_cm": "arrangement.study_distance_cm",
            "pressure_kpa": "room.site_pressure_kpa",
            "temperature_celsius": "room.temperature_celsius",
            "dose_per_cycle_gy": "program.largest_dose_per_cycle_gy",
            "b_factor": "arrangement.b_factor",
            "sessions_per_cycle": "program.fewest_sessions_per_cycle",
            "lit_width_cm": "arrangement.lit_width_cm",
            "upper_axis_height_cm": "arrangement.upper_axis_height_cm",
            "lower_axis_height_cm": "arrangement.lower_axis_height_cm",
            "beam_min": "arrangement.session_beam_min",
            "floor_polygon_cm": "room.floor_polygon_cm",
            "ceiling_height_cm": "room.ceiling_height_cm",
            "air_changes_per_h": "room.air_changes_per_h",
            "ozone_yield": "criterion.ozone_yield_ratio",
            "life_min": "criterion.ozone_life_min",
        },
        model=True,
        internal=True,
    ),
    Definition(
        "arrangement.ozone_ppm",
        "Ozone in the air of the room at the end of a session.",
        of="arrangement.ozone_record",
        part="at_end_ppm",
        source="ncrp-144",
        known="memory",
        formula="C = (G/100) (I/e) S rho L / (V n lambda) (1 - exp(-lambda t))",
    ),
)
