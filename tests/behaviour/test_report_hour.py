"""The page of one hour by hand: every figure follows from figures and formulas that are printed there."""

from __future__ import annotations

import json
import math
import random
import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import pytest
from CoolProp.HumidAirProp import HAPropsSI

FAN_BEFORE = "fan.position=blow-through"
#: By what it shows: what governs the coil (from the case itself, not from the program), air, settings.
CASES = {
    "deep coil": ("dew point", "32 degC, 65 %, 101.3 kPa"),
    "fan before the coil": ("dew point", "27 degC, 60 %, 95 kPa", FAN_BEFORE),
    "constant volume": ("dew point", "35 degC, dew point 20 degC, 80 kPa", "airflow.basis=actual"),
    "no bypass": ("dew point", "29.4 degC, wet bulb 25 degC, 900 m", "coil.bypass_factor=0"),
    "small unit": ("dew point", "31.7 degC, 21.3 g/kg, 98765 Pa", "airflow.outdoor_air=40 L/s"),
    "large unit": ("dew point", "31.7 degC, 21.3 g/kg, 98765 Pa", "airflow.outdoor_air=80 m3/s"),
    # what a mixture of air near saturation with colder saturated air has too much is fog
    "fog": ("dew point", "22 degC, 99 %, 101.3 kPa", "coil.bypass_factor=0.3"),
    # 0.3 x 28.7 + 0.7 x 4.1, the surface at 1 degC, are 11.5 g/kg; the target is 10.0
    "fog that alone makes it dry": (
        "dew point", "31 degC, 99 %, 101.3 kPa", "coil.bypass_factor=0.3", "supply.dew_point=14 degC",
    ),
    "frozen": (
        "dew point", "20 degC, 60 %, 100 kPa", "coil.least_surface_temperature=-9 degC",
        "supply.dew_point=-5 degC",
    ),
    "frozen, fan before": (
        "dew point", "16 degC, 50 %, 100 kPa", "coil.least_surface_temperature=-20 degC",
        "supply.dew_point=-3 degC", FAN_BEFORE,
    ),
    "dry coil": ("dry bulb", "38 degC, 3 g/kg, 100 kPa"),
    "dry coil, fan before": ("dry bulb", "38 degC, 3 g/kg, 100 kPa", FAN_BEFORE),
    "cold supply": (
        "dry bulb", "26 degC, 55 %, 100 kPa", "supply.dry_bulb=12 degC", "supply.dew_point=14 degC",
    ),
    "cold supply, fan before": (
        "dry bulb", "26 degC, 55 %, 100 kPa", "supply.dry_bulb=11 degC", "supply.dew_point=14 degC",
        FAN_BEFORE,
    ),
    "cold supply of fog": (
        "dry bulb", "22 degC, 90 %, 100 kPa", "supply.dry_bulb=12 degC", "supply.dew_point=14 degC",
    ),
    "shallow coil": ("least surface temperature", "32 degC, 65 %, 101.3 kPa", "coil.bypass_factor=0.5"),
    "shallow coil in fog": (
        "least surface temperature", "30 degC, 99 %, 101.3 kPa", "coil.bypass_factor=0.3",
    ),
    "shallow coil, fan before": (
        "least surface temperature", "32 degC, 65 %, 101.3 kPa", "coil.bypass_factor=0.5", FAN_BEFORE,
    ),
    "too warm a surface": (
        "least surface temperature", "30 degC, 40 %, 100 kPa", "coil.least_surface_temperature=16 degC",
        "supply.dry_bulb=14 degC", "supply.dew_point=13 degC",
    ),
    "too warm a dry surface": (
        "least surface temperature", "38 degC, 3 g/kg, 100 kPa", "coil.least_surface_temperature=22 degC",
    ),
    "a surface above the dew point": (
        "least surface temperature", "18 degC, 60 %, 100 kPa", "coil.least_surface_temperature=15 degC",
        "supply.dew_point=5 degC",
    ),
    "a surface above the air": (
        "least surface temperature", "23 degC, 20 %, 100 kPa", "coil.least_surface_temperature=26 degC",
    ),
    "at capacity": ("total cooling capacity", "32 degC, 65 %, 100 kPa", "coil.capacity=60 kW"),
    "at capacity, fan before": (
        "total cooling capacity", "32 degC, 65 %, 100 kPa", "coil.capacity=60 kW", FAN_BEFORE,
    ),
    "at capacity, dry": ("total cooling capacity", "38 degC, 3 g/kg, 100 kPa", "coil.capacity=20 kW"),
    "at capacity in fog": (
        "total cooling capacity", "30 degC, 99.5 %, 100 kPa", "coil.capacity=120 kW",
        "coil.bypass_factor=0.2",
    ),
    "locked out": (
        "lockout", "8 degC, 95 %, 100 kPa", "coil.lockout_below=10 degC", "supply.dew_point=5 degC",
    ),
    "winter": ("off", "-12.5 degC, 80 %, 101 kPa"),
    "winter, fan before": ("off", "-12.5 degC, 80 %, 101 kPa", FAN_BEFORE),
    "short of heat": ("off", "-12.5 degC, 80 %, 101 kPa", "reheat.electric.capacity=60 kW"),
    "short of reheat": (
        "dew point", "28 degC, 70 %, 100 kPa", "reheat.electric.capacity=5 kW", "supply.dry_bulb=24 degC",
    ),
    "preheat": (
        "off", "-15 degC, 70 %, 98 kPa", "preheat.dry_bulb=4 degC", "preheat.source=boiler",
    ),
    "preheat at its capacity": (
        "off", "-15 degC, 70 %, 98 kPa", "preheat.dry_bulb=4 degC", "preheat.source=electric",
        "preheat.capacity=30 kW",
    ),
    "preheat before a coil that dries": (
        "dew point", "14 degC, 95 %, 100 kPa", "preheat.dry_bulb=16 degC", "preheat.source=district",
    ),
    "supply warmer than outdoors": ("dew point", "15 degC, 95 %, 100 kPa"),
    "nothing to do": (
        "off", "19 degC, 40 %, 100 kPa", "supply.dry_bulb.low=15 degC", "supply.dry_bulb.high=25 degC",
    ),
}  # fmt: skip


