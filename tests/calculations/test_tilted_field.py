"""Single and dual fields against straightforward integration, and in their directions."""

from typing import Any

import numpy as np
import pytest
from beam_setups import common_setup
from scipy.integrate import dblquad

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.ray_slices import open_slices
from readiness.calculations.scatter_at_plane import KERNEL, scatter_at_plane
from readiness.calculations.tilted_field import MARGIN_CM, dual_field, tilted_fields
from readiness.calculations.truncated_gaussian import blurred_gaussian
from readiness.errors import OutsideValidity

ZERO = np.array([0.0])
HEIGHTS = np.linspace(-120, 120, 49)


def by_integration(setup: FieldSetup, tilt_deg: float, distance: float, height: float, across: float) -> float:
    """Return the dose at one point by integrating over the rays of a square opening, turned or not."""
    tilt, axis = np.radians(tilt_deg), setup.source_axis_distance_cm
    ahead = distance - axis + axis * np.cos(tilt)
    scatter = scatter_at_plane(setup, distance - MARGIN_CM, distance)
    turn, half = np.radians(setup.collimator_deg), setup.opening_cm / 200

    def ray(p: float, q: float) -> float:
        """Return what a ray with tangents p, q in the collimator's frame adds."""
        a, b = p * np.cos(turn) - q * np.sin(turn), p * np.sin(turn) + q * np.cos(turn)
        forward = np.cos(tilt) - b * np.sin(tilt)
        rise = (np.sin(tilt) + b * np.cos(tilt)) / forward
        secant = np.hypot(1, rise)
        found = scatter.rays(np.array(ahead), np.array(secant))
        weight = np.exp(-(a**2 + b**2) / (2 * setup.foil_spread**2)) * found.transmission * secant**2
        up, aside = height - (ahead * rise - axis * np.sin(tilt)), across - ahead * a / forward
        dose = 0.0
        for part, width in KERNEL:
            aside2 = width**2 * found.air_variance_cm2 + found.degrader_variance_cm2
            up2 = aside2 * secant**2
            dose += part * np.exp(-(up**2) / (2 * up2) - aside**2 / (2 * aside2)) / (2 * np.pi * np.sqrt(up2 * aside2))
        return float(weight * dose)

    return float(dblquad(ray, -half, half, -half, half, epsrel=1e-4)[0])


@pytest.mark.parametrize(
    ("changes", "tilt", "distance"),
    [({}, 16.0, 400.0), ({"collimator_deg": 30.0}, 14.0, 340.0), ({"energy_at_source_mev": 9.0, "degrader_gap_cm": 45.0}, 20.0, 300.0)],
)
def test_slices_give_what_double_integration_gives(changes: dict[str, Any], tilt: float, distance: float) -> None:
    """At points on and off the axis the field is the double integral to 0.1 % of the centre."""
    setup = common_setup(**changes)
    centre = tilted_fields(setup, np.array([tilt]), distance, ZERO, ZERO)[0, 0, 0]
    for height, across in ((0.0, 0.0), (90.0, 0.0), (-60.0, 40.0)):
        found = tilted_fields(setup, np.array([tilt]), distance, np.array([height]), np.array([across]))[0, 0, 0]
        assert found == pytest.approx(by_integration(setup, tilt, distance, height, across), abs=1e-3 * centre)


@pytest.mark.parametrize(("energy", "distance"), [(6.0, 300.0), (12.0, 250.0), (12.0, 300.0), (9.0, 200.0), (4.0, 500.0)])
def test_few_slices_are_enough(energy: float, distance: float) -> None:
    """The slices taken reach 0.1 % of the centre at every energy and distance, also with a turned collimator."""
    for turned in (0.0, 20.0):
        setup = common_setup(energy_at_source_mev=energy, degrader_thickness_cm=0.3, collimator_deg=turned)
        tilts, across = np.array([0.0, 16.0, 25.0]), np.linspace(-40, 40, 9)
        few = tilted_fields(setup, tilts, distance, HEIGHTS, across)
        many = tilted_fields(setup, tilts, distance, HEIGHTS, across, slices=80)
        assert np.max(np.abs(few - many)) < 1e-3 * many.max()


