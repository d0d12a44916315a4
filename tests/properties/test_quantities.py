"""The grammar of a value, and units against their definitions."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from estimator.errors import QuantityError
from estimator.quantities import QUANTITIES, convert, parse_value, parse_values, units_of

Q = QUANTITIES

# Definitions: NIST SP 811 (2008), appendix B.8 (factors exact there, or to the digits given there).
DEFINED = [
    (1.0, "cfm", "m3/s", 4.719474e-4),
    (1.0, "inH2O", "Pa", 249.0889),
    (1.0, "inHg", "Pa", 3386.389),
    (1.0, "psi", "Pa", 6894.757),
    (1.0, "Btu/h", "W", 0.2930711),
    (1.0, "ton", "kW", 3.516853),
    (1.0, "therm", "MJ", 105.5056),
    (1.0, "US gal", "L", 3.785412),
    (1.0, "lb/ft3", "kg/m3", 16.01846),
    (1.0, "lb/h", "kg/s", 1.259979e-4),
    (7000.0, "gr/lb", "kg/kg", 1.0),
    (1.0, "Btu/lb", "kJ/kg", 2.326),
    (32.0, "degF", "degC", 0.0),
    (212.0, "degF", "degC", 100.0),
    (1.8, "delta degF", "K", 1.0),
    (1000.0, "/MWh", "/kWh", 1.0),
    (1.0, "ton-h", "kWh", 3.516853),
    (1.0, "MMBtu", "kWh", 293.0711),
]


@pytest.mark.parametrize(("number", "unit", "to", "expected"), DEFINED)
def test_units_have_their_defined_size(number, unit, to, expected):
    assert convert(number, unit, to) == pytest.approx(expected, rel=1e-6, abs=1e-9)


@pytest.mark.parametrize("quantity", Q.values(), ids=Q)
@given(value=st.floats(0.011, 100.0))
def test_every_unit_of_a_quantity_goes_there_and_back(quantity, value):
    for unit in (*units_of(quantity), quantity.ip_unit):
        assert convert(convert(value, quantity.unit, unit), unit, quantity.unit) == pytest.approx(
            value, rel=1e-9
        )


@pytest.mark.parametrize(
    ("text", "quantity", "expected"),
    [
        ("11 degC", "dew point", 11.0),
        ("11degC", "dew point", 11.0),
        (" 51.8 degF ", "dew point", 11.0),
        ("68 F", "dry bulb", 20.0),
        ("20 °C", "dry bulb", 20.0),
        ("-4.5e0 degC", "dry bulb", -4.5),
        ("2.5 m3/s", "airflow", 2.5),
        ("2500 L/s", "airflow", 2.5),
        ("5 %", "fraction", 0.05),
        (0.05, "fraction", 0.05),
        ("0.05", "fraction", 0.05),
        (1, "fraction", 1.0),
        ("12 tons", "cooling rate", 12 * 3.5168528421),
        ("2 inH2O", "fan pressure", 498.178),
    ],
)
def test_a_value_is_read(text, quantity, expected):
    assert parse_value(text, Q[quantity]) == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("8..10 degC by 1", [8, 9, 10]),
        ("8..9 degC by 0.5 K", [8, 8.5, 9]),
        ("-2..2 degC by 2", [-2, 0, 2]),
        ("50..54 degF by 2", [10, 11.111111, 12.222222]),
        ("10..12 degC by 1.8 degF", [10, 11, 12]),
        ("8..8 degC by 1", [8]),
        ("[8, 10, 12] degC", [8, 10, 12]),
        ("[8 degC, 50 degF]", [8, 10]),
        (["8 degC", "10 degC"], [8, 10]),
        ("11 degC", [11]),
    ],
)
def test_ranges_and_lists_are_read(text, expected):
    assert parse_values(text, Q["dew point"]) == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize(
    ("text", "quantity", "says"),
    [
        ("11", "dew point", "no unit"),
        (11, "dew point", "no unit"),
        ("11 kPa", "dew point", "not a unit of dew point"),
        ("20 degX", "dry bulb", "did you mean"),
        ("warm", "dry bulb", "not a number"),
        ("", "dry bulb", "not a number"),
        (True, "fraction", "not a value"),
        (None, "fraction", "not a value"),
        ("nan degC", "dry bulb", "not a number"),
        ("inf degC", "dry bulb", "not a number"),
        ("1e999 degC", "dry bulb", "out of range"),
        ("300 degC", "dry bulb", "out of range"),
        ("8..14 degC", "dew point", "without its step"),
        ("8..14 degC by 4", "dew point", "does not reach its end"),
        ("14..8 degC by 1", "dew point", "goes nowhere"),
        ("8..14 degC by 0", "dew point", "goes nowhere"),
        ("8..14 degC by -1", "dew point", "goes nowhere"),
        ("0..14 degC by 0.000001", "dew point", "values"),
        ("8..14 degC by 1 kPa", "dew point", "not a unit of temperature difference"),
        ("8..14 by 1", "dew point", "no unit"),
        ("[8, 10 degC", "dew point", "closing bracket"),
        ("[] degC", "dew point", "empty"),
        ([], "dew point", "empty"),
        ("[8, x] degC", "dew point", "not a number"),
        ({"a": 1}, "dew point", "not a value"),
    ],
)
def test_what_cannot_be_read_is_refused_in_one_message(text, quantity, says):
    with pytest.raises(QuantityError, match=says) as caught:
        parse_values(text, Q[quantity], where="supply.dew_point")
    message = str(caught.value)
    assert message.startswith("supply.dew_point: ")
    assert "allowed: " in message
    assert "\n" not in message


def test_one_value_is_one_value():
    with pytest.raises(QuantityError, match="has 2 values"):
        parse_value("[8, 9] degC", Q["dew point"])


def test_the_inch_pound_display_never_says_an_ambiguous_unit():
    assert not any(q.ip_unit == "MBtu" or "MBtu" in units_of(q) for q in Q.values())


def test_a_value_is_shown_in_both_systems():
    assert Q["cooling"].show(3516.853) == "3 517 kWh"
    assert Q["cooling"].show(3516.853, "ip") == "1 000 ton-h"
    assert Q["dry bulb"].show(20.0, "ip") == "68.0 degF"
    assert Q["humidity ratio"].show(0.01, "ip") == "70.0 gr/lb"
    assert Q["dry bulb"].show(-0.001) == "0.00 degC"
