"""How much of the radiation comes through a barrier of one or more layers."""

from math import cos, isfinite, log10, radians
from typing import NamedTuple

from readiness.calculations.tenth_value_layers import TenthValueLayers, tenth_value_layers
from readiness.errors import OutsideValidity
from readiness.quantities import Table

MOST_OBLIQUE_DEG = 45.0  # beyond it scatter inside the wall takes shorter ways out (practice)


class Layer(NamedTuple):
    """One layer of a barrier; no density means the reference density of its material."""

    material: str
    thickness_cm: float
    density_g_per_cm3: float | None


class LayerStep(NamedTuple):
    """What one layer takes: its tenth-value layers for its density, and how many of them it is worth."""

    layer: Layer
    tvl1_cm: float
    tvle_cm: float
    in_first_cm: float
    tenths: float


def barrier_layers(*, layers: Table, recess_depth_cm: float) -> tuple[Layer, ...]:
    """
    Return the layers that the radiation meets, thinned by a recess or conduit.

    A recess takes material away from the inside, through as many layers as it is deep; a conduit inside the
    wall counts as a recess of its diameter.

    Args:
        layers: From inside outwards: material, thickness_cm, density_g_per_cm3 (blank for steel or lead).
        recess_depth_cm: Material missing along the beam: laser recess, niche, conduits. [cm]

    Returns:
        What is left, from inside outwards.

    Raises:
        ValueError: If a thickness is not above zero, or the recess is deeper than the barrier.
        OutsideValidity: If the barrier has no layers.

    Source: derived.
    """
    if not layers.rows:
        raise OutsideValidity("the barrier has no layers: state material, thickness and density of each")
    missing = recess_depth_cm
    if not (isfinite(missing) and missing >= 0.0):
        raise ValueError(f"the depth of a recess must not be below zero, not {missing:g}")
    left: list[Layer] = []
    columns = ("material", "thickness_cm", "density_g_per_cm3")
    for material, thickness, density in zip(*(layers.column(name) for name in columns), strict=True):
        if isinstance(thickness, str) or thickness is None or not (isfinite(thickness) and thickness > 0.0):
            raise ValueError(f"the thickness of a layer must be above zero, not {thickness}")
        taken = min(missing, thickness)
        missing -= taken
        if thickness > taken:
            given = None if density is None else float(density)
            left.append(Layer(str(material), thickness - taken, given))
    if missing > 0.0:
        raise ValueError("the recess is deeper than the barrier")
    return tuple(left)


def layers_transmission(
    *, layers: tuple[Layer, ...], radiation: str, energy_mv: float, angle_deg: float | None
) -> float:
    """
    Return the transmission of layers that have been read already.

    B = 10^-(1 + (t - TVL1)/TVLe) for t >= TVL1, else 10^-(t/TVL1)

    The first tenth-value layer is spent once, from inside outwards: a first layer thinner than that leaves
    the rest of it to the next one, so that a wall cut into slices transmits as much as the whole wall.

    Args:
        layers: From inside outwards.
        radiation: ``primary``, ``leakage`` or ``scatter``.
        energy_mv: End point of the x rays. [MV]
        angle_deg: Scattering angle, for ``scatter`` only. [deg]

    Returns:
        Transmission B; 1 without any layer. [1]

    Raises:
        ValueError: If a density is not above zero or the radiation is unknown.
        OutsideValidity: If a material, its density or the energy has no tenth-value layer.

    Valid for: broad beams of 4 to 18 MV at normal incidence; not for neutrons.
    Assumes: layers in touch; no shielding by patient or equipment.
    Source: ncrp-151, Eq. 2.2-2.3 (memory), inverted; thin first layers derived.
    """
    steps = transmission_steps(
        layers=layers, radiation=radiation, energy_mv=energy_mv, angle_deg=angle_deg
    )
    return float(10.0 ** -sum(step.tenths for step in steps))


def transmission_steps(
    *, layers: tuple[Layer, ...], radiation: str, energy_mv: float, angle_deg: float | None
) -> list[LayerStep]:
    """
    Return what each layer takes, with the tenth-value layers that it is taken with.

    Args:
        layers: From inside outwards.
        radiation: ``primary``, ``leakage`` or ``scatter``.
        energy_mv: End point of the x rays. [MV]
        angle_deg: Scattering angle, for ``scatter`` only. [deg]

    Returns:
        One step for each layer; the transmission is ten to the minus sum of their tenths.

    Raises:
        ValueError: As ``layers_transmission``.
        OutsideValidity: As ``layers_transmission``.

    Source: ncrp-151, Eq. 2.2-2.3 (memory), inverted; thin first layers derived.
    """
    steps: list[LayerStep] = []
    first_left = 1.0
    for layer in layers:
        taken = tenth_value_layers(
            material=layer.material,
            density_g_per_cm3=layer.density_g_per_cm3,
            radiation=radiation,
            energy_mv=energy_mv,
            angle_deg=angle_deg,
        )
        in_first = min(layer.thickness_cm, first_left * taken.tvl1_cm)
        spent = in_first / taken.tvl1_cm
        first_left = max(0.0, first_left - spent)
        tenths = spent + (layer.thickness_cm - in_first) / taken.tvle_cm
        steps.append(LayerStep(layer, taken.tvl1_cm, taken.tvle_cm, in_first, tenths))
    return steps


