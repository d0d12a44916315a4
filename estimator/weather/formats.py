"""The three formats as data: how each is recognised, and how each writes the columns this program keeps.

Sources: EPW, EnergyPlus Auxiliary Programs, "EnergyPlus Weather File (EPW) Data Dictionary"; TMY3,
NREL/TP-581-43156 (2008), tables 1-1 and 1-2; TMY2, "User's Manual for TMY2s", NREL 1995, tables 3-1 and
3-2. Names, units and codes from memory of these, names checked against the columns that pvlib returns.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final, Literal

import numpy as np
from numpy.typing import NDArray

from estimator.moist_air import Array
from estimator.quantities import QUANTITIES

__all__ = [
    "ESSENTIAL",
    "FORMATS_READ",
    "LIMITS",
    "SOURCES",
    "Format",
    "Limits",
    "Source",
    "decode",
    "recognise",
    "what_else",
]

Format = Literal["EPW", "TMY3", "TMY2"]
FORMATS_READ: Final = "EPW, TMY3, TMY2"

TMY2_HEADER: Final = re.compile(
    rb"\s*(\d{5})\s+(\S.*?)\s+([A-Z]{2})\s+([+-]?\d+)\s+([NS])\s*(\d+)\s+(\d+)\s+([EW])\s*(\d+)\s+(\d+)"
    rb"\s+(-?\d+)\s*"
)
TMY3_COLUMNS: Final = b"date (mm/dd/yyyy),time (hh:mm)"


@dataclass(frozen=True)
class Limits:
    """Plausible range of a column in the unit the program keeps."""

    least: float
    most: float
    unit: str

    def __str__(self) -> str:
        return f"{self.least:g}..{self.most:g} {self.unit}"


@dataclass(frozen=True)
class Source:
    """Where a format keeps a column: its name in pvlib's table, the factor to our unit, missing codes."""

    name: str
    factor: float = 1.0
    codes: tuple[float, ...] = ()


_T, _DP, _P = (QUANTITIES[name] for name in ("dry bulb", "dew point", "station pressure"))

#: Relative humidity is kept in percent while reading, and up to 110 % is taken, as the EPW dictionary
#: does. Radiation a little below zero is an instrument's night offset.
LIMITS: Final[dict[str, Limits]] = {
    "dry bulb": Limits(_T.least, _T.most, "degC"),
    "dew point": Limits(_DP.least, _DP.most, "degC"),
    "relative humidity": Limits(0.0, 110.0, "%"),
    "pressure": Limits(_P.least, _P.most, "Pa"),
    "global horizontal radiation": Limits(-20.0, 1500.0, "W/m2"),
    "direct normal radiation": Limits(-20.0, 1500.0, "W/m2"),
    "diffuse horizontal radiation": Limits(-20.0, 1500.0, "W/m2"),
    "wind speed": Limits(0.0, 90.0, "m/s"),
    "wind direction": Limits(0.0, 360.0, "degrees"),
}

#: Columns whose implausible values are refused. The others are set missing, or, pressure, replaced.
ESSENTIAL: Final = ("dry bulb", "dew point", "relative humidity")

#: Codes met in all three formats beside each format's own (common practice), heeded only where they lie
#: outside the plausible range, so that 999 W/m2 or 999 hPa stay what they are.
_COMMON_CODES: Final = (-99.0, -99.9, -999.0, -9900.0, -9999.0, 999.0, 9999.0, 99999.0, 999999.0)

