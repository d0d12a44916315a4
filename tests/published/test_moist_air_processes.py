"""Worked examples of airstream processes, computed from the moist-air functions alone.

Sources: ASHRAE Handbook Fundamentals 2021 (SI), chapter 1, section 10 (read), and examples of textbooks on
refrigeration and air conditioning (from memory). Published answers were read off charts, which is what the
tolerances of 1 % and more allow for. Cross-checks computed with CoolProp get narrower ones.
"""

from __future__ import annotations

from published import checks
from published.chart import SEA_LEVEL, Air
from published.checks import Recorder, validates

from estimator import moist_air

CFM = 0.3048**3 / 60.0
POUND = 0.45359237
BTU = 1.05505585262
TON = 12_000.0 * BTU / 3600.0


def fahrenheit(t: float) -> float:
    """degC from degF."""
    return (t - 32.0) / 1.8


def cooling(entering: Air, leaving: Air, drained_at: float) -> float:
    """Heat taken out by a coil, kJ per kg dry air, water leaving at ``drained_at`` degC."""
    drained = (entering.w - leaving.w) * float(moist_air.water_enthalpy(drained_at))
    return entering.h - leaving.h - drained


@validates("Heating", checks.EXAMPLES)
def test_heating(check: Recorder) -> None:
    """Saturated 2 degC, 10 m3/s, heated to 40 degC. Heat 1 % (chart), flow 0.1 % (digits)."""
    entering = Air.humid(2.0, 1.0)
    flow = 10.0 / entering.v
    heat = flow * (Air.of(40.0, entering.w).h - entering.h)
    check("flow", flow, 12.74, "kg/s", rel=1e-3)
    check("heat", heat, 490.0, "kW", rel=1e-2)
    # last digits
    check("heat", heat, 491.4, "kW", within=0.3, source=checks.COOLPROP)


@validates("Cooling to saturation", checks.EXAMPLES)
def test_cooling(check: Recorder) -> None:
    """30 degC 50 %, 5 m3/s, to saturated 10 degC. Heat 1 % (chart), flow 0.1 % (digits)."""
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 5.0 / entering.v
    heat = flow * cooling(entering, leaving, 10.0)
    check("flow", flow, 5.70, "kg/s", rel=1e-3)
    check("heat", heat, 197.0, "kW", rel=1e-2)
    # 0.1 % for heat and water
    check("heat", heat, 198.2, "kW", rel=1e-3, source=checks.COOLPROP)
    check("water", flow * (entering.w - leaving.w), 0.03256, "kg/s", rel=1e-3, source=checks.COOLPROP)


@validates("The water's enthalpy in the cooling example", checks.TABLE_3)
def test_condensate_term_of_the_cooling_example(check: Recorder) -> None:
    """The enthalpy of the water drained, alone: 0.03256 kg/s (CoolProp) of 42.02 kJ/kg is 1.368 kW.

    It is only 0.7 % of the example's answer, less than the tolerance there. Tolerance 0.1 %: the water.
    """
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 5.0 / entering.v
    without = flow * (entering.h - leaving.h)
    term = without - flow * cooling(entering, leaving, 10.0)
    check("heat", term, 0.03256 * 42.02, "kW", rel=1e-3)


@validates("Mixing", checks.EXAMPLES)
def test_mixing(check: Recorder) -> None:
    """2 m3/s at 4 degC, wet bulb 2 degC, with 6.25 m3/s at 25 degC 50 %. 0.3 K (chart)."""
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
    carried away by air supplied at 15 degC (vapour 2555.58 kJ/kg, table 3). 1.5 %: a slope read off a chart.
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
    """20 000 cfm saturated 35 degF heated to 100 degF. 0.2 %: table values of four digits."""
    entering = Air.humid(fahrenheit(35.0), 1.0)
    flow = 20_000.0 * CFM / entering.v
    heat = flow * (Air.of(fahrenheit(100.0), entering.w).h - entering.h) * 3600.0 / BTU
    check("heat", heat, 1_507_000.0, "Btu/h", rel=2e-3)
    check("heat", heat, 1_505_640.0, "Btu/h", rel=5e-4, source=checks.COOLPROP)


@validates("Cooling, in inch-pound units", checks.INCH_POUND)
def test_cooling_in_inch_pound_units(check: Recorder) -> None:
    """10 000 cfm 85 degF 50 % cooled to saturated 50 degF. 0.2 %: table values; 0.1 % for CoolProp's."""
    entering, leaving = Air.humid(fahrenheit(85.0), 0.5), Air.humid(fahrenheit(50.0), 1.0)
    flow = 10_000.0 * CFM / entering.v
    heat = flow * cooling(entering, leaving, leaving.t)
    water = flow * (entering.w - leaving.w) * 3600.0 / POUND
    check("heat", heat * 3600.0 / BTU, 609_200.0, "Btu/h", rel=2e-3)
    check("heat, tons", heat / TON, 50.77, "ton", rel=2e-3)
    check("heat", heat * 3600.0 / BTU, 609_508.0, "Btu/h", rel=1e-3, source=checks.COOLPROP)
    check("water", water, 226.1, "lb/h", rel=1e-3, source=checks.COOLPROP)


