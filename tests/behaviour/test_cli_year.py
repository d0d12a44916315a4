"""``dewledger year``: the summary, the JSON contract, the hourly ledger, and that they agree."""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from behaviour import weather_files as wf

NUMBER, WHOLE, TEXT, LIST, TABLE, FLAG = (int, float), int, str, list, dict, bool
PERIOD = {
    "coil_cooling_kwh": NUMBER, "coil_sensible_kwh": NUMBER, "coil_latent_kwh": NUMBER, "reheat_kwh": NUMBER,
    "reheat_recovered_kwh": NUMBER, "reheat_solar_kwh": NUMBER, "reheat_purchased_kwh": NUMBER,
    "cooling_undone_kwh": NUMBER, "outdoor_air_heating_kwh": NUMBER, "condensate_kg": NUMBER,
    "fan_kwh": NUMBER, "electricity_kwh": NUMBER, "fuel_kwh": NUMBER, "cost": NUMBER, "co2e_kg": NUMBER,
    "moisture_removed_per_kwh_kg": NUMBER, "hours_operating": WHOLE, "hours_drying": WHOLE,
    "hours_reheat": WHOLE, "hours_unmet": WHOLE, "hours_unmet_dew_point": WHOLE, "hours_unmet_warm": WHOLE,
    "hours_unmet_cold": WHOLE,
}  # fmt: skip
PEAKS = {
    "coil_cooling_kw": NUMBER, "coil_cooling_at": TEXT, "reheat_kw": NUMBER, "reheat_at": TEXT,
    "condensate_kg_per_h": NUMBER, "condensate_at": TEXT,
}  # fmt: skip
CONTRACT = {
    "schema": WHOLE,
    "tool": {"name": TEXT, "version": TEXT},
    "weather": {
        "file": TEXT, "sha256": TEXT, "site": TEXT, "latitude": NUMBER, "longitude": NUMBER,
        "elevation_m": NUMBER, "hours": WHOLE, "calendar": TEXT, "synthetic": FLAG, "repairs": LIST,
    },
    "scheme": {"name": TEXT, "file_sha256": TEXT, "resolved_sha256": TEXT, "settings": TABLE},
    "annual": PERIOD,
    "energy": [{"carrier": TEXT, "purpose": TEXT, "kwh": NUMBER}],
    "peaks": PEAKS,
    "seasons": [{"season": TEXT, **PERIOD, "peaks": PEAKS}],
    "months": [{"month": WHOLE, **PERIOD, "peaks": PEAKS}],
    "balance": {"heat_residual_max": NUMBER, "water_residual_max": NUMBER},
    "notes": [TEXT],
    "cautions": [TEXT],
}  # fmt: skip
#: What may be null in a period: a ratio over nothing, and the hour of a peak of 0.
NULL = {"moisture_removed_per_kwh_kg", "coil_cooling_at", "reheat_at", "condensate_at"}


def conforms(value, shape, path="document"):
    """Every key of the contract with its type; more fields are allowed."""
    if isinstance(shape, dict):
        assert isinstance(value, dict), path
        for key, inner in shape.items():
            assert key in value, f"{path}.{key} is missing"
            if value[key] is None:
                assert key in NULL, f"{path}.{key} is null"
            else:
                conforms(value[key], inner, f"{path}.{key}")
    elif isinstance(shape, list):
        assert isinstance(value, list), path
        assert value, path
        for i, item in enumerate(value):
            conforms(item, shape[0], f"{path}[{i}]")
    else:
        assert isinstance(value, shape), path
        assert shape is bool or not isinstance(value, bool), path


@pytest.fixture
def ran(dewledger, years, busy):
    """The document and the ledger of one run that leaves nothing at zero."""
    result = dewledger("year", years["mild"], "--scheme", busy, "--json", "y.json", "--hours", "h.csv", "-q")
    assert (result.exit_code, result.stdout, result.stderr) == (0, "", "")
    document = json.loads(Path("y.json").read_text(encoding="utf-8"))
    with Path("h.csv").open(encoding="utf-8", newline="") as stream:
        return document, list(csv.DictReader(stream))


