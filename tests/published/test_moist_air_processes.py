"""Worked examples of airstream processes, computed from the moist-air functions alone.

Sources: ASHRAE Handbook Fundamentals 2021 (SI), chapter 1, section 10 (read), and examples of textbooks on
refrigeration and air conditioning (from memory). Published answers were read off charts, which is what the
tolerances of 1 % and more allow for. Cross-checks computed with CoolProp get narrower ones.
"""

from __future__ import annotations

import pytest
from published.chart import SEA_LEVEL, Air

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


def test_heating() -> None:
    """Section 10: saturated 2 degC, 10 m3/s, heated to 40 degC. Heat 1 % (chart), flow 0.1 % (digits)."""
    entering = Air.humid(2.0, 1.0)
    flow = 10.0 / entering.v
    heat = flow * (Air.of(40.0, entering.w).h - entering.h)
    assert flow == pytest.approx(12.74, rel=1e-3)
    assert heat == pytest.approx(490.0, rel=1e-2)
    # computed with CoolProp, a cross-check; last digits
    assert heat == pytest.approx(491.4, abs=0.3)


def test_cooling() -> None:
    """Section 10: 30 degC 50 %, 5 m3/s, to saturated 10 degC. Heat 1 % (chart), flow 0.1 % (digits)."""
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 5.0 / entering.v
    heat = flow * cooling(entering, leaving, 10.0)
    assert flow == pytest.approx(5.70, rel=1e-3)
    assert heat == pytest.approx(197.0, rel=1e-2)
    # computed with CoolProp, a cross-check; 0.1 % for heat and water
    assert heat == pytest.approx(198.2, rel=1e-3)
    assert flow * (entering.w - leaving.w) == pytest.approx(0.03256, rel=1e-3)


def test_condensate_term_of_the_cooling_example() -> None:
    """The enthalpy of the water drained, alone: 0.03256 kg/s of 42.02 kJ/kg (table 3) is 1.368 kW.

    It is only 0.7 % of the example's answer, less than the tolerance there. Tolerance 0.1 %: the water.
    """
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 5.0 / entering.v
    without = flow * (entering.h - leaving.h)
    term = without - flow * cooling(entering, leaving, 10.0)
    assert term == pytest.approx(0.03256 * 42.02, rel=1e-3)


def test_mixing() -> None:
    """Section 10: 2 m3/s at 4 degC, wet bulb 2 degC, with 6.25 m3/s at 25 degC 50 %. 0.3 K (chart)."""
    cold = Air.wet(4.0, 2.0)
    warm = Air.humid(25.0, 0.5)
    a, b = 2.0 / cold.v, 6.25 / warm.v
    mixed = Air.from_enthalpy((a * cold.h + b * warm.h) / (a + b), (a * cold.w + b * warm.w) / (a + b))
    wet_bulb = float(moist_air.wet_bulb(mixed.t, mixed.w, SEA_LEVEL))
    assert mixed.t == pytest.approx(19.5, abs=0.3)
    assert wet_bulb == pytest.approx(14.6, abs=0.3)
    # computed with CoolProp, a cross-check; last digits
    assert mixed.t == pytest.approx(19.63, abs=0.01)
    assert wet_bulb == pytest.approx(14.56, abs=0.01)


def test_room() -> None:
    """Section 10: room 25 degC, wet bulb 19 degC; 9 kW and 1.5 g/s of saturated vapour at 30 degC to be
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
    assert flow == pytest.approx(0.873, rel=1.5e-2)
    assert flow * supply.v == pytest.approx(0.724, rel=1.5e-2)
    # computed with CoolProp, a cross-check; last digit
    assert flow == pytest.approx(0.880, abs=1e-3)
    assert flow * supply.v == pytest.approx(0.729, abs=1e-3)


def test_heating_in_inch_pound_units() -> None:
    """Inch-pound edition: 20 000 cfm saturated 35 degF heated to 100 degF, 1 507 000 Btu/h (from memory).

    0.2 %: table values of four digits. CoolProp gives 1 505 640 (a cross-check), 0.05 %.
    """
    entering = Air.humid(fahrenheit(35.0), 1.0)
    flow = 20_000.0 * CFM / entering.v
    heat = flow * (Air.of(fahrenheit(100.0), entering.w).h - entering.h) * 3600.0 / BTU
    assert heat == pytest.approx(1_507_000.0, rel=2e-3)
    assert heat == pytest.approx(1_505_640.0, rel=5e-4)


def test_cooling_in_inch_pound_units() -> None:
    """Inch-pound edition: 10 000 cfm 85 degF 50 % cooled to saturated 50 degF, 609 200 Btu/h or 50.77 tons
    (from memory). 0.2 %: table values. CoolProp gives 609 508 Btu/h and 226.1 lb/h (a cross-check), 0.1 %.
    """
    entering, leaving = Air.humid(fahrenheit(85.0), 0.5), Air.humid(fahrenheit(50.0), 1.0)
    flow = 10_000.0 * CFM / entering.v
    heat = flow * cooling(entering, leaving, leaving.t)
    assert heat * 3600.0 / BTU == pytest.approx(609_200.0, rel=2e-3)
    assert heat / TON == pytest.approx(50.77, rel=2e-3)
    assert heat * 3600.0 / BTU == pytest.approx(609_508.0, rel=1e-3)
    assert flow * (entering.w - leaving.w) * 3600.0 / POUND == pytest.approx(226.1, rel=1e-3)


def test_coil_with_bypass_then_reheat() -> None:
    """Textbook (states read, statement from memory): 250 m3/min at 32 degC 65 % to 25 degC 60 % through a
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
    assert bypass == pytest.approx(0.237, abs=0.02)
    assert off_coil.t == pytest.approx(17.6, abs=0.3)
    assert heat == pytest.approx(163.5, rel=3e-2)
    assert reheat == pytest.approx(38.3, rel=12e-2)
    assert water == pytest.approx(131.2, rel=2e-2)
    # computed with CoolProp, a cross-check; 0.3 %, the last digit of the reheat
    assert bypass == pytest.approx(0.250, abs=2e-3)
    assert heat == pytest.approx(160.6, rel=3e-3)
    # ... and with the water leaving at the apparatus dew point
    assert flow * cooling(entering, off_coil, 13.0) == pytest.approx(158.6, rel=3e-3)
    assert reheat == pytest.approx(34.5, rel=3e-3)
    assert water == pytest.approx(130.0, rel=3e-3)


