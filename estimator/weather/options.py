"""What a reader of a weather file may choose."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

from estimator.errors import WeatherError

__all__ = ["DEFAULTS", "HumiditySource", "WeatherOptions"]

HumiditySource = Literal["dew_point", "relative_humidity"]

#: The widest time zones in use, h east of Greenwich (common knowledge).
UTC_OFFSETS = (-12.0, 14.0)

_LONGEST_GAP = 48


@dataclass(frozen=True, kw_only=True)
class WeatherOptions:
    """Choices for reading a weather file.

    Parameters
    ----------
    humidity
        Which of the file's two humidity columns governs; the other one is only compared with it, and
        used where the governing one is missing.
    max_gap_hours
        Longest run of missing hours that is interpolated, 0..48; a longer one is refused.
    utc_offset
        Time zone of the rows, h east of Greenwich, in place of the one the file's header states. Only the
        zone is restated: every row keeps its label, and nothing is moved to another hour.
    first_weekday
        Day of the week of 1 January, 0 being Monday. ``None``: Monday for a typical year, the real one for
        an observed year.
    cache
        Whether the parsed year may be kept in, and taken from, the user's cache folder.

    Raises
    ------
    WeatherError
        A choice outside what is allowed.
    """

    humidity: HumiditySource = "dew_point"
    max_gap_hours: int = 6
    utc_offset: float | None = None
    first_weekday: int | None = None
    cache: bool = True

    def __post_init__(self) -> None:
        _require(
            self.humidity in ("dew_point", "relative_humidity"),
            "humidity",
            self.humidity,
            "dew_point or relative_humidity",
        )
        _require(
            _whole(self.max_gap_hours, 0, _LONGEST_GAP),
            "max_gap_hours",
            self.max_gap_hours,
            f"a whole number, 0..{_LONGEST_GAP}",
        )
        low, high = UTC_OFFSETS
        offset = self.utc_offset
        _require(
            offset is None or (math.isfinite(offset) and low <= offset <= high),
            "utc_offset",
            offset,
            f"{low:g}..{high:g} h east of Greenwich",
        )
        _require(
            self.first_weekday is None or _whole(self.first_weekday, 0, 6),
            "first_weekday",
            self.first_weekday,
            "0 (Monday) .. 6 (Sunday)",
        )


def _whole(value: object, least: int, most: int) -> bool:
    return isinstance(value, int) and not isinstance(value, bool) and least <= value <= most


def _require(good: bool, name: str, value: object, allowed: str) -> None:
    if not good:
        raise WeatherError(f"{value!r} cannot be used", where=f"weather option {name}", allowed=allowed)


DEFAULTS = WeatherOptions()