def arguments_of(case: str) -> list[str]:
    _, air, *settings = CASES[case]
    return ["-s", "starter", "--air", air, *(part for item in settings for part in ("--set", item))]


# the page as a reader takes it


@dataclass(frozen=True)
class Worked:
    """One step: the block it stands in, symbol, formula, the formula with numbers, result."""

    block: str
    symbol: str
    formula: str
    numbers: str
    result: str
    #: where it begins in the page
    line: int


def section(text: str, title: str) -> str:
    return text.partition(f"\n{title}\n{'-' * len(title)}\n")[2].partition("\n---")[0]


def worked(text: str) -> list[Worked]:
    lines = text.splitlines()
    first, last = lines.index("Arithmetic"), lines.index("Where h and W_s come from")
    found, block, number = [], "", first
    while number < last:
        line = lines[number]
        start = number
        number += 1
        if re.match(r"  \S", line):
            block = line.strip().partition(":")[0]
        if re.match(r"    [\w.]+ *= ", line):
            while lines[number].startswith("      "):
                line += " " + lines[number].strip()
                number += 1
            symbol, formula, numbers, result = re.split(r" +(?:=) ", line.strip())
            found.append(Worked(block, symbol, formula, numbers, result.split()[0], start))
    return found


def python_of(formula: str) -> str:
    """A printed formula in Python: what stands side by side is multiplied."""
    product = re.sub(r"(?<=[\w)]) (?=[\w(])", " * ", formula)
    return product.replace("^", "**").replace("ln(", "log(")


