"""Scheme files: what is read, what is refused and how, where every setting came from."""

from __future__ import annotations

import dataclasses

import pytest
from support import BASE, FAN, scheme

from estimator.airstream.airflow import ScheduleRule
from estimator.errors import SchemeError
from estimator.scheme import Scheme, leaves, resolved_sha256, stack
from estimator.scheme_file import _SECTIONS, bundled_schemes, load_scheme, parse_scheme, starter_text
from estimator.settings import Setpoint, settings_of


def refusal(text: str, **settings) -> str:
    with pytest.raises(SchemeError) as caught:
        scheme(text, **settings)
    return str(caught.value)


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ('outdoor_air = "2 m3/s"', 'outdoor_air = "2"', ["airflow.outdoor_air", "no unit", "m3/s"]),
        ('outdoor_air = "2 m3/s"', "outdoor_air = 2", ["airflow.outdoor_air", "no unit"]),
        ('outdoor_air = "2 m3/s"', 'outdoor_air = "2 kg"', ["airflow.outdoor_air", "'kg' is not a unit"]),
        (
            'outdoor_air = "2 m3/s"',
            'outdoor_air = "0 m3/s"',
            ["airflow.outdoor_air", "out of range", "above 0"],
        ),
        ('outdoor_air = "2 m3/s"', 'outdoor_air = "-2 m3/s"', ["airflow.outdoor_air", "out of range"]),
        ('outdoor_air = "2 m3/s"', "", ["airflow.outdoor_air", "is missing"]),
        ('outdoor_air = "2 m3/s"', 'outdor_air = "2 m3/s"', ["did you mean 'outdoor_air'?"]),
        ('dew_point = "11 degC"', 'dew_point = "45 degC"', ["supply.dew_point", "out of range"]),
        (
            'dew_point = "11 degC"',
            'dew_point = "35 degC"',
            ["supply.dew_point", "out of range", "-40 to 30 degC"],
        ),
        ('dew_point = "11 degC"', 'dew_point = ["11 degC"]', ["supply.dew_point", "bare list"]),
        (
            'dew_point = "11 degC"',
            "dew_point = { by_month = [] }",
            ["supply.dew_point.by_month", "not a list"],
        ),
        ('dew_point = "11 degC"', 'dew_point = { by_month = ["11 degC", "12 degC"] }', ["2 values", "12"]),
        (
            'dew_point = "11 degC"',
            'dew_point = { outdoor = ["20 degC", "10 degC"], value = ["11 degC", "12 degC"] }',
            ["supply.dew_point", "do not rise"],
        ),
        (
            'dew_point = "11 degC"',
            'dew_point = { outdoor = ["10 degC"], value = ["11 degC", "12 degC"] }',
            ["supply.dew_point", "1 outdoor temperatures"],
        ),
        (
            'dew_point = "11 degC"',
            'dew_point = { month = "11 degC" }',
            ["supply.dew_point", "has the keys month"],
        ),
        ('dry_bulb = "20 degC"', "", ["supply.dry_bulb", "is missing"]),
        ('dry_bulb = "20 degC"', "dry_bulb = {}", ["supply.dry_bulb", "has the keys none"]),
        ('dry_bulb = "20 degC"', 'dry_bulb = { lo = "18 degC" }', ["supply.dry_bulb", "low, high"]),
        ('dry_bulb = "20 degC"', 'dry_bulb = { low = "22 degC", high = "18 degC" }', ["low at most high"]),
        ('dry_bulb = "20 degC"', 'low = "18 degC"\ndry_bulb = "20 degC"', ["supply.dry_bulb.low"]),
        ("bypass_factor = 0.05", "bypass_factor = 1.5", ["coil.bypass_factor", "out of range"]),
        ("bypass_factor = 0.05", "bypass_factor = 0.95", ["coil.bypass_factor", "0 to 0.9"]),
        ("bypass_factor = 0.05", 'bypass_factor = "deep"', ["coil.bypass_factor", "not a number"]),
        ("bypass_factor = 0.05", "bypass_factor = true", ["coil.bypass_factor", "not a value"]),
        ("bypass_factor = 0.05", "bypass_factor = nan", ["coil.bypass_factor", "out of range"]),
        ("bypass_factor = 0.05", "efficiency = 0.5", ["coil.efficiency", "fan.efficiency"]),
        ("[coil]", "[coils]", ["coils", "did you mean 'coil'?"]),
        ('source = "electric"', 'source = "gas"', ["reheat.gas.source", "'boiler'"]),
        ('source = "electric"', "", ["reheat.1.source", "is missing"]),
        ('source = "electric"', 'source = "electric"\n[[reheat]]\nsource = "electric"', ["stands twice"]),
        ("[[reheat]]", "[reheat]", ["reheat", "[[reheat]]"]),
        ('name = "base"', "", ["scheme.name", "is missing"]),
        ('name = "base"', "name = 3", ["scheme.name", "not a name"]),
        ('name = "base"', 'name = "base"\nauthor = "x"', ["scheme.author", "name"]),
        ('[supply]\ndew_point = "11 degC"\ndry_bulb = "20 degC"', "", ["[supply]", "is missing"]),
        ("cooling_cop = 3.0", "cooling_cop = 0", ["plant.cooling_cop", "above 0"]),
        ("cooling_cop = 3.0", 'cooling_cop = "3 kW"', ["plant.cooling_cop", "not a unit"]),
    ],
)
def test_a_fault_is_told_with_file_key_value_and_what_is_allowed(old, new, says):
    assert old in BASE
    message = refusal(BASE.replace(old, new))
    assert message.startswith("scheme.toml: ")
    for part in says:
        assert part in message
    assert "Traceback" not in message