def test_the_document_keeps_the_contract(ran):
    document, _ = ran
    conforms(document, CONTRACT)
    assert document["schema"] == 1
    assert document["tool"]["name"] == "dewledger"
    assert [month["month"] for month in document["months"]] == list(range(1, 13))
    assert document["weather"]["calendar"] == "typical"
    assert all(
        len(document[part][key]) == 64 for part, key in (("weather", "sha256"), ("scheme", "file_sha256"))
    )
    for path, entry in document["scheme"]["settings"].items():
        assert set(entry) >= {"value", "unit", "origin"}, path
        assert entry["origin"] in ("file", "default", "command"), path
    assert document["scheme"]["settings"]["airflow.outdoor_air"] == {
        "value": 2.0, "unit": "m3/s", "origin": "file",
    }  # fmt: skip


SUMS = {
    "coil_cooling_kwh": "coil_cooling_kw",
    "coil_sensible_kwh": "coil_sensible_kw",
    "coil_latent_kwh": "coil_latent_kw",
    "reheat_kwh": "reheat_kw",
    "cooling_undone_kwh": "cooling_undone_kw",
    "cooling_undone_by_fan_kwh": "cooling_undone_by_fan_kw",
    "cooling_undone_by_purchased_kwh": "cooling_undone_by_purchased_kw",
    "outdoor_air_heating_kwh": "outdoor_air_heating_kw",
    "preheat_kwh": "preheat_kw",
    "condensate_kg": "condensate_kg_per_h",
    "fan_kwh": "fan_kw",
    "hours_unmet_dew_point": "unmet_dew_point",
    "hours_unmet_warm": "unmet_warm",
    "hours_unmet_cold": "unmet_cold",
}


def test_sums_of_the_ledger_are_the_totals_of_each_month_and_the_year(ran):
    document, rows = ran
    assert len(rows) == 8760
    periods = [(document["annual"], rows)]
    periods += [
        (month, [row for row in rows if row["hour"].startswith(f"{month['month']:02d}-")])
        for month in document["months"]
    ]
    for period, hours in periods:
        for key, column in SUMS.items():
            assert sum(float(row[column]) for row in hours) == pytest.approx(period[key], rel=1e-8), key
        unmet = [row for row in hours if any(row[f"unmet_{k}"] == "1" for k in ("dew_point", "warm", "cold"))]
        assert len(unmet) == period["hours_unmet"]
        for mode, count in period["hours_by_mode"].items():
            assert sum(row["mode"] == mode for row in hours) == count
    # nothing here would be found if the year were all zeros
    assert [key for key in SUMS if not document["annual"][key]] == []


def test_months_and_seasons_add_up_to_the_year(ran):
    document, _ = ran
    for part in ("months", "seasons"):
        for key, total in document["annual"].items():
            if key != "moisture_removed_per_kwh_kg" and isinstance(total, int | float):
                assert sum(period[key] for period in document[part]) == pytest.approx(total, rel=1e-12), key


def test_energy_cost_and_carbon_follow_from_the_ledger(ran):
    document, rows = ran
    bought = {"electricity": 0.0, "fuel": 0.0}
    for entry in document["energy"]:
        column = f"{entry['carrier']}_for_{entry['purpose'].replace(' ', '_').replace('-', '_')}_kw"
        kwh = sum(float(row[column]) for row in rows)
        assert kwh == pytest.approx(entry["kwh"], rel=1e-8)
        bought[entry["carrier"]] += kwh
    annual = document["annual"]
    assert annual["electricity_kwh"] == pytest.approx(bought["electricity"], rel=1e-8)
    assert annual["fuel_kwh"] == pytest.approx(bought["fuel"], rel=1e-8)
    # the prices and factors that stand in the scheme
    assert annual["cost"] == pytest.approx(0.20 * bought["electricity"] + 0.08 * bought["fuel"], rel=1e-8)
    assert annual["co2e_kg"] == pytest.approx(0.30 * bought["electricity"] + 0.25 * bought["fuel"], rel=1e-8)
    assert document["currency"] == "EUR"
    # a boiler of efficiency 0.8 serves the preheat
    fuel = next(e["kwh"] for e in document["energy"] if (e["carrier"], e["purpose"]) == ("fuel", "preheat"))
    assert fuel == pytest.approx(annual["preheat_kwh"] / 0.8, rel=1e-8)


