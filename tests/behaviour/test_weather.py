"""Reading weather files: each trap of the three formats, on files of an invented place."""

from __future__ import annotations

import gzip
import io
import os
import subprocess
import sys
import zipfile
from datetime import date
from pathlib import Path

import numpy as np
import pytest
from behaviour import weather_files as wf

from estimator.errors import WeatherError
from estimator.weather import WeatherOptions, WeatherYear, read_weather

PLAIN = WeatherOptions(cache=False)


@pytest.fixture
def read(tmp_path):
    """Write bytes to a file and read it, without the cache."""

    def _read(data: bytes, name: str = "made.epw", **options) -> WeatherYear:
        path = tmp_path / name
        path.write_bytes(data)
        return read_weather(path, WeatherOptions(cache=False, **options))

    return _read


@pytest.fixture
def refusal(read):
    """The message with which a file is refused."""

    def _refusal(data: bytes, name: str = "made.epw", **options) -> str:
        with pytest.raises(WeatherError) as caught:
            read(data, name, **options)
        assert name in caught.value.where
        return str(caught.value)

    return _refusal


def rows(**year) -> list[list[str]]:
    return wf.epw_rows(wf.Year(**year))


def repairs(year: WeatherYear) -> dict[str, tuple[int, str]]:
    return {r.what: (r.count, r.where) for r in year.repairs}


def repair(year: WeatherYear, words: str) -> tuple[int, str]:
    """Count and place of the one repair whose text holds ``words``."""
    (found,) = [r for r in year.repairs if words in r.what]
    return found.count, found.where


def finding(year: WeatherYear, words: str):
    (found,) = [f for f in year.findings if words in f.what]
    return found


# --- the three formats --------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("format_", "data"),
    [
        ("EPW", wf.epw()),
        ("TMY3", wf.text(wf.tmy3())),
        ("TMY3", wf.text(wf.tmy3(midnight="00:00"))),
        ("TMY2", wf.text(wf.tmy2())),
    ],
    ids=["EPW", "TMY3", "TMY3 midnight as 00:00", "TMY2"],
)
def test_the_same_year_reads_the_same_from_every_format(read, format_, data):
    made = wf.Year()
    year = read(data, "told-by-content.txt")
    assert year.format == format_
    assert year.site.upper() == wf.SITE.upper()
    assert (year.latitude, year.longitude, year.elevation, year.utc_offset) == (40.0, -75.0, 300.0, -5.0)
    assert year.hours == 8760
    assert year.calendar == "typical"
    assert year.source_years == wf.YEARS
    stamps = [s[1:] for s in made.stamps]
    assert list(zip(year.month, year.day, year.hour, strict=True)) == stamps
    np.testing.assert_array_equal(year.dry_bulb, made.dry_bulb)
    np.testing.assert_array_equal(year.dew_point, made.dew_point)
    np.testing.assert_array_equal(year.pressure, made.pressure)
    np.testing.assert_array_equal(year.global_horizontal, made.radiation)
    np.testing.assert_array_equal(year.wind_speed, made.wind)
    assert year.repairs == ()
    assert year.findings == ()
    assert not year.synthetic


def test_the_last_hour_of_december_belongs_to_december(read):
    for data in (wf.epw(), wf.text(wf.tmy3()), wf.text(wf.tmy3(midnight="00:00")), wf.text(wf.tmy2())):
        year = read(data)
        assert year.label(0) == "01-01 00:00"
        assert year.label(8759) == "12-31 23:00"
        assert year.dry_bulb[-1] == wf.Year().dry_bulb[-1]


def test_arrays_are_read_only(read):
    year = read(wf.epw())
    with pytest.raises(ValueError, match="read-only"):
        year.dry_bulb[0] = 0.0


def test_humidity_ratio_is_that_of_the_dew_point(read):
    year = read(wf.epw())
    i = int(year.dew_point.argmax())
    # ideal gas with Bolton's vapour pressure and the enhancement factor of about 1.004
    e = 1.004 * 100.0 * float(wf.magnus(year.dew_point[i]))
    assert year.humidity_ratio[i] == pytest.approx(0.62198 * e / (year.pressure[i] - e), rel=0.003)


# --- containers and encodings -------------------------------------------------------------------------------


def test_gzip_and_zip_give_the_same_year(read):
    data = wf.epw()
    plain = read(data)
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("readme.txt", "nothing")
        archive.writestr("site.stat", "more, of nothing\n")
        archive.writestr("inner/made.epw", data)
    for packed, name in ((gzip.compress(data, 1), "made.epw"), (buffer.getvalue(), "made.dat")):
        year = read(packed, name)
        np.testing.assert_array_equal(year.dry_bulb, plain.dry_bulb)
        assert year.sha256 != plain.sha256


