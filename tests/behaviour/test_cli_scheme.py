"""``dewledger scheme``."""

from __future__ import annotations

import json
import tomllib

import pytest


def test_new_writes_a_scheme_that_can_be_used_as_it_is(dewledger, tmp_path, years):
    result = dewledger("scheme", "new", "mine.toml")
    assert (result.exit_code, result.stdout) == (0, "")
    assert "wrote mine.toml" in result.stderr
    tables = tomllib.loads((tmp_path / "mine.toml").read_text(encoding="utf-8"))
    assert tables["scheme"]["name"]
    assert dewledger("year", years["cold"], "--scheme", "mine.toml", "--quiet").exit_code == 0


def test_new_without_a_path_and_on_standard_output(dewledger, tmp_path):
    assert dewledger("scheme", "new").exit_code == 0
    result = dewledger("scheme", "new", "-")
    assert (result.exit_code, result.stderr) == (0, "")
    assert result.stdout == (tmp_path / "scheme.toml").read_text(encoding="utf-8")
    assert not (tmp_path / "-").exists()


def test_new_does_not_write_over_a_file_unless_told_to(dewledger, refused, tmp_path):
    (tmp_path / "mine.toml").write_text("precious", encoding="utf-8")
    message = refused("scheme", "new", "mine.toml")
    assert "mine.toml: exists already" in message
    assert "--force" in message
    assert dewledger("scheme", "new", "mine.toml", "--force").exit_code == 0
    assert "[coil]" in (tmp_path / "mine.toml").read_text(encoding="utf-8")


@pytest.mark.parametrize("force", [(), ("--force",)])
def test_new_refuses_a_folder_and_a_missing_folder(refused, tmp_path, force):
    (tmp_path / "folder").mkdir()
    assert "is a folder" in refused("scheme", "new", "folder", *force)
    assert "no folder 'nowhere'" in refused("scheme", "new", "nowhere/mine.toml", *force)


def test_list_names_every_bundled_scheme_and_each_can_be_shown(dewledger):
    text = dewledger("scheme", "list").stdout
    names = [line.partition(":")[0] for line in text.splitlines() if not line.startswith(" ")]
    assert "starter" in names
    assert names == sorted(names)
    assert max(map(len, text.splitlines())) <= 80
    for name in names:
        assert dewledger("scheme", "show", name).exit_code == 0


def test_show_tells_value_unit_origin_and_meaning(dewledger, busy):
    result = dewledger("scheme", "show", busy, "--set", "coil.bypass_factor=0.1")
    assert (result.exit_code, result.stderr) == (0, "")
    rows = {line.split("  ")[1].strip(): line.split() for line in result.stdout.splitlines() if "  " in line}
    assert rows["outdoor_air"] == ["outdoor_air", "2", "m3/s", "file"]
    assert rows["bypass_factor"] == ["bypass_factor", "0.1", "--set"]
    assert rows["motor_efficiency"] == ["motor_efficiency", "0.9", "default"]
    assert rows["lockout_below"] == ["lockout_below", "not", "set", "default"]
    assert "sat" in rows["days"]
    assert "(default: common practice)" in result.stdout
    assert max(map(len, result.stdout.splitlines())) <= 80


def test_show_in_inch_pound_units(dewledger, busy):
    text = dewledger("scheme", "show", busy, "--units", "ip").stdout
    # 2 m3/s / 0.3048^3 * 60; 9 degC * 1.8 + 32; 700 Pa / 249.08891; 35 kW / 3.5168528
    for value in ("4237.76 cfm", "48.2 degF", "2.81024 inH2O", "9.95208 ton"):
        assert value in text
    assert max(map(len, text.splitlines())) <= 80


def test_show_as_json(dewledger, busy):
    result = dewledger("scheme", "show", busy, "--set", "supply.dew_point=50 degF", "--json", "-")
    document = json.loads(result.stdout)
    settings = document["scheme"]["settings"]
    dew_point = settings["supply.dew_point"]
    assert (dew_point["value"], dew_point["unit"], dew_point["origin"]) == (10.0, "degC", "command")
    assert settings["fan.efficiency"]["origin"] == "file"
    assert settings["fan.loss_to_air"]["origin"] == "default"
    assert all(entry["doc"] for entry in settings.values())
    assert len(document["scheme"]["resolved_sha256"]) == 64


def test_the_resolved_hash_is_the_same_for_every_way_of_writing(dewledger, busy):
    def resolved(*rest: str) -> str:
        return json.loads(dewledger("scheme", "show", busy, *rest, "--json", "-").stdout)["scheme"][
            "resolved_sha256"
        ]

    assert resolved("--set", "supply.dew_point=48.2 degF") == resolved()
    assert resolved("--set", "supply.dew_point=9.1 degC") != resolved()


SCHEDULED = """
[scheme]
name = "By the month"
[airflow]
outdoor_air = "1000 cfm"
[supply]
dew_point = { by_month = ["12 degC", "12 degC", "12 degC", "11 degC", "11 degC", "10 degC",
                          "10 degC", "10 degC", "11 degC", "11 degC", "12 degC", "12 degC"] }
dry_bulb = { low = { outdoor = ["0 degC", "30 degC"], value = ["22 degC", "18 degC"] } }
"""


@pytest.mark.parametrize("units", ["si", "ip"])
def test_targets_that_follow_month_or_outdoor_air_are_shown_whole(dewledger, tmp_path, units):
    (tmp_path / "s.toml").write_text(SCHEDULED, encoding="utf-8")
    text = " ".join(dewledger("scheme", "show", "s.toml", "--units", units).stdout.split())
    if units == "si":
        assert "12, 12, 12, 11, 11, 10, 10, 10, 11, 11, 12, 12 degC by month" in text
        assert "22, 18 degC at outdoor dry bulbs of 0, 30 degC" in text
    else:
        assert "53.6, 53.6, 53.6, 51.8, 51.8, 50, 50, 50, 51.8, 51.8, 53.6, 53.6 degF by month" in text
        assert "71.6, 64.4 degF at outdoor dry bulbs of 32, 86 degF" in text


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("nothing",), ("nothing: there is no such scheme", "starter")),
        (("stater",), ("did you mean 'starter'?",)),
        (("starter", "--set", "coil.bypas=0.1"), ("coil.bypas", "did you mean 'bypass_factor'?")),
        (("starter", "--set", "coil.bypass_factor=0.95"), ("coil.bypass_factor", "0 to 0.9")),
        (("starter", "--set", "fan.total_pressure=900"), ("fan.total_pressure", "has no unit", "900 Pa")),
        (("starter", "--set", "fan.total_pressure=900 m"), ("'m' is not a unit of fan pressure",)),
        (("starter", "--set", "coil.bypass_factor"), ("--set", "'coil.bypass_factor' is not KEY=VALUE")),
        (("starter", "--set", "=0.1"), ("--set", "is not KEY=VALUE")),
        (("starter", "--set", "a.b=1", "--set", "a.b=2"), ("--set", "'a.b' is set twice")),
        (("starter", "--units", "us"), ("--units: 'us'",)),
        (("starter", "--json", "."), ("--json .: is a folder",)),
    ],
)
def test_what_show_refuses(refused, arguments, words):
    message = refused("scheme", "show", *arguments)
    assert all(word in message for word in words), message


def test_show_does_not_write_over_the_scheme(refused, busy):
    assert "is a file that is read" in refused("scheme", "show", busy, "--json", "busy.toml")
