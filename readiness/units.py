"""
Units stand at the end of a name: ``plane_distance_cm`` is in centimetres.

This module knows every unit that a field, value or table column may end with, how it is printed,
and nothing else: numbers are kept in the unit of their name and never converted silently.
"""

from functools import cache

# ending of the name -> printed unit; the longest ending that fits counts
UNITS: dict[str, str] = {
    "cgy_per_mu": "cGy/MU",
    "gy_per_mu": "Gy/MU",
    "cgy_per_min": "cGy/min",
    "usv_per_mu": "µSv/MU",
    "mu_per_min": "MU/min",
    "mu_per_week": "MU/week",
    "gy_per_week": "Gy/week",
    "gy_m2_per_week": "Gy m²/week",
    "gy_m2_per_h": "Gy m²/h",
    "gy_m2": "Gy m²",
    "gy_per_h": "Gy/h",
    "msv_per_week": "mSv/week",
    "usv_per_week": "µSv/week",
    "usv_per_h": "µSv/h",
    "usv_in_any_hour": "µSv in any one hour",
    "msv_per_year": "mSv/year",
    "cm_per_s": "cm/s",
    "mev_per_cm": "MeV/cm",
    "mev_cm2_per_g": "MeV cm²/g",
    "g_per_cm3": "g/cm³",
    "g_per_cm2": "g/cm²",
    "h_per_day": "h/day",
    "per_week": "per week",
    "per_month": "per month",
    "per_year": "per year",
    "per_day": "per day",
    "per_h": "per hour",
    "percent_per_cm": "%/cm",
    "percent_per_deg": "%/°",
    "per_cm": "1/cm",
    "per_cm2_per_gy": "1/(cm² Gy)",
    "per_100ev": "per 100 eV",
    "per_s": "per second",
    "working_days": "working days",
    "cm2": "cm²",
    "m2": "m²",
    "m3": "m³",
    "cm": "cm",
    "mm": "mm",
    "m": "m",
    "deg": "°",
    "rad": "rad",
    "mev": "MeV",
    "mv": "MV",
    "gy": "Gy",
    "cgy": "cGy",
    "msv": "mSv",
    "usv": "µSv",
    "mu": "MU",
    "percent": "%",
    "kpa": "kPa",
    "celsius": "°C",
    "kg": "kg",
    "ppm": "ppm",
    "ua": "µA",
    "s": "s",
    "min": "min",
    "h": "h",
    "days": "days",
    "weeks": "weeks",
    "months": "months",
    "years": "years",
    "fte": "FTE",
    "patients": "patients",
    "persons": "persons",
    "tvl": "TVL",
}


@cache
def unit_ending(name: str) -> str:
    """Return the unit ending of a name ("cm" for "plane_distance_cm"), or "" if it has none."""
    last = name.rsplit(".", 1)[-1].split("_")
    for start in range(len(last)):
        ending = "_".join(last[start:])
        if ending in UNITS:
            return ending
    return ""


def unit_of(name: str) -> str:
    """Return the printed unit of a name, or "" for words, yes/no, dates, counts and ratios."""
    ending = unit_ending(name)
    return UNITS[ending] if ending else ""


def words_of(name: str) -> str:
    """Return a name in the user's words: without kind and unit, underscores as spaces."""
    last = name.rsplit(".", 1)[-1]
    ending = unit_ending(last)
    if ending and last != ending:
        last = last[: -len(ending) - 1]
    return last.replace("_", " ")


def rounded(number: float, digits: int = 6) -> float:
    """Return a number rounded to significant digits, so that printed inputs reproduce printed results."""
    if number == 0 or number != number or number in (float("inf"), float("-inf")):
        return number
    return float(f"{number:.{digits - 1}e}")


def printed(number: float | int, digits: int = 4) -> str:
    """Return a number as people write it: up to the given significant digits, no exponent where avoidable."""
    if isinstance(number, int):
        return str(number)
    if number != number or number in (float("inf"), float("-inf")):
        raise ValueError("a number that is not finite is never printed")
    text = f"{number:.{digits}g}"
    if "e" in text:
        mantissa, exponent = text.split("e")
        power = int(exponent)
        if -5 <= power < 9:
            decimals = max(0, digits - 1 - power)
            text = f"{number:.{decimals}f}"
        else:
            text = f"{mantissa}e{power}"
    return text if text not in ("-0", "-0.0") else "0"
