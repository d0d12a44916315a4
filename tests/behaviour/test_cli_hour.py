"""``dewledger hour``: the air chosen, the state points, and arithmetic that can be redone by hand."""

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


def test_an_hour_that_is_off_is_shown_as_such(dewledger, busy):
    text = dewledger("hour", "-s", busy, "--air", "30 degC, 50 %, 1 bar", "--at", "07-15 10:00").stdout
    assert re.search(r"^  Mode +off$", text, re.MULTILINE)
    assert "The unit is off in this hour" in text


# the arithmetic

CASES = {
    "deep coil": ("32 degC, 65 %, 101.3 kPa",),
    "shallow coil": ("32 degC, 65 %, 101.3 kPa", "coil.bypass_factor=0.3"),
    "fog": ("30 degC, 99 %, 101.3 kPa", "coil.bypass_factor=0.3"),
    "no bypass": ("29.4 degC, wet bulb 25 degC, 900 m", "coil.bypass_factor=0"),
    "fan before the coil": ("27 degC, 60 %, 95 kPa", "fan.position=blow-through"),
    "constant volume": ("35 degC, dew point 20 degC, 80 kPa", "airflow.basis=actual"),
    "dry coil": ("38 degC, 3 g/kg, 100 kPa",),
    "winter": ("-12.5 degC, 80 %, 101 kPa",),
    "ice": (
        "20 degC, 60 %, 100 kPa", "coil.least_surface_temperature=-9 degC", "supply.dew_point=-5 degC",
    ),
    "small unit": ("31.7 degC, 21.3 g/kg, 98765 Pa", "airflow.outdoor_air=40 L/s"),
    "large unit": ("31.7 degC, 21.3 g/kg, 98765 Pa", "airflow.outdoor_air=80 m3/s"),
}  # fmt: skip


def arguments_of(case: str) -> list[str]:
    air, *settings = CASES[case]
    return ["-s", "starter", "--air", air, *(part for item in settings for part in ("--set", item))]


def worked(text: str) -> list[tuple[str, str, str]]:
    """Symbol, expression with numbers, and result of every step of the page."""
    body = text.partition("\nArithmetic\n")[2]
    joined = re.sub(r"\n {6,}(?!\s*= )(?=\S)", " ", body)
    steps = re.findall(r"^    (\w+) *= [^=\n]+\n +(?:= ([^=\n]+)\n) *= (-?[\d.]+)", joined, re.MULTILINE)
    return [(symbol, numbers.strip(), result) for symbol, numbers, result in steps]


@pytest.mark.parametrize("case", CASES)
def test_a_calculator_gets_the_figures_that_are_shown(dewledger, asked, case):
    text = dewledger("hour", *arguments_of(case)).stdout
    document = asked(*arguments_of(case))
    steps = worked(text)
    for symbol, numbers, result in steps:
        assert re.fullmatch(r"[\d.() /x+-]+", numbers), numbers
        decimals = len(result.partition(".")[2])
        value = eval(numbers.replace("x", "*"))  # digits and operators only, see the line above
        assert f"{value:.{decimals}f}".replace("-0.0000", "0.0000") == result, f"{symbol} = {numbers}"
    # one step each for the flow and for every exchange at least
    working = [e for e in document["exchanges"] if e["kw"]]
    shown = [float(result) for symbol, _, result in steps if symbol == "Q"]
    assert shown == [pytest.approx(e["kw"], abs=6e-4) for e in working]
    assert steps[0][0] == "m"


def test_fog_that_drains_is_shown(dewledger):
    text = dewledger("hour", *arguments_of("fog")).stdout
    assert "it drains" in text
    assert [symbol for symbol, _, _ in worked(text)][1:4] == ["Wm", "fog", "h2"]


def test_the_state_table_is_the_document(dewledger, asked):
    arguments = arguments_of("shallow coil")
    table = dewledger("hour", *arguments).stdout.partition("\nState points\n")[2].partition("\n\n")[0]
    for number, p in enumerate(asked(*arguments)["state_points"], 1):
        row = next(line for line in table.splitlines() if line.startswith(f"  {number} {p['name']}  "))
        assert row.split()[-6:] == [
            f"{p['dry_bulb_c']:.4f}",
            f"{1000 * p['humidity_ratio']:.4f}",
            f"{100 * p['relative_humidity']:.2f}",
            f"{p['dew_point_c']:.4f}",
            f"{p['wet_bulb_c']:.4f}",
            f"{p['enthalpy_kj_per_kg']:.4f}",
        ]


def test_the_state_table_in_inch_pound_units(dewledger, asked):
    arguments = arguments_of("deep coil")
    text = dewledger("hour", *arguments, "--units", "ip").stdout
    first = asked(*arguments)["state_points"][0]
    row = next(line for line in text.splitlines() if line.startswith("  1 outdoor  "))
    # 1 Btu/lb is 2.326 kJ/kg, 1 lb is 7000 gr
    assert row.split()[-6:] == [
        f"{first['dry_bulb_c'] * 1.8 + 32:.4f}",
        f"{7000 * first['humidity_ratio']:.4f}",
        f"{100 * first['relative_humidity']:.2f}",
        f"{first['dew_point_c'] * 1.8 + 32:.4f}",
        f"{first['wet_bulb_c'] * 1.8 + 32:.4f}",
        f"{first['enthalpy_kj_per_kg'] / 2.326:.4f}",
    ]
    assert "In SI, where the formulas need no unit factors." in text


def test_the_document_keeps_the_contract(asked, years):
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
