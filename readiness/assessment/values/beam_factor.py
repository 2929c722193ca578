"""The multiple-field factor B and the x-ray component, each stated, measured or predicted."""

from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.readings import number_or_none, numbers, numbers_or, rows_where, words
from readiness.calculations.b_factor import BFactor, analyse_b_factor
from readiness.calculations.beam_geometry import axis_height_at_plane_cm
from readiness.calculations.course_xray_dose import composite_xray_percent
from readiness.calculations.field_factor import b_factor_question, rotating_factor
from readiness.calculations.monitor_units import ON_EACH
from readiness.calculations.xray_component import XrayComponent, analyse_xray_component
from readiness.errors import OutsideValidity
from readiness.quantities import Table, Uncertain

B_FACTOR, XRAYS = "b-factor", "xray-component"


def b_factor_of_readings(
    *, kind: str, table: Table, technique: str, phantom_radius_cm: float
) -> BFactor | None:
    """Return the factor that readings on a cylinder give; None for another kind of measurement."""
    if kind != B_FACTOR:
        return None
    around, point = (rows_where(table, "fields", word) for word in ("all-dual", "one-dual"))
    return analyse_b_factor(
        around_deg=numbers(around, "around_deg"),
        cylinder_doses_cgy=numbers(around, "dose_cgy"),
        cylinder_mu=numbers(around, "mu"),
        calibration_doses_cgy=numbers(point, "dose_cgy"),
        calibration_mu=numbers(point, "mu"),
        technique=technique,
        cylinder_radius_cm=phantom_radius_cm,
    )


def six_position_factor(*, analysis: BFactor) -> Uncertain:
    """Return B of six dual fields, whichever fields were given, with its standard deviation."""
    scale = analysis.six_position_factor / analysis.factor.value
    return Uncertain(analysis.six_position_factor, analysis.factor.sd * scale)


def stated_factor(*, b_factor: float) -> float:
    """Return the factor that the plan states."""
    return b_factor


def question_or_none(*, b_factor: float) -> str:
    """Return the question that a factor raises, none if it raises none."""
    return b_factor_question(b_factor=b_factor) or "none"


def stated_fraction(*, xray_fraction_percent: float) -> float:
    """Return f1 as the department states it."""
    return xray_fraction_percent


def stated_depth(*, xray_fraction_depth_cm: float) -> float:
    """Return the depth for which f1 is stated."""
    return xray_fraction_depth_cm


def depth_of_readings(*, xrays: XrayComponent) -> float | None:
    """Return the depth at which f1 was measured."""
    return None if xrays.pair_depth_mm is None else xrays.pair_depth_mm / 10


def depth_on_axis(*, xrays: XrayComponent) -> float | None:
    """Return the depth at which the dose per MU on the tilted axis was measured."""
    return None if xrays.tilted_axis_depth_mm is None else xrays.tilted_axis_depth_mm / 10


@lru_cache(maxsize=256)
def xrays_of_readings(
    *,
    kind: str,
    table: Table,
    distance_cm: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    rp_cm: float | None,
    mu_convention: str | None,
) -> XrayComponent | None:
    """
    Return what readings behind the electrons' range give; None for another kind of measurement.

    The beam's range at 100 cm bounds the one at the plane. Doses per MU are brought to the MU of both beams
    together; without a word of how MU were counted they are taken as that.
    """
    if kind != XRAYS:
        return None
    per_mu = 0.5 if mu_convention == ON_EACH else 1.0
    doses = [number_or_none(entry) for entry in table.column("xray_cgy_per_mu")]
    return analyse_xray_component(
        fields=words(table, "fields", ""),
        depths_mm=numbers(table, "depth_mm"),
        heights_cm=numbers(table, "height_cm"),
        across_cm=numbers_or(table, "across_cm", 0.0),
        xray_percent=[number_or_none(entry) for entry in table.column("xray_percent")],
        xray_cgy_per_mu=[None if dose is None else per_mu * dose for dose in doses],
        axis_height_cm=axis_height_at_plane_cm(
            plane_distance_cm=distance_cm,
            source_axis_distance_cm=source_axis_distance_cm,
            tilt_deg=tilt_deg,
        ),
        practical_range_mm=None if rp_cm is None else 10 * rp_cm,
        b_factor=None,
    )


def composite_of_readings(*, xrays: XrayComponent) -> float:
    """Return F where it was measured itself."""
    if not xrays.composite_is_measured or xrays.composite_xray_percent is None:
        raise OutsideValidity("it holds no reading of all dual fields, so that F was not measured itself")
    return xrays.composite_xray_percent


def composite_of_pair(
    *, technique: str, pair_xray_percent: float, b_factor: float, definition_confirmed: bool | None
) -> float:
    """Return F from f1 and B; a moving couch has no B."""
    if technique == "moving-couch":
        raise OutsideValidity("a lying technique has no B: its x-ray dose must be measured")
    return composite_xray_percent(
        pair_xray_percent=pair_xray_percent,
        b_factor=b_factor,
        definition_confirmed=definition_confirmed is True,
    )


