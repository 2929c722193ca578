"""Sites of in-vivo readings with the dose that publications lead us to expect there."""

from dataclasses import dataclass

from readiness.calculations.published_tables import published_table

PRESCRIPTION_SITE = "umbilicus"


@dataclass(frozen=True)
class Site:
    """
    One site on the body.

    The expected range is in per cent of the prescription, None where no figure for the mean is published.
    """

    site: str
    title: str
    group: str
    expected_low_percent: float | None
    expected_high_percent: float | None
    source: str
    from_figure: str
    known: str


def in_vivo_sites() -> dict[str, Site]:
    """Return all sites by their word, in the order of the table."""
    found = {}
    for row in published_table("in_vivo_sites").records():
        low, high = row["expected_low_percent"], row["expected_high_percent"]
        found[str(row["site"])] = Site(
            site=str(row["site"]),
            title=str(row["title"]),
            group=str(row["group"]),
            expected_low_percent=None if low is None else float(low),
            expected_high_percent=None if high is None else float(high),
            source=str(row["source"]),
            from_figure=str(row["from_figure"]),
            known=str(row["known"]),
        )
    return found