def test_normal_incidence_in_a_narrow_field_is_the_product_of_two_closed_forms() -> None:
    """Where obliquity plays no part the field is height part times width part, kernel by kernel."""
    setup = common_setup(opening_cm=2.0).without_degrader()
    variance = float(scatter_at_plane(setup, 400 - MARGIN_CM, 400).rays(np.array(400.0), np.array(1.0)).air_variance_cm2)

    def closed(at: float, blur: float) -> float:
        """Return one axis."""
        return float(blurred_gaussian(position_cm=at, spread_cm=80.0, lower_cm=-4.0, upper_cm=4.0, blur_cm=blur)) / 400

    expected = sum(part * closed(30, width * variance**0.5) * closed(20, width * variance**0.5) for part, width in KERNEL)
    found = tilted_fields(setup, ZERO, 400.0, np.array([30.0]), np.array([20.0]))[0, 0, 0]
    assert found == pytest.approx(expected, rel=5e-4)


def test_zero_tilt_is_symmetric_both_ways() -> None:
    """A horizontal field is the same above and below, left and right."""
    doses = tilted_fields(common_setup(), ZERO, 400.0, HEIGHTS, np.array([-30.0, 0, 30]))[0]
    assert doses == pytest.approx(doses[::-1])
    assert doses[:, 0] == pytest.approx(doses[:, 2])


def test_axis_meets_the_plane_where_isocentric_geometry_says() -> None:
    """A narrow field without scatter is brightest at (D - SAD) tan t: 86.0 cm at 400 cm and 16 degrees."""
    setup = common_setup(opening_cm=1.0, pressure_kpa=0.0).without_degrader()
    heights = np.arange(75, 97, 0.25)
    doses = tilted_fields(setup, np.array([16.0]), 400.0, heights, ZERO)[0, :, 0]
    assert heights[np.argmax(doses)] == pytest.approx(300 * np.tan(np.radians(16)), abs=0.3)


def test_without_air_the_field_ends_where_the_collimator_ends() -> None:
    """In a vacuum a flat field is even inside its edges at opening x distance/100 and dark outside."""
    setup = common_setup(pressure_kpa=0.0, foil_spread=20.0).without_degrader()
    doses = tilted_fields(setup, ZERO, 400.0, np.array([0.0, 76, 80, 84]), ZERO)[0, :, 0]
    assert doses[1] / doses[0] == pytest.approx(1 + 0.19**2, rel=2e-3)
    assert doses[2] / doses[0] == pytest.approx(0.5, abs=0.05)
    assert doses[3] < 1e-3 * doses[0]


def test_larger_tilt_moves_dose_outward() -> None:
    """The centre of gravity of an upward field rises with its tilt."""
    doses = tilted_fields(common_setup(), np.array([0.0, 8, 12, 16, 20]), 400.0, np.linspace(-300, 400, 141), ZERO)[:, :, 0]
    middles = (doses * np.linspace(-300, 400, 141)).sum(axis=1) / doses.sum(axis=1)
    assert (np.diff(middles) > 5).all()
    assert middles[0] == pytest.approx(0, abs=1)


def _width(setup: FieldSetup, distance: float = 400.0) -> float:
    """Return the height at which a horizontal field has half its dose."""
    heights = np.linspace(0, 250, 251)
    doses = tilted_fields(setup, ZERO, distance, heights, ZERO)[0, :, 0]
    return float(np.interp(-0.5 * doses[0], -doses, heights))


