"""``dewledger weather``."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from behaviour import weather_files as wf


def rows_of(path: str) -> list[tuple[float, float, float]]:
    """Dry bulb, dew point and pressure of a TMY2 file by its published columns, degC and Pa."""
    lines = Path(path).read_text(encoding="ascii").splitlines()[1:]
    return [(int(line[67:71]) / 10, int(line[73:77]) / 10, int(line[84:88]) * 100.0) for line in lines]


def test_the_page_shows_place_extremes_and_humid_hours(dewledger, years):
    result = dewledger("weather", years["humid"])
    assert (result.exit_code, result.stderr) == (0, "")
    dry, dew, _ = zip(*rows_of(years["humid"]), strict=True)
    text = result.stdout
    assert "25.80 N, 80.27 W, 2 m, UTC-5" in text
    assert "01-01 00:00 to 12-31 23:00, 8 760 hours" in text
    assert "100.00 % of the hours as read" in text
    line = next(line for line in text.splitlines() if line.startswith("  Dry bulb "))
    assert line.split() == [
        "Dry", "bulb", "degC", f"{min(dry):.2f}", f"{sum(dry) / 8760:.2f}", f"{max(dry):.2f}",
    ]  # fmt: skip
    above = [sum(value > limit for value in dew) for limit in range(8, 25, 2)]
    line = next(line for line in text.splitlines() if line.startswith("  hours  "))
    # a thousands mark is one space, a gap between columns at least two
    assert [int(cell.replace(" ", "")) for cell in line.split("  ")[2:] if cell.strip()] == above
    assert "None: every hour is as read." in text


def test_inch_pound_units(dewledger, years):
    text = dewledger("weather", years["humid"], "--units", "ip").stdout
    dry = [row[0] for row in rows_of(years["humid"])]
    line = next(line for line in text.splitlines() if line.startswith("  Dry bulb "))
    assert line.split()[2:] == [
        "degF",
        *(f"{t * 1.8 + 32:.1f}" for t in (min(dry), sum(dry) / 8760, max(dry))),
    ]
    assert "gr/lb" in text
    assert "inHg" in text
    assert "degC" not in text


def test_repairs_and_findings_are_listed(dewledger, tmp_path):
    year = wf.Year()
    rows = wf.epw_rows(year)
    wf.put(rows, "dry bulb", slice(100, 103), "99.9")
    wf.put(rows, "dew point", slice(100, 103), "99.9")
    wf.put(rows, "relative humidity", slice(100, 103), "999")
    (tmp_path / "made.epw").write_bytes(wf.epw(rows))
    text = dewledger("weather", "made.epw").stdout
    repairs = text.partition("\nRepairs\n")[2].partition("\nFindings\n")[0]
    assert "3 h" in repairs
    assert "01-05 04:00" in repairs
    assert "99.97 % of the hours as read" in text
    found = json.loads(dewledger("weather", "made.epw", "--json", "-").stdout)["weather"][0]
    assert {(r["count"], r["where"]) for r in found["repairs"]} == {(3, "01-05 04:00")}
    assert found["completeness"] == pytest.approx(1 - 3 / 8760)


def test_a_bad_file_among_good_ones(dewledger, years, tmp_path):
    (tmp_path / "empty.epw").write_bytes(b"")
    result = dewledger(
        "weather", years["humid"], "empty.epw", "nowhere.epw", years["cold"], "--json", "w.json"
    )
    assert result.exit_code == 2
    assert result.stdout.count("Design values of this one year") == 2
    told = result.stderr.splitlines()
    assert len(told) == 2
    assert told[0].startswith("dewledger: empty.epw: ")
    assert told[1].startswith("dewledger: nowhere.epw: ")
    document = json.loads((tmp_path / "w.json").read_text(encoding="utf-8"))
    assert [entry["file"] for entry in document["weather"]] == [
        Path(years[n]).name for n in ("humid", "cold")
    ]
    assert [entry["file"] for entry in document["failed"]] == ["empty.epw", "nowhere.epw"]


def test_json_on_standard_output_is_nothing_but_json(dewledger, years):
    result = dewledger("weather", years["humid"], "--json", "-")
    document = json.loads(result.stdout)
    entry = document["weather"][0]
    assert document["schema"] == 1
    assert entry["dry_bulb_c"]["most"] == max(row[0] for row in rows_of(years["humid"]))
    assert [d["name"] for d in entry["design"]] == [
        f"{kind} {share} %" for kind in ("dry bulb", "dew point") for share in ("0.4", "1", "2")
    ]
    assert {entry["calendar"], entry["first_weekday"]} == {"typical", "Monday"}


def test_the_options_reach_the_reader(dewledger, tmp_path):
    rows = wf.put(wf.epw_rows(wf.Year()), "dew point", slice(200, 210), "99.9")
    wf.put(rows, "relative humidity", slice(200, 210), "999")
    (tmp_path / "made.epw").write_bytes(wf.epw(rows))
    assert dewledger("weather", "made.epw").exit_code == 2
    result = dewledger(
        "weather", "made.epw", "--max-gap", "12", "--first-weekday", "Thursday", "--utc-offset", "-6",
        "--humidity", "relative-humidity", "--no-cache", "--json", "-",
    )  # fmt: skip
    entry = json.loads(result.stdout)["weather"][0]
    assert (entry["first_weekday"], entry["utc_offset_h"]) == ("Thursday", -6.0)
    assert max(r["count"] for r in entry["repairs"]) == 10


def test_the_cache_is_used_left_alone_and_cleared(dewledger, tmp_path, monkeypatch):
    monkeypatch.setenv("DEWLEDGER_HOME", str(tmp_path / "own"))
    (tmp_path / "made.epw").write_bytes(wf.epw())
    assert dewledger("weather", "made.epw", "--no-cache").exit_code == 0
    assert dewledger("weather", "--clear-cache").stderr.startswith("dewledger: 0 ")
    first = dewledger("weather", "made.epw").stdout
    assert dewledger("weather", "made.epw").stdout == first
    result = dewledger("weather", "--clear-cache")
    assert (result.exit_code, result.stdout) == (0, "")
    assert result.stderr.startswith("dewledger: 1 ")


def test_quiet_prints_nothing_and_still_tells_what_fails(dewledger, years, tmp_path):
    result = dewledger("weather", years["humid"], "--quiet", "--json", "w.json")
    assert (result.exit_code, result.stdout, result.stderr) == (0, "", "")
    assert json.loads((tmp_path / "w.json").read_text(encoding="utf-8"))["weather"]
    result = dewledger("weather", years["humid"], "nowhere.epw", "-q")
    assert (result.exit_code, result.stdout) == (2, "")
    assert "nowhere.epw: no such file" in result.stderr


def test_a_leap_year_has_its_hours(dewledger, tmp_path):
    (tmp_path / "leap.epw").write_bytes(wf.epw(wf.epw_rows(wf.Year(leap=True, years=(2004,) * 12))))
    assert "8 784 hours" in dewledger("weather", "leap.epw").stdout


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("--json", "w.json"), ("no weather file is named",)),
        (("FILE", "--units", "metric", "-q"), ("--units: 'metric'",)),
        (("FILE", "--units", "metric"), ("--units: 'metric'", "si or ip")),
        (("FILE", "--max-gap", "99"), ("--max-gap: 99", "0..48")),
        (("FILE", "--max-gap", "some"), ("--max-gap: 'some' is not a number",)),
        (("FILE", "--utc-offset", "90"), ("--utc-offset: 90", "-12..14")),
        (("FILE", "--first-weekday", "someday"), ("--first-weekday: 'someday'", "monday")),
        (("FILE", "--humidity", "dewpoint"), ("--humidity: 'dewpoint'", "did you mean 'dew-point'?")),
        (("FILE", "--json", "no/w.json"), ("--json no/w.json", "no folder")),
        (("FILE", "--json", "FILE"), ("is a file that is read",)),
    ],
)
def test_what_is_refused(refused, years, arguments, words):
    message = refused("weather", *(years["humid"] if a == "FILE" else a for a in arguments))
    assert all(word in message for word in words), message


@pytest.mark.parametrize(
    ("content", "word"), [(b"", "empty"), (b"\x00\x01\x02" * 100, ""), (b"a,b\n1,2\n", "")]
)
def test_what_is_no_weather_file(refused, tmp_path, content, word):
    (tmp_path / "x.epw").write_bytes(content)
    assert word in refused("weather", "x.epw")
    assert "x.epw: " in refused("year", "x.epw", "--scheme", "starter", "--json", "y.json")


@pytest.mark.parametrize("target", ["weather.json", "-"])
def test_where_no_file_can_be_read_nothing_is_written(refused, tmp_path, target):
    (tmp_path / "empty.epw").touch()
    assert "is empty" in refused("weather", "empty.epw", "--json", target)