class Functions:
    """The functions at the end of the page, made from what is printed there."""

    def __init__(self, text: str) -> None:
        body = section(text, "Where h and W_s come from")
        self.pressure = float(re.search(r"At p of ([\d.]+) Pa", body)[1])
        above, _, below = body.partition("over ice, instead:")
        self.over_water, self.over_ice = self._formulas(above), self._formulas(below)

    @staticmethod
    def _formulas(text: str) -> dict[str, str]:
        joined = re.sub(r"\n {6,}(?=\S)", " ", text)
        rows = re.findall(r"^    (\w+)(?:\([\w, ]+\))? += (.+)$", joined, re.MULTILINE)
        return {name: python_of(formula) for name, formula in rows}

    def _value(self, name: str, cold: bool = False, **known: float) -> float:
        """One formula; what it does not know it works out from the formulas of its kind."""
        formulas = self.over_water | (self.over_ice if cold else {})
        known |= {"p": self.pressure, "q": self.pressure / 101_325}
        scope: dict[str, Any] = {"exp": math.exp, "log": math.log, "sqrt": math.sqrt}
        for other in re.findall(r"(?<![\w.])[A-Za-z]\w*", formulas[name]):
            if other not in scope and other not in known:
                known[other] = self._value(other, cold, **known)
        return float(eval(formulas[name], scope, known))

    def h(self, t: float, w: float) -> float:
        return self._value("h", t=t, w=w / 1000)

    def t(self, h: float, w: float) -> float:
        return self._value("t", h=h, w=w / 1000)

    def h_w(self, t: float) -> float:
        return self._value("h_w", t < 0.01, t=t)

    def e(self, t: float) -> float:
        return self._value("e", t < 0.01, t=t, T=t + 273.15)

    def w_s(self, t: float) -> float:
        return self._value("W_s", t < 0.01, t=t, T=t + 273.15)

    def t_s(self, w: float) -> float:
        return by_trial(lambda t: self.w_s(t) - w)

    def wet_bulb(self, t: float, w: float) -> float:
        h = self.h(t, w)

        def excess(at: float) -> float:
            w_s = self.w_s(at)
            return self.h(at, w_s) - h - (w_s - w) / 1000 * self.h_w(at)

        # over liquid water where there is a wet bulb over liquid water
        return by_trial(excess, *((0.01, 70) if excess(0.01) <= 0 else (-60, 0.01 - 1e-9)))

    def evaluate(self, numbers: str) -> float:
        assert re.fullmatch(r"(?:h|t|W_s|t_s|h_w|x|[\d.() /+,-])+", numbers), numbers
        scope = {"h": self.h, "t": self.t, "W_s": self.w_s, "t_s": self.t_s, "h_w": self.h_w}
        return float(eval(numbers.replace(" x ", "*"), {"__builtins__": {}}, scope))


def by_trial(excess: Any, low: float = -60.0, high: float = 70.0) -> float:
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (low, middle) if excess(middle) > 0 else (middle, high)
    return (low + high) / 2


def check_arithmetic(text: str) -> list[Worked]:
    """Every step of the page has the result that its numbers have."""
    functions, steps = Functions(text), worked(text)
    for step in steps:
        decimals = len(step.result.partition(".")[2])
        value = f"{functions.evaluate(step.numbers):.{decimals}f}"
        assert re.sub(r"^-(?=[0.]+$)", "", value) == step.result, step
    return steps


@pytest.fixture
def shown(dewledger):
    """The page of one hour and its document."""

    def run(*arguments: str) -> tuple[str, dict]:
        page, document = (dewledger("hour", *arguments, *more) for more in ((), ("--json", "-")))
        for result in (page, document):
            assert (result.exit_code, result.stderr) == (0, ""), result.output
        return page.stdout, json.loads(document.stdout)

    return run


# the arithmetic


@pytest.mark.parametrize("case", CASES)
def test_a_calculator_gets_the_figures_that_are_shown(shown, case):
    text, document = shown(*arguments_of(case))
    steps = check_arithmetic(text)
    points = {p["name"]: p for p in document["state_points"]}
    results = {(s.block, s.symbol): float(s.result) for s in steps}
    for e in document["exchanges"]:
        if e["kw"]:
            at_capacity = f"At its capacity: Q is {e['kw']:g} kW." in text
            heat = e["kw"] if at_capacity else results[e["name"], "Q"]
            assert heat == pytest.approx(e["kw"], abs=6e-4)
            assert results[e["name"], "q"] == pytest.approx(e["heat_kj_per_kg"], abs=6e-5)
            assert results[e["name"], "h2"] == pytest.approx(points[e["to"]]["enthalpy_kj_per_kg"], abs=6e-5)
        for symbol, key, scale in (("t2", "dry_bulb_c", 1), ("W2", "humidity_ratio", 1000)):
            if (e["name"], symbol) in results:
                value = scale * points[e["to"]][key]
                assert results[e["name"], symbol] == pytest.approx(value, abs=6e-5)
    for block, symbol, key in (
        ("outdoor air and targets", "m", "mass_flow_kg_per_s"),
        ("coil", "sensible", "coil_sensible_kw"),
        ("coil", "latent", "coil_latent_kw"),
        ("coil", "condensate", "condensate_kg_per_h"),
        ("cooling undone", "all", "cooling_undone_kw"),
        ("bought energy", "electricity", "electricity_kw"),
    ):
        if (block, symbol) in results:
            assert results[block, symbol] == pytest.approx(document[key], abs=6e-4)


