"""``docs/scheme-reference.md``: every section and setting of a scheme, from the model's own declarations."""

from __future__ import annotations

import dataclasses
import inspect
import tomllib
from typing import Any, Final

from generators.markdown import MARK, cell, code, paragraph, table

from estimator.airstream.airflow import ScheduleRule
from estimator.quantities import _ALIASES, QUANTITIES, Quantity, units_of
from estimator.scheme import PATHS, Scheme
from estimator.scheme_file import _ALWAYS, _SECTIONS, bundled_schemes, starter_text
from estimator.settings import REQUIRED, Setting, settings_of

__all__ = ["scheme_page"]

_INTRODUCTION: Final = (
    "A scheme is one way of treating a building's outdoor air: a TOML file. `dewledger scheme new` writes "
    "one with every setting in it, `dewledger scheme show` lists what a file means and where each value came "
    "from. The reader is strict: a key that is not known, a quantity without a unit and a value outside its "
    "bounds are refused, all of a file at once. Nothing is defaulted silently: what a file leaves out is "
    "listed with every result.",
    "A section that stands in the file is a device that stands in the airstream, in this order whatever the "
    "order of the file: preheat, fan (blow-through), cooling coil, fan (draw-through), sources of reheat in "
    "the order of the file.",
)

#: What a rule of the schedule takes besides its settings.
_RULE: Final = {
    "days": (
        "days of the week in which the rule applies",
        'a day, a span or a list: `"mon"`, `"mon..fri"`, `["mon", "wed"]`',
        "all days",
    ),
    "hours": (
        "hours of the day, by their start; a span may run over midnight",
        '`"HH:00..HH:00"`, such as `"07:00..19:00"` or `"22:00..06:00"`',
        "the whole day",
    ),
    "months": (
        "months in which the rule applies",
        'a month, a span or a list: `"jul"`, `"nov..mar"`, `["jan", "jul"]`',
        "all months",
    ),
}

_SCHEDULE: Final = """
[airflow]
outdoor_air = "10000 cfm"

[[airflow.schedule]]            # the reading rooms
days = "mon..sat"
hours = "08:00..20:00"

[[airflow.schedule]]            # a third of the air for the books, at night and on Sundays
days = "sun"
fraction = 0.33

[[airflow.schedule]]
days = "mon..sat"
hours = "20:00..08:00"
fraction = 0.33
"""

_TARGETS: Final = """
[supply]
# by month, January first
dew_point = { by_month = ["12 degC", "12 degC", "12 degC", "11 degC", "11 degC", "10 degC",
                          "10 degC", "10 degC", "11 degC", "11 degC", "12 degC", "12 degC"] }
# a band, one end of which follows the outdoor air
dry_bulb = { low = { outdoor = ["10 degC", "25 degC"], value = ["21 degC", "17 degC"] }, high = "22 degC" }
"""


def scheme_page() -> str:
    """The page as text."""
    lines = [MARK, "", "# Scheme reference", ""]
    for text in _INTRODUCTION:
        lines += paragraph(text)
    lines += [
        "## Sections",
        "",
        *table(("section", "stands for", "in a file"), map(_presence, _SECTIONS)),
        "",
    ]
    lines += _name()
    for key, model in _SECTIONS.items():
        lines += _section(key, model)
        if key == "airflow":
            lines += _schedule()
        if key == "supply":
            lines += _targets()
    lines += [*_values(), *_units(), *_paths(), *_bundled(), *_starter()]
    return "\n".join(lines).rstrip("\n") + "\n"


def _first_sentence(model: type) -> str:
    return inspect.cleandoc(model.__doc__ or "").split("\n\n")[0].replace("\n", " ")


def _link(key: str) -> str:
    return f"[`{key}`](#{key})"


def _presence(key: str) -> tuple[str, str, str]:
    default = next(f.default for f in dataclasses.fields(Scheme) if f.name == key)
    if key == "reheat":
        words = "any number, `[[reheat]]`; without one nothing is heated after the coil"
    elif key in _ALWAYS:
        words = "may be left out: its defaults hold"
    elif default is None:
        words = "optional: without it there is no such device"
    else:
        words = "required"
    return _link(key), cell(_first_sentence(_SECTIONS[key])), words


