"""Rows of a weather file as arrays: the one module that uses pvlib.

pvlib parses the values. It does not parse the calendar: its readers label an hour by its end in one format
and by its start in another, take the year of the first row for every row (TMY2), move 29 February to
1 March (TMY3), and stop at a date that does not exist, without a line number. So the time columns are read
here from the text, and the copy handed to pvlib carries one and the same valid hour in every row; its
index is not used. For the same reason it gets a plain header of its own (see ``headers``).
"""

from __future__ import annotations

import re
import tempfile
import warnings
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from estimator.errors import WeatherError
from estimator.moist_air import Array
from estimator.weather.formats import FORMATS_READ, SOURCES, Format, recognise, what_else
from estimator.weather.headers import Header, read_header
from estimator.weather.lines import Lines, text_of

if TYPE_CHECKING:
    import pandas as pd

__all__ = ["Rows", "read_rows"]

Integers = NDArray[np.int64]

# EPW: year, month, day, hour, minute
_EPW_TIME: Final = re.compile(
    rb'^[ \t"]*(\d{1,4})[ "]*,[ "]*(\d{1,2})[ "]*,[ "]*(\d{1,2})[ "]*,'
    rb'[ "]*(\d{1,2})[ "]*,[ "]*(\d{1,2})[ "]*(?=,)',
    re.MULTILINE,
)
# TMY3: month/day/year, hour:minute
_TMY3_TIME: Final = re.compile(
    rb'^[ "]*(\d{1,2})/(\d{1,2})/(\d{4})[ "]*,[ "]*(\d{1,2}):(\d{2})[ "]*(?=,)', re.MULTILINE
)
#: Fields of an EPW row: the dictionary defines 35, old files end earlier; wind speed is the 22nd.
_EPW_FIELDS: Final = (22, 35)
_EPW_HEADER: Final = b"LOCATION,a,b,c,d,e,0,0,0,0\n" + b"x\n" * 6 + b"DATA PERIODS\n"
_TMY3_HEADER: Final = b"000000,a,b,0,0,0,0\n"
_TMY2_HEADER: Final = b" 00000 A XX 0 N 0 0 E 0 0 0\n"
_TMY2_LENGTH: Final = 142
#: Where TMY2 keeps year, month, day and hour, and the columns this program reads: first byte, width.
_TMY2_TIME: Final = ((1, 2), (3, 2), (5, 2), (7, 2))
_TMY2_COLUMNS: Final = {
    "global horizontal radiation": (17, 4),
    "direct normal radiation": (23, 4),
    "diffuse horizontal radiation": (29, 4),
    "dry bulb": (67, 4),
    "dew point": (73, 4),
    "relative humidity": (79, 3),
    "pressure": (84, 4),
    "wind direction": (90, 3),
    "wind speed": (95, 3),
}


@dataclass(frozen=True, kw_only=True)
class Rows:
    """The rows in the order of the file, each array of shape (rows,).

    ``hour`` is 1..24 and names the end of the hour, as all three formats have it. ``columns`` holds what
    the file writes, in the file's unit, NaN for a blank.
    """

    header: Header
    #: line number in the file, from 1
    line: Integers
    year: Integers
    month: Integers
    day: Integers
    hour: Integers
    columns: dict[str, Array]


def read_rows(data: bytes) -> Rows:
    """Recognise the format of ``data`` by its content and read its header and rows.

    Raises
    ------
    WeatherError
        None of the three formats, or a row that is not what its format prescribes, with its line.
    """
    format_ = recognise(data[:65536])
    if format_ is None:
        raise WeatherError(
            f"{what_else(data[:65536])}; it is none of the formats that are read",
            allowed=f"hourly weather of one year as {FORMATS_READ}, plain, .gz or .zip",
            hint="fetch the year in one of these formats",
        )
    lines = Lines(text_of(data))
    header = read_header(lines, format_)
    if len(lines) <= header.lines:
        raise WeatherError(
            "has a header but no rows of data", allowed="8760 or 8784 hours", hint="fetch it again"
        )
    readers: dict[Format, Callable[[Lines, Header], Rows]] = {"EPW": _epw, "TMY3": _tmy3, "TMY2": _tmy2}
    return readers[format_](lines, header)