@pytest.mark.parametrize("case", CASES)
def test_what_a_step_needs_stands_above_it(shown, case):
    text, document = shown(*arguments_of(case))
    lines = text.splitlines()
    settings = [s["value"] for s in document["scheme"]["settings"].values()]
    known = [s for s in settings if isinstance(s, int | float)]
    # the one look ahead, told in the formula: what the fan will add to air that leaves the coil
    known += [e["heat_kj_per_kg"] for e in document["exchanges"] if e["name"] == "fan"]
    for step in worked(text):
        above = known + [
            float(x) for x in re.findall(r"(?<![\w.])-?\d+\.?\d*", "\n".join(lines[: step.line]))
        ]
        if "/ p" in step.formula:
            above.append(document["outdoor"]["pressure_pa"])
        inputs = re.findall(r"(?<![\w.])\d+\.?\d*", step.numbers)
        for constant in re.findall(r"(?<![\w.])\d+\.?\d*", step.formula):
            inputs.remove(constant)
        for x in map(float, inputs):
            # the last digit of what stands above is rounded, of kW the third
            assert any(abs(abs(y) - x) <= 6e-4 for y in above), (step, x)


@pytest.mark.parametrize("case", CASES)
def test_what_governs_the_coil(shown, case):
    text, document = shown(*arguments_of(case))
    governed = CASES[case][0]
    assert document["coil"]["governed_by"] == governed
    assert re.search(rf"^  Governed by  {governed}$", text, re.MULTILINE)
    coil = re.search(r"\n  coil: .*\n((?:    .*\n)*)", text)[1]
    if document["coil"]["surface_c"] is None:
        assert "Nothing in this hour" in coil or "Locked out" in coil
    else:
        assert f"Governed by the {governed}" in " ".join(coil.split())


@pytest.mark.parametrize("case", CASES)
def test_the_state_table_follows_from_dry_bulb_and_humidity(shown, case):
    text, _ = shown(*arguments_of(case))
    functions = Functions(text)
    rows = re.findall(r"^  \d [a-z ]+?((?: +-?[\d.]+){6})$", section(text, "State points"), re.MULTILINE)
    assert len(rows) >= 4
    for row in rows:
        t, w, rh, dew_point, wet_bulb, h = map(float, row.split())
        pressure = functions.pressure * w / (621.945 + w)
        # one unit of the last digit, since the two that are given are rounded themselves
        assert rh == pytest.approx(100 * pressure / functions.e(t), abs=0.011)
        assert dew_point == pytest.approx(functions.t_s(w), abs=2e-4)
        assert wet_bulb == pytest.approx(functions.wet_bulb(t, w), abs=2e-4)
        assert h == pytest.approx(functions.h(t, w), abs=1.2e-4)


@pytest.mark.parametrize("case", ["deep coil", "no bypass", "winter", "frozen"])
def test_the_printed_functions_are_those_of_moist_air(shown, case):
    """CoolProp's humid air, to the accuracy that the method page claims of saturation and enthalpy."""
    functions = Functions(shown(*arguments_of(case))[0])
    for t in (25.0, 8.0) if not functions.over_ice else (25.0, 8.0, -4.0, -12.0):
        saturated = HAPropsSI("W", "T", t + 273.15, "R", 1.0, "P", functions.pressure)
        assert functions.w_s(t) / 1000 == pytest.approx(saturated, rel=5e-4)
        expected = HAPropsSI("H", "T", t + 273.15, "W", saturated / 2, "P", functions.pressure) / 1000
        assert functions.h(t, 500 * saturated) == pytest.approx(expected, abs=0.02)


