"""Parsed weather years, kept so that the second run of a file needs neither pandas nor pvlib.

An entry is a digest, a line feed, and an npz archive of plain arrays and a JSON text; no pickle. Its name
and its content carry the key: hash of the weather file, of the options, of the version, and of the code that
made it. Whatever does not match is no entry: a damaged, foreign or outdated file is read over, never
believed. The weather file's own name is not part of it.
"""

from __future__ import annotations

import dataclasses
import io
import json
import zipfile
from functools import lru_cache
from importlib import import_module
from pathlib import Path
from typing import Any, Final

import numpy as np

from estimator.errors import InputError
from estimator.files import canonical_json, replacing, sha256, user_folder
from estimator.weather.model import Finding, Repair, WeatherYear
from estimator.weather.options import WeatherOptions

__all__ = ["cache_folder", "clear_cache", "key_of", "load", "store"]

_SCHEMA: Final = 1
_SUFFIX: Final = ".weather"
_DIGEST: Final = 64
_CLOCK: Final = ("month", "day", "hour", "weekday")
_NAMES: Final = ("file", "sha256")
#: What writing or finding the folder may fail with; a run goes on without its cache.
_NO_FOLDER: Final = (OSError, InputError, RuntimeError)
#: What taking a whole file apart may fail with that is not one of ours after all.
_NO_ENTRY: Final = (OSError, ValueError, KeyError, TypeError, AttributeError, EOFError, zipfile.BadZipFile)


def cache_folder() -> Path:
    """Where the entries lie."""
    return user_folder() / "weather"


def clear_cache() -> int:
    """Remove every entry; returns how many there were. An entry that cannot be removed stays, uncounted."""
    count = 0
    try:
        entries = sorted(cache_folder().glob(f"*{_SUFFIX}"))
    except _NO_FOLDER:
        return 0
    for entry in entries:
        try:
            entry.unlink()
        except OSError:
            continue
        count += 1
    return count


def key_of(content: str, options: WeatherOptions) -> str:
    """The name of the entry for a file of hash ``content`` read with ``options``."""
    chosen = dataclasses.asdict(options)
    del chosen["cache"]
    return sha256(canonical_json([_SCHEMA, content, chosen, _version(), _code()]))


def _version() -> str:
    # looked up, not imported: the package's front page names modules above this one
    return str(import_module("estimator").__version__)


@lru_cache(maxsize=1)
def _code() -> str:
    """Hash of the modules that make a weather year, so that no edit of them leaves an old entry valid."""
    here = Path(__file__).parent
    modules = sorted(here.glob("*.py")) + [
        here.parent / f"{n}.py" for n in ("moist_air", "constants", "quantities")
    ]
    try:
        return sha256(b"".join(module.read_bytes() for module in modules))
    except OSError:
        return ""


def load(key: str) -> WeatherYear | None:
    """The year stored under ``key``, ``file`` and ``sha256`` left empty; None where none can be trusted."""
    try:
        data = (cache_folder() / f"{key}{_SUFFIX}").read_bytes()
    except _NO_FOLDER:
        return None
    digest, body = data[:_DIGEST], data[_DIGEST + 1 :]
    # checked before anything of it is parsed
    if digest != sha256(body).encode() or data[_DIGEST : _DIGEST + 1] != b"\n":
        return None
    try:
        return _restore(key, body)
    except _NO_ENTRY:
        return None


def _restore(key: str, body: bytes) -> WeatherYear | None:
    with np.load(io.BytesIO(body), allow_pickle=False) as archive:
        scalars = json.loads(archive["meta"].tobytes())
        if scalars.pop("key") != key:
            return None
        clock, floats, repaired = archive["clock"], archive["floats"], archive["repaired"]
    fields: dict[str, Any] = dict.fromkeys(scalars.pop("absent"))
    fields |= dict(zip(scalars.pop("floats"), floats, strict=True))
    fields |= {name: values.astype(np.int64) for name, values in zip(_CLOCK, clock, strict=True)}
    fields["repairs"] = tuple(Repair(**item) for item in scalars.pop("repairs"))
    fields["findings"] = tuple(Finding(**item) for item in scalars.pop("findings"))
    fields["source_years"] = tuple(scalars.pop("source_years"))
    return WeatherYear(**fields, **scalars, repaired=repaired)


def store(key: str, year: WeatherYear) -> None:
    """Keep ``year`` under ``key``, whole or not at all; a folder that cannot be written is no error."""
    body = _archive(key, year)
    try:
        folder = cache_folder()
        folder.mkdir(parents=True, exist_ok=True)
        with replacing(folder / f"{key}{_SUFFIX}") as stream:
            stream.write(sha256(body).encode() + b"\n" + body)
    except _NO_FOLDER:
        return


def _archive(key: str, year: WeatherYear) -> bytes:
    arrays: dict[str, Any] = {}
    scalars: dict[str, Any] = {}
    for item in dataclasses.fields(year):
        value = getattr(year, item.name)
        if item.name in _NAMES or item.name in _CLOCK or item.name == "repaired":
            continue
        (arrays if isinstance(value, np.ndarray) else scalars)[item.name] = value
    absent = [name for name in _optional_arrays() if scalars.get(name, 0) is None]
    for name in absent:
        del scalars[name]
    scalars["repairs"] = [dataclasses.asdict(item) for item in year.repairs]
    scalars["findings"] = [dataclasses.asdict(item) for item in year.findings]
    meta = canonical_json({**scalars, "key": key, "floats": list(arrays), "absent": absent})
    stream = io.BytesIO()
    repaired = year.repaired
    np.savez(
        stream,
        meta=np.frombuffer(meta, dtype=np.uint8),
        clock=np.stack([getattr(year, name) for name in _CLOCK]).astype(np.int8),
        floats=np.stack(list(arrays.values())),
        repaired=np.zeros(year.hours, dtype=bool) if repaired is None else repaired,
    )
    return stream.getvalue()


def _optional_arrays() -> tuple[str, ...]:
    return ("global_horizontal", "direct_normal", "diffuse_horizontal", "wind_speed", "wind_direction")
