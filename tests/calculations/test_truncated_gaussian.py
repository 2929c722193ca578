"""One axis of a field in closed form."""

import numpy as np
import pytest
from scipy.integrate import quad

from readiness.calculations.truncated_gaussian import blurred_gaussian

SIGMA = 12.0


def field(position: float, spread: float, lower: float, upper: float, blur: float) -> float:
    """Return the closed form as a number."""
    return float(
        blurred_gaussian(position_cm=position, spread_cm=spread, lower_cm=lower, upper_cm=upper, blur_cm=blur)
    )


@pytest.mark.parametrize("position", [0.0, 25.0, -60.0, 110.0])
@pytest.mark.parametrize(("spread", "lower", "upper", "blur"), [(80, -80, 80, 47), (60, -80, 80, 30), (2000, -72, 72, 40), (70, -20, 90, 25)])
def test_closed_form_is_the_integral(position: float, spread: float, lower: float, upper: float, blur: float) -> None:
    """Numerical integration over the rays gives the same."""
    def ray(at: float) -> float:
        """Return what a ray adds."""
        away = (position - at) / blur
        return float(np.exp(-0.5 * (at / spread) ** 2 - 0.5 * away**2) / (blur * np.sqrt(2 * np.pi)))

    expected, _ = quad(ray, lower, upper, points=[min(max(position, lower), upper)], epsabs=1e-12)
    assert field(position, spread, lower, upper, blur) == pytest.approx(expected, abs=1e-10)


def test_hardly_blurred_is_the_cut_gaussian_itself() -> None:
    """Without blur the Gaussian shows inside the edges and nothing outside."""
    assert field(30, 60, -80, 80, 1e-3) == pytest.approx(np.exp(-0.125), rel=1e-6)
    assert field(90, 60, -80, 80, 1e-3) == pytest.approx(0, abs=1e-12)


def test_flat_field_is_half_at_its_edge() -> None:
    """A flat field has half its dose at a straight edge."""
    assert field(80, 1e6, -1e4, 80, 10) == pytest.approx(0.5, rel=1e-3)


def two_gaussians(at: float, apart: float) -> float:
    """Return two equal Gaussians of standard deviation SIGMA, one on either side of 0."""
    # cut far outside: spread and blur add in quadrature
    spread = blur = SIGMA / np.sqrt(2)
    return field(at - apart, spread, -1e3, 1e3, blur) + field(at + apart, spread, -1e3, 1e3, blur)


def test_two_gaussians_a_sigma_from_the_middle_are_flattest() -> None:
    """The middle of two Gaussians is flat to second order when they stand at plus and minus sigma."""
    def curvature(apart: float) -> float:
        """Return the second difference at the middle."""
        return two_gaussians(0.5, apart) + two_gaussians(-0.5, apart) - 2 * two_gaussians(0, apart)

    assert abs(curvature(SIGMA)) < 1e-5
    assert curvature(0.9 * SIGMA) < -1e-4
    assert curvature(1.1 * SIGMA) > 1e-4


@pytest.mark.parametrize(("at", "expected"), [(1.0, 0.936), (1.5, 0.764)])
def test_two_gaussians_fall_as_their_identity_says(at: float, expected: float) -> None:
    """At one sigma 0.936 of the middle is left, at one and a half 0.764."""
    assert two_gaussians(at * SIGMA, SIGMA) / two_gaussians(0, SIGMA) == pytest.approx(expected, abs=5e-4)


@pytest.mark.parametrize(
    ("spread", "lower", "upper", "blur", "words"),
    [(0, -1, 1, 1, "must be positive"), (1, -1, 1, 0, "must be positive"), (1, 1, -1, 1, "lies above")],
)
def test_impossible_shapes_are_refused(spread: float, lower: float, upper: float, blur: float, words: str) -> None:
    """Widths must be positive and edges in order."""
    with pytest.raises(ValueError, match=words):
        field(0, spread, lower, upper, blur)
