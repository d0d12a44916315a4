"""``dewledger hour``: the air chosen, what is refused, and the document."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from behaviour import weather_files as wf
from CoolProp.HumidAirProp import HAPropsSI


def point(document: dict, name: str) -> dict:
    return next(p for p in document["state_points"] if p["name"] == name)


@pytest.fixture
def asked(dewledger):
    """The document of one hour."""

    def run(*arguments: str) -> dict:
        result = dewledger("hour", *arguments, "--json", "-")
        assert (result.exit_code, result.stderr) == (0, ""), result.output
        return json.loads(result.stdout)

    return run


# which air


@pytest.mark.parametrize(
    ("at", "row"), [("01-01 00:00", 0), ("07-14 15:00", (181 + 13) * 24 + 15), ("12-31 23:00", 8759)]
)
def test_an_hour_of_a_file_by_its_start(asked, years, at, row):
    # rows of this format follow one header line; the first is the hour that ends at 01:00
    line = Path(years["humid"]).read_text(encoding="ascii").splitlines()[1 + row]
    outdoor = point(asked(years["humid"], "-s", "starter", "--at", at), "outdoor")
    assert outdoor["dry_bulb_c"] == int(line[67:71]) / 10
    assert outdoor["dew_point_c"] == pytest.approx(int(line[73:77]) / 10, abs=1e-5)


def test_a_day_that_only_a_leap_year_has(asked, refused, tmp_path, years):
    (tmp_path / "leap.epw").write_bytes(wf.epw(wf.epw_rows(wf.Year(leap=True, years=(2004,) * 12))))
    assert asked("leap.epw", "-s", "starter", "--at", "02-29 10:00")["mode"]
    message = refused("hour", years["humid"], "-s", "starter", "--at", "02-29 10:00")
    assert "no day 29" in message
    assert "01 to 28" in message


@pytest.mark.parametrize(
    ("at", "words"),
    [
        ("02-30 10:00", ("no day 30", "01 to 28")),
        ("06-31 10:00", ("no day 31", "01 to 30")),
        ("07-00 10:00", ("no day 0",)),
        ("13-01 00:00", ("no month 13", "01 to 12")),
        ("07-14 15:30", ("full hour", "15:00 or 16:00")),
        ("12-31 24:00", ("no hour 24", "00:00 to 23:00")),
        ("July 14, 3 pm", ("is not an hour", "MM-DD HH:00")),
        ("07-14", ("is not an hour",)),
        ("", ("is not an hour",)),
    ],
)
def test_an_hour_that_does_not_exist(refused, years, at, words):
    for message in (
        refused("hour", years["humid"], "-s", "starter", "--at", at),
        refused("hour", "-s", "starter", "--air", "30 degC, 50 %, 1 bar", "--at", at),
    ):
        assert message.startswith("--at: ")
        assert all(word in message for word in words), message


def test_air_by_relative_humidity_and_pressure(asked):
    outdoor = point(asked("-s", "starter", "--air", "32 degC, 65 %, 101.3 kPa"), "outdoor")
    assert outdoor["dry_bulb_c"] == 32
    assert outdoor["relative_humidity"] == pytest.approx(0.65, abs=1e-9)
    expected = HAPropsSI("W", "T", 305.15, "R", 0.65, "P", 101300)
    assert outdoor["humidity_ratio"] == pytest.approx(expected, rel=5e-4)


def test_air_by_dew_point_and_elevation(asked):
    document = asked("-s", "starter", "--air", "32 degC, dew point 24 degC, 1500 m")
    # standard atmosphere at 1500 m: 84.556 kPa (ASHRAE Handbook Fundamentals 2021, ch. 1, table 1)
    assert document["outdoor"]["pressure_pa"] == pytest.approx(84_556, abs=1)
    assert point(document, "outdoor")["dew_point_c"] == pytest.approx(24, abs=1e-5)


@pytest.mark.parametrize(
    ("dry_bulb", "wet_bulb", "pressure"), [(32, 26, 101325), (40, 20, 85000), (8, 3, 95000)]
)
def test_air_by_wet_bulb(asked, dry_bulb, wet_bulb, pressure):
    air = f"{dry_bulb} degC, wet bulb {wet_bulb} degC, {pressure} Pa"
    outdoor = point(asked("-s", "starter", "--air", air), "outdoor")
    expected = HAPropsSI("W", "T", dry_bulb + 273.15, "Twb", wet_bulb + 273.15, "P", pressure)
    # a wet bulb fixes W through a difference of enthalpies, each good to 0.12 kJ/kg, over some 2500 kJ/kg
    assert outdoor["humidity_ratio"] == pytest.approx(expected, abs=1e-4)
    assert outdoor["wet_bulb_c"] == pytest.approx(wet_bulb, abs=1e-5)


@pytest.mark.parametrize("text", ["12 g/kg", "0.012 kg/kg", "84 gr/lb"])
def test_air_by_humidity_ratio(asked, text):
    outdoor = point(asked("-s", "starter", "--air", f"20 degC, {text}, 14.5 psi"), "outdoor")
    assert outdoor["humidity_ratio"] == pytest.approx(0.012, rel=1e-12)


@pytest.mark.parametrize(
    ("air", "words"),
    [
        ("32 degC", ("does not have three parts", "32 degC, 65 %, 101.3 kPa")),
        ("32 degC, 65 %, 101.3 kPa, 3", ("does not have three parts",)),
        ("32 degC, , 101.3 kPa", ("does not have three parts",)),
        ("32, 65 %, 101.3 kPa", ("--air, dry bulb", "has no unit", "32 degC")),
        ("32 kg, 65 %, 101.3 kPa", ("--air, dry bulb", "'kg' is not a unit")),
        ("99 degC, 5 %, 101.3 kPa", ("--air, dry bulb", "out of range")),
        ("32 degC, 65, 101.3 kPa", ("--air, humidity", "'65 %'", "'dew point 24 degC'")),
        ("32 degC, 165 %, 101.3 kPa", ("--air, humidity", "out of range")),
        ("32 degC, 0 %, 101.3 kPa", ("--air, humidity", "drier", "0.001 g/kg")),
        ("32 degC, dew point 24, 101.3 kPa", ("--air, dew point", "has no unit")),
        ("32 degC, dew point 33 degC, 101.3 kPa", ("above the dry bulb", "at most 32 degC")),
        ("32 degC, wet bulb 33 degC, 101.3 kPa", ("above the dry bulb",)),
        ("32 degC, wet bulb 5 degC, 101.3 kPa", ("lower than that of dry air", "to 32 degC")),
        ("20 degC, 30 g/kg, 101.3 kPa", ("more water than air at 20 degC holds",)),
        # more than 0.12 kg/kg, however it is said
        ("65 degC, 100 %, 46 kPa", ("--air, humidity", "'100 %' means", "at most 120 g/kg")),
        ("65 degC, dew point 40 degC, 45 kPa", ("'dew point 40 degC' means", "at most 120 g/kg")),
        ("41 degC, wet bulb 40 degC, 45 kPa", ("'wet bulb 40 degC' means", "at most 120 g/kg")),
        ("65 degC, 121 g/kg, 101.3 kPa", ("--air, humidity", "out of range", "0 to 0.12 kg/kg")),
        ("32 degC, 65 %, 101.3", ("--air, pressure", "has no unit")),
        ("32 degC, 65 %, 10 kPa", ("--air, pressure", "out of range")),
        ("32 degC, 65 %, 9000 m", ("--air, elevation", "out of range")),
    ],
)
def test_air_that_cannot_be(refused, air, words):
    message = refused("hour", "-s", "starter", "--air", air)
    assert all(word in message for word in words), message


def test_a_design_condition(asked, dewledger, refused, years):
    weather = json.loads(dewledger("weather", years["mild"], "--json", "-").stdout)["weather"][0]
    for condition in weather["design"]:
        document = asked(years["mild"], "-s", "starter", "--design", condition["name"])
        assert point(document, "outdoor")["dry_bulb_c"] == pytest.approx(condition["dry_bulb_c"])
        assert point(document, "outdoor")["humidity_ratio"] == pytest.approx(condition["humidity_ratio"])
    message = refused("hour", years["mild"], "-s", "starter", "--design", "dew point 3 %")
    assert "dew point 0.4 %, dew point 1 %, dew point 2 %" in message


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("FILE",), ("no hour is chosen", "--at, --air or --design")),
        (("FILE", "--at", "07-14 15:00", "--design", "dew point 1 %"), ("--at and --design",)),
        (("FILE", "--air", "30 degC, 50 %, 1 bar"), ("--air and a weather file",)),
        (("--air", "30 degC, 50 %, 1 bar", "--design", "dew point 1 %"), ("--air and --design",)),
        (("--at", "07-14 15:00"), ("--at needs a weather file",)),
        (("--design", "dew point 1 %"), ("--design needs a weather file",)),
        (("nowhere.epw", "--at", "07-14 15:00"), ("nowhere.epw: no such file",)),
        (("FILE", "--at", "07-14 15:00", "--json", "no/x.json"), ("no folder",)),
        (("FILE", "--at", "07-14 15:00", "--set", "coil"), ("is not KEY=VALUE",)),
        (("FILE", "--at", "07-14 15:00", "--units", "x"), ("--units: 'x'",)),
    ],
)
def test_what_is_refused(refused, years, arguments, words):
    message = refused("hour", "-s", "starter", *(years["humid"] if a == "FILE" else a for a in arguments))
    assert all(word in message for word in words), message


# a scheme that follows the calendar


def test_a_scheduled_scheme_needs_a_time(asked, refused, busy, years):
    air = "30 degC, 50 %, 1 bar"
    assert "say when" in refused("hour", "-s", busy, "--air", air)
    # of the calendar that begins on a Monday 07-16 is a Monday, and 07-15 a Sunday, on which the unit is off
    assert asked("-s", busy, "--air", air, "--at", "07-16 10:00")["mass_flow_kg_per_s"] > 2
    off = asked("-s", busy, "--air", air, "--at", "07-15 10:00")
    assert (off["mode"], off["mass_flow_kg_per_s"]) == ("off", 0)
    # a year that begins on a Tuesday has that Monday a day earlier
    moved = asked("-s", busy, "--air", air, "--at", "07-15 10:00", "--first-weekday", "tuesday")
    assert moved["mode"] != "off"
    message = refused("hour", years["mild"], "-s", busy, "--design", "dew point 1 %")
    retry = re.search(r"--air '([^']+)' --at '([^']+)'", message)
    assert retry is not None
    assert asked("-s", busy, "--air", retry[1], "--at", retry[2])["mode"]


# the document


def test_the_document_keeps_the_contract(asked, dewledger, years):
    document = asked(years["humid"], "-s", "starter", "--at", "07-14 15:00")
    assert document["schema"] == 1
    numbers = {"dry_bulb_c", "humidity_ratio", "relative_humidity", "dew_point_c", "wet_bulb_c"}
    numbers |= {"enthalpy_kj_per_kg"}
    assert [p["name"] for p in document["state_points"]] == ["outdoor", "after coil", "after fan", "supply"]
    for p in document["state_points"]:
        assert all(isinstance(p[key], float) for key in numbers)
    for e in document["exchanges"]:
        assert set(e) >= {
            "name", "from", "to", "heat_kj_per_kg", "water_g_per_kg", "kw", "equation", "inputs",
        }  # fmt: skip
        assert all(isinstance(e[key], float) for key in ("heat_kj_per_kg", "water_g_per_kg", "kw"))
        assert all(isinstance(value, float) for value in e["inputs"].values())
    assert document["mode"] == "drying with reheat"
    assert document["unmet"] == {"dew_point": False, "warm": False, "cold": False}
    assert document["coil"]["governed_by"] == "dew point"
    year = json.loads(dewledger("year", years["humid"], "-s", "starter", "--json", "-").stdout)
    assert (document["weather"], document["scheme"]) == (year["weather"], year["scheme"])


def test_the_hour_is_that_of_the_ledger(asked, dewledger, years):
    rows = dewledger("year", years["humid"], "-s", "starter", "--hours", "-").stdout.splitlines()
    row = dict(
        zip(rows[0].split(","), next(r for r in rows if r.startswith("07-14 15:00")).split(","), strict=True)
    )
    document = asked(years["humid"], "-s", "starter", "--at", "07-14 15:00")
    coil, fan, reheat = document["exchanges"]
    assert float(row["coil_cooling_kw"]) == pytest.approx(-coil["kw"], rel=1e-9)
    assert float(row["coil_latent_kw"]) == pytest.approx(document["coil_latent_kw"], rel=1e-9)
    assert float(row["reheat_kw"]) == pytest.approx(reheat["kw"], rel=1e-9)
    assert float(row["condensate_kg_per_h"]) == pytest.approx(document["condensate_kg_per_h"], rel=1e-9)
    assert float(row["apparatus_dew_point_c"]) == pytest.approx(
        coil["inputs"]["apparatus_dew_point_c"], abs=1e-6
    )
    assert float(row["fan_kw"]) == pytest.approx(fan["inputs"]["electric_kw"], rel=1e-9)
