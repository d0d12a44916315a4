"""Worked examples of airstream processes, taken through the program's own devices.

Each example is written as a scheme file and as the air of ``--air``, in the units in which it is stated, and
run as the program runs any hour. What the program has no device for, mixing and a room, is computed from its
moist-air functions.

Sources: ASHRAE Handbook Fundamentals 2021 (SI), chapter 1, section 10 (read), and examples of textbooks on
refrigeration and air conditioning (from memory). Published answers were read off charts, which is what the
tolerances of 1 % and more allow for. Cross-checks computed with CoolProp get narrower ones.
"""

from __future__ import annotations

import dataclasses

import pytest
from published import checks
from published.chart import SEA_LEVEL, Air
from published.checks import Recorder, validates
from support import hours

from estimator import moist_air
from estimator.airstream.airflow import mass_flow
from estimator.airstream.state import State
from estimator.cli.air import air_given
from estimator.hour import OutdoorAir
from estimator.scheme import Scheme
from estimator.scheme_file import parse_scheme
from estimator.year import Year, run_hours

POUND = 0.45359237
BTU = 1.05505585262
TON = 12_000.0 * BTU / 3600.0
INCH_OF_WATER = 249.089
#: 0.075 lb/ft3 in kg/m3
INCH_POUND_DENSITY = 1.20138
#: Enthalpy of liquid water at 10 degC, kJ/kg: table 3.
WATER_AT_10 = 42.02

HEATER = '[[reheat]]\nsource = "electric"'
#: Warmer than any air here, so that the dew point alone is asked for.
NO_DRY_BULB = '{ high = "50 degC" }'


def unit(
    airflow: str,
    dew_point: str,
    dry_bulb: str = "",
    *,
    basis: str = "actual",
    density: str = "1.204 kg/m3",
    coil: str = "bypass_factor = 0",
    more: str = "",
) -> Scheme:
    """A scheme file of a coil, and of a heater where there is a supply dry bulb, as the program reads it."""
    return parse_scheme(f"""
        [scheme]
        name = "example"
        [airflow]
        outdoor_air = "{airflow}"
        basis = "{basis}"
        standard_density = "{density}"
        [supply]
        dew_point = "{dew_point}"
        dry_bulb = {f'"{dry_bulb}"' if dry_bulb else NO_DRY_BULB}
        [coil]
        {coil}
        {HEATER if dry_bulb else ""}
        {more}
    """)


def per_kilogram(dew_point: str, dry_bulb: str) -> Scheme:
    """A unit for 1 kg/s of dry air: its kW are kJ/kg."""
    return unit("1 m3/s", dew_point, dry_bulb, basis="standard", density="1 kg/m3")


def air(text: str) -> OutdoorAir:
    """Air at sea level as the command line takes it."""
    return air_given(f"{text}, 101.325 kPa", None, None)


def through(scheme: Scheme, outdoor: OutdoorAir) -> Year:
    """One hour of this air through the scheme."""
    hour = hours([outdoor.dry_bulb], [outdoor.humidity_ratio], [outdoor.pressure])
    flow = mass_flow(
        scheme.airflow,
        month=hour.month,
        hour=hour.hour,
        weekday=hour.weekday,
        dry_bulb=hour.outdoor.dry_bulb,
        humidity_ratio=hour.outdoor.humidity_ratio,
        pressure=hour.outdoor.pressure,
    )
    return run_hours(scheme, dataclasses.replace(hour, mass_flow=flow))


def off_coil(year: Year) -> State:
    """The air that leaves the coil."""
    return year.airstream.points["after coil"]


def enthalpy_fall(year: Year) -> float:
    """What the air loses in the coil, kW: the cooling and the enthalpy of the water drained."""
    fall = year.airstream.points["outdoor"].enthalpy - off_coil(year).enthalpy
    return (year.mass_flow * fall).item()


def dew_point_of(state: OutdoorAir) -> float:
    """Its dew point, degC."""
    return float(moist_air.dew_point(state.humidity_ratio, state.pressure))