def test_thinner_air_narrows_farther_widens_wider_foils_widen() -> None:
    """Half width follows air, distance, foils, opening, energy and gap in the directions of physics."""
    usual = _width(common_setup())
    assert _width(common_setup(pressure_kpa=85.0)) < usual
    assert _width(common_setup(), 450.0) > usual
    assert _width(common_setup(foil_spread=0.25)) > usual
    assert _width(common_setup(opening_cm=36.0)) < usual
    assert _width(common_setup(energy_at_source_mev=9.0)) < usual
    assert _width(common_setup(degrader_gap_cm=50.0)) > usual
    assert _width(common_setup().without_degrader()) < usual


def test_collimator_turned_by_a_right_angle_changes_nothing() -> None:
    """A square field turned by 90 degrees is the same field; by 45 degrees its corners stand up and down."""
    setup = common_setup()
    straight, right, diagonal = (
        tilted_fields(setup.but(collimator_deg=angle), ZERO, 400.0, HEIGHTS, ZERO)[0, :, 0] for angle in (0.0, 90.0, 45.0)
    )
    assert right == pytest.approx(straight)
    assert diagonal[0] > 1.02 * straight[0] * diagonal[24] / straight[24]


def test_turned_field_is_the_same_after_half_a_turn() -> None:
    """A square turned by 30 degrees has no mirror symmetry, but half a turn about the axis leaves it."""
    setup, across = common_setup(collimator_deg=30.0), np.array([-40.0, 0, 40])
    doses = tilted_fields(setup, ZERO, 400.0, HEIGHTS, across)[0]
    assert doses == pytest.approx(doses[::-1, ::-1])
    assert doses[0, 0] != pytest.approx(doses[0, 2], rel=1e-3)


def test_slices_of_a_turned_square_have_its_area() -> None:
    """However the collimator is turned, the opening keeps its area."""
    for angle in (0.0, 10.0, 30.0, 45.0, 80.0):
        opening = open_slices(40.0, angle, 12)
        assert np.sum(opening.weight * (opening.upper - opening.lower)) == pytest.approx(0.16)


def test_downward_field_mirrors_the_upward_one() -> None:
    """With equal tilts and MU a dual field is symmetric about the isocentre."""
    doses = dual_field(common_setup(), 16.0, 16.0, 400.0, HEIGHTS, np.array([-20.0, 0, 20]))
    assert doses == pytest.approx(doses[::-1])


def test_more_mu_above_raise_the_upper_part() -> None:
    """Giving the field aimed at the head more MU moves dose upward, and the fields exchange when tilts do."""
    doses = dual_field(common_setup(), 16.0, 16.0, 400.0, HEIGHTS, ZERO, mu_share_upper=0.6)[:, 0]
    assert doses[-1] > doses[0]
    other = dual_field(common_setup(), 14.0, 17.0, 400.0, HEIGHTS, ZERO)[:, 0]
    assert other == pytest.approx(dual_field(common_setup(), 17.0, 14.0, 400.0, HEIGHTS, ZERO)[::-1, 0])


def test_tilts_and_distances_outside_the_model_are_refused() -> None:
    """Tilts above 25 degrees and planes before the isocentre are refused."""
    with pytest.raises(OutsideValidity, match="tilts up to 25 degrees"):
        tilted_fields(common_setup(), np.array([26.0]), 400.0, ZERO, ZERO)
    with pytest.raises(OutsideValidity, match="beyond the isocentre"):
        tilted_fields(common_setup(), ZERO, 95.0, ZERO, ZERO)


def test_degrader_behind_the_source_is_impossible() -> None:
    """A gap larger than the distance puts the degrader behind the source."""
    with pytest.raises(ValueError, match="behind the source"):
        tilted_fields(common_setup(degrader_gap_cm=395.0), ZERO, 400.0, ZERO, ZERO)


def test_degrader_that_stops_the_beam_is_refused() -> None:
    """Four centimetres of plastic leave nothing to treat with."""
    with pytest.raises(OutsideValidity, match="stops the beam"):
        tilted_fields(common_setup(degrader_thickness_cm=4.0), ZERO, 400.0, ZERO, ZERO)