def _epw(lines: Lines, header: Header) -> Rows:
    number = lines.number[header.lines :]
    fields = lines.occurrences(",", header.lines) + 1
    least, most = _EPW_FIELDS
    usual = int(np.bincount(fields).argmax())
    usual = usual if least <= usual <= most else most
    _require_fields(lines, header.lines, fields, usual)
    body = lines.after(header.lines)
    times, neutral = _times(
        _EPW_TIME, b"2000,1,1,1,0", body, lines, header.lines, "year, month, day, hour and minute in numbers"
    )
    year, month, day, hour, minute = times
    _require_hourly(minute, number)
    _require_dates(month, day, hour, number)
    if usual < most:
        neutral = neutral.replace(b"\n", b"," * (most - usual) + b"\n")
    frame = _with_pvlib("EPW", _EPW_HEADER + neutral, len(number))
    return Rows(
        header=header,
        line=number,
        year=year,
        month=month,
        day=day,
        hour=hour,
        columns=_numbers(frame, "EPW", number),
    )


def _tmy3(lines: Lines, header: Header) -> Rows:
    number = lines.number[header.lines :]
    names = [name.strip(' "') for name in lines[1].split(",")]
    _require_fields(lines, header.lines, lines.occurrences(",", header.lines) + 1, len(names))
    body = lines.after(header.lines)
    times, neutral = _times(
        _TMY3_TIME, b"01/01/2000,01:00", body, lines, header.lines, "a date MM/DD/YYYY and a time HH:MM"
    )
    month, day, year, hour, minute = times
    if minute.any():
        row = int(minute.argmax())
        raise WeatherError(
            f"minute {minute[row]}",
            where=f"line {number[row]}, column Time (HH:MM)",
            allowed="whole hours, 01:00 to 24:00, each naming the end of its hour",
            hint="average the file to whole hours first",
        )
    year, month, day, hour = _midnight_ends_the_day_before(year, month, day, hour)
    _require_dates(month, day, hour, number)
    columns = ",".join(["Date (MM/DD/YYYY)", "Time (HH:MM)", *names[2:]]).encode("ascii", errors="replace")
    frame = _with_pvlib("TMY3", _TMY3_HEADER + columns + b"\n" + neutral, len(number))
    return Rows(
        header=header,
        line=number,
        year=year,
        month=month,
        day=day,
        hour=hour,
        columns=_numbers(frame, "TMY3", number),
    )


def _tmy2(lines: Lines, header: Header) -> Rows:
    number = lines.number[header.lines :]
    lengths = lines.lengths(header.lines)
    if (lengths < _TMY2_LENGTH).any():
        row = int((lengths < _TMY2_LENGTH).argmax())
        raise WeatherError(
            f"the line is {lengths[row]} characters long",
            where=f"line {number[row]}",
            allowed=f"{_TMY2_LENGTH}",
            hint="it may be cut off: fetch it again",
        )
    body = np.frombuffer(lines.after(header.lines), dtype=np.uint8)
    starts = np.concatenate(([0], np.cumsum(lengths + 1)[:-1]))
    table = body[starts[:, None] + np.arange(_TMY2_LENGTH)]
    year, month, day, hour = (_tmy2_time(table, at, number) for at in _TMY2_TIME)
    # two digits: the format was made for 1961..1990, later files use it beyond 1999
    year += np.where(year < 50, 2000, 1900)
    _require_dates(month, day, hour, number)
    frame = _with_pvlib("TMY2", _TMY2_HEADER + _neutral_tmy2(table, number), len(number))
    return Rows(
        header=header,
        line=number,
        year=year,
        month=month,
        day=day,
        hour=hour,
        columns=_numbers(frame, "TMY2", number),
    )