def relative_humidity(state: State) -> float:
    """Relative humidity, %."""
    share = moist_air.relative_humidity(state.dry_bulb, state.humidity_ratio, state.pressure)
    return 100.0 * share.item()


@validates("Heating", checks.EXAMPLES)
def test_heating(check: Recorder) -> None:
    """Saturated 2 degC, 10 m3/s, heated to 40 degC by the unit's heater; the coil has nothing to do.

    Heat 1 % (chart), flow 0.1 % (digits). For CoolProp's heat 0.3 kW, 0.06 %: the perfect gas in the flow.
    """
    year = through(unit("10 m3/s", "15 degC", "40 degC"), air("2 degC, 100 %"))
    heat = year.outdoor_air_heating.item()
    check("flow", year.mass_flow.item(), 12.74, "kg/s", rel=1e-3)
    check("heat", heat, 490.0, "kW", rel=1e-2)
    check("heat", heat, 491.4, "kW", within=0.3, source=checks.COOLPROP)
    assert year.supply.dry_bulb.item() == pytest.approx(40.0, abs=1e-6)
    assert year.coil_cooling.item() == year.condensate.item() == year.reheat.item() == 0.0


@validates("Cooling to saturation", checks.EXAMPLES)
def test_cooling(check: Recorder) -> None:
    """30 degC 50 %, 5 m3/s, to saturated 10 degC. Heat 1 % (chart), flow 0.1 % (digits).

    For CoolProp's 0.1 %: the perfect gas in the flow, 0.06 %, and 0.04 % of humidity ratio. The air that
    leaves is that of table 2, 0.05 %, the accuracy this program claims.
    """
    year = through(unit("5 m3/s", "10 degC"), air("30 degC, 50 %"))
    heat, leaving = year.coil_cooling.item(), off_coil(year)
    check("flow", year.mass_flow.item(), 5.70, "kg/s", rel=1e-3)
    check("heat", heat, 197.0, "kW", rel=1e-2)
    check("heat", heat, 198.2, "kW", rel=1e-3, source=checks.COOLPROP)
    water = year.condensate.item() / 3600.0
    check("water", water, 0.03256, "kg/s", rel=1e-3, source=checks.COOLPROP)
    humidity_ratio = leaving.humidity_ratio.item()
    check("leaving humidity ratio", humidity_ratio, 0.0076627, "kg/kg", rel=5e-4, source=checks.TABLE_2)
    assert leaving.dry_bulb.item() == pytest.approx(10.0, abs=1e-6)
    assert year.apparatus_dew_point().item() == pytest.approx(10.0, abs=1e-6)
    assert year.active_heat.item() == 0.0


@validates("The water's enthalpy in the cooling example", checks.TABLE_3)
def test_condensate_term_of_the_cooling_example(check: Recorder) -> None:
    """By how much the coil's heat is less than what the air loses, the enthalpy of the water drained:
    0.03256 kg/s (CoolProp) of 42.02 kJ/kg is 1.368 kW.

    It is only 0.7 % of the example's answer, less than the tolerance there. Tolerance 0.1 %: the water.
    """
    year = through(unit("5 m3/s", "10 degC"), air("30 degC, 50 %"))
    term = enthalpy_fall(year) - year.coil_cooling.item()
    check("heat", term, 0.03256 * WATER_AT_10, "kW", rel=1e-3)


@validates("Mixing", checks.EXAMPLES)
def test_mixing(check: Recorder) -> None:
    """2 m3/s at 4 degC, wet bulb 2 degC, with 6.25 m3/s at 25 degC 50 %, from the moist-air functions alone:
    the program has no device that mixes. 0.3 K (chart).
    """
    cold = Air.wet(4.0, 2.0)
    warm = Air.humid(25.0, 0.5)
    a, b = 2.0 / cold.v, 6.25 / warm.v
    mixed = Air.from_enthalpy((a * cold.h + b * warm.h) / (a + b), (a * cold.w + b * warm.w) / (a + b))
    wet_bulb = float(moist_air.wet_bulb(mixed.t, mixed.w, SEA_LEVEL))
    check("dry bulb", mixed.t, 19.5, "degC", within=0.3)
    check("wet bulb", wet_bulb, 14.6, "degC", within=0.3)
    # last digits
    check("dry bulb", mixed.t, 19.63, "degC", within=0.01, source=checks.COOLPROP)
    check("wet bulb", wet_bulb, 14.56, "degC", within=0.01, source=checks.COOLPROP)


