"""Weather reading against files and values from outside the project.

The files are the ones pvlib carries, and real ones where a folder of them is at hand. What they hold is read
here again from their text, apart from the program and from pvlib.
"""

from __future__ import annotations

import csv
import os
from pathlib import Path

import numpy as np
import pytest
from published import checks
from published.checks import Recorder, validates

from estimator.errors import WeatherError
from estimator.weather import WeatherOptions, WeatherYear, read_weather, summarise
from estimator.weather.humidity import (
    better_phase,
    dew_point_from_relative_humidity,
    relative_humidity_from_dew_point,
)
from estimator.weather.sun import equation_of_time

pvlib = pytest.importorskip("pvlib")
DATA = Path(pvlib.__path__[0]) / "data"
TMY2 = DATA / "12839.tm2"
TMY3 = (DATA / "723170TYA.CSV", DATA / "703165TY.csv")
PLAIN = WeatherOptions(cache=False)

for needed in (TMY2, *TMY3):
    if not needed.exists():
        pytest.skip(f"this pvlib carries no {needed.name}", allow_module_level=True)


def shared_weather() -> Path:
    """The folder of real files, or a skip that says where it was sought."""
    beside = Path(__file__).parents[2].parent / "shared" / "weather"
    folder = Path(os.environ.get("DEWLEDGER_SHARED_WEATHER", beside))
    if not folder.is_dir():
        pytest.skip("no folder of real weather files (DEWLEDGER_SHARED_WEATHER)")
    return folder


def text_of_tmy3(path: Path) -> dict[str, np.ndarray]:
    """Columns by header name, straight from the text."""
    with path.open(encoding="latin-1", newline="") as stream:
        next(stream)
        table = list(csv.DictReader(stream))
    wanted = ("Dry-bulb (C)", "Dew-point (C)", "RHum (%)", "Pressure (mbar)", "GHI (W/m^2)", "Wspd (m/s)")
    columns = {name: np.array([float(row[name]) for row in table]) for name in wanted}
    columns["month"] = np.array([int(row["Date (MM/DD/YYYY)"][:2]) for row in table])
    columns["year"] = np.array([int(row["Date (MM/DD/YYYY)"][6:]) for row in table])
    return columns


def years_by_month(month: np.ndarray, year: np.ndarray) -> tuple[int, ...]:
    return tuple(int(year[month == m][0]) for m in range(1, 13))


def find(year: WeatherYear, words: str):
    return [f for f in year.findings if words in f.what]


@validates("TMY3 values are those of the file", checks.FILE_TEXT)
@pytest.mark.parametrize("path", TMY3, ids=lambda p: p.name)
def test_tmy3_values_are_those_of_the_text(path: Path, check: Recorder):
    """Every hour of every column, under the right month and hour."""
    text, year = text_of_tmy3(path), read_weather(path, PLAIN)
    assert year.format == "TMY3"
    assert year.hours == 8760
    assert year.calendar == "typical"
    assert year.source_years == years_by_month(text["month"], text["year"])
    np.testing.assert_array_equal(year.month, text["month"])
    np.testing.assert_array_equal(year.hour, np.tile(np.arange(24), 365))
    for name, values, written, unit in (
        ("dry bulb", year.dry_bulb, text["Dry-bulb (C)"], "K"),
        ("dew point", year.dew_point, text["Dew-point (C)"], "K"),
        ("pressure", year.pressure, 100.0 * text["Pressure (mbar)"], "Pa"),
        ("radiation", year.global_horizontal, text["GHI (W/m^2)"], "W/m2"),
        ("wind", year.wind_speed, text["Wspd (m/s)"], "m/s"),
    ):
        check.largest(f"{path.name}, {name}", values, written, unit, within=0.0)
    assert year.repairs == ()
    assert find(year, "culminates") == []


def test_tmy3_values_are_those_of_pvlib_one_label_earlier():
    frame, meta = pvlib.iotools.read_tmy3(TMY3[0], map_variables=True)
    year = read_weather(TMY3[0], PLAIN)
    np.testing.assert_array_equal(year.dry_bulb, frame["temp_air"])
    # pvlib's last label is the first hour of another January; here it is the last of December
    assert frame.index[-1].month == 1
    assert year.label(8759) == "12-31 23:00"
    assert (year.latitude, year.longitude, year.utc_offset) == (
        meta["latitude"],
        meta["longitude"],
        meta["TZ"],
    )
    assert year.elevation == meta["altitude"]


