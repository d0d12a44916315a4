"""The clock that the radiation of a file keeps, against the one its header states."""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from estimator.moist_air import Array

__all__ = ["equation_of_time", "hours_ahead"]

_BRIGHTEST: Final = 5  # days whose mean, hour by hour, stands for a clear day of the month
_LEAST_PEAK: Final = 100.0  # W/m2; a month whose brightest hours stay below tells no time
_LEAST_MONTHS: Final = 3
_MOST_MISSING: Final = 0.2


def equation_of_time(day_of_year: Array) -> Array:
    """Solar time less mean time, h. Spencer 1971 (Search 2, p. 172), from memory; within 0.01 h."""
    b = 2.0 * np.pi * (day_of_year - 1.0) / 365.0
    minutes = 229.18 * (
        0.000075
        + 0.001868 * np.cos(b)
        - 0.032077 * np.sin(b)
        - 0.014615 * np.cos(2 * b)
        - 0.040849 * np.sin(2 * b)
    )
    return np.asarray(minutes / 60.0)


def hours_ahead(
    radiation: Array, month: NDArray[np.int64], longitude: float, utc_offset: float
) -> float | None:
    """How much later the sun culminates by the file's rows than the stated time zone has it, h, -12..12.

    Parameters
    ----------
    radiation
        Global horizontal radiation, W/m2, mean over the hour, shape (hours,), whole days, NaN for missing.
    month
        1..12, shape (hours,).
    longitude
        Degrees, east positive.
    utc_offset
        Stated time zone, h.

    Returns
    -------
    The median over the months, or ``None`` when fewer than three months have enough radiation. Positive: the
    rows belong to a zone that much farther east than stated.

    Method (this program's own): for every month and hour of the day the mean of the five brightest days,
    which sheds clouds that prefer a time of day; its centre is the phase of the first daily harmonic, which
    does not depend on where the day is cut; against it the mean solar noon of the month.
    """
    by_day = radiation.reshape(-1, 24)
    months = month.reshape(-1, 24)[:, 0]
    angle = np.exp(2j * np.pi * (np.arange(24) + 0.5) / 24.0)
    off = []
    for m in range(1, 13):
        days = np.flatnonzero(months == m)
        values = by_day[days]
        if np.isnan(values).mean() > _MOST_MISSING:
            continue
        profile = np.sort(np.nan_to_num(values), axis=0)[-_BRIGHTEST:].mean(axis=0)
        if profile.max() < _LEAST_PEAK:
            continue
        culmination = np.angle((profile * angle).sum()) * 12.0 / np.pi
        noon = 12.0 - longitude / 15.0 + utc_offset - equation_of_time(np.asarray(days.mean() + 1.0))
        off.append((culmination - noon + 12.0) % 24.0 - 12.0)
    if len(off) < _LEAST_MONTHS:
        return None
    # differences around the first month's, so that a zone twelve hours off is not averaged to none
    spread = (np.array(off) - off[0] + 12.0) % 24.0 - 12.0
    return float((off[0] + np.median(spread) + 12.0) % 24.0 - 12.0)