def test_peaks_are_the_highest_hours_of_the_ledger(ran):
    document, rows = ran
    peaks, outdoor = document["peaks"], document["peaks_outdoor"]
    for name, key in (
        ("coil_cooling", "coil_cooling_kw"),
        ("reheat", "reheat_kw"),
        ("condensate", "condensate_kg_per_h"),
    ):
        at = next(row for row in rows if row["hour"] == peaks[f"{name}_at"])
        assert float(at[key]) == pytest.approx(peaks[key], rel=1e-9)
        assert max(float(row[key]) for row in rows) == float(at[key])
        assert float(at["outdoor_dry_bulb_c"]) == outdoor[name]["dry_bulb_c"]


def test_the_ledger_has_every_state_point_and_the_unit_in_every_name(ran):
    _, rows = ran
    units = ("_c", "_kw", "_pa", "_kg_per_s", "_kg_per_h", "_kg_per_kg")
    plain = {"hour", "mode", "frozen", "heat_residual", "water_residual"}
    for column in rows[0]:
        flag = column.startswith(("unmet_", "coil_at_", "coil_locked"))
        assert column in plain or flag or column.endswith(units), column
    for point in ("outdoor", "preheated", "after_coil", "after_fan", "after_boiler", "supply"):
        assert f"{point}_dry_bulb_c" in rows[0]
        assert f"{point}_humidity_ratio_kg_per_kg" in rows[0]
    labels = [row["hour"] for row in rows]
    assert (labels[0], labels[-1], len(set(labels))) == ("01-01 00:00", "12-31 23:00", 8760)
    for row in rows:
        # there is an apparatus dew point exactly where water is removed
        assert (row["apparatus_dew_point_c"] != "") == (float(row["condensate_kg_per_h"]) > 0)
        assert not {"nan", "inf", "-inf", "None", "True", "-0"} & set(row.values())


def test_the_ledger_balances_by_hand_in_every_hour(ran):
    _, rows = ran
    for row in rows:
        value = {key: float(text) for key, text in row.items() if key not in ("hour", "mode") and text}
        removed = value["outdoor_humidity_ratio_kg_per_kg"] - value["supply_humidity_ratio_kg_per_kg"]
        water = value["mass_flow_kg_per_s"] * removed * 3600
        assert water == pytest.approx(value["condensate_kg_per_h"], abs=1e-5)
        sensible, latent = value["coil_sensible_kw"], value["coil_latent_kw"]
        assert sensible + latent == pytest.approx(value["coil_cooling_kw"], abs=1e-7)
        assert value["heat_residual"] <= 1e-9


def test_what_is_not_determined_is_null_and_never_zero(dewledger, years, busy):
    lines = (
        Path(busy)
        .read_text(encoding="utf-8")
        .replace("cooling_cop = 3.5", "")
        .replace('fuel = "0.08 /kWh"', "")
    )
    Path(busy).write_text(lines, encoding="utf-8")
    result = dewledger("year", years["mild"], "-s", busy, "--json", "-", "--hours", "h.csv")
    annual = json.loads(result.stdout)["annual"]
    for key in ("electricity_kwh", "moisture_removed_per_kwh_kg", "cost", "co2e_kg"):
        assert annual[key] is None
    assert annual["fuel_kwh"] > 0
    with Path("h.csv").open(encoding="utf-8", newline="") as stream:
        assert {row["electricity_for_cooling_kw"] for row in csv.DictReader(stream)} == {""}
    text = dewledger("year", years["mild"], "-s", busy).stdout
    assert "Cost    not stated: plant.cooling_cop and prices.fuel are not set" in text
    assert "Carbon  not stated: plant.cooling_cop is not set" in text
    assert text.count("not stated") >= 4