@validates("TMY2 values are those of the file", checks.FILE_TEXT)
def test_tmy2_values_are_those_of_the_text(check: Recorder):
    """Every hour of every column, under the right month and hour, to rounding."""
    lines = TMY2.read_text().splitlines()[1:]
    year = read_weather(TMY2, PLAIN)
    assert year.format == "TMY2"
    assert year.site == TMY2.read_text()[7:29].strip()
    assert (year.utc_offset, year.elevation) == (-5.0, 2.0)
    # 25 degrees 48 minutes north, 80 degrees 16 minutes west
    assert year.latitude == pytest.approx(25.8)
    assert year.longitude == pytest.approx(-80.26667, abs=1e-5)
    for name, values, (a, b), factor, unit in (
        ("dry bulb", year.dry_bulb, (67, 71), 10, "K"),
        ("dew point", year.dew_point, (73, 77), 10, "K"),
        ("pressure", year.pressure, (84, 88), 0.01, "Pa"),
        ("radiation", year.global_horizontal, (17, 21), 1, "W/m2"),
        ("wind", year.wind_speed, (95, 98), 10, "m/s"),
        ("hour, by its end", year.hour + 1, (7, 9), 1, "h"),
    ):
        written = np.array([float(line[a:b]) for line in lines])
        check.largest(f"{TMY2.name}, {name}", values, written / factor, unit, rel=1e-15)
    months = np.array([int(line[3:5]) for line in lines])
    years = 1900 + np.array([int(line[1:3]) for line in lines])
    assert year.source_years == years_by_month(months, years)
    assert year.repairs == ()
    assert year.findings == ()


def test_tmy2_values_are_those_of_pvlib_one_label_earlier():
    frame, _ = pvlib.iotools.read_tmy2(TMY2)
    year = read_weather(TMY2, PLAIN)
    np.testing.assert_allclose(year.dry_bulb, frame["DryBulb"] / 10, rtol=1e-15)
    np.testing.assert_array_equal(year.hour, frame["hour"] - 1)


def test_a_pressure_that_was_estimated_is_told():
    """Every hour of the file has 1012 mbar, flagged E."""
    assert set(text_of_tmy3(TMY3[1])["Pressure (mbar)"]) == {1012.0}
    assert len(find(read_weather(TMY3[1], PLAIN), "101200 Pa in every hour")) == 1


@pytest.mark.parametrize("path", TMY3, ids=lambda p: p.name)
def test_humidity_columns_that_disagree_are_found(path):
    """Mostly at the joints of the months, which the makers of the files smoothed column by column."""
    text = text_of_tmy3(path)
    t, dew, rh = text["Dry-bulb (C)"], text["Dew-point (C)"], text["RHum (%)"]

    def over_water(x):  # Bolton 1980
        return np.exp(17.67 * x / (x + 243.5))

    def over_ice(x):  # Buck 1981
        return np.where(x < 0, np.exp(22.452 * x / (272.55 + x)), np.exp(17.67 * x / (x + 243.5)))

    # the two stations follow different conventions: whichever gives the smaller median difference
    apart = min(
        (np.abs(100 * s(dew) / s(t) - rh) for s in (over_water, over_ice)),
        key=lambda off: np.median(off[t < 0]),
    )
    (found,) = find(read_weather(path, PLAIN), "disagree")
    assert found.count == pytest.approx((apart > 5).sum(), abs=2)  # another formula near the limit
    points = float(found.what.split("by up to ")[1].split(" points")[0])
    assert points == pytest.approx(apart.max(), abs=0.1)
    assert found.where == read_weather(path, PLAIN).label(int((apart > 5).argmax()))


@pytest.mark.parametrize("path", [TMY2, *TMY3], ids=lambda p: p.name)
def test_the_sun_of_real_files_keeps_their_time_zone(path):
    """Stations between 25 and 55 degrees north: as they are nothing is told, a zone off by an hour is."""
    year = read_weather(path, PLAIN)
    assert find(year, "culminates") == []
    for shift in (-1.0, 1.0):
        moved = read_weather(path, WeatherOptions(cache=False, utc_offset=year.utc_offset + shift))
        (told,) = find(moved, "culminates")
        assert float(told.what.split("culminates ")[1].split(" h")[0]) == pytest.approx(1.0, abs=0.15)


@validates("Design values of a humid site", checks.DESIGN)
def test_design_values_of_a_humid_site(check: Recorder):
    """Those of Miami, from a long record; one older typical year is within 1.5 K of it, its hottest hours,
    which a typical year leaves out, within 1.6 K.
    """
    design = {c.name: c for c in summarise(read_weather(TMY2, PLAIN)).design}
    check("dew point exceeded in 0.4 %", design["dew point 0.4 %"].dew_point, 25.8, "degC", within=1.5)
    check("dry bulb with it", design["dew point 0.4 %"].dry_bulb, 28.9, "degC", within=1.5)
    check("dry bulb exceeded in 0.4 %", design["dry bulb 0.4 %"].dry_bulb, 33.2, "degC", within=1.6)


@validates("Equation of time", checks.ALMANAC)
def test_equation_of_time(check: Recorder):
    """Its extremes; half a minute for the cycle of leap years."""
    for date, day, minutes in (
        ("11 February", 42.0, -14.2),
        ("14 May", 134.0, 3.7),
        ("26 July", 207.0, -6.5),
        ("3 November", 307.0, 16.4),
    ):
        check(date, 60 * equation_of_time(np.array([day]))[0], minutes, "min", within=0.5)


