"""Sample weather that comes with the program, taken by name wherever a weather file is asked for.

The samples are synthetic years of invented places. An installed package carries them beside its modules; a
checkout has them in its own folder.
"""

from __future__ import annotations

import difflib
import re
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from estimator.errors import WeatherError
from estimator.quantities import likeliest

__all__ = ["Sample", "sample_names", "samples", "weather_path"]

_FOLDER: Final = "weather_samples"
_SUFFIX: Final = ".epw"
_HERE: Final = Path(__file__).resolve().parent
#: An installed package is asked first: what stands beside it in its environment belongs to somebody else.
_FOLDERS: Final = (_HERE / _FOLDER, _HERE.parent / _FOLDER)
#: The header's first comment says in brackets what kind of climate the year stands for.
_STANDS_FOR: Final = re.compile(r"\((.*?)\)")


@dataclass(frozen=True, kw_only=True)
class Sample:
    """One sample year: the name it is taken by, its invented place, and the climate it stands for."""

    name: str
    site: str
    stands_for: str
    path: Path


def _paths() -> dict[str, Path]:
    for folder in _FOLDERS:
        found = sorted(folder.glob(f"*{_SUFFIX}"))
        if found:
            return {path.name.removesuffix(_SUFFIX): path for path in found}
    return {}


def sample_names() -> tuple[str, ...]:
    """The names of all samples, sorted; none where a package was built without them."""
    return tuple(_paths())


def samples() -> dict[str, Sample]:
    """All samples by name, sorted, with what their headers say of them."""
    return {name: _sample(name, path) for name, path in _paths().items()}


def _sample(name: str, path: Path) -> Sample:
    with path.open(encoding="utf-8") as stream:
        header = [stream.readline() for _ in range(8)]
    place = header[0].split(",")
    comment = next((line for line in header if line.startswith("COMMENTS 1,")), "")
    kind = _STANDS_FOR.search(comment)
    return Sample(name=name, site=place[1], stands_for=kind[1] if kind else "", path=path)


def weather_path(name: str | Path) -> Path:
    """The path of a weather file, or of a sample by its name where no such file exists.

    Raises
    ------
    WeatherError
        There is neither, and the name is close to a sample's or could be one.
    """
    path, text = Path(name), str(name)
    if _is_file(path):
        return path
    known = _paths()
    if text in known:
        return known[text]
    if _is_there(path) or path.name != text:
        return path
    stem = text.removesuffix(_SUFFIX)
    # a name with an ending is most likely a file that is missing, not a sample that is misspelt
    if path.suffix and not difflib.get_close_matches(stem, known, n=1, cutoff=0.8):
        return path
    raise WeatherError(
        "there is no such file and no such sample",
        where=text,
        hint=likeliest(stem, known) or "'dewledger weather' lists the samples",
    )


def _is_file(path: Path) -> bool:
    try:
        return path.is_file()
    except OSError:
        # what may not be looked at is told by whoever reads it
        return False


def _is_there(path: Path) -> bool:
    try:
        return path.exists()
    except (OSError, ValueError):
        return True