def test_a_peak_of_nothing_has_no_hour(dewledger, years):
    arguments = ("year", years["cold"], "-s", "starter", "--set", "supply.dew_point=29 degC")
    arguments += ("--set", "supply.dry_bulb.high=45 degC", "--set", "supply.dry_bulb.low=5 degC")
    document = json.loads(dewledger(*arguments, "--json", "-").stdout)
    assert document["peaks"]["coil_cooling_kw"] == 0
    assert document["peaks"]["coil_cooling_at"] is None
    assert document["peaks_outdoor"]["coil_cooling"] is None
    peaks = dewledger(*arguments).stdout.partition("\nPeaks\n")[2]
    assert peaks.splitlines()[2].split() == ["Coil", "cooling", "0.0", "kW", "never"]


# the summary


def figure(text: str, label: str) -> str:
    """The number behind a label of the page, without its thousands marks."""
    line = next(line for line in text.splitlines() if line.strip().startswith(label))
    return line.strip()[len(label) :].strip().partition("  ")[0].replace(" ", "")


def test_the_summary_shows_the_figures_of_the_document(dewledger, years, busy):
    arguments = ("year", years["mild"], "-s", busy)
    text = dewledger(*arguments).stdout
    annual = json.loads(dewledger(*arguments, "--json", "-").stdout)["annual"]
    for label, key in (
        ("Coil cooling", "coil_cooling_kwh"),
        ("latent", "coil_latent_kwh"),
        ("Reheat", "reheat_kwh"),
        ("Cooling undone", "cooling_undone_kwh"),
        ("by fan heat", "cooling_undone_by_fan_kwh"),
        ("Preheat while the coil runs", "preheat_while_cooling_kwh"),
        ("Condensate", "condensate_kg"),
        ("operating", "hours_operating"),
        ("off target (unmet)", "hours_unmet"),
        ("dew point", "hours_unmet_dew_point"),
    ):
        assert figure(text, label) == f"{annual[key]:.0f}", label
    assert f"Cost    {annual['cost']:,.0f} EUR".replace(",", " ") in text


def test_the_summary_in_inch_pound_units(dewledger, years, busy):
    arguments = ("year", years["mild"], "-s", busy)
    text = dewledger(*arguments, "--units", "ip").stdout
    annual = json.loads(dewledger(*arguments, "--json", "-").stdout)["annual"]
    # 1 ton is 12 000 Btu/h, 1 Btu is 1055.05585 J, 1 US gal is 3.785412 L, of 0.9997 kg each
    assert figure(text, "Coil cooling") == f"{annual['coil_cooling_kwh'] / 3.51685284:.0f}"
    assert figure(text, "Reheat") == f"{annual['reheat_kwh'] / 293.071070:.1f}"
    assert figure(text, "Condensate") == f"{annual['condensate_kg'] / 3.785411784 / 0.9997:.0f}"
    assert figure(text, "Fan electricity") == f"{annual['fan_kwh']:.0f}"
    for unit in ("ton-h", "MMBtu", "US gal", "lb/h", "degF"):
        assert unit in text
    assert "MBtu" not in text.replace("MMBtu", "")


@pytest.mark.parametrize("units", ["si", "ip"])
@pytest.mark.parametrize("year", ["humid", "mild", "cold"])
@pytest.mark.parametrize("scheme", ["starter", "busy"])
def test_no_page_is_wider_than_80_columns(dewledger, years, busy, scheme, year, units):
    name = busy if scheme == "busy" else scheme
    for arguments in (
        ("year", years[year], "-s", name, "--units", units),
        ("weather", years[year], "--units", units),
        ("hour", years[year], "-s", name, "--at", "07-14 15:00", "--units", units),
        ("hour", years[year], "-s", name, "--at", "01-14 10:00", "--units", units),
    ):
        result = dewledger(*arguments)
        assert (result.exit_code, result.stderr) == (0, "")
        lines = result.stdout.splitlines()
        assert max(map(len, lines)) <= 80, max(lines, key=len)
        assert not [line for line in lines if line != line.rstrip()]
        assert "nan" not in result.stdout.split()
        assert "inf" not in result.stdout.split()


