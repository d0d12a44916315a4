#!/usr/bin/env python3
"""The tables of docs/sample-climates.md: ``python weather_samples/describe.py [--write]``.

Prints them; with ``--write`` puts them into the page. Needs the program itself, which reads the files, and
the three real years that come with pvlib.
"""

from __future__ import annotations

import argparse
import sys
from collections.abc import Iterable, Sequence
from importlib.util import find_spec
from pathlib import Path
from typing import Final

import numpy as np
from sites import SITES, Site

from estimator.weather import WeatherOptions, WeatherYear, read_weather

__all__ = ["PAGE", "paragraphs"]

_HERE: Final = Path(__file__).resolve().parent
PAGE: Final = _HERE.parent / "docs" / "sample-climates.md"

#: Shares of the year's hours, %, in which the dew point lies above the value given.
_EXCEEDED: Final = (99.6, 95.0, 75.0, 50.0, 25.0, 5.0, 0.4)
_DRYING: Final = 12.0  # degC
_NEAR: Final = 0.8  # K, about 95 % relative humidity

#: Which of pvlib's real years each kind of climate is held against.
_BESIDE: Final = (
    ("12839.tm2", "hot-humid coast, 26 N", ("port-quellin", "sablewick-bay")),
    ("723170TYA.CSV", "mixed-humid, 36 N", ("millbrandt",)),
    ("703165TY.csv", "cold maritime, 55 N", ("cape-wendle",)),
)


def paragraphs() -> dict[str, str]:
    """The tables by the name of their place in the page, in Markdown."""
    years = {site.slug: _read(_HERE / f"{site.slug}.epw") for site in SITES}
    return {"sites": _sites(years), "dew points": _dew_points(years), "real years": _real(years)}


def _read(path: Path) -> WeatherYear:
    return read_weather(path, WeatherOptions(cache=False))


def _sites(years: dict[str, WeatherYear]) -> str:
    head = ("file", "site", "stands for", "latitude", "elevation, m", "mean", "least", "most", "hours")
    return _table(head, (_site(site, years[site.slug]) for site in SITES))


def _site(site: Site, year: WeatherYear) -> Sequence[str]:
    t = year.dry_bulb
    side = "N" if site.latitude > 0.0 else "S"
    return (
        f"`{site.slug}.epw`", site.name, site.climate, f"{abs(site.latitude):.1f} {side}",
        f"{site.elevation:g}", f"{t.mean():.1f}", f"{t.min():.1f}", f"{t.max():.1f}",
        str(int((year.dew_point > _DRYING).sum())),
    )  # fmt: skip


def _dew_points(years: dict[str, WeatherYear]) -> str:
    head = ("site", *(f"{share:g} %" for share in _EXCEEDED))
    return _table(head, ((site.name, *_exceeded(years[site.slug])) for site in SITES))


def _exceeded(year: WeatherYear) -> tuple[str, ...]:
    return tuple(f"{np.quantile(year.dew_point, 1.0 - share / 100.0):.1f}" for share in _EXCEEDED)


def _real(years: dict[str, WeatherYear]) -> str:
    spec = find_spec("pvlib")  # where its data lie; the library itself is not needed
    assert spec is not None
    assert spec.origin is not None
    data = Path(spec.origin).parent / "data"
    head = ("year", *(f"{share:g} %" for share in _EXCEEDED), "hours", "near", "memory")
    rows = []
    for file, kind, slugs in _BESIDE:
        rows.append((f"real: {kind} (`{file}`)", *_compared(_read(data / file))))
        rows += [(site.name, *_compared(years[site.slug])) for site in SITES if site.slug in slugs]
    return _table(head, rows)


def _compared(year: WeatherYear) -> Sequence[str]:
    near = (year.dry_bulb - year.dew_point < _NEAR).mean()
    hours = int((year.dew_point > _DRYING).sum())
    return (*_exceeded(year), str(hours), f"{100.0 * near:.0f} %", f"{_memory(year):.2f}")


def _memory(year: WeatherYear) -> float:
    """Correlation of one day's mean dew point with the next day's, both less their month's mean."""
    days = year.dew_point.reshape(-1, 24).mean(axis=1)
    month = year.month.reshape(-1, 24)[:, 0]
    means = np.array([days[month == m].mean() for m in range(1, 13)])
    off = days - means[month - 1]
    return float(np.corrcoef(off[:-1], off[1:])[0, 1])


def _table(head: Sequence[str], rows: Iterable[Sequence[str]]) -> str:
    lines = [head, ["---"] * len(head), *rows]
    return "\n".join("| " + " | ".join(line) + " |" for line in lines)


def _put(page: str, name: str, table: str) -> str:
    start, end = f"<!-- table: {name} -->\n", "<!-- end -->"
    before, rest = page.split(start)
    return f"{before}{start}{table}\n{end}{rest.split(end, 1)[1]}"


def main() -> None:
    """Print the tables, or write them into the page."""
    parser = argparse.ArgumentParser(description="Describe the synthetic sample years.")
    parser.add_argument("--write", action="store_true", help=f"put the tables into {PAGE.name}")
    write = parser.parse_args().write
    found = paragraphs()
    if write:
        page = PAGE.read_text(encoding="utf-8")
        for name, table in found.items():
            page = _put(page, name, table)
        PAGE.write_text(page, encoding="utf-8", newline="\n")
        return
    sys.stdout.write("\n\n".join(found.values()) + "\n")


if __name__ == "__main__":
    main()