def test_cool_and_reheat() -> None:
    """Textbook problem (from memory): 34 degC 70 % to 22 degC 50 %, water drained at 10 degC.

    Published 11.1 degC off the coil, 62.7 and 11.3 kJ/kg: last digit of the first two, 2 % of the reheat
    (a constant specific heat). CoolProp gives 62.71 and 11.12 (a cross-check), 0.03 kJ/kg.
    """
    entering, supplied = Air.humid(34.0, 0.70), Air.humid(22.0, 0.50)
    off_coil = Air.of(float(moist_air.dew_point(supplied.w, SEA_LEVEL)), supplied.w)
    heat, reheat = cooling(entering, off_coil, 10.0), supplied.h - off_coil.h
    assert off_coil.t == pytest.approx(11.1, abs=0.05)
    assert heat == pytest.approx(62.7, abs=0.1)
    assert reheat == pytest.approx(11.3, rel=2e-2)
    assert heat == pytest.approx(62.71, abs=0.03)
    assert reheat == pytest.approx(11.12, abs=0.03)


def test_saturated_leaving() -> None:
    """Textbook (from memory): 10 m3/min at 30 degC 80 % to saturated 14 degC. 0.5 %: table values.

    CoolProp gives 0.1313 kg/min and 512.3 kJ/min (a cross-check), 0.1 %.
    """
    entering, leaving = Air.humid(30.0, 0.80), Air.humid(14.0, 1.0)
    flow = 10.0 / entering.v
    heat = flow * cooling(entering, leaving, 14.0)
    assert flow * (entering.w - leaving.w) == pytest.approx(0.131, rel=5e-3)
    assert heat == pytest.approx(511.0, rel=5e-3)
    assert flow * (entering.w - leaving.w) == pytest.approx(0.1313, rel=1e-3)
    assert heat == pytest.approx(512.3, rel=1e-3)


def test_saturated_leaving_in_tons() -> None:
    """Textbook (from memory): 280 m3/min at 30 degC 50 % to saturated 10 degC, 319.35 kg/min and 52.5 tons.

    Flow 0.1 % (perfect gas), tons 0.5 % (table values; CoolProp gives 52.6). A ton here is 3.517 kW.
    """
    entering, leaving = Air.humid(30.0, 0.5), Air.humid(10.0, 1.0)
    flow = 280.0 / entering.v
    assert flow == pytest.approx(319.35, rel=1e-3)
    assert flow / 60.0 * cooling(entering, leaving, 10.0) / TON == pytest.approx(52.5, rel=5e-3)


def test_reheat_penalty_per_cfm() -> None:
    """55 to 70 degF costs 16.2 Btu/h per cfm (common practice: 1.08 Btu/h per cfm and degF).

    The factor is that of dry air at 0.075 lb/ft3, to 0.5 %, its last digit; the vapour adds some 1.7 %.
    """
    flow = 0.075 * 60.0
    cold, warm = fahrenheit(55.0), fahrenheit(70.0)

    def penalty(w: float) -> float:
        per_kg = float(moist_air.enthalpy(warm, w, SEA_LEVEL) - moist_air.enthalpy(cold, w, SEA_LEVEL))
        return flow * per_kg / BTU * POUND

    saturated = float(moist_air.saturation_humidity_ratio(cold, SEA_LEVEL))
    assert penalty(0.0) == pytest.approx(16.2, rel=5e-3)
    assert penalty(saturated) == pytest.approx(1.017 * 16.2, rel=5e-3)