def _name() -> list[str]:
    return [
        "## scheme",
        "",
        *paragraph(
            "The file's own section. `name` is required: a text, shown with every result. It is no part of "
            "what the scheme means: two files that differ in it alone have the same resolved hash."
        ),
    ]


def _section(key: str, model: type) -> list[str]:
    head = f"[[{key}]]" if key == "reheat" else f"[{key}]"
    lines = [f"## {key}", "", *paragraph(f"`{head}`. {inspect.cleandoc(model.__doc__ or '')}")]
    return [*lines, *_settings(key, model)]


def _settings(key: str, model: type) -> list[str]:
    rows = []
    for name, known in settings_of(model):
        if not known.doc:
            raise KeyError(f"{key}.{name} has no meaning written beside it")
        path = PATHS.get(f"{key}.{name}", f"{key}.{name}").removeprefix(f"{key}.")
        varies = "; may vary, see [targets that vary](#targets-that-vary)" if known.schedulable else ""
        rows.append(
            (
                code(path.rpartition("schedule.")[2]),
                cell(known.doc) + varies,
                cell(known.allowed()),
                _written_in(known),
                _default(known),
                code(_example(known)),
            )
        )
    return [*table(("setting", "meaning", "takes", "units", "default", "example"), rows), ""]


def _written_in(known: Setting) -> str:
    if known.quantity is None:
        return ""
    return cell(", ".join("bare" if unit == "1" else unit for unit in units_of(known.quantity)))


def _default(known: Setting) -> str:
    if known.default is REQUIRED:
        return "**required**"
    if known.default is None and known.source:
        text = "as said"
    elif known.default in (None, ""):
        text = "not set"
    elif known.quantity is None:
        text = code(f'"{known.default}"')
    else:
        text = code(_as_written(known.default, known.quantity))
    return text + (f" ({cell(known.source)})" if known.source else "")


def _as_written(value: float, quantity: Quantity) -> str:
    return f"{value:g}" if quantity.unit == "1" else f'"{value:g} {quantity.unit}"'


def _example(known: Setting) -> str:
    """The setting's own example, or its default, as a file has it."""
    if not known.example:
        if known.quantity is None:
            return f'"{known.default}"'
        return _as_written(known.default, known.quantity)
    plain = known.example.startswith('"') or known.example.replace(".", "", 1).isdigit()
    return known.example if plain else f'"{known.example}"'


def _schedule() -> list[str]:
    settings = dict(settings_of(ScheduleRule))
    own = {field.name for field in dataclasses.fields(ScheduleRule)} - set(settings)
    if own != set(_RULE):
        raise KeyError(f"describe {', '.join(own ^ set(_RULE))} of a schedule rule in {__name__}._RULE")
    rows = [(code(key), meaning, takes, default) for key, (meaning, takes, default) in _RULE.items()]
    rows += [
        (code(name), cell(known.doc), cell(known.allowed()), _default(known))
        for name, known in settings.items()
    ]
    return [
        "## airflow.schedule",
        "",
        *paragraph(
            "`[[airflow.schedule]]`, any number of rules. Without one the unit runs all year at full flow. "
            "With one, hours that no rule names are off, and where several name an hour the last one counts. "
            "The day of the week is that of the weather's calendar; a typical year begins on a Monday unless "
            "`--first-weekday` says otherwise. There are no holidays: a typical year has no dates for them."
        ),
        *table(("setting", "meaning", "takes", "default"), rows),
        "",
        "```toml",
        *_SCHEDULE.strip().splitlines(),
        "```",
        "",
    ]


def _targets() -> list[str]:
    return [
        "## Targets that vary",
        "",
        *paragraph(
            "`supply.dry_bulb` takes one value, which is both ends of the band, or a table with `low`, "
            "`high` or both. With one value the supply is heated up and cooled down to it; inside a band it "
            "is neither heated nor cooled; an end that is left out is not asked for. The dew point is a "
            "highest one: drier air is left as it is."
        ),
        *paragraph("The dew point and each end of the band take one of three forms:"),
        *table(
            ("form", "meaning"),
            (
                ('`"11 degC"`', "the same in every hour"),
                (
                    "`{ by_month = [twelve values] }`",
                    "one value a month, January first, changing on the first of the month",
                ),
                (
                    "`{ outdoor = [rising dry bulbs], value = [as many values] }`",
                    "follows the outdoor dry bulb of the hour: a straight line between two entries, the last "
                    "value beyond the ends",
                ),
            ),
        ),
        "",
        *paragraph(
            "`low` may lie above `high` in no hour: where both can be compared beforehand that is refused "
            "with the file, otherwise when the first such hour is met."
        ),
        "```toml",
        *_TARGETS.strip().splitlines(),
        "```",
        "",
    ]