def _xrays(name: str, meaning: str, part: str) -> Definition:
    """Return a number that only readings of the x-ray component give."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        measured=Measured(XRAYS, takes={"xrays": "measurement.xray_readings"}, part=part),
        source="aapm-23",
        known="memory",
    )


def depth_at_mid_height(*, xrays: XrayComponent) -> float | None:
    """Return the depth at which the dose per MU at mid-height was measured."""
    return None if xrays.mid_height_depth_mm is None else xrays.mid_height_depth_mm / 10


_F_PLACES = {"pair_xray_percent": "arrangement.pair_xray_percent", "b_factor": "arrangement.b_factor"}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "measurement.b_factor_readings",
        "Factor that readings on a cylinder give.",
        by=b_factor_of_readings,
        takes={
            "kind": "measurement.kind",
            "table": "measurement.table",
            "technique": "measurement.technique",
            "phantom_radius_cm": "measurement.phantom_radius_cm",
        },
        internal=True,
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.predicted_b_factor",
        "Multiple-field factor B on a cylinder of 30 cm, as predicted.",
        of="arrangement.predicted_depth_dose",
        part="b_factor",
        source="own-monte-carlo",
        known="mc",
    ),
    Definition(
        "arrangement.b_factor",
        "Multiple-field factor B: mean skin dose from all six dual fields over the calibration-point dose of"
        " one.",
        by=stated_factor,
        takes={"b_factor": "plan.b_factor"},
        otherwise="arrangement.predicted_b_factor",
        measured=Measured(
            B_FACTOR, by=six_position_factor, takes={"analysis": "measurement.b_factor_readings"}
        ),
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.b_factor_question",
        "What a multiple-field factor of unusual size makes us ask, none for one of the usual size.",
        by=question_or_none,
        takes={"b_factor": "arrangement.b_factor"},
        source="practice",
        known="practice",
    ),
    Definition(
        "arrangement.b_factor_spread_percent",
        "Half-range of the skin dose around the cylinder.",
        measured=Measured(
            B_FACTOR, takes={"analysis": "measurement.b_factor_readings"}, part="spread_percent"
        ),
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.rotating_factor",
        "Skin dose of a turning patient over the calibration-point dose for the same monitor units.",
        by=rotating_factor,
        takes={"b_factor": "arrangement.b_factor"},
        source="definition",
        known="derived",
        formula="B_rot = B/6",
    ),
    Definition(
        "measurement.xray_readings",
        "What readings behind the electrons' range give.",
        by=xrays_of_readings,
        takes={
            "kind": "measurement.kind",
            "table": "measurement.table",
            "distance_cm": "measurement.distance_cm",
            "tilt_deg": "measurement.tilt_deg",
            "source_axis_distance_cm": "machine.source_axis_distance_cm",
            "rp_cm": "beam.rp_cm?",
            "mu_convention": "measurement.mu_convention?",
        },
        internal=True,
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.pair_xray_percent",
        "X-ray dose f1 of one dual field as a part of its calibration-point dose.",
        by=stated_fraction,
        takes={"xray_fraction_percent": "beam.xray_fraction_percent"},
        measured=Measured(XRAYS, takes={"xrays": "measurement.xray_readings"}, part="pair_xray_percent"),
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.pair_xray_depth_cm",
        "Depth for which f1 holds.",
        by=stated_depth,
        takes={"xray_fraction_depth_cm": "beam.xray_fraction_depth_cm"},
        measured=Measured(XRAYS, by=depth_of_readings, takes={"xrays": "measurement.xray_readings"}),
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.composite_xray_percent",
        "X-ray dose F of all six dual fields to the body as a part of the skin dose.",
        by=composite_of_pair,
        takes={
            "technique": "arrangement.technique",
            **_F_PLACES,
            "definition_confirmed": "plan.b_definition_confirmed?",
        },
        measured=Measured(XRAYS, by=composite_of_readings, takes={"xrays": "measurement.xray_readings"}),
        source="definition",
        known="derived",
        formula="F = (6/B) f1",
    ),
    _xrays(
        "xray_mid_height_cgy_per_mu",
        "X-ray dose of one dual field at mid-height per MU of both beams together.",
        "mid_height_cgy_per_mu",
    ),
    _xrays(
        "xray_axis_cgy_per_mu",
        "X-ray dose of one dual field on the tilted axis per MU of both beams together.",
        "tilted_axis_cgy_per_mu",
    ),
    Definition(
        "arrangement.xray_axis_depth_cm",
        "Depth at which the x-ray dose on the tilted axis was measured.",
        measured=Measured(XRAYS, by=depth_on_axis, takes={"xrays": "measurement.xray_readings"}),
        source="aapm-23",
        known="memory",
    ),
    Definition(
        "arrangement.xray_mid_height_depth_cm",
        "Depth at which the x-ray dose at mid-height was measured.",
        measured=Measured(XRAYS, by=depth_at_mid_height, takes={"xrays": "measurement.xray_readings"}),
        source="aapm-23",
        known="memory",
    ),
    _xrays(
        "xray_axis_ratio",
        "X-ray dose on the tilted axis over that at mid-height.",
        "axis_over_mid_height",
    ),
    _xrays("xray_remarks", "What must be said about the x-ray readings.", "remarks"),
)