SOURCES: Final[dict[Format, dict[str, Source]]] = {
    "EPW": {
        "dry bulb": Source("temp_air", 1.0, (99.9,)),
        "dew point": Source("temp_dew", 1.0, (99.9,)),
        "relative humidity": Source("relative_humidity", 1.0, (999.0,)),
        "pressure": Source("atmospheric_pressure", 1.0, (999999.0,)),
        "global horizontal radiation": Source("ghi", 1.0, (9999.0,)),
        "direct normal radiation": Source("dni", 1.0, (9999.0,)),
        "diffuse horizontal radiation": Source("dhi", 1.0, (9999.0,)),
        "wind speed": Source("wind_speed", 1.0, (999.0,)),
        "wind direction": Source("wind_direction", 1.0, (999.0,)),
    },
    "TMY3": {
        "dry bulb": Source("temp_air", 1.0, (-9900.0,)),
        "dew point": Source("temp_dew", 1.0, (-9900.0,)),
        "relative humidity": Source("relative_humidity", 1.0, (-9900.0,)),
        "pressure": Source("pressure", 100.0, (-9900.0,)),
        "global horizontal radiation": Source("ghi", 1.0, (-9900.0,)),
        "direct normal radiation": Source("dni", 1.0, (-9900.0,)),
        "diffuse horizontal radiation": Source("dhi", 1.0, (-9900.0,)),
        "wind speed": Source("wind_speed", 1.0, (-9900.0,)),
        "wind direction": Source("wind_direction", 1.0, (-9900.0,)),
    },
    "TMY2": {
        "dry bulb": Source("DryBulb", 0.1, (9999.0,)),
        "dew point": Source("DewPoint", 0.1, (9999.0,)),
        "relative humidity": Source("RHum", 1.0, (999.0,)),
        "pressure": Source("Pressure", 100.0, (9999.0,)),
        "global horizontal radiation": Source("GHI", 1.0, (9999.0,)),
        "direct normal radiation": Source("DNI", 1.0, (9999.0,)),
        "diffuse horizontal radiation": Source("DHI", 1.0, (9999.0,)),
        "wind speed": Source("Wspd", 0.1, (999.0,)),
        "wind direction": Source("Wdir", 1.0, (999.0,)),
    },
}


def decode(raw: Array, column: str, source: Source) -> tuple[Array, NDArray[np.bool_]]:
    """A column as the file writes it, in the program's unit with NaN for missing, and what is implausible.

    ``raw`` has the shape (rows,) with NaN for a blank. Implausible values keep their number.
    """
    limits = LIMITS[column]
    # tenths divided, not multiplied, give the float that the decimal number has
    values = raw / round(1.0 / source.factor) if source.factor < 1.0 else raw * source.factor
    outside = (values < limits.least) | (values > limits.most)
    if outside.any():
        codes = np.array(source.codes + _COMMON_CODES)
        coded = np.zeros(raw.shape, dtype=bool)
        coded[outside] = (np.abs(raw[outside][:, None] - codes) < 1e-6).any(axis=1)
        values = np.where(coded, np.nan, values)
        outside &= ~coded
    return values, outside


def recognise(head: bytes) -> Format | None:
    """The format whose file starts with ``head``, judged by its first two lines that are not empty."""
    lines = [line for line in _clean(head).splitlines()[:20] if line.strip()]
    if not lines:
        return None
    first = lines[0].lstrip(b' "').lower()
    if first.startswith(b"location,"):
        return "EPW"
    if len(lines) > 1:
        second = lines[1].replace(b'"', b"").lower().lstrip()
        if second.startswith(TMY3_COLUMNS):
            return "TMY3"
    return "TMY2" if TMY2_HEADER.fullmatch(lines[0]) else None


def _clean(head: bytes) -> bytes:
    if head.startswith((b"\xff\xfe", b"\xfe\xff")):
        return head[: len(head) // 2 * 2].decode("utf-16", errors="replace").encode()
    return head.removeprefix(b"\xef\xbb\xbf").replace(b"\r", b"\n")


def what_else(head: bytes) -> str:
    """What a file that is none of the three seems to be, in words, for the message that refuses it."""
    text = _clean(head).lstrip().lower()
    first = text.split(b"\n", 1)[0]
    signs = (
        (not text, "is empty"),
        (b"\x00" in head, "is a binary file"),
        (text.startswith((b"{", b"[")), "is a JSON file"),
        (text.startswith(b"<"), "is a web page or an XML file"),
        (text.startswith(b"%pdf"), "is a PDF file"),
        (first.startswith(b"latitude (decimal degrees)"), "is a CSV file of the PVGIS service"),
        (
            b"year,month,day,hour" in text and b"dew point" in text,
            "is a CSV file of the National Solar Radiation Database, or one like it",
        ),
        (b"," in first, "is a CSV file that starts with neither an EPW nor a TMY3 header"),
        (True, "is a text file that starts with none of their headers"),
    )
    return next(words for holds, words in signs if holds)
