"""A phantom cycle read with two types of detector: what each site received, and whether the two agree."""

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from statistics import fmean

from readiness.calculations.in_vivo_sites import PRESCRIPTION_SITE
from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.units import printed

COLUMNS = ("site", "detector", "readings", "mean_cgy", "prescription_percent")
PAIR_COLUMNS = ("site", "one", "other", "difference_percent")


@dataclass(frozen=True)
class EndToEnd:
    """
    Doses per site and detector, and the sites read with two types.

    ``prescription_percent`` is the mean of all detectors at the prescription level;
    ``largest_difference_percent`` the largest between two types at one site; None where nothing shows it.
    """

    doses: Table
    pairs: Table
    prescription_percent: float | None
    largest_difference_percent: float | None
    detector_types: int
    remarks: tuple[str, ...]


def analyse_end_to_end(
    *, sites: Sequence[str], detectors: Sequence[str], doses_cgy: Sequence[float], dose_per_cycle_gy: float
) -> EndToEnd:
    """
    Return the doses of a phantom cycle per site and detector, and how far two types of detector agree.

    difference = 200 |a - b| / (a + b)

    Args:
        sites: Site of each reading, by its word.
        detectors: Type of detector of each reading.
        doses_cgy: Dose of the whole cycle. [cGy]
        dose_per_cycle_gy: Dose that the cycle was meant to give. [Gy]

    Returns:
        A row per site and detector, a row per pair of types at one site, the dose at the prescription level.

    Raises:
        ValueError: If lengths differ or the dose is not more than 0.
        OutsideValidity: If there is no reading or one is negative.

    Valid for: one cycle on one phantom.
    Assumes: readings of one type at one site are repeats.
    Source: definition (derived); aapm-23 (memory) for measuring on a phantom.
    """
    if not dose_per_cycle_gy > 0:
        raise ValueError("a cycle has a dose above 0")
    rows = list(zip(sites, detectors, doses_cgy, strict=True))
    if not rows or any(dose < 0 for _, _, dose in rows):
        raise OutsideValidity("a phantom cycle needs readings, none of them negative")
    grouped: dict[tuple[str, str], list[float]] = defaultdict(list)
    for site, detector, dose in rows:
        grouped[site, detector].append(dose)
    means = {key: fmean(doses) for key, doses in grouped.items()}
    at_level = [mean for (site, _), mean in means.items() if site == PRESCRIPTION_SITE]
    pairs = _pairs(means)
    differences = [pair[3] for pair in pairs]
    types = len({detector for _, detector in means})
    said = []
    if types < 2:
        said.append("One type of detector only: nothing independent confirms it.")
    elif not pairs:
        said.append("No site was read with two types of detector.")
    if not at_level:
        said.append(f"No reading at the prescription level ({PRESCRIPTION_SITE}).")
    table = [
        (site, detector, len(grouped[site, detector]), mean, mean / dose_per_cycle_gy)  # cGy over Gy is %
        for (site, detector), mean in means.items()
    ]
    level = fmean(at_level) / dose_per_cycle_gy if at_level else None
    if level is not None and not 10 < level < 1000:
        said.append(f"The prescription level has {printed(level, 2)} % of the dose: another unit than cGy?")
    return EndToEnd(
        doses=Table.of(COLUMNS, table),
        pairs=Table.of(PAIR_COLUMNS, pairs),
        prescription_percent=level,
        largest_difference_percent=max(differences, default=None),
        detector_types=types,
        remarks=tuple(said),
    )


def _pairs(means: dict[tuple[str, str], float]) -> list[tuple[str, str, str, float]]:
    """Return the difference of each two types of detector at one site."""
    found = []
    keys = list(means)
    for at, (site, one) in enumerate(keys):
        for other_site, other in keys[at + 1 :]:
            if other_site == site:
                a, b = means[site, one], means[site, other]
                found.append((site, one, other, 200 * abs(a - b) / (a + b) if a + b > 0 else 0.0))
    return found
