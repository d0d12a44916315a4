"""From a path to the bytes of one weather file: plain, gzip, or the only weather file of a zip archive.

Everything is recognised by content, never by name, and nothing is unpacked beyond a bound.
"""

from __future__ import annotations

import gzip
import io
import zipfile
import zlib
from pathlib import Path
from typing import IO, Final

from estimator.errors import WeatherError
from estimator.weather.formats import FORMATS_READ, recognise

__all__ = ["load", "unpack"]

#: Largest file and largest unpacked file, bytes. An hourly year is about 2 MB in any of the formats.
LARGEST: Final = 64_000_000

_HEAD: Final = 16_384
_MOST_MEMBERS: Final = 1000
_UNREADABLE_ZIP: Final = (
    zipfile.BadZipFile,
    zlib.error,
    EOFError,
    OSError,
    RuntimeError,
    NotImplementedError,
    ValueError,
)


def load(path: Path) -> bytes:
    """The bytes of the file as it lies on disk.

    Raises
    ------
    WeatherError
        No such file, a folder, not a regular file, not readable, or larger than the bound.
    """
    try:
        if path.is_dir():
            raise WeatherError("is a folder, not a weather file", hint="name one file")
        if not path.exists():
            raise WeatherError("no such file", hint="check the name and the folder")
        if not path.is_file():
            raise WeatherError("is not a regular file", hint="save it to a file first")
        with path.open("rb") as stream:
            return _bounded(stream, "")
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or error
        raise WeatherError(f"cannot be read ({reason})") from error


def unpack(data: bytes) -> bytes:
    """The weather file inside ``data``: itself, or what a gzip or zip archive holds.

    Raises
    ------
    WeatherError
        A damaged archive, one that unpacks to more than the bound, or a zip with none or several
        weather files.
    """
    if data.startswith(b"\x1f\x8b"):
        try:
            with gzip.open(io.BytesIO(data)) as stream:
                return _bounded(stream, " unpacked")
        except (OSError, EOFError, zlib.error) as error:
            raise WeatherError(f"is a damaged gzip file ({error})", hint="fetch it again") from error
    if data.startswith((b"PK\x03\x04", b"PK\x05\x06")):
        try:
            return _only_weather_file(data)
        except _UNREADABLE_ZIP as error:
            raise WeatherError(
                f"is a zip archive that cannot be unpacked ({error})",
                hint="fetch it again, or unpack it and name the weather file",
            ) from error
    return data


def _bounded(stream: IO[bytes] | gzip.GzipFile, how: str) -> bytes:
    data = stream.read(LARGEST + 1)
    if len(data) > LARGEST:
        raise WeatherError(
            f"is larger than {LARGEST // 1_000_000} MB{how}: not one year of hourly weather",
            allowed=f"one year in one of {FORMATS_READ}",
        )
    return data


def _only_weather_file(data: bytes) -> bytes:
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        members = [m for m in archive.infolist() if not m.is_dir()]
        if len(members) > _MOST_MEMBERS:
            raise WeatherError(
                f"is a zip archive of {len(members)} files", allowed="one that holds one weather file"
            )
        found = []
        for member in members:
            with archive.open(member) as stream:
                if recognise(stream.read(_HEAD)):
                    found.append(member)
        if len(found) != 1:
            names = [m.filename for m in (found or members)]
            shown = ", ".join(names[:6]) + (", ..." if len(names) > 6 else "")
            what = f"{len(found)} weather files" if found else f"no weather file in {FORMATS_READ}"
            raise WeatherError(
                f"is a zip archive with {what} ({shown or 'it is empty'})",
                allowed="exactly one weather file in the archive",
                hint="unpack it and name the one you mean",
            )
        with archive.open(found[0]) as stream:
            return _bounded(stream, " unpacked")