@validates("Relative humidity over water and over ice", checks.SMITHSONIAN)
def test_relative_humidity_over_water_and_over_ice(check: Recorder):
    """At -10 degC with a dew point of -20 degC. Saturation in hPa at -10 degC 2.863 and 2.597, at -20 degC
    1.254 and 1.032, over water and over ice; 0.5 % for the formula.
    """
    t, dew = np.array([-10.0]), np.array([-20.0])
    over_water, over_ice = (relative_humidity_from_dew_point(t, dew, phase)[0] for phase in ("water", "ice"))
    check("over water", over_water, 100 * 1.254 / 2.863, "%", rel=0.005)
    check("over ice", over_ice, 100 * 1.032 / 2.597, "%", rel=0.005)
    assert better_phase(np.full(30, -10.0), np.full(30, -20.0), np.full(30, 43.8)) == "water"
    assert better_phase(np.full(30, -10.0), np.full(30, -20.0), np.full(30, 39.7)) == "ice"


@validates("Dew point from relative humidity", checks.TABLE_3_MEMORY)
def test_dew_point_from_relative_humidity(check: Recorder):
    """25 degC at 50 %: half of 3.1697 kPa, between 1.4979 kPa at 13 and 1.5987 kPa at 14 degC. The
    enhancement factor cancels to 0.01 K, as much again for the straight line between the rows.
    """
    dew = dew_point_from_relative_humidity(np.array([25.0]), np.array([50.0]), np.array([101_325.0]), "water")
    check("25 degC, 50 %", dew[0], 13.0 + (1.58485 - 1.4979) / (1.5987 - 1.4979), "degC", within=0.02)


# --- real files, where they are at hand ---------------------------------------------------------------------


def test_a_real_epw_of_reanalysis_data():
    """Unnamed site, months of twelve years, and a header that says UTC+1 over rows that are in UTC."""
    path = shared_weather() / "tmy_45.000_8.000_2005_2023.epw"
    with path.open(newline="") as stream:
        table = list(csv.reader(stream))[8:]
    year = read_weather(path, PLAIN)
    np.testing.assert_array_equal(year.dry_bulb, [float(row[6]) for row in table])
    np.testing.assert_array_equal(year.dew_point, [float(row[7]) for row in table])
    np.testing.assert_array_equal(year.pressure, [float(row[9]) for row in table])
    assert year.site == "tmy_45.000_8.000_2005_2023"
    assert len(find(year, "names no site")) == 1
    assert year.calendar == "typical"
    assert year.source_years == (2018, 2007, 2009, 2013, 2008, 2006, 2011, 2010, 2020, 2006, 2007, 2016)
    assert year.utc_offset == 1.0
    # the same year in the service's own CSV: values hold 0.1761 h after the full hour in UTC, so in rows that
    # are taken for means over the hour, and whose header is an hour off, the sun is 0.676 h early
    (told,) = find(year, "culminates")
    off = float(told.what.split("culminates ")[1].split(" h")[0])
    assert off == pytest.approx(1.0 - 0.5 + 0.1761, abs=0.05)
    assert "earlier" in told.what
    assert find(read_weather(path, WeatherOptions(cache=False, utc_offset=0.0)), "culminates") == []


def test_a_real_epw_agrees_with_the_same_year_as_csv():
    folder = shared_weather()
    year = read_weather(folder / "tmy_45.000_8.000_2005_2023.epw", PLAIN)
    with (folder / "tmy_45.000_8.000_2005_2023.csv").open(newline="") as stream:
        lines = stream.read().splitlines()
    start = next(i for i, line in enumerate(lines) if line.startswith("time(UTC)"))
    table = np.array([[float(x) for x in line.split(",")[1:3]] for line in lines[start + 1 : start + 8761]])
    np.testing.assert_array_equal(year.dry_bulb, table[:, 0])
    # the CSV gives humidity only, in hundredths of a percent; the EPW's dew points come from it
    by_humidity = read_weather(
        folder / "tmy_45.000_8.000_2005_2023.epw", WeatherOptions(cache=False, humidity="relative_humidity")
    )
    assert np.abs(by_humidity.dew_point - year.dew_point).max() < 2.0
    assert np.quantile(np.abs(by_humidity.dew_point - year.dew_point), 0.99) < 0.15


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("tmy_45.000_8.000_2005_2023.csv", "PVGIS"),
        ("tmy_45.000_8.000_2005_2023.json", "JSON"),
        ("test_psm4_tmy-2023.csv", "National Solar Radiation Database"),
    ],
)
def test_other_open_formats_are_refused_with_what_is_read(name, words):
    with pytest.raises(WeatherError, match=f"{words}.*EPW, TMY3, TMY2"):
        read_weather(shared_weather() / name, PLAIN)