def _tmy2_time(table: NDArray[np.uint8], at: tuple[int, int], number: Integers) -> Integers:
    start, width = at
    digits = table[:, start : start + width].astype(np.int64) - 48
    digits[digits == -16] = 0  # a space before a single digit
    bad = ((digits < 0) | (digits > 9)).any(axis=1)
    if bad.any():
        row = int(bad.argmax())
        text = table[row, 1:9].tobytes().decode("latin-1")
        raise WeatherError(
            f"{text!r} where the time belongs",
            where=f"line {number[row]}",
            allowed="year, month, day and hour, two digits each",
        )
    return digits @ (10 ** np.arange(width - 1, -1, -1))


def _neutral_tmy2(table: NDArray[np.uint8], number: Integers) -> bytes:
    """The rows with one hour for all of them and zeros in every column that this program does not read."""
    out = np.full((len(table), _TMY2_LENGTH + 1), ord("0"), dtype=np.uint8)
    out[:, 0], out[:, -1] = ord(" "), ord("\n")
    out[:, 1:9] = np.frombuffer(b"60010101", dtype=np.uint8)
    for column, (start, width) in _TMY2_COLUMNS.items():
        span = table[:, start : start + width].copy()
        span[(span == ord(" ")).all(axis=1)] = ord("9")  # a blank field: the format's own code for missing
        text = np.ascontiguousarray(span).view(f"S{width}").ravel()
        bare = np.char.strip(text)
        bad = ~np.char.isdigit(np.where(np.char.startswith(bare, b"-"), np.char.lstrip(bare, b"-"), bare))
        if bad.any():
            row = int(bad.argmax())
            raise _not_a_number(text[row].decode("latin-1"), int(number[row]), column)
        out[:, start : start + width] = span
    return out.tobytes()


def _require_fields(lines: Lines, before: int, fields: Integers, wanted: int) -> None:
    """Refuse rows of another number of fields, and quotation marks, which would join rows."""
    number = lines.number[before:]
    open_ = lines.occurrences('"', before) % 2 == 1
    if open_.any():
        raise WeatherError(
            "a quotation mark without its partner",
            where=f"line {number[int(open_.argmax())]}",
            hint="remove it",
        )
    wrong = fields != wanted
    if wrong.any():
        row = int(wrong.argmax())
        raise WeatherError(
            f"{fields[row]} fields",
            where=f"line {number[row]}",
            allowed=f"{wanted} in every row of this file",
            hint="the line may be cut off, or a decimal comma may have split a number",
        )


def _times(
    pattern: re.Pattern[bytes], instead: bytes, body: bytes, lines: Lines, before: int, allowed: str
) -> tuple[tuple[Integers, ...], bytes]:
    """The time columns of every row, a group of the pattern each, and the text with ``instead`` for them."""
    parts = pattern.split(body)
    each = pattern.groups + 1
    if len(parts) != each * (len(lines) - before) + 1 or parts[0]:
        bad = next(i for i, row in enumerate(body.splitlines()) if not pattern.match(row))
        start = ",".join(lines[before + bad].split(",")[:5])
        raise WeatherError(
            f"{start!r} where the time belongs", where=f"line {lines.number[before + bad]}", allowed=allowed
        )
    times = tuple(np.array(parts[group::each], dtype="S4").astype(np.int64) for group in range(1, each))
    return times, instead + instead.join(parts[each::each])


def _require_hourly(minute: Integers, number: Integers) -> None:
    """Refuse an EPW whose rows do not stand at full hours; 0 and 60 mean the same."""
    other = minute % 60 != 0
    if other.any():
        row = int(other.argmax())
        raise WeatherError(
            f"minute {minute[row]}",
            where=f"line {number[row]}, column minute",
            allowed="one row an hour",
            hint="average the file to hours first",
        )