@validates("Air for a room", checks.EXAMPLES)
def test_room(check: Recorder) -> None:
    """Room 25 degC, wet bulb 19 degC; 9 kW and 1.5 g/s of saturated vapour at 30 degC to be
    carried away by air supplied at 15 degC (vapour 2555.58 kJ/kg, table 3), from the moist-air functions
    alone: the program has no room. 1.5 %: a slope read off a chart.
    """
    room = Air.wet(25.0, 19.0)
    water = 1.5e-3
    heat = 9.0 + water * 2555.58
    # h_room - h(15, W_supply) = heat / flow, W_supply = W_room - water / flow; h is nearly linear in W
    flow = 1.0
    for _ in range(50):
        supply = Air.of(15.0, room.w - water / flow)
        flow = heat / (room.h - supply.h)
    check("flow", flow, 0.873, "kg/s", rel=1.5e-2)
    check("volume", flow * supply.v, 0.724, "m3/s", rel=1.5e-2)
    # last digit
    check("flow", flow, 0.880, "kg/s", within=1e-3, source=checks.COOLPROP)
    check("volume", flow * supply.v, 0.729, "m3/s", within=1e-3, source=checks.COOLPROP)


@validates("Heating, in inch-pound units", checks.INCH_POUND)
def test_heating_in_inch_pound_units(check: Recorder) -> None:
    """20 000 cfm saturated 35 degF heated to 100 degF. 0.2 %: table values of four digits; 0.05 % for
    CoolProp's.
    """
    year = through(unit("20000 cfm", "60 degF", "100 degF"), air("35 degF, 100 %"))
    heat = year.outdoor_air_heating.item() * 3600.0 / BTU
    check("heat", heat, 1_507_000.0, "Btu/h", rel=2e-3)
    check("heat", heat, 1_505_640.0, "Btu/h", rel=5e-4, source=checks.COOLPROP)
    assert year.coil_cooling.item() == 0.0


@validates("Cooling, in inch-pound units", checks.INCH_POUND)
def test_cooling_in_inch_pound_units(check: Recorder) -> None:
    """10 000 cfm 85 degF 50 % cooled to saturated 50 degF. 0.2 %: table values; 0.1 % for CoolProp's."""
    year = through(unit("10000 cfm", "50 degF"), air("85 degF, 50 %"))
    heat = year.coil_cooling.item()
    check("heat", heat * 3600.0 / BTU, 609_200.0, "Btu/h", rel=2e-3)
    check("heat, tons", heat / TON, 50.77, "ton", rel=2e-3)
    check("heat", heat * 3600.0 / BTU, 609_508.0, "Btu/h", rel=1e-3, source=checks.COOLPROP)
    check("water", year.condensate.item() / POUND, 226.1, "lb/h", rel=1e-3, source=checks.COOLPROP)


def coil_then_reheat(coil: str, dew_point: str) -> Year:
    """The textbook's air through a coil with these settings, and a heater to 25 degC."""
    return through(unit("250 m3/min", dew_point, "25 degC", coil=coil), air("32 degC, 65 %"))