def test_a_huge_unit_still_fits(dewledger, years):
    arguments = ("--set", "airflow.outdoor_air=990 m3/s", "--set", "supply.dew_point=2 degC")
    text = dewledger("year", years["humid"], "-s", "starter", *arguments).stdout
    assert max(map(len, text.splitlines())) <= 80


def test_the_summary_says_where_everything_comes_from(dewledger, years, busy):
    text = dewledger("year", years["mild"], "-s", busy, "--set", "coil.bypass_factor=0.1").stdout
    document = json.loads(
        dewledger("year", years["mild"], "-s", busy, "--set", "coil.bypass_factor=0.1", "--json", "-").stdout
    )
    joined = " ".join(text.split())
    for expected in (
        document["weather"]["sha256"][:12],
        document["scheme"]["file_sha256"][:12],
        document["scheme"]["resolved_sha256"][:12],
        f"dewledger {document['tool']['version']}",
        "By command coil.bypass_factor = 0.1",
        "fan.motor_efficiency = 0.9",
        "coil.least_surface_temperature = 1 degC",
        "1 January is a Monday",
        *document["notes"],
        *document["cautions"],
    ):
        assert expected in joined


# options


def test_seasons_of_ones_own(dewledger, years):
    arguments = ("year", years["humid"], "-s", "starter", "--seasons", "wet=may..oct, dry=nov..apr")
    document = json.loads(dewledger(*arguments, "--json", "-").stdout)
    wet, dry = document["seasons"]
    assert (wet["season"], wet["months"]) == ("wet", [5, 6, 7, 8, 9, 10])
    assert (dry["season"], dry["months"]) == ("dry", [1, 2, 3, 4, 11, 12])
    months = {month["month"]: month["condensate_kg"] for month in document["months"]}
    assert wet["condensate_kg"] == pytest.approx(sum(months[m] for m in range(5, 11)), rel=1e-12)
    assert "wet May Jun Jul Aug Sep Oct" in " ".join(dewledger(*arguments).stdout.split())


def test_a_leap_year_stays_whole(dewledger, tmp_path):
    (tmp_path / "leap.epw").write_bytes(wf.epw(wf.epw_rows(wf.Year(leap=True, years=(2004,) * 12))))
    result = dewledger("year", "leap.epw", "-s", "starter", "--hours", "-")
    rows = result.stdout.splitlines()
    assert len(rows) == 1 + 8784
    assert any(row.startswith("02-29 23:00,") for row in rows)


def test_quiet_prints_nothing(dewledger, years):
    result = dewledger("year", years["cold"], "-s", "starter", "--quiet")
    assert (result.exit_code, result.stdout, result.stderr) == (0, "", "")


def test_the_same_run_gives_the_same_bytes(dewledger, years):
    arguments = ("year", years["cold"], "-s", "starter", "--json", "-")
    assert dewledger(*arguments).stdout == dewledger(*arguments, "--no-cache").stdout