def test_generated_hours_can_be_followed(dewledger):
    """Steps of hours that nobody chose, as a guard against a rule that the cases above leave out."""
    from estimator.hour import OutdoorAir, run_hour
    from estimator.moist_air import saturation_humidity_ratio
    from estimator.report.hour import hour_page
    from estimator.scheme_file import load_scheme

    chance = random.Random(20240511)
    governed = set()
    for _ in range(120):
        settings = {
            "coil.bypass_factor": chance.choice([0, 0.05, 0.2, 0.5]),
            "coil.least_surface_temperature": f"{chance.uniform(-15, 12)} degC",
            "supply.dew_point": f"{chance.uniform(-5, 15)} degC",
            "supply.dry_bulb": f"{chance.uniform(10, 25)} degC",
            "fan.position": chance.choice(["draw-through", "blow-through"]),
            "airflow.basis": chance.choice(["standard", "actual"]),
        } | chance.choice([{}, {"coil.capacity": "50 kW"}, {"coil.lockout_below": "15 degC"}])
        scheme = load_scheme("starter", settings)
        t, p = chance.uniform(-20, 40), chance.uniform(70_000, 104_000)
        w = chance.choice([0.1, 0.5, 0.9, 0.999]) * float(saturation_humidity_ratio(t, p))
        result = run_hour(scheme, OutdoorAir(dry_bulb=t, humidity_ratio=w, pressure=p, described="air"))
        governed.add(result.coil.governed_by)
        check_arithmetic(hour_page(result))
        for system in ("si", "ip"):
            assert max(map(len, hour_page(result, system).splitlines())) <= 80
    assert len(governed) == 6


# what the numbers alone do not say


def test_fog_that_drains_is_shown(shown):
    for case in ("fog", "fog that alone makes it dry", "cold supply of fog", "shallow coil in fog"):
        text, document = shown(*arguments_of(case))
        symbols = [step.symbol for step in worked(text) if step.block == "coil"]
        assert [s for s in symbols if s in ("W_mix", "h_mix", "fog", "h2")] == ["W_mix", "h_mix", "fog", "h2"]
        point = next(p for p in document["state_points"] if p["name"] == "after coil")
        assert point["relative_humidity"] == pytest.approx(1, abs=1e-9)
        said = " ".join(text.split())
        if document["coil"]["governed_by"] == "dew point":
            setpoint = document["targets"]["dew_point_c"]
            assert f"so the air leaves saturated at exactly {setpoint:g} degC with" in said
            assert (
                document["coil"]["surface_c"]
                > document["scheme"]["settings"]["coil.least_surface_temperature"]["value"]
            )
        else:
            assert "its excess drains until saturated air is left" in said


def test_frost_is_shown(shown):
    text, document = shown(*arguments_of("frozen"))
    assert document["coil"]["frozen"] is True
    assert re.search(r"^    h_w .* kJ/kg, of ice$", text, re.MULTILINE)
    assert "over ice, instead" in text
    assert any("Frost forms" in caution for caution in document["cautions"])
    text, document = shown(*arguments_of("deep coil"))
    assert "over ice" not in text
    assert document["coil"]["frozen"] is False


@pytest.mark.parametrize(
    ("case", "because", "words"),
    [
        ("shallow coil", {"dew_point": "least surface temperature"}, "surface is never below 1.0 degC"),
        ("a surface above the dew point", {"dew_point": "least surface temperature"}, "below 15.0 degC"),
        ("too warm a dry surface", {"warm": "least surface temperature"}, "too warm: the coil's surface"),
        ("at capacity", {"dew_point": "total cooling capacity", "warm": "total cooling capacity"},
         "dew point, too warm: the coil's capacity of 60.0 kW is reached"),
        ("locked out", {"dew_point": "lockout"}, "the coil is locked out below 10.0 degC outdoors"),
        ("short of heat", {"cold": "heating capacity"}, "the heat sources' capacity of 60.0 kW is reached"),
        ("deep coil", {}, "no"),
    ],
)  # fmt: skip
def test_why_an_hour_is_off_target(shown, case, because, words):
    text, document = shown(*arguments_of(case))
    expected = {"dew_point": None, "warm": None, "cold": None} | because
    assert document["unmet_because"] == expected
    assert document["unmet"] == {target: reason is not None for target, reason in expected.items()}
    head = " ".join(text.partition("\n  Dry air ")[0].partition("Off target")[2].split())
    assert words in head
    assert any("off target" in caution for caution in document["cautions"]) == bool(because)