def barrier_transmission(
    *,
    layers: Table,
    recess_depth_cm: float,
    incidence_deg: float,
    radiation: str,
    energy_mv: float,
    angle_deg: float | None,
) -> float:
    """
    Return the transmission of a barrier, along an oblique path if wanted.

    Args:
        layers: From inside outwards: material, thickness_cm, density_g_per_cm3 (blank for steel or lead).
        recess_depth_cm: Material missing along the beam: laser recess, niche, conduits. [cm]
        incidence_deg: Between the ray and the wall's normal; zero is the careful choice. [deg]
        radiation: ``primary``, ``leakage`` or ``scatter``.
        energy_mv: End point of the x rays. [MV]
        angle_deg: Scattering angle, for ``scatter`` only. [deg]

    Returns:
        Transmission B. [1]

    Raises:
        ValueError: If a thickness or density is not above zero, or the recess is deeper than the barrier.
        OutsideValidity: If there are no layers, the ray is more oblique than 45 degrees, or a material, its
            density or the energy has no tenth-value layer.

    Valid for: broad beams of 4 to 18 MV, incidence up to 45 degrees; not for neutrons.
    Assumes: layers in touch; no shielding by patient or equipment.
    Source: ncrp-151, Eq. 2.2-2.3 (memory), inverted.
    """
    if not 0.0 <= incidence_deg <= MOST_OBLIQUE_DEG:
        raise OutsideValidity(f"oblique paths are counted from 0 to 45 degrees, not {incidence_deg:g}")
    met = barrier_layers(layers=layers, recess_depth_cm=recess_depth_cm)
    longer = 1.0 / cos(radians(incidence_deg))
    slanted = tuple(layer._replace(thickness_cm=layer.thickness_cm * longer) for layer in met)
    return layers_transmission(layers=slanted, radiation=radiation, energy_mv=energy_mv, angle_deg=angle_deg)


def wall_transmission(*, thickness_cm: float, tvl1_cm: float, tvle_cm: float) -> float:
    """
    Return the transmission of a wall of one material whose tenth-value layers are given.

    B = 10^-(1 + (t - TVL1)/TVLe) for t >= TVL1, else 10^-(t/TVL1)

    Args:
        thickness_cm: Of the wall, t. [cm]
        tvl1_cm: First tenth-value layer. [cm]
        tvle_cm: Equilibrium tenth-value layer. [cm]

    Returns:
        Transmission B; 1 without a wall. [1]

    Raises:
        ValueError: If the thickness is below zero or a tenth-value layer not above zero.

    Source: ncrp-151, Eq. 2.2-2.3 (memory), inverted; second form derived.
    """
    _check_layers(TenthValueLayers(tvl1_cm, tvle_cm))
    if not thickness_cm >= 0.0:
        raise ValueError(f"a thickness must not be below zero, not {thickness_cm:g}")
    if thickness_cm >= tvl1_cm:
        return float(10.0 ** -(1.0 + (thickness_cm - tvl1_cm) / tvle_cm))
    return float(10.0 ** -(thickness_cm / tvl1_cm))


def wall_thickness_cm(*, transmission: float, tvl1_cm: float, tvle_cm: float) -> float:
    """
    Return how thick a wall of one material must be for a transmission.

    n = -log10 B; t = TVL1 + (n - 1) TVLe, or n TVL1 where less than one layer is needed

    Args:
        transmission: Highest transmission B. [1]
        tvl1_cm: First tenth-value layer. [cm]
        tvle_cm: Equilibrium tenth-value layer. [cm]

    Returns:
        Thickness t; 0 if the transmission may be 1 or more. [cm]

    Raises:
        ValueError: If the transmission or a tenth-value layer is not above zero.

    Source: ncrp-151, Eq. 2.2-2.3 (memory); below one layer derived.
    """
    _check_layers(TenthValueLayers(tvl1_cm, tvle_cm))
    if not transmission > 0.0:
        raise ValueError(f"a transmission must be above zero, not {transmission:g}")
    tenths = -log10(transmission)
    if tenths <= 0.0:
        return 0.0
    return tvl1_cm + (tenths - 1.0) * tvle_cm if tenths >= 1.0 else tenths * tvl1_cm


def _check_layers(layers: TenthValueLayers) -> None:
    """Refuse tenth-value layers that are not above zero."""
    if not (layers.tvl1_cm > 0.0 and layers.tvle_cm > 0.0):
        raise ValueError("a tenth-value layer must be above zero")