@validates("Coil with bypass, then reheat", checks.TEXTBOOK_COIL)
def test_coil_with_bypass_then_reheat(check: Recorder) -> None:
    """250 m3/min at 32 degC 65 % to 25 degC 60 % through a coil of apparatus dew point 13 degC and a
    reheater.

    The unit is given the bypass factor and, as its setpoint, the dew point of 25 degC 60 %; the apparatus
    dew point must come out. The book reads its states off a chart and finds a factor of 0.237; by definition,
    (W2 - W_adp) / (W1 - W_adp), the same states make it 0.250.

    With the book's factor: apparatus dew point 0.4 K, which is 0.02 of the factor; off-coil 0.3 K; cooling
    3 %, water 2 %; reheat 12 %, being a small difference of two readings. The book leaves out the enthalpy of
    the water drained, and so does the figure held against it.
    """
    dew_point = dew_point_of(air("25 degC, 60 %"))
    check("dew point of 25 degC 60 %", dew_point, 16.70, "degC", within=0.01, source=checks.COOLPROP)
    year = coil_then_reheat("bypass_factor = 0.237", f"{dew_point} degC")
    check("apparatus dew point", year.apparatus_dew_point().item(), 13.0, "degC", within=0.4)
    check("off-coil dry bulb", off_coil(year).dry_bulb.item(), 17.6, "degC", within=0.3)
    check("cooling and water drained", enthalpy_fall(year), 163.5, "kW", rel=3e-2)
    check("reheat", year.reheat.item(), 38.3, "kW", rel=12e-2)
    check("water", year.condensate.item(), 131.2, "kg/h", rel=2e-2)
    assert relative_humidity(year.supply) == pytest.approx(60.0, abs=1e-6)


@validates("Coil with bypass, then reheat, by definition", checks.COOLPROP)
def test_coil_with_bypass_by_definition(check: Recorder) -> None:
    """The same example with the bypass factor that the definition yields, 0.250, against CoolProp.

    Apparatus dew point 0.02 K: 0.01 K for the last digit of the factor, 0.006 K for the saturation humidity
    ratio. Off-coil 0.05 K, its last digit; powers and water 0.3 %, the last digit of the reheat. Of the 160.6
    kW that the air loses, 2.7 kW leave with the water at the leaving temperature and 157.9 kW are cooling.
    """
    year = coil_then_reheat("bypass_factor = 0.250", f"{dew_point_of(air('25 degC, 60 %'))} degC")
    check("apparatus dew point", year.apparatus_dew_point().item(), 13.0, "degC", within=0.02)
    check("off-coil dry bulb", off_coil(year).dry_bulb.item(), 17.8, "degC", within=0.05)
    check("cooling and water drained", enthalpy_fall(year), 160.6, "kW", rel=3e-3)
    check("cooling", year.coil_cooling.item(), 157.9, "kW", rel=3e-3)
    check("reheat", year.reheat.item(), 34.5, "kW", rel=3e-3)
    check("water", year.condensate.item(), 130.0, "kg/h", rel=3e-3)


@validates("Coil with bypass, its surface given", checks.COOLPROP)
def test_coil_with_bypass_its_surface_given(check: Recorder) -> None:
    """The same example asked the other way round: the surface can be no colder than 13 degC, the setpoint is
    out of its reach, and the air that comes out is the book's. 0.1 points of relative humidity, for the last
    digit of the factor; 0.3 % as above.
    """
    year = coil_then_reheat('bypass_factor = 0.250\nleast_surface_temperature = "13 degC"', "10 degC")
    assert year.coil_flags["at least surface temperature"].all()
    assert year.apparatus_dew_point().item() == pytest.approx(13.0, abs=1e-6)
    check("supply relative humidity", relative_humidity(year.supply), 60.0, "%", within=0.1)
    check("cooling", year.coil_cooling.item(), 157.9, "kW", rel=3e-3)
    check("reheat", year.reheat.item(), 34.5, "kW", rel=3e-3)
    check("water", year.condensate.item(), 130.0, "kg/h", rel=3e-3)