def test_a_scheme_without_heat_is_off_target_for_that(shown, tmp_path):
    (tmp_path / "bare.toml").write_text(
        '[scheme]\nname = "Bare"\n[airflow]\noutdoor_air = "1 m3/s"\n[supply]\ndew_point = "11 degC"\n'
        'dry_bulb = { low = "18 degC" }\n',
        encoding="utf-8",
    )
    text, document = shown("-s", "bare.toml", "--air", "10 degC, 50 %, 1 bar")
    assert document["unmet_because"]["cold"] == "no source of heat"
    assert "Off target   too cold: the scheme has no source of heat" in text
    assert "low 18.0000 degC, high none" in text
    assert document["targets"]["dry_bulb_high_c"] is None
    # without a coefficient of performance electricity is not stated, not even where the coil is off
    assert document["electricity_kw"] is None
    assert "Electricity is not stated: plant.cooling_cop is not set." in text
    assert any("no fan" in note for note in document["notes"])


def test_a_schedule_and_two_sources_can_be_followed(shown, busy):
    # 07-14 is a Saturday of the calendar that begins on a Monday: half flow, and both sources at work
    text, document = shown("-s", busy, "--air", "2 degC, 70 %, 900 hPa", "--at", "07-14 10:00")
    steps = check_arithmetic(text)
    assert document["flow_share"] == 0.5
    flow = next(step for step in steps if step.symbol == "m")
    assert flow.formula == "V / v x share of the schedule"
    assert [s.formula for s in steps if s.block == "bought energy"] == [
        "fan + reheat.electric / efficiency",
        "preheat / efficiency + reheat.boiler / efficiency",
    ]
    assert "At its capacity: Q is 12 kW." in text


def test_an_hour_that_is_off_is_shown_as_such(shown, busy):
    text, document = shown("-s", busy, "--air", "30 degC, 50 %, 1 bar", "--at", "07-15 10:00")
    assert re.search(r"^  Mode +off$", text, re.MULTILINE)
    assert re.search(r"^  Governed by +off$", text, re.MULTILINE)
    assert "The unit is off in this hour" in text
    assert document["flow_share"] == 0
    assert document["coil"]["surface_c"] is None


# the sums over the unit


def parts(steps: list[Worked], block: str) -> Iterator[tuple[str, float]]:
    return ((step.symbol, float(step.result)) for step in steps if step.block == block)


def test_cooling_undone_is_split_in_the_order_of_the_air(shown):
    text, document = shown(*arguments_of("deep coil"))
    undone = dict(parts(worked(text), "cooling undone"))
    assert list(undone) == ["h_top", "fan", "electric", "all"]
    assert undone["fan"] == pytest.approx(document["cooling_undone_by_fan_kw"], abs=6e-4)
    assert undone["electric"] == pytest.approx(document["cooling_undone_by_purchased_kw"], abs=6e-4)
    # air at 32 degC outdoors and 20 degC supplied: all of fan heat and reheat is cooling undone
    _, fan, reheat = document["exchanges"]
    assert undone["all"] == pytest.approx(fan["kw"] + reheat["kw"], abs=6e-4)


def test_cooling_undone_ends_at_the_outdoor_dry_bulb(shown):
    text, document = shown(*arguments_of("supply warmer than outdoors"))
    step = next(s for s in worked(text) if (s.block, s.symbol) == ("cooling undone", "electric"))
    assert step.formula == "m (h_top - h1)"
    reheat = document["exchanges"][-1]["kw"]
    assert 0 < document["cooling_undone_by_purchased_kw"] < reheat
    text, _ = shown(*arguments_of("at capacity, fan before"))
    assert "None: nothing heats the air." in text


def test_electricity_is_the_sum_of_its_parts(shown):
    text, document = shown(*arguments_of("deep coil"))
    step = next(s for s in worked(text) if s.symbol == "electricity")
    assert step.formula == "coil / COP + fan + reheat.electric / efficiency"
    rows = {(e["carrier"], e["purpose"]): e["kw"] for e in document["energy"]}
    assert sum(kw for (carrier, _), kw in rows.items() if carrier == "electricity") == pytest.approx(
        document["electricity_kw"]
    )
    assert rows["electricity", "cooling"] == pytest.approx(-document["exchanges"][0]["kw"] / 3.2)


