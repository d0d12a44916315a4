"""One-line answers without a scheme file, and the options for the three settings that matter most."""

from __future__ import annotations

import json

import pytest

from estimator import load_scheme
from estimator.scheme import leaves

THREE = ("--airflow", "10000 cfm", "--dew-point", "52 degF", "--dry-bulb", "70 degF")
SET = {"airflow.outdoor_air", "supply.dew_point", "supply.dry_bulb.low", "supply.dry_bulb.high"}


def document(dewledger, *arguments: str) -> dict:
    result = dewledger(*arguments, "--json", "-", "--quiet")
    assert (result.exit_code, result.stderr) == (0, "")
    return json.loads(result.stdout)


def test_the_options_are_settings_of_the_starter(dewledger):
    settings = document(dewledger, "year", "cape-wendle", *THREE)["scheme"]["settings"]
    assert {path for path, entry in settings.items() if entry["origin"] == "command"} == SET
    # 1 cfm is 0.3048^3 m3 a minute
    assert settings["airflow.outdoor_air"]["value"] == pytest.approx(10000 * 0.3048**3 / 60, rel=1e-11)
    assert settings["supply.dew_point"]["value"] == pytest.approx((52 - 32) / 1.8, rel=1e-11)
    for end in ("low", "high"):
        assert settings[f"supply.dry_bulb.{end}"]["value"] == pytest.approx((70 - 32) / 1.8, rel=1e-11)
    starter = {leaf.path: leaf.origin for leaf in leaves(load_scheme("starter"))}
    assert {path: e["origin"] for path, e in settings.items() if path not in SET} == {
        path: origin for path, origin in starter.items() if path not in SET
    }


@pytest.mark.parametrize("command", [("year",), ("hour", "--at", "01-26 13:00")], ids=["year", "hour"])
def test_the_figures_are_those_of_the_starter_with_the_same_settings(dewledger, command):
    name, *rest = command
    short = document(dewledger, name, "cape-wendle", *rest, *THREE)
    sets = (
        "airflow.outdoor_air=10000 cfm", "supply.dew_point=52 degF", "supply.dry_bulb=70 degF",
    )  # fmt: skip
    long = document(
        dewledger, name, "cape-wendle", *rest, "-s", "starter", *(p for s in sets for p in ("--set", s))
    )
    for found in (short, long):
        found.pop("cautions", None)
    assert short == long


def listed(text: str) -> tuple[dict[str, str], set[str]]:
    """The settings that the page lists as assumed, and those that it lists as not set."""
    section = text.partition("\nAssumed\n")[2]
    assert section
    _, table, rest = section.strip().split("\n\n")
    rows = dict(line.split(maxsplit=1) for line in table.splitlines())
    absent = " ".join(rest.split()).partition("not stated: ")[2].partition(". ")[0]
    return rows, set(absent.split(", "))


@pytest.mark.parametrize("command", [("year",), ("hour", "--at", "01-26 13:00")], ids=["year", "hour"])
@pytest.mark.parametrize("units", ["si", "ip"])
def test_every_setting_that_was_not_given_is_listed_as_assumed(dewledger, command, units):
    name, *rest = command
    result = dewledger(name, "cape-wendle", *rest, "--airflow", "3 m3/s", "--units", units)
    assert (result.exit_code, result.stderr) == (0, "")
    assert max(map(len, result.stdout.splitlines())) <= 80
    rows, absent = listed(result.stdout)
    starter = {leaf.path: leaf.value for leaf in leaves(load_scheme("starter"))}
    del starter["airflow.outdoor_air"]
    assert set(rows) == {path for path, value in starter.items() if value not in (None, "")}
    assert absent == {path for path, value in starter.items() if value in (None, "")}
    assert rows["supply.dew_point"] == ("11 degC" if units == "si" else "51.8 degF")
    assert rows["fan.efficiency"] == "0.62"
    assert rows["coil.bypass_factor"] == "0.05"


