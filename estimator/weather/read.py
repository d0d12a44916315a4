"""``read_weather``: from a path to a weather year."""

from __future__ import annotations

import dataclasses
import os
from pathlib import Path

from estimator.errors import WeatherError
from estimator.files import sha256
from estimator.weather import cache
from estimator.weather.model import WeatherYear
from estimator.weather.options import DEFAULTS, WeatherOptions
from estimator.weather.unpack import load

__all__ = ["read_weather"]

_ARCHIVES = (".gz", ".zip")


def read_weather(path: str | os.PathLike[str], options: WeatherOptions = DEFAULTS) -> WeatherYear:
    """Read, check and repair one year of hourly weather.

    Parameters
    ----------
    path
        An EPW, TMY3 or TMY2 file, plain, gzipped, or the only weather file in a zip archive. What it is, is
        told by its content; its name does not matter.
    options
        See ``WeatherOptions``.

    Returns
    -------
    The year, of 8760 or 8784 hours labelled by their start; what was repaired and what was noticed stands in
    its ``repairs`` and ``findings``.

    Raises
    ------
    WeatherError
        The file cannot be read, or must not be trusted. The message names the file, the line or the hour,
        the value, and what is allowed.
    """
    file = Path(path)
    try:
        data = load(file)
        digest = sha256(data)
        year = _kept(data, digest, options) if options.cache else _parse(data, options)
    except WeatherError as error:
        raise error.at(f"{file}: {error.where}" if error.where else str(file)) from error
    # whether the cache was used changes nothing in the year
    options = dataclasses.replace(options, cache=True)
    return dataclasses.replace(
        year, file=file.name, sha256=digest, options=options, site=year.site or _stem(file)
    )


def _kept(data: bytes, digest: str, options: WeatherOptions) -> WeatherYear:
    key = cache.key_of(digest, options)
    year = cache.load(key)
    if year is None:
        year = _parse(data, options)
        cache.store(key, year)
    return year


def _parse(data: bytes, options: WeatherOptions) -> WeatherYear:
    # here, not above: a year that comes from the cache needs none of this
    from estimator.weather.assemble import assemble
    from estimator.weather.reading import read_rows
    from estimator.weather.unpack import unpack

    return assemble(read_rows(unpack(data)), options)


def _stem(file: Path) -> str:
    name = file.name
    if file.suffix.lower() in _ARCHIVES:
        name = file.stem
    return Path(name).stem or file.name