def _values() -> list[str]:
    return [
        "## Values",
        "",
        *paragraph(
            "In a file and on the command line a value is a number and its unit. A number that has no unit "
            "by nature (a fraction, a factor, a coefficient of performance) may stand bare or in per cent; "
            "any other bare number is refused. Case counts: `kW`, not `KW`. Where a temperature *difference* "
            "is asked for, one `degF` is five ninths of a kelvin."
        ),
        *table(
            ("written", "is"),
            (
                ('`"11 degC"`, `"10000 cfm"`, `"3.5 inH2O"`', "number and unit, with or without a space"),
                ('`0.05`, `"5 %"`', "a pure number"),
                ('`"8..14 degC by 0.5"`', "a range with its step, both ends included: 13 values"),
                ('`"[8, 10, 12] degC"`, `["8 degC", "46 degF"]`', "a list"),
            ),
        ),
        "",
        *paragraph(
            "A setting of a scheme is one value. Ranges and lists belong to the same grammar and are for "
            "what takes several; where one value is asked for they are refused."
        ),
    ]


def _units() -> list[str]:
    rows = [
        (
            cell(q.label),
            code(q.symbol),
            _unit(q.unit),
            _unit(q.unit_for("si")),
            _unit(q.unit_for("ip")),
            cell(", ".join("bare" if unit == "1" else unit for unit in units_of(q))),
        )
        for q in QUANTITIES.values()
    ]
    other: dict[str, list[str]] = {}
    for alias, unit in _ALIASES.items():
        other.setdefault(unit, []).append(alias)
    return [
        "## Quantities and units",
        "",
        *paragraph(
            "*Kept in* is the unit inside the program and in every JSON and CSV; pages show the next two, by "
            "`--units`. *Written in* lists every unit that a value may be given in."
        ),
        *table(("quantity", "symbol", "kept in", "`--units si`", "`--units ip`", "written in"), rows),
        "",
        *paragraph(
            "A volume of water stands for its mass at 10 degC, 999.7 kg/m3. A ton of refrigeration is "
            "12 000 Btu/h; `MMBtu` is a million Btu, and `MBtu`, which some read as a thousand, is refused. "
            "Prices are per unit of energy bought, in whatever currency the scheme names."
        ),
        *paragraph(
            "Other spellings: "
            + "; ".join(f"{', '.join(map(code, names))} for {code(unit)}" for unit, names in other.items())
            + "."
        ),
    ]


def _unit(unit: str) -> str:
    return "" if unit == "1" else cell(unit)


def _paths() -> list[str]:
    return [
        "## Settings from the command line",
        "",
        *paragraph(
            "`--set KEY=VALUE` puts one value in the place of the file's, written as the file would have it. "
            "The key is section and setting; a reheat source is addressed by its name, a rule of the "
            "schedule by its number. A section that the file does not have is made."
        ),
        "```sh",
        "dewledger scheme show starter --set coil.bypass_factor=0.1 --set reheat.electric.capacity=40kW",
        'dewledger scheme show starter --set "supply.dry_bulb.high=24 degC" --set plant.cooling_cop=2.9',
        'dewledger scheme show starter --set \'supply.dew_point={ outdoor = ["15 degC", "30 degC"], '
        'value = ["12 degC", "10 degC"] }\'',
        "```",
        "",
    ]


def _bundled() -> list[str]:
    rows = []
    for name, text in bundled_schemes().items():
        head: dict[str, Any] = tomllib.loads(text)["scheme"]
        first = next((line.lstrip("# ") for line in text.splitlines() if line.startswith("#")), "")
        rows.append((code(name), cell(head["name"]), cell(first)))
    return [
        "## Bundled schemes",
        "",
        *paragraph("Each name may stand in place of a file. `dewledger scheme list` lists them."),
        *table(("name", "called", "is"), rows),
        "",
    ]


def _starter() -> list[str]:
    return [
        "## The starter",
        "",
        *paragraph("What `dewledger scheme new` writes:"),
        "```toml",
        *starter_text().rstrip("\n").splitlines(),
        "```",
    ]