@pytest.mark.parametrize(
    ("rule", "says"),
    [
        ('hours = "7..19"', "HH:00..HH:00"),
        ('hours = "07:30..19:00"', "HH:00..HH:00"),
        ('hours = "07:00..25:00"', "HH:00..HH:00"),
        ('hours = "07:00..07:00"', "empty"),
        ("hours = 7", "HH:00..HH:00"),
        ('days = "funday"', "'funday' is not known"),
        ("days = []", "empty"),
        ("days = [1]", "1 is not known"),
        ('months = "may..octember"', "jan, feb"),
        ("fraction = 1.2", "out of range"),
        ('fraktion = "1"', "did you mean 'fraction'?"),
    ],
)
def test_a_fault_in_a_schedule_names_the_rule(rule, says):
    message = refusal(BASE + f"[[airflow.schedule]]\n{rule}\n")
    assert "airflow.schedule.1" in message
    assert says in message


def test_schedules_are_read_with_wrapping_spans():
    rule = '[[airflow.schedule]]\ndays = "fri..mon"\nhours = "22:00..06:00"\nmonths = ["nov..feb", "jul"]\n'
    (read,) = scheme(BASE + rule).airflow.schedule
    assert read.days == (0, 4, 5, 6)
    assert read.hours == (0, 1, 2, 3, 4, 5, 22, 23)
    assert read.months == (1, 2, 7, 11, 12)
    assert read.fraction == 1.0


def test_all_faults_of_a_file_are_told_at_once():
    text = BASE.replace('"2 m3/s"', '"2"').replace('"11 degC"', '"11 kPa"').replace("0.05", "5")
    message = refusal(text)
    assert "3 problems" in message
    for key in ("airflow.outdoor_air", "supply.dew_point", "coil.bypass_factor"):
        assert key in message


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", "is empty"),
        ("# only a comment\n", "is empty"),
        ("[scheme", "is not TOML"),
        ("dew_point = 11 degC", "quote a value"),
        ("coil = 3", "coil: 3 is not a section"),
        ("[scheme]\nname = 'x'\n[scheme]\n", "is not TOML"),
    ],
)
def test_what_is_no_scheme_at_all_is_refused(text, says):
    assert says in refusal(text)


@pytest.mark.parametrize(
    ("path", "value", "says"),
    [
        ("coil.bypas_factor", "0.1", "did you mean 'bypass_factor'?"),
        ("bypass_factor", "0.1", "did you mean 'coil.bypass_factor'?"),
        ("coil", "0.1", "not the path"),
        ("", "0.1", "not the path"),
        ("coil.bypass_factor.deep", "0.1", "not a value"),
        ("reheat.boiler.capacity", "5 kW", "there is no 'boiler'"),
        ("reheat.electric.capacity", "5", "no unit"),
        ("supply.dew_point", "[8, 9] degC", "has 2 values"),
        ("fan", "3", "is not the path"),
        ("supply.dry_bulb.mid", "20 degC", "low, high"),
        ("airflow.schedule.1.fraction", "0.5", "there is no '1'"),
    ],
)
def test_a_bad_override_is_refused_like_a_bad_file(path, value, says):
    with pytest.raises(SchemeError) as caught:
        parse_scheme(BASE, settings={path: value})
    assert says in str(caught.value)


def test_overrides_reach_every_kind_of_setting():
    text = BASE + '[[airflow.schedule]]\nhours = "07:00..19:00"\n'
    one = scheme(
        text,
        coil__bypass_factor="10 %",
        reheat__electric__capacity="60 kW",
        supply__dry_bulb__low="18 degC",
        supply__dew_point="{ by_month = [" + ", ".join(['"50 degF"'] * 12) + "] }",
        fan__total_pressure="3 inH2O",
        fan__efficiency="0.6",
        airflow__schedule__1__fraction="0.5",
    )
    assert one.coil.bypass_factor == pytest.approx(0.1)
    assert one.reheat[0].capacity == 60.0
    assert (one.supply.low, one.supply.high) == (Setpoint(values=(18.0,)), Setpoint(values=(20.0,)))
    assert one.supply.dew_point.values == (10.0,) * 12
    assert one.fan is not None
    assert one.fan.total_pressure == pytest.approx(747.26673)
    assert one.airflow.schedule[0].fraction == 0.5


def test_every_setting_knows_where_it_came_from():
    origins = {leaf.path: leaf.origin for leaf in leaves(scheme(supply__dry_bulb__low="18 degC"))}
    assert origins["supply.dry_bulb.low"] == "command"
    assert origins["supply.dry_bulb.high"] == "file"
    assert origins["coil.bypass_factor"] == "file"
    assert origins["coil.least_surface_temperature"] == "default"
    assert origins["reheat.electric.efficiency"] == "default"