def test_a_file_that_exists_is_replaced_whole(dewledger, years):
    Path("y.json").write_text("x" * 1_000_000, encoding="utf-8")
    assert dewledger("year", years["cold"], "-s", "starter", "--json", "y.json").exit_code == 0
    json.loads(Path("y.json").read_text(encoding="utf-8"))
    assert [path.name for path in Path().iterdir()] == ["y.json"]


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("nowhere.epw", "-s", "starter"), ("nowhere.epw: no such file",)),
        ((".", "-s", "starter"), ("is a folder",)),
        (("FILE", "-s", "nothing"), ("nothing: there is no such scheme", "starter")),
        (("FILE", "-s", "starter", "--set", "coil.bypas=0.1"), ("did you mean 'bypass_factor'?",)),
        (("FILE", "-s", "starter", "--set", "coil.bypass_factor"), ("is not KEY=VALUE",)),
        (("FILE", "-s", "starter", "--set", "fan.total_pressure=9 kg"), ("'kg' is not a unit",)),
        (("FILE", "-s", "starter", "--set", "supply.dew_point=11"), ("has no unit", "11 degC")),
        (("FILE", "-s", "starter", "--units", "english"), ("--units: 'english'", "si or ip")),
        (("FILE", "-s", "starter", "--seasons", "wet=may..oct"), ("seasons", "11, 12", "left out")),
        (("FILE", "-s", "starter", "--seasons", "all=jan..dec, wet=may"), ("counted twice",)),
        (("FILE", "-s", "starter", "--seasons", "wet"), ("'wet' is not a season",)),
        (("FILE", "-s", "starter", "--json", "no/y.json"), ("--json no/y.json", "no folder 'no'")),
        (("FILE", "-s", "starter", "--hours", "no/h.csv"), ("--hours no/h.csv", "no folder 'no'")),
        (("FILE", "-s", "starter", "--hours", "."), ("--hours .: is a folder",)),
        (("FILE", "-s", "starter", "--json", "y", "--hours", "./y"), ("--hours ./y", "for --json too")),
        (("FILE", "-s", "starter", "--json", "-", "--hours", "-"), ("for --json too",)),
        (("FILE", "-s", "starter", "--json", "y.json", "--hours", "no/h"), ("--hours no/h",)),
        (("FILE", "-s", "starter", "--json", "FILE"), ("is a file that is read",)),
    ],
)
def test_what_is_refused(refused, years, arguments, words):
    message = refused("year", *(years["humid"] if a == "FILE" else a for a in arguments))
    assert all(word in message for word in words), message


def test_every_error_of_a_scheme_file_is_told_at_once(refused, years, busy):
    text = Path(busy).read_text(encoding="utf-8")
    Path(busy).write_text(
        text.replace('"700 Pa"', "700").replace("bypass_factor", "bypas_factor"), encoding="utf-8"
    )
    message = refused("year", years["humid"], "-s", busy, "--json", "y.json")
    assert "2 problems" in message
    assert "did you mean 'bypass_factor'?" in message
    assert "fan.total_pressure" in message


def test_neither_the_scheme_nor_the_weather_file_is_written_over(refused, years, busy, tmp_path):
    assert "is a file that is read" in refused("year", years["humid"], "-s", busy, "--hours", "busy.toml")
    (tmp_path / "link.toml").symlink_to(busy)
    assert "is a file that is read" in refused("year", years["humid"], "-s", busy, "--json", "link.toml")


def test_what_is_no_regular_file_is_not_replaced(refused, years, tmp_path):
    import os

    if not hasattr(os, "mkfifo"):
        pytest.skip("no such thing as a named pipe here")
    os.mkfifo(tmp_path / "pipe")
    assert "is not a regular file" in refused("year", years["humid"], "-s", "starter", "--json", "pipe")


def test_a_link_is_followed_and_stays(dewledger, years, tmp_path):
    (tmp_path / "target.json").write_text("old", encoding="utf-8")
    (tmp_path / "link.json").symlink_to("target.json")
    assert dewledger("year", years["cold"], "-s", "starter", "-q", "--json", "link.json").exit_code == 0
    assert (tmp_path / "link.json").is_symlink()
    json.loads((tmp_path / "target.json").read_text(encoding="utf-8"))


def test_a_folder_that_may_not_be_written(refused, years, tmp_path):
    import os

    (tmp_path / "locked").mkdir(mode=0o500)
    if os.access(tmp_path / "locked", os.W_OK):
        pytest.skip("this user may write anywhere")
    assert "cannot be written" in refused("year", years["humid"], "-s", "starter", "--json", "locked/y.json")