@validates("A coil whose mixture is fog", checks.APART)
@pytest.mark.parametrize(
    ("dew_point", "dry_bulb", "grams", "held"), [(7.0, 7.0, 6.238, False), (4.0, 5.7, 5.704, True)]
)
def test_fog(dew_point: float, dry_bulb: float, grams: float, held: bool, check: Recorder) -> None:
    """Saturated air of 30 degC, a tenth of it passing by a surface of 1 degC at the least: the mixture,
    6.40 g/kg and 20.08 kJ/kg, is fog, and drained it is saturated at 5.7 degC.

    A setpoint of 7 degC is below what the mixture reaches but above what is left when the fog has drained:
    the air leaves there, saturated. One of 4 degC is out of reach. Dry bulb to the last digit; humidity ratio
    0.05 %, the accuracy this program claims.
    """
    coil = 'bypass_factor = 0.1\nleast_surface_temperature = "1 degC"'
    year = through(unit("1 m3/s", f"{dew_point} degC", coil=coil), air("30 degC, 100 %"))
    leaving = off_coil(year)
    asked = f"asked for {dew_point:g} degC"
    check(f"leaving dry bulb, {asked}", leaving.dry_bulb.item(), dry_bulb, "degC", within=0.05)
    humidity_ratio = 1000.0 * leaving.humidity_ratio.item()
    check(f"humidity ratio, {asked}", humidity_ratio, grams, "g/kg", rel=5e-4, source=checks.COOLPROP)
    assert relative_humidity(leaving) == pytest.approx(100.0, abs=1e-6)
    assert year.coil_flags["at least surface temperature"].item() is held


@validates("Cool and reheat", checks.TEXTBOOK)
def test_cool_and_reheat(check: Recorder) -> None:
    """34 degC 70 % to 22 degC 50 %, water drained at 10 degC, for 1 kg/s.

    Here water leaves at the coil's leaving temperature; the figures have it moved to 10 degC, 0.07 kJ/kg.
    Off-coil and cooling to the last digit, 2 % of the reheat (a constant specific heat). For CoolProp's, 0.01
    K (its last digit, and the saturation humidity ratio) and 0.03 kJ/kg
    (0.04 % of the water).
    """
    dew_point = dew_point_of(air("22 degC, 50 %"))
    year = through(per_kilogram(f"{dew_point} degC", "22 degC"), air("34 degC, 70 %"))
    water = year.condensate.item() / 3600.0
    cooling, reheat = enthalpy_fall(year) - water * WATER_AT_10, year.reheat.item()
    dry_bulb = off_coil(year).dry_bulb.item()
    check("off-coil dry bulb", dry_bulb, 11.1, "degC", within=0.05)
    check("cooling", cooling, 62.7, "kJ/kg", within=0.1)
    check("reheat", reheat, 11.3, "kJ/kg", rel=2e-2)
    check("off-coil dry bulb", dry_bulb, 11.11, "degC", within=0.01, source=checks.COOLPROP)
    check("cooling", cooling, 62.71, "kJ/kg", within=0.03, source=checks.COOLPROP)
    at_leaving = year.coil_cooling.item()
    check("cooling, water at 11.11 degC", at_leaving, 62.64, "kJ/kg", within=0.03, source=checks.COOLPROP)
    check("reheat", reheat, 11.12, "kJ/kg", within=0.03, source=checks.COOLPROP)
    assert relative_humidity(year.supply) == pytest.approx(50.0, abs=1e-6)


@validates("Cooling to saturation, per minute", checks.TEXTBOOK)
def test_saturated_leaving(check: Recorder) -> None:
    """10 m3/min at 30 degC 80 % to saturated 14 degC. 0.5 %: table values; 0.1 % for CoolProp's."""
    year = through(unit("10 m3/min", "14 degC"), air("30 degC, 80 %"))
    heat, water = 60.0 * year.coil_cooling.item(), year.condensate.item() / 60.0
    check("water", water, 0.131, "kg/min", rel=5e-3)
    check("cooling", heat, 511.0, "kJ/min", rel=5e-3)
    check("water", water, 0.1313, "kg/min", rel=1e-3, source=checks.COOLPROP)
    check("cooling", heat, 512.3, "kJ/min", rel=1e-3, source=checks.COOLPROP)