@validates("Coil with bypass, then reheat", checks.TEXTBOOK_COIL)
def test_coil_with_bypass_then_reheat(check: Recorder) -> None:
    """250 m3/min at 32 degC 65 % to 25 degC 60 % through a
    coil of apparatus dew point 13 degC and a reheater.

    The book reads its states off a chart. Cooling 3 %, water 2 %, bypass 0.02, off-coil 0.3 K; reheat 12 %,
    being a small difference of two readings. The book leaves out the enthalpy of the water drained.
    """
    entering, supplied, surface = Air.humid(32.0, 0.65), Air.humid(25.0, 0.60), Air.humid(13.0, 1.0)
    flow = 250.0 / 60.0 / entering.v
    bypass = (supplied.w - surface.w) / (entering.w - surface.w)
    off_coil = Air.from_enthalpy(bypass * entering.h + (1.0 - bypass) * surface.h, supplied.w)
    heat = flow * (entering.h - off_coil.h)
    reheat = flow * (supplied.h - off_coil.h)
    water = 3600.0 * flow * (entering.w - supplied.w)
    check("bypass factor", bypass, 0.237, "1", within=0.02)
    check("off-coil dry bulb", off_coil.t, 17.6, "degC", within=0.3)
    check("cooling", heat, 163.5, "kW", rel=3e-2)
    check("reheat", reheat, 38.3, "kW", rel=12e-2)
    check("water", water, 131.2, "kg/h", rel=2e-2)
    # 0.3 %, the last digit of the reheat
    coolprop = checks.COOLPROP
    check("bypass factor", bypass, 0.250, "1", within=2e-3, source=coolprop)
    check("cooling", heat, 160.6, "kW", rel=3e-3, source=coolprop)
    less_water = flow * cooling(entering, off_coil, 13.0)
    check("cooling, water drained at 13 degC", less_water, 158.6, "kW", rel=3e-3, source=coolprop)
    check("reheat", reheat, 34.5, "kW", rel=3e-3, source=coolprop)
    check("water", water, 130.0, "kg/h", rel=3e-3, source=coolprop)


@validates("Cool and reheat", checks.TEXTBOOK)
def test_cool_and_reheat(check: Recorder) -> None:
    """34 degC 70 % to 22 degC 50 %, water drained at 10 degC.

    Off-coil and cooling to the last digit, 2 % of the reheat (a constant specific heat); 0.03 kJ/kg for
    CoolProp's.
    """
    entering, supplied = Air.humid(34.0, 0.70), Air.humid(22.0, 0.50)
    off_coil = Air.of(float(moist_air.dew_point(supplied.w, SEA_LEVEL)), supplied.w)
    heat, reheat = cooling(entering, off_coil, 10.0), supplied.h - off_coil.h
    check("off-coil dry bulb", off_coil.t, 11.1, "degC", within=0.05)
    check("cooling", heat, 62.7, "kJ/kg", within=0.1)
    check("reheat", reheat, 11.3, "kJ/kg", rel=2e-2)
    check("cooling", heat, 62.71, "kJ/kg", within=0.03, source=checks.COOLPROP)
    check("reheat", reheat, 11.12, "kJ/kg", within=0.03, source=checks.COOLPROP)


@validates("Cooling to saturation, per minute", checks.TEXTBOOK)
def test_saturated_leaving(check: Recorder) -> None:
    """10 m3/min at 30 degC 80 % to saturated 14 degC. 0.5 %: table values; 0.1 % for CoolProp's."""
    entering, leaving = Air.humid(30.0, 0.80), Air.humid(14.0, 1.0)
    flow = 10.0 / entering.v
    heat = flow * cooling(entering, leaving, 14.0)
    water = flow * (entering.w - leaving.w)
    check("water", water, 0.131, "kg/min", rel=5e-3)
    check("cooling", heat, 511.0, "kJ/min", rel=5e-3)
    check("water", water, 0.1313, "kg/min", rel=1e-3, source=checks.COOLPROP)
    check("cooling", heat, 512.3, "kJ/min", rel=1e-3, source=checks.COOLPROP)


@validates("Cooling to saturation, in tons", checks.TEXTBOOK)
def test_saturated_leaving_in_tons(check: Recorder) -> None:
    """280 m3/min at 30 degC 50 % to saturated 10 degC.

    Flow 0.1 % (perfect gas), tons 0.5 % (table values; CoolProp gives 52.6). A ton here is 3.517 kW.
    """
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 280.0 / entering.v
    check("flow", flow, 319.35, "kg/min", rel=1e-3)
    check("cooling", flow / 60.0 * cooling(entering, leaving, 10.0) / TON, 52.5, "ton", rel=5e-3)


@validates("Reheat of one cfm", checks.PENALTY)
def test_reheat_penalty_per_cfm(check: Recorder) -> None:
    """55 to 70 degF, 15 times the rule's factor.

    The factor is that of dry air at 0.075 lb/ft3, to 0.5 %, its last digit; the vapour adds some 1.7 %.
    """
    flow = 0.075 * 60.0
    cold, warm = fahrenheit(55.0), fahrenheit(70.0)

    def penalty(w: float) -> float:
        per_kg = float(moist_air.enthalpy(warm, w, SEA_LEVEL) - moist_air.enthalpy(cold, w, SEA_LEVEL))
        return flow * per_kg / BTU * POUND

    saturated = float(moist_air.saturation_humidity_ratio(cold, SEA_LEVEL))
    check("dry air", penalty(0.0), 16.2, "Btu/h", rel=5e-3)
    check("saturated air", penalty(saturated), 1.017 * 16.2, "Btu/h", rel=5e-3)