def test_a_result_says_that_its_scheme_is_assumed(dewledger):
    first = document(dewledger, "year", "cape-wendle", "--airflow", "3 m3/s")["cautions"][0]
    assert "No scheme was named: all settings but airflow.outdoor_air are assumed" in first
    result = dewledger("year", "cape-wendle", "--airflow", "3 m3/s", "--hours", "-")
    assert result.stdout.startswith("hour,")
    assert "No scheme was named" in result.stderr
    named = document(dewledger, "year", "cape-wendle", "-s", "starter", "--airflow", "3 m3/s")
    assert not [text for text in named["cautions"] if "No scheme was named" in text]
    text = dewledger("year", "cape-wendle", "-s", "starter", "--airflow", "3 m3/s").stdout
    assert "\nAssumed\n" not in text


def test_with_a_scheme_the_options_override_it(dewledger, busy):
    arguments = ("year", "cape-wendle", "-s", busy)
    plain = document(dewledger, *arguments)["scheme"]["settings"]
    # its dry bulb is a band, and one value closes it
    changed = document(dewledger, *arguments, "--dry-bulb", "19 degC")["scheme"]["settings"]
    assert (plain["supply.dry_bulb.low"]["value"], plain["supply.dry_bulb.high"]["value"]) == (17.0, 21.0)
    for end in ("low", "high"):
        entry = changed.pop(f"supply.dry_bulb.{end}")
        assert (entry["value"], entry["origin"]) == (19.0, "command")
        plain.pop(f"supply.dry_bulb.{end}")
    assert changed == plain


def test_a_target_may_follow_the_month_there_too(dewledger):
    values = ", ".join(f'"{t} degC"' for t in (12, 12, 12, 11, 11, 10, 10, 10, 11, 11, 12, 12))
    settings = document(dewledger, "year", "cape-wendle", "--dew-point", f"{{ by_month = [{values}] }}")
    assert settings["scheme"]["settings"]["supply.dew_point"]["value"][5] == 10.0


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ((), ("no scheme is named", "--scheme", "--airflow, --dew-point, --dry-bulb", "starter")),
        (("--set", "fan.efficiency=0.5"), ("no scheme is named",)),
        (("--airflow", "10000"), ("--airflow: '10000' has no unit", "cfm")),
        (("--airflow", "10000 cfn"), ("--airflow: 'cfn' is not a unit of airflow", "did you mean 'cfm'?")),
        (("--airflow", "-3 m3/s"), ("--airflow: '-3 m3/s' is out of range",)),
        (("--airflow", "much"), ("--airflow: 'much' is not a number with a unit",)),
        (("--airflow", ""), ("--airflow: ''",)),
        (("--dew-point", "52 degK"), ("--dew-point: 'degK' is not a unit of dew point",)),
        (("--dew-point", "80 degC"), ("--dew-point: '80 degC' is out of range", "-40 to 30 degC")),
        (("--dry-bulb", "20 Pa"), ("--dry-bulb: 'Pa' is not a unit of temperature",)),
        (
            ("--airflow", "1", "--dew-point", "2", "--dry-bulb", "3"),
            ("3 problems", "--airflow: '1'", "--dew-point: '2'", "--dry-bulb: '3'"),
        ),
        (
            ("--airflow", "1", "--set", "fan.efficiency=3"),
            ("2 problems", "--airflow: '1'", "starter: fan.efficiency: '3'"),
        ),
        (
            ("--airflow", "3 m3/s", "--set", "airflow.outdoor_air=4 m3/s"),
            ("--airflow: --set airflow.outdoor_air gives the same setting",),
        ),
        (
            ("--dry-bulb", "20 degC", "--set", "supply.dry_bulb.low=18 degC"),
            ("--dry-bulb: --set supply.dry_bulb.low gives the same setting",),
        ),
        (("--airflow", "3 m3/s", "-s", "stater"), ("stater: there is no such scheme", "'starter'")),
    ],
)
def test_what_is_refused(refused, arguments, words):
    for command in (("year", "cape-wendle"), ("hour", "cape-wendle", "--at", "07-14 15:00")):
        message = refused(*command, *arguments)
        assert all(word in message for word in words), message