def _require_dates(month: Integers, day: Integers, hour: Integers, number: Integers) -> None:
    """Refuse what no calendar has; 29 February is taken in every year."""
    length = np.array([0, 31, 29, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31])
    in_range = (month >= 1) & (month <= 12)
    checks = (
        ("month", month, in_range, "1..12"),
        ("day", day, (day >= 1) & (day <= length[np.where(in_range, month, 0)]), "a day of its month"),
        ("hour", hour, (hour >= 1) & (hour <= 24), "1..24, naming the end of the hour"),
    )
    for name, values, good, allowed in checks:
        if not good.all():
            row = int((~good).argmax())
            raise WeatherError(
                f"{name} {values[row]}", where=f"line {number[row]}, column {name}", allowed=allowed
            )


def _midnight_ends_the_day_before(
    year: Integers, month: Integers, day: Integers, hour: Integers
) -> tuple[Integers, Integers, Integers, Integers]:
    """Turn 00:00, with which some TMY3 files name the end of a day, into 24:00 of the day before.

    A file whose first row is 00:00 labels hours in another way, and keeps its 0, which is refused.
    """
    midnight = hour == 0
    if not midnight.any() or midnight[0]:
        return year, month, day, hour
    # the day before is the one of the row before, the rows being in order; else the row stays and is refused
    before = np.maximum(np.arange(len(hour)) - 1, 0)
    follows = midnight & (hour[before] == 23)
    pick = np.where(follows, before, np.arange(len(hour)))
    return year[pick], month[pick], day[pick], np.where(follows, 24, hour)


def _with_pvlib(format_: Format, text: bytes, rows: int) -> pd.DataFrame:
    """The table that pvlib's reader makes of ``text``, which it can only take from a file."""
    import pvlib.iotools

    with tempfile.TemporaryDirectory(prefix="dewledger-") as folder, warnings.catch_warnings():
        # columns that are not used may mix text and numbers, which pandas remarks on
        warnings.simplefilter("ignore")
        path = Path(folder) / "weather"
        path.write_bytes(_ascii(text))
        try:
            if format_ == "EPW":
                frame, _ = pvlib.iotools.read_epw(str(path))
            elif format_ == "TMY3":
                frame, _ = pvlib.iotools.read_tmy3(str(path), map_variables=True)
            else:
                frame, _ = pvlib.iotools.read_tmy2(str(path))
        except (ValueError, KeyError, IndexError, TypeError, OverflowError) as error:
            raise WeatherError(f"cannot be read as {format_}: {error}", hint="fetch it again") from error
    if len(frame) != rows:
        raise WeatherError(
            f"{rows} rows of data, of which {len(frame)} can be told apart as {format_}",
            hint="fetch it again",
        )
    table: pd.DataFrame = frame
    return table


def _ascii(text: bytes) -> bytes:
    """Text that reads the same in every encoding the reader may assume."""
    return text if text.isascii() else re.sub(rb"[\x80-\xff]", b"?", text)


def _numbers(frame: pd.DataFrame, format_: Format, number: Integers) -> dict[str, Array]:
    """The columns this program reads, as floats; text is refused with its line."""
    import pandas as pd

    columns = {}
    for column, source in SOURCES[format_].items():
        if source.name not in frame:
            if column == "dry bulb":
                raise WeatherError("there is no column for the dry bulb", allowed="Dry-bulb (C)")
            columns[column] = np.full(len(number), np.nan)
            continue
        series = frame[source.name]
        values = np.asarray(pd.to_numeric(series, errors="coerce"), dtype=np.float64)
        text = np.isnan(values) & np.asarray(series.notna())
        if text.any():
            row = int(text.argmax())
            raise _not_a_number(str(series.iloc[row]), int(number[row]), column)
        columns[column] = values
    return columns


def _not_a_number(text: str, line: int, column: str) -> WeatherError:
    return WeatherError(
        f"{text.strip()!r} where a number belongs",
        where=f"line {line}, column {column}",
        allowed="a number",
        hint="correct the file; a missing value is a blank or the format's code",
    )