def zipped(**members: bytes) -> bytes:
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w") as archive:
        for name, data in members.items():
            archive.writestr(name.replace("_", "."), data)
    return buffer.getvalue()


def test_a_zip_must_hold_exactly_one_weather_file(refusal):
    two = refusal(zipped(a_epw=wf.epw(), b_csv=wf.text(wf.tmy3())), "two.zip")
    assert "2 weather files" in two
    assert "a.epw, b.csv" in two
    none = refusal(zipped(a_txt=b"hello"), "none.zip")
    assert "no weather file" in none
    assert "a.txt" in none
    assert "empty" in refusal(zipped(), "empty.zip")


@pytest.mark.parametrize("kind", ["gzip", "zip"])
def test_unpacking_is_bounded(refusal, kind):
    huge = wf.epw() + b" " * 70_000_000
    packed = gzip.compress(huge, 1) if kind == "gzip" else None
    if packed is None:
        buffer = io.BytesIO()
        with zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED, compresslevel=1) as archive:
            archive.writestr("a.epw", huge)
        packed = buffer.getvalue()
    assert "larger than 64 MB" in refusal(packed)


def test_a_damaged_archive_is_refused(refusal):
    packed = gzip.compress(wf.epw(), 1)
    assert "damaged gzip" in refusal(packed[: len(packed) // 2])
    packed = zipped(a_epw=wf.epw())
    assert "cannot be unpacked" in refusal(packed[: len(packed) // 2])


@pytest.mark.parametrize(
    "change",
    [
        lambda data: b"\xef\xbb\xbf" + data,
        lambda data: data.replace(b"\n", b"\r\n"),
        lambda data: data.replace(b"\n", b"\r"),
        lambda data: data.replace(b"\n", b"\n\n"),
        lambda data: data + b"\n \n\x1a",
        lambda data: data.rstrip(),
        lambda data: data.decode().encode("utf-16"),
    ],
    ids=["BOM", "CRLF", "CR", "blank lines", "end-of-file mark", "no last line end", "UTF-16"],
)
def test_line_ends_and_marks_do_not_matter(read, change):
    for made in (wf.epw(), wf.text(wf.tmy3()), wf.text(wf.tmy2())):
        np.testing.assert_array_equal(read(change(made)).dry_bulb, wf.Year().dry_bulb)


def test_line_numbers_count_blank_lines(refusal):
    data = wf.epw(wf.put(rows(), "dry bulb", 0, "warm")).replace(b"\n", b"\n\n")
    assert "line 17, column dry bulb" in refusal(data)


@pytest.mark.parametrize("encoding", ["utf-8", "latin-1"])
def test_site_names_keep_their_letters(read, encoding):
    header = wf.epw_header(site="Grünmoor")
    data = wf.epw(rows(), header).decode().encode(encoding)
    assert read(data).site == "Grünmoor"


# --- what is not a weather file -----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("data", "words"),
    [
        (b"", "is empty"),
        (b"\n\n  \n", "is empty"),
        (b"\x89PNG\x00\x01\x02", "binary"),
        (b'{"inputs": {}}', "JSON"),
        (b"<!DOCTYPE html><html></html>", "web page"),
        (b"Latitude (decimal degrees): 45.000\nLongitude (decimal degrees): 8.000\n", "PVGIS"),
        (
            b",Year,Month,Day,Hour,Minute,Temperature,Dew Point\n0,2020,1,1,0,30,-11.4,-15\n",
            "National Solar Radiation Database",
        ),
        (b"time,temperature\n1,2\n", "neither an EPW nor a TMY3 header"),
        (b"Dear reader\n", "none of their headers"),
    ],
)
def test_other_files_are_refused_with_what_is_read(refusal, data, words):
    message = refusal(data, "other.dat")
    assert words in message
    assert "EPW, TMY3, TMY2" in message


def test_a_missing_file_a_folder_and_an_unreadable_name(tmp_path):
    for path, words in ((tmp_path / "gone.epw", "no such file"), (tmp_path, "folder")):
        with pytest.raises(WeatherError, match=words):
            read_weather(path, PLAIN)
    with pytest.raises(WeatherError, match=r"no such file|cannot be read"):
        read_weather("a\0b", PLAIN)


def test_a_header_without_rows(refusal):
    assert "no rows" in refusal(wf.epw([]))
    assert "no rows" in refusal(wf.text(wf.tmy3()[:2]))
    assert "no rows" in refusal(wf.text(wf.tmy2()[:1]))
    assert "DATA PERIODS" in refusal("\n".join(wf.epw_header()[:7]).encode())


def test_rows_shorter_than_an_hour_are_refused(refusal):
    periods = "DATA PERIODS,1,4,Data,Monday, 1/ 1,12/31"
    assert "4 records an hour" in refusal(wf.epw(rows(), wf.epw_header(periods=periods)))
    half = rows()
    wf.put(half, "minute", slice(1, None, 2), "30")
    assert "minute 30" in refusal(wf.epw(half))
    lines = wf.tmy3()
    lines[2] = lines[2].replace("01:00", "00:30")
    assert "line 3, column Time" in refusal(wf.text(lines))


# --- cut off, split, text -----------------------------------------------------------------------------------


def test_a_last_line_that_is_cut_off(refusal):
    cut = wf.epw()[:-60]
    kept = cut.splitlines()[-1].count(b",") + 1
    assert f"line 8768: {kept} fields" in refusal(cut)
    lines = wf.tmy3()
    lines[-1] = lines[-1][:40]
    assert "line 8762" in refusal(wf.text(lines))
    lines = wf.tmy2()
    lines[-1] = lines[-1][:100]
    assert "line 8761: the line is 100 characters" in refusal(wf.text(lines))


def test_a_decimal_comma_is_told_by_the_number_of_fields(refusal):
    assert "line 109: 36 fields" in refusal(wf.epw(wf.put(rows(), "dry bulb", 100, "12,5")))


def test_old_files_of_fewer_columns_are_read(read):
    assert read(wf.epw([row[:32] for row in rows()])).hours == 8760


def test_header_lines_padded_by_a_spreadsheet_are_read(read):
    header = [line + "," * 24 for line in wf.epw_header()]
    assert read(wf.epw(rows(), header)).site == wf.SITE


@pytest.mark.parametrize("column", ["dry bulb", "dew point", "relative humidity", "pressure", "wind speed"])
def test_text_where_a_number_belongs(refusal, column):
    message = refusal(wf.epw(wf.put(rows(), column, 2032, "missing")))
    assert f"line 2041, column {column}" in message
    assert "'missing'" in message


def test_text_in_the_time_columns(refusal):
    assert "line 15: '2003,1,1,seven,0'" in refusal(wf.epw(wf.put(rows(), "hour", 6, "seven")))
    lines = wf.tmy3()
    lines[10] = "2003-01-01" + lines[10][10:]
    assert "line 11: '2003-01-01" in refusal(wf.text(lines))
    lines = wf.tmy2()
    lines[10] = lines[10][:3] + "xx" + lines[10][5:]
    assert "line 11" in refusal(wf.text(lines))


def test_text_in_tmy3_and_tmy2(refusal):
    lines = wf.tmy3()
    lines[50] = lines[50].replace(",A,7", ",A,7", 1).replace(f"{wf.Year().dry_bulb[48]:.1f},A", "x,A", 1)
    assert "line 51, column dry bulb: 'x'" in refusal(wf.text(lines))
    lines = wf.tmy2()
    lines[50] = lines[50][:67] + " 1-2" + lines[50][71:]
    assert "line 51, column dry bulb: '1-2'" in refusal(wf.text(lines))


@pytest.mark.parametrize(
    ("column", "text", "words"),
    [
        ("month", "13", "month 13"),
        ("day", "31", "day 31"),
        ("hour", "0", "hour 0"),
        ("hour", "25", "hour 25"),
    ],
)
def test_dates_that_do_not_exist(refusal, column, text, words):
    made = wf.Year()
    row = made.row(4, 30, 5)
    message = refusal(wf.epw(wf.put(wf.epw_rows(made), column, row, text)))
    assert f"line {row + 9}, column {column}: {words}" in message


def test_a_stray_quotation_mark(refusal):
    assert "line 19: a quotation mark" in refusal(wf.epw(wf.put(rows(), "flags", 10, '"')))


# --- hours --------------------------------------------------------------------------------------------------


def test_a_29_february_stays_whole(read):
    for made in (wf.Year(leap=True), wf.Year(leap=True, years=(2003,) * 12)):
        for data in (wf.epw(wf.epw_rows(made)), wf.text(wf.tmy3(made)), wf.text(wf.tmy2(made))):
            year = read(data)
            assert year.hours == 8784
            assert year.calendar == "typical"  # 2003 had no 29 February
            np.testing.assert_array_equal(year.dry_bulb, made.dry_bulb)
            assert year.label(59 * 24) == "02-29 00:00"


def test_a_repeated_row_is_dropped_and_counted(read):
    made = rows()
    year = read(wf.epw(made[:101] + made[100:]))
    assert year.hours == 8760
    assert repair(year, "repeated word for word") == (1, "01-05 04:00 (line 110)")


def test_two_rows_that_differ_for_one_hour_are_refused(refusal):
    made = rows()
    other = wf.put([list(made[100])], "dry bulb", 0, "1.0")
    message = refusal(wf.epw(made[:101] + other + made[101:]))
    assert "01-05 04:00: two different rows" in message
    assert "lines 109 and 110" in message


def test_rows_out_of_order_are_put_in_order_and_counted(read):
    made = rows()
    made[500], made[501] = made[501], made[500]
    year = read(wf.epw(made))
    np.testing.assert_array_equal(year.dry_bulb, wf.Year().dry_bulb)
    assert repair(year, "put in its place") == (1, "01-21 20:00 (line 510)")


def test_a_file_that_starts_in_july(read):
    made = rows()
    year = read(wf.epw(made[4344:] + made[:4344]))
    np.testing.assert_array_equal(year.dry_bulb, wf.Year().dry_bulb)
    assert repair(year, "put in its place")[0] == 4344


def test_missing_hours_are_interpolated_and_counted(read):
    made = rows()
    t = wf.Year().dry_bulb
    year = read(wf.epw(made[:1000] + made[1003:]))
    assert repair(year, "hour without a row") == (3, year.label(1000))
    np.testing.assert_allclose(
        year.dry_bulb[1000:1003], t[999] + (t[1003] - t[999]) * np.array([1, 2, 3]) / 4
    )
    assert np.isnan(year.wind_speed[1000:1003]).all()
    assert year.repaired.sum() == 3


def test_a_gap_over_new_year_is_bridged_to_the_other_end(read):
    made = rows()
    t = wf.Year().dry_bulb
    year = read(wf.epw(made[1:-1]))
    np.testing.assert_allclose(
        year.dry_bulb[[-1, 0]], t[-2] + (t[1] - t[-2]) * np.array([1, 2]) / 3, atol=1e-9
    )


def test_a_long_gap_is_refused_with_its_place(read, refusal):
    made = rows()
    data = wf.epw(made[:1000] + made[1007:])
    message = refusal(data)
    assert f"{wf.Year().stamps[1000][1]:02d}-" in message
    assert "02-11 16:00: no dry bulb for 7 hours in a row" in message
    assert "at most 6 hours" in message
    assert read(data, max_gap_hours=7).hours == 8760


@pytest.mark.parametrize("part", [slice(0, 4380), slice(0, 1), slice(0, None, 3), slice(744, 8000)])
def test_a_part_of_a_year_is_refused(refusal, part):
    assert "one whole year" in refusal(wf.epw(rows()[part]))


def test_every_third_hour_missing_is_not_an_hourly_year(refusal):
    made = [row for i, row in enumerate(rows()) if i % 8]
    assert "one whole year" in refusal(wf.epw(made))
    coded = rows()
    wf.put(coded, "dry bulb", slice(0, None, 8), "99.9")
    assert "at most 10%" in refusal(wf.epw(coded))


def test_a_month_without_rows(refusal):
    assert "month 2: a month without rows" in refusal(wf.epw([r for r in rows() if r[1] != "2"]))


def test_two_years_in_one_file(refusal):
    two = rows(years=(2013,) * 12) + rows(years=(2014,) * 12)
    assert "years 2013, 2014" in refusal(wf.epw(two))


# --- calendar -----------------------------------------------------------------------------------------------


def test_an_observed_year_keeps_its_own_weekdays(read):
    year = read(wf.epw(rows(years=(2013,) * 12)))
    assert year.calendar == "observed"
    assert year.source_years == (2013,) * 12
    assert "taken as observed" in finding(year, "2013:").what
    for i in (0, 1416, 8759):
        assert year.weekday[i] == date(2013, year.month[i], year.day[i]).weekday()
    assert "Monday" in finding(year, "the header calls the first day").what


def test_an_observed_leap_year_whose_leap_day_was_left_out(read):
    year = read(wf.epw(rows(years=(2012,) * 12)))
    assert year.calendar == "observed"
    assert finding(year, "no 29 February").where == "02-29 00:00"
    assert year.weekday[-1] == date(2012, 12, 31).weekday()


def test_one_year_that_the_header_calls_typical(read):
    made = rows(years=(2010,) * 12)
    for header in (wf.epw_header(source="TMY3"), wf.epw_header(comment="a typical year of ten")):
        year = read(wf.epw(made, header))
        assert year.calendar == "typical"
        assert not [f for f in year.findings if "2010" in f.what]


def test_a_typical_year_starts_on_a_monday_unless_set(read):
    data = wf.epw(rows(), wf.epw_header(periods="DATA PERIODS,1,1,Data,Sunday, 1/ 1,12/31"))
    year = read(data)
    assert (year.weekday[0], year.weekday[23], year.weekday[24], year.weekday[7 * 24]) == (0, 0, 1, 0)
    assert "Sunday" in finding(year, "first day").what
    chosen = read(data, first_weekday=6)
    assert chosen.weekday[0] == 6
    assert chosen.findings == ()


def test_stated_daylight_saving_is_told(read):
    header = wf.epw_header(saving="HOLIDAYS/DAYLIGHT SAVINGS,No,3/12,11/5,0")
    assert "3/12 to 11/5" in finding(read(wf.epw(rows(), header)), "daylight saving").what


# --- missing values -----------------------------------------------------------------------------------------


def test_epw_codes_are_missing_never_data(read):
    made = wf.Year()
    data = wf.epw_rows(made)
    wf.put(data, "dry bulb", slice(100, 103), "99.9")
    wf.put(data, "dew point", slice(200, 202), "99.9")
    wf.put(data, "relative humidity", 300, "999")
    wf.put(data, "pressure", slice(400, 404), "999999")
    wf.put(data, "global", slice(500, 505), "9999")
    wf.put(data, "wind speed", 600, "999")
    wf.put(data, "wind direction", 600, "999")
    year = read(wf.epw(data))
    assert repair(year, "dry bulb missing") == (3, "01-05 04:00")
    assert repair(year, "dew point missing, derived") == (2, "01-09 08:00")
    assert repair(year, "pressure missing, interpolated") == (4, "01-17 16:00")
    assert finding(year, "global horizontal radiation missing").count == 5
    assert np.isnan(year.global_horizontal).sum() == 5
    assert finding(year, "wind speed missing").count == 1
    assert finding(year, "wind direction missing").count == 1
    # the humidity column is whole percents: 0.5 % of it is at most 0.13 K of dew point here
    np.testing.assert_allclose(year.dew_point[200:202], made.dew_point[200:202], atol=0.15)
    assert year.repaired.sum() == 3 + 2 + 4


@pytest.mark.parametrize("text", ["", "NA", "-9999", "-999", "9999"])
def test_blanks_and_codes_of_other_formats_are_missing_too(read, text):
    assert repair(read(wf.epw(wf.put(rows(), "dry bulb", 9, text))), "dry bulb missing") == (1, "01-01 09:00")


def test_tmy3_and_tmy2_codes(read):
    made = wf.Year()
    lines = wf.tmy3()
    parts = lines[102].split(",")
    parts[13] = parts[16] = parts[22] = parts[4] = "-9900"
    lines[102] = ",".join(parts)
    year = read(wf.text(lines))
    at = year.label(100)
    assert repairs(year) == {
        "dry bulb missing, interpolated": (1, at),
        "pressure missing, interpolated": (1, at),
        "dew point missing, derived from relative humidity": (1, at),
    }
    assert finding(year, "global horizontal radiation missing").where == at

    lines = wf.tmy2()
    line = lines[101]
    lines[101] = line[:67] + "9999" + line[71:73] + "9999" + line[77:79] + "999" + line[82:]
    year = read(wf.text(lines))
    assert repair(year, "dry bulb missing") == (1, at)
    assert repair(year, "dew point and relative humidity missing") == (1, at)
    t = made.dry_bulb
    assert year.dry_bulb[100] == pytest.approx((t[99] + t[101]) / 2)


def test_a_blank_tmy2_field_is_missing(read):
    lines = wf.tmy2()
    lines[101] = lines[101][:67] + "    " + lines[101][71:]
    assert repair(read(wf.text(lines)), "dry bulb missing")[0] == 1


def test_a_real_999_is_no_code(read):
    data = wf.put(rows(), "global", 12, "999")
    assert read(wf.epw(data)).global_horizontal[12] == 999.0
    lines = wf.tmy2()
    lines[101] = lines[101][:84] + " 999" + lines[101][88:]
    assert read(wf.text(lines)).pressure[100] == 99_900.0


def test_columns_without_any_value_are_none(read):
    data = rows()
    for column in ("global", "direct", "diffuse"):
        wf.put(data, column, slice(None), "9999")
    wf.put(data, "wind speed", slice(None), "999")
    year = read(wf.epw(data))
    assert year.global_horizontal is None
    assert year.direct_normal is None
    assert year.diffuse_horizontal is None
    assert year.wind_speed is None
    assert finding(year, "no wind speed")


# --- implausible values -------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("column", "text", "allowed"),
    [
        ("dry bulb", "75.0", "-90..65 degC"),
        ("dry bulb", "-95.5", "-90..65 degC"),
        ("dry bulb", "inf", "-90..65 degC"),
        ("dew point", "45", "-90..40 degC"),
        ("relative humidity", "120", "0..110 %"),
        ("relative humidity", "-3", "0..110 %"),
    ],
)
def test_values_that_no_weather_has_are_refused(refusal, column, text, allowed):
    message = refusal(wf.epw(wf.put(rows(), column, 2032, text)))
    assert f"line 2041, column {column}" in message
    assert text.rstrip("0").rstrip(".") in message
    assert allowed in message


def test_implausible_wind_and_radiation_are_set_missing_and_counted(read):
    data = wf.put(rows(), "wind speed", 10, "120")
    wf.put(data, "wind direction", slice(20, 22), "400")
    wf.put(data, "direct", 30, "5000")
    wf.put(data, "diffuse", 31, "-4")
    year = read(wf.epw(data))
    assert repair(year, "wind speed outside 0..90 m/s") == (1, year.label(10))
    assert repair(year, "wind direction outside 0..360") == (2, year.label(20))
    assert repair(year, "direct normal radiation outside") == (1, year.label(30))
    assert repair(year, "diffuse horizontal radiation below zero") == (1, year.label(31))
    assert np.isnan(year.direct_normal[30])
    assert year.diffuse_horizontal[31] == 0.0
    assert not year.repaired.any()


# --- humidity -----------------------------------------------------------------------------------------------


def test_a_dew_point_above_the_dry_bulb_is_lowered_and_counted(read):
    made = wf.Year()
    data = wf.epw_rows(made)
    wf.put(data, "dew point", 100, f"{made.dry_bulb[100] + 0.1:.1f}")
    wf.put(data, "dew point", 200, f"{made.dry_bulb[200] + 2.5:.1f}")
    year = read(wf.epw(data))
    assert repair(year, "lowered to it (by 2.5 K at most)") == (2, "01-05 04:00")
    assert (year.dew_point <= year.dry_bulb).all()
    assert year.dew_point[200] == made.dry_bulb[200]


def test_swapped_columns_are_refused(refusal):
    data = rows()
    for row in data:
        row[6], row[7] = row[7], row[6]
    assert "columns may be swapped" in refusal(wf.epw(data))


def test_columns_that_disagree_are_told_with_who_governs(read):
    made = wf.Year()
    data = wf.epw_rows(made)
    hot = made.row(7, 10, 12)
    for i in range(hot, hot + 3):
        wf.put(data, "relative humidity", i, f"{made.humidity[i] - 20:.0f}")
    dew = read(wf.epw(data))
    told = finding(dew, "disagree")
    assert (told.count, told.where) == (3, "07-10 12:00")
    assert "the dew point governs" in told.what
    assert dew.dew_point[hot] == made.dew_point[hot]
    points = float(told.what.split("by up to ")[1].split(" points")[0])
    assert points == pytest.approx(20.0, abs=1.0)  # whole percents, and another vapour pressure formula

    humidity = read(wf.epw(data), humidity="relative_humidity")
    assert "the relative humidity governs" in finding(humidity, "disagree").what
    kelvin = float(told.what.split(" or ")[1].split(" K")[0])
    assert kelvin == pytest.approx(
        float((made.dew_point - humidity.dew_point)[hot : hot + 3].max()), abs=0.06
    )
    # Bolton's formula inverted, on the columns as written
    e = (made.humidity[hot] - 20) / 100 * float(wf.magnus(made.dry_bulb[hot]))
    x = np.log(e / 6.112)
    assert humidity.dew_point[hot] == pytest.approx(243.5 * x / (17.67 - x), abs=0.05)


def test_below_freezing_the_columns_are_compared_over_the_phase_that_fits(read):
    cold = wf.Year(cold=25.0)
    assert (cold.dry_bulb < 0).sum() > 4000
    assert read(wf.epw(wf.epw_rows(cold))).findings == ()  # the helper writes humidity over water

    # over ice: August-Roche-Magnus with ice coefficients of Buck 1981
    def ice(t):
        return 6.1115 * np.exp(22.452 * t / (272.55 + t))

    over_ice = wf.Year(cold=25.0)
    below = over_ice.dry_bulb < 0
    meant = 100 * ice(over_ice.dew_point) / ice(over_ice.dry_bulb)
    over_ice.humidity = np.where(below, np.round(meant), over_ice.humidity)
    over_ice.humidity = np.where(
        ~below & (over_ice.dew_point < 0),
        np.round(100 * ice(over_ice.dew_point) / wf.magnus(over_ice.dry_bulb)),
        over_ice.humidity,
    )
    assert read(wf.epw(wf.epw_rows(over_ice))).findings == ()


def test_one_humidity_column_missing_altogether(read):
    made = wf.Year()
    year = read(wf.epw(wf.put(rows(), "dew point", slice(None), "99.9")))
    assert repair(year, "derived from relative humidity")[0] == 8760
    warm = made.dew_point > 0
    # half a percent of humidity is 0.5/RH of the vapour pressure, whose slope is over 6.2 %/K here
    np.testing.assert_array_less(
        np.abs(year.dew_point - made.dew_point)[warm], (0.5 / made.humidity / 0.062 + 0.03)[warm]
    )
    year = read(wf.epw(wf.put(rows(), "relative humidity", slice(None), "999")), humidity="relative_humidity")
    assert repair(year, "the file's dew point used")[0] == 8760
    np.testing.assert_array_equal(year.dew_point, made.dew_point)


def test_both_humidity_columns_missing(read, refusal):
    data = wf.put(
        wf.put(rows(), "dew point", slice(50, 54), "99.9"), "relative humidity", slice(50, 54), "999"
    )
    assert repair(read(wf.epw(data)), "dew point and relative humidity missing") == (4, "01-03 02:00")
    data = wf.put(
        wf.put(rows(), "dew point", slice(50, 60), "99.9"), "relative humidity", slice(50, 60), "999"
    )
    assert "no dew point or relative humidity for 10 hours" in refusal(wf.epw(data))
    data = wf.put(wf.put(rows(), "dew point", slice(None), ""), "relative humidity", slice(None), "")
    assert "in the whole file" in refusal(wf.epw(data))


# --- pressure and elevation ---------------------------------------------------------------------------------

#: Standard atmosphere at 500 m and 2000 m, ASHRAE Handbook Fundamentals 2021, ch. 1, table 1
STANDARD = {500: 95_461.0, 2000: 79_495.0}


def test_pressure_missing_all_year_gives_the_standard_atmosphere(read):
    data = wf.epw(wf.put(rows(), "pressure", slice(None), "999999"), wf.epw_header(elevation=2000))
    year = read(data)
    assert repair(year, "standard atmosphere at 2000 m used")[0] == 8760
    np.testing.assert_allclose(year.pressure, STANDARD[2000], rtol=1e-4)


def test_a_long_run_without_pressure_gives_the_standard_atmosphere(read):
    year = read(wf.epw(wf.put(rows(), "pressure", slice(100, 120), "999999"), wf.epw_header(elevation=500)))
    assert repair(year, "standard atmosphere") == (20, "01-05 04:00")
    np.testing.assert_allclose(year.pressure[100:120], STANDARD[500], rtol=1e-4)


def test_pressure_that_no_weather_brings_about(read):
    year = read(wf.epw(wf.put(rows(), "pressure", slice(7, 9), "80000"), wf.epw_header(elevation=500)))
    count, where = repair(year, "impossible at 500 m (-16% off")  # 80.0 / 95.461
    assert (count, where) == (2, "01-01 07:00")
    np.testing.assert_allclose(year.pressure[7:9], STANDARD[500], rtol=1e-4)
    sea_level = wf.put(rows(), "pressure", slice(None), "101300")
    year = read(wf.epw(sea_level, wf.epw_header(elevation=2000)))
    assert repair(year, "impossible at 2000 m (+27% off")[0] == 8760


def test_storms_and_polar_highs_pass(read):
    data = wf.put(rows(), "pressure", 100, "89200")  # a hurricane on land
    wf.put(data, "pressure", 200, "106400")
    year = read(wf.epw(data, wf.epw_header(elevation=2)))
    assert (year.pressure[100], year.pressure[200]) == (89_200.0, 106_400.0)
    assert year.repairs == ()
    assert "mean pressure" in finding(year, "sea level").what  # 97.7 kPa at 2 m is told, all the same


def test_neither_pressure_nor_elevation(read, refusal):
    header = wf.epw_header(elevation="-9999")
    year = read(wf.epw(rows(), header))
    assert year.elevation is None
    assert finding(year, "no usable elevation")
    message = refusal(wf.epw(wf.put(rows(), "pressure", slice(None), "999999"), header))
    assert "so is the elevation" in message


def test_an_elevation_of_zero_that_the_pressure_contradicts(read):
    data = wf.put(rows(), "pressure", slice(None), "80000")
    wf.put(data, "pressure", slice(0, 4000), "80300")
    year = read(wf.epw(data, wf.epw_header(elevation=0)))
    assert year.elevation is None
    assert finding(year, "contradicts: taken as unknown")
    assert set(year.pressure) == {80_000.0, 80_300.0}


def test_a_constant_pressure_is_told(read):
    year = read(wf.epw(wf.put(rows(), "pressure", slice(None), "97700")))
    assert finding(year, "97700 Pa in every hour")


# --- site and clock -----------------------------------------------------------------------------------------


def test_a_header_of_zeros_is_unknown(read):
    year = read(wf.epw(rows(), wf.epw_header(latitude=0, longitude=0, zone=0, elevation=0)))
    assert (year.latitude, year.longitude, year.elevation) == (None, None, None)
    assert finding(year, "no usable latitude")
    assert finding(year, "no usable elevation")


@pytest.mark.parametrize("latitude", [91, -100])
def test_places_that_the_earth_does_not_have(refusal, latitude):
    assert "line 1, latitude" in refusal(wf.epw(rows(), wf.epw_header(latitude=latitude)))


@pytest.mark.parametrize("site", ["unknown", "", "-", "Unknown"])
def test_a_site_without_a_name_takes_the_file_s(read, site):
    data = wf.epw(rows(), wf.epw_header(site=site))
    assert read(data, "Upper Fen.epw").site == "Upper Fen"
    year = read(gzip.compress(data, 1), "Upper Fen.epw.gz")
    assert year.site == "Upper Fen"
    assert finding(year, "names no site")


@pytest.mark.parametrize("zone", ["", "unknown", "-999"])
def test_no_time_zone(read, refusal, zone):
    header = wf.epw_header(zone=zone)
    assert "--utc-offset" in refusal(wf.epw(rows(), header))
    assert read(wf.epw(rows(), header), utc_offset=-5.0).utc_offset == -5.0


@pytest.mark.parametrize("zone", [-4.0, -6.5, 7.0])
def test_a_time_zone_that_the_radiation_contradicts(read, zone):
    """The made-up sun keeps UTC-5; a header that says otherwise is told, and nothing is shifted."""
    year = read(wf.epw(rows(), wf.epw_header(zone=zone)))
    told = finding(year, "culminates").what
    off = (-5.0 - zone + 12.0) % 24.0 - 12.0
    assert float(told.split("culminates ")[1].split(" h")[0]) == pytest.approx(abs(off), abs=0.1)
    assert ("later" in told) == (off > 0) or abs(off) > 11.5
    assert "--utc-offset" in told
    np.testing.assert_array_equal(year.dry_bulb, wf.Year().dry_bulb)
    restated = read(wf.epw(rows(), wf.epw_header(zone=zone)), utc_offset=-5.0)
    assert restated.utc_offset == -5.0
    np.testing.assert_array_equal(restated.hour, year.hour)
    np.testing.assert_array_equal(restated.dry_bulb, year.dry_bulb)
    assert [f.what for f in restated.findings if "culminates" in f.what] == []
    assert finding(restated, "as asked")


def test_without_radiation_the_longitude_speaks(read):
    data = wf.put(rows(), "global", slice(None), "9999")
    assert finding(read(wf.epw(data, wf.epw_header(zone=5.0))), "farther than any zone")


@pytest.mark.parametrize(
    "header", [wf.epw_header(source="Synthetic"), wf.epw_header(comment="this is SYNTHETIC weather")]
)
def test_a_synthetic_year_says_so(read, header):
    assert read(wf.epw(rows(), header)).synthetic


def test_a_dry_bulb_that_stays_is_told(read):
    told = finding(read(wf.epw(wf.put(rows(), "dry bulb", slice(4000, 4040), "25.0"))), "stays at 25")
    assert told.count == 40


# --- options and imports ------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "bad",
    [
        {"humidity": "wet_bulb"},
        {"max_gap_hours": -1},
        {"max_gap_hours": 2.5},
        {"max_gap_hours": 1000},
        {"utc_offset": 20.0},
        {"utc_offset": float("nan")},
        {"first_weekday": 7},
    ],
)
def test_options_outside_what_is_allowed(bad):
    with pytest.raises(WeatherError, match=next(iter(bad))):
        WeatherOptions(**bad)


def test_importing_the_package_loads_neither_pvlib_nor_pandas():
    code = (
        "import sys, estimator.weather; print([m for m in ('pvlib', 'pandas', 'scipy') if m in sys.modules])"
    )
    root = Path(__file__).parents[2]
    env = {**os.environ, "PYTHONPATH": str(root)}
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, env=env, check=True)
    assert done.stdout.strip() == "[]"


def test_tmy3_columns_that_are_not_there(read, refusal):
    lines = wf.tmy3()
    lines[1] = lines[1].replace("Dry-bulb (C)", "Dry-bulb (F)")
    assert "no column for the dry bulb" in refusal(wf.text(lines))
    lines = wf.tmy3()
    lines[1] = lines[1].replace("Dew-point (C)", "Dew-point (F)").replace("Wspd (m/s)", "Wspd (kt)")
    year = read(wf.text(lines))
    assert repair(year, "derived from relative humidity")[0] == 8760
    assert year.wind_speed is None


def test_a_file_of_hours_labelled_by_their_start_is_refused(refusal):
    lines = [f"{line[:11]}{int(line[11:13]) - 1:02d}{line[13:]}" for line in wf.tmy3()[2:]]
    assert "line 3, column hour: hour 0" in refusal(wf.text([*wf.tmy3()[:2], *lines]))