def test_what_a_scheme_means_has_one_hash_however_it_is_written():
    same = BASE.replace('"2 m3/s"', '"2000 L/s"').replace('"11 degC"', '"51.8 degF"').replace("base", "other")
    explicit = same + "[carbon]\n[prices]\n"
    assert resolved_sha256(scheme(BASE)) == resolved_sha256(scheme(same)) == resolved_sha256(scheme(explicit))
    assert resolved_sha256(scheme(BASE)) != resolved_sha256(scheme(coil__bypass_factor="0.06"))
    assert resolved_sha256(scheme(BASE)) != resolved_sha256(scheme(BASE + FAN))


def test_the_resolved_hash_covers_every_field_of_the_model():
    """A field that is no setting would be left out of the hash, and two schemes would pass for one."""
    one = scheme(BASE + FAN + '[preheat]\ndry_bulb = "4 degC"\nsource = "boiler"\n')
    covered = {leaf.path.split(".")[0] for leaf in leaves(one)}
    sections = {f.name for f in dataclasses.fields(Scheme)} - {"name", "source"}
    assert covered == sections
    for section in (*_SECTIONS.values(), ScheduleRule):
        fields = {f.name for f in dataclasses.fields(section)}
        loose = fields - {name for name, _ in settings_of(section)}
        assert loose <= {"schedule", "days", "hours", "months"}, section


@pytest.mark.parametrize("name", list(bundled_schemes()))
def test_bundled_schemes_are_read(name):
    assert load_scheme(name).name


def test_the_starter_shows_every_setting():
    text = starter_text()
    one = scheme(BASE + FAN + '[preheat]\ndry_bulb = "4 degC"\nsource = "boiler"\n[[airflow.schedule]]\n')
    for leaf in leaves(one):
        if leaf.path.startswith("supply.dry_bulb"):
            assert "dry_bulb = { low" in text
        else:
            key = leaf.path.rpartition(".")[2]
            assert f"{key} = " in text, leaf.path


def test_the_starters_commented_lines_are_valid_too():
    lines = []
    for line in starter_text().splitlines():
        bare = line.removeprefix("# ")
        is_setting = " = " in bare and not bare.startswith(" ") and bare.split(" = ")[0].isidentifier()
        lines.append(bare if line.startswith("# ") and (is_setting or bare.startswith("[")) else line)
    one = parse_scheme("\n".join(lines))
    assert one.preheat is not None
    assert one.airflow.schedule
    assert one.coil.capacity == 150.0
    assert one.prices.electricity is not None


def test_a_file_that_cannot_be_read_is_refused(tmp_path):
    for path, says in ((tmp_path, "is a folder"), (tmp_path / "none.toml", "there is no such scheme")):
        with pytest.raises(SchemeError, match=says):
            load_scheme(path)
    latin = tmp_path / "latin.toml"
    latin.write_bytes(BASE.replace("base", "caf\u00e9").encode("latin-1"))
    with pytest.raises(SchemeError, match="not UTF-8"):
        load_scheme(latin)
    marked = tmp_path / "marked.toml"
    marked.write_bytes(b"\xef\xbb\xbf" + BASE.encode())
    assert load_scheme(marked).name == "base"
    with pytest.raises(SchemeError, match="did you mean 'starter'"):
        load_scheme("startr")


def test_the_order_of_sources_is_part_of_what_a_scheme_means():
    boiler, electric = '[[reheat]]\nsource = "boiler"\n', '[[reheat]]\nsource = "electric"\n'
    one, other = (BASE.replace(electric, sources) for sources in (boiler + electric, electric + boiler))
    assert resolved_sha256(scheme(one)) != resolved_sha256(scheme(other))


def test_schedules_and_reset_curves_that_differ_do_not_stack():
    rules = [BASE + f'[[airflow.schedule]]\nhours = "{span}"\n' for span in ("07:00..19:00", "08:00..20:00")]
    curves = [
        f'{{ outdoor = ["{low} degC", "30 degC"], value = ["12 degC", "10 degC"] }}' for low in (10, 15)
    ]
    pairs = [[scheme(text) for text in rules], [scheme(supply__dew_point=curve) for curve in curves]]
    for pair in pairs:
        with pytest.raises(SchemeError, match="differ in more than a number"):
            stack(pair)
    fractions = [BASE + f"[[airflow.schedule]]\nfraction = {x}\n" for x in (0.5, 1.0)]
    assert stack([scheme(text) for text in fractions]).variants == (2,)


def test_schemes_of_different_shape_do_not_stack():
    for other in (scheme(BASE + FAN), scheme(coil__capacity="5 kW"), scheme(airflow__basis="actual")):
        with pytest.raises(SchemeError, match="differ in more than a number"):
            stack([scheme(), other])


def test_a_value_outside_its_range_cannot_be_constructed():
    one = scheme()
    with pytest.raises(SchemeError, match="bypass_factor"):
        dataclasses.replace(one.coil, bypass_factor=1.2)