# targets, provenance, and how it looks


def test_the_targets_at_this_pressure(shown):
    text, document = shown(*arguments_of("no bypass"))
    targets = document["targets"]
    pressure = document["outdoor"]["pressure_pa"]
    assert targets == {
        "dew_point_c": 11,
        "humidity_ratio": pytest.approx(HAPropsSI("W", "T", 284.15, "R", 1, "P", pressure), rel=5e-4),
        "dry_bulb_low_c": 20,
        "dry_bulb_high_c": 20,
    }
    shown_ = f"at most 11.0000 degC; at this pressure W_set is {1000 * targets['humidity_ratio']:.5f} g/kg"
    assert shown_ in section(text, "Targets")
    assert "low 20.0000 degC, high 20.0000 degC" in section(text, "Targets")


def test_it_says_what_it_rests_on(shown, years):
    from estimator.result import NOT_MODELLED

    text, document = shown(years["humid"], "-s", "starter", "--at", "07-14 15:00")
    assert document["notes"][: len(NOT_MODELLED)] == list(NOT_MODELLED)
    assert document["cautions"][-1].startswith("An estimate")
    assert any("do not size equipment" in caution for caution in document["cautions"])
    said = " ".join(text.split())
    for sentence in (*document["notes"], *document["cautions"]):
        assert sentence in said
    source = section(text, "Where this comes from")
    for part, key in (("weather", "sha256"), ("scheme", "file_sha256"), ("scheme", "resolved_sha256")):
        assert document[part][key][:12] in source
    assert f"dewledger {document['tool']['version']}" in source
    given, _ = shown(*arguments_of("deep coil"))
    assert "none: the air was given" in section(given, "Where this comes from")


@pytest.mark.parametrize("case", CASES)
@pytest.mark.parametrize("units", ["si", "ip"])
def test_it_fits_a_terminal(dewledger, case, units):
    text = dewledger("hour", *arguments_of(case), "--units", units).stdout
    assert text.isascii()
    assert max(map(len, text.splitlines())) <= 80
    assert not re.search(r" $", text, re.MULTILINE)
    assert "nan" not in text


def test_the_state_table_is_the_document(shown):
    text, document = shown(*arguments_of("shallow coil"))
    for number, p in enumerate(document["state_points"], 1):
        lines = section(text, "State points").splitlines()
        row = next(line for line in lines if line.startswith(f"  {number} {p['name']}  "))
        assert row.split()[-6:] == [
            f"{p['dry_bulb_c']:.4f}",
            f"{1000 * p['humidity_ratio']:.5f}",
            f"{100 * p['relative_humidity']:.2f}",
            f"{p['dew_point_c']:.4f}",
            f"{p['wet_bulb_c']:.4f}",
            f"{p['enthalpy_kj_per_kg']:.4f}",
        ]


def test_the_state_table_in_inch_pound_units(dewledger, shown):
    _, document = shown(*arguments_of("deep coil"))
    text = dewledger("hour", *arguments_of("deep coil"), "--units", "ip").stdout
    first = document["state_points"][0]
    row = next(line for line in text.splitlines() if line.startswith("  1 outdoor  "))
    # 1 Btu/lb is 2.326 kJ/kg, 1 lb is 7000 gr
    assert row.split()[-6:] == [
        f"{first['dry_bulb_c'] * 1.8 + 32:.4f}",
        f"{7000 * first['humidity_ratio']:.5f}",
        f"{100 * first['relative_humidity']:.2f}",
        f"{first['dew_point_c'] * 1.8 + 32:.4f}",
        f"{first['wet_bulb_c'] * 1.8 + 32:.4f}",
        f"{first['enthalpy_kj_per_kg'] / 2.326:.4f}",
    ]
    assert "In SI, where the formulas need no unit factors." in text
    # the arithmetic stays in SI
    assert [s.result for s in worked(text)] == [
        s.result for s in worked(shown(*arguments_of("deep coil"))[0])
    ]