@validates("Cooling to saturation, in tons", checks.TEXTBOOK)
def test_saturated_leaving_in_tons(check: Recorder) -> None:
    """280 m3/min at 30 degC 50 % to saturated 10 degC.

    Flow 0.1 % (perfect gas), tons 0.5 % (table values; CoolProp gives 52.6). A ton here is 3.517 kW.
    """
    year = through(unit("280 m3/min", "10 degC"), air("30 degC, 50 %"))
    check("flow", 60.0 * year.mass_flow.item(), 319.35, "kg/min", rel=1e-3)
    check("cooling", year.coil_cooling.item() / TON, 52.5, "ton", rel=5e-3)


@validates("Reheat of one cfm", checks.PENALTY)
def test_reheat_penalty_per_cfm(check: Recorder) -> None:
    """55 to 70 degF, 15 times the rule's factor.

    The factor is that of dry air at 0.075 lb/ft3, to 0.5 %, its last digit. Air that a coil leaves saturated
    at 55 degF has 9.2 g/kg of vapour as well, which at the textbook's specific heats (1.006 for air, 1.86
    for vapour) takes 1.7 % more.
    """
    rule = 16.2
    one_cfm = unit("1 cfm", "55 degF", "70 degF", basis="standard", density="0.075 lb/ft3")
    dry = through(one_cfm, OutdoorAir(dry_bulb=23.0 / 1.8, humidity_ratio=0.0, pressure=SEA_LEVEL))
    check("dry air", dry.outdoor_air_heating.item() * 3600.0 / BTU, rule, "Btu/h", rel=5e-3)
    saturated = through(one_cfm, air("85 degF, 60 %"))
    with_vapour = rule * (1.006 + 1.86 * 0.0092) / 1.006
    check("saturated air", saturated.reheat.item() * 3600.0 / BTU, with_vapour, "Btu/h", rel=5e-3)


@validates("Temperature rise over a fan", checks.APART)
@pytest.mark.parametrize(
    ("case", "humidity_ratio", "pressure"),
    [
        ("dry air, sea level", 0.0, SEA_LEVEL),
        ("dry air, 1500 m", 0.0, 84_556.0),
        ("10 g/kg, sea level", 0.01, SEA_LEVEL),
    ],
)
def test_fan_temperature_rise(case: str, humidity_ratio: float, pressure: float, check: Recorder) -> None:
    """1 inH2O of fan total pressure at an efficiency of 0.65, all of its heat in the air: dp / (rho cp eta).

    0.57 degF, of dry air, to its last digit; the identity itself, per mass of moist air and with the
    textbook's specific heats, to 0.1 %, which is what constant specific heats are good for. Pressure and
    density both refer to standard air, 0.075 lb/ft3, so that thin air is warmed as much. The fan's power for
    1 m3/s at standard density is dp / eta, with the vapour carried along; to the digits of an inch of water.
    """
    fan = '[fan]\ntotal_pressure = "1 inH2O"\nefficiency = 0.65\nmotor_efficiency = 1'
    scheme = unit("1 m3/s", "25 degC", basis="standard", density="0.075 lb/ft3", more=fan)
    year = through(scheme, OutdoorAir(dry_bulb=20.0, humidity_ratio=humidity_ratio, pressure=pressure))
    rise = 1.8 * (year.supply.dry_bulb - year.airstream.points["outdoor"].dry_bulb).item()
    if humidity_ratio == 0.0:
        check(f"rise, {case}", rise, 0.57, "delta degF", within=0.005)
    mass = 1.0 + humidity_ratio
    specific_heat = 1.006 + 1.86 * humidity_ratio
    identity = 1.8 * mass * INCH_OF_WATER / (1000.0 * INCH_POUND_DENSITY * specific_heat * 0.65)
    check(f"rise, {case}", rise, identity, "delta degF", rel=1e-3, source=checks.CONSTANTS)
    power = mass * INCH_OF_WATER / 650.0
    check(f"power, {case}", year.fan_power.item(), power, "kW", rel=1e-5)
    assert year.coil_cooling.item() == 0.0
