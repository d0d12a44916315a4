"""The demo as text, and the files that it leaves behind."""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Mapping
from typing import Final

from estimator.demo import OWNER, SCHEMES, SITES, Demo
from estimator.quantities import UnitSystem, convert, count
from estimator.report.documents import dumps, year_document
from estimator.report.ledger import write_ledger
from estimator.report.scheme import setting_text
from estimator.report.text import bullets, heading, page, pairs, paragraph, show, table, unit
from estimator.scheme import leaves
from estimator.totals import PeriodTotals

__all__ = ["HOURS_OF", "demo_files", "demo_page"]

#: The site whose hours are written: a year with much drying and some heating.
HOURS_OF: Final = "sablewick-bay"
#: Where a year has fewer hours of drying than this, it is heating that costs.
_FEW_HOURS: Final = 500
_PRICED: Final = (
    "Prices and carbon factors are invented too, and energy alone is priced: no equipment, upkeep or demand "
    "charge."
)


def demo_page(demo: Demo, system: UnitSystem = "si", folder: str = "dewledger-demo") -> str:
    """The whole page; ``folder`` is where the files are, as a command names it."""
    lines: list[str] = []
    for title, body in (
        (f"{OWNER}: one outdoor-air unit for six sites", _question(demo, system)),
        (f"Energy cost of a year, {_currency(demo)}", _costs(demo, system)),
        ("What the air takes with the scheme that costs least", _figures(demo, system)),
        ("In words", _wrapped(_words(demo, system))),
        ("Cautions", bullets(_cautions(demo))),
        (f"Files in {folder}", pairs(_contents(demo))),
        ("Try next", _next(demo, system, folder)),
    ):
        lines += [*heading(title), *body]
    return page(lines)


def _wrapped(text: str) -> list[str]:
    """A paragraph in which no number is torn from its thousands or its unit."""
    return [line.replace("\xa0", " ") for line in paragraph(re.sub(r"(?<=\d) ", "\xa0", text))]


# of the demo


def _plain(scheme: str) -> str:
    """A scheme as a sentence names it."""
    return scheme.replace("-", " ")


def _currency(demo: Demo) -> str:
    return demo.schemes[SCHEMES[0]].prices.currency


def _site(demo: Demo, site: str) -> str:
    return demo.results[site][SCHEMES[0]].weather.site


def _annual(demo: Demo, site: str) -> PeriodTotals:
    """The year of the scheme that costs least."""
    return demo.results[site][demo.best(site)].totals.annual


def _total(demo: Demo, scheme: str) -> float:
    return sum(demo.cost(site, scheme) for site in SITES)


def _undone(annual: PeriodTotals) -> float:
    """The share of the coil's cooling that is put back."""
    return annual.cooling_undone_kwh / annual.coil_cooling_kwh if annual.coil_cooling_kwh else 0.0


def _water_unit(system: UnitSystem) -> str:
    """The unit of a year's water; a kilogram would be small."""
    return "m3" if system == "si" else "US gal"


def _best_of_all(demo: Demo) -> str:
    return min(demo.ranked, key=lambda name: _total(demo, name))


def _asked(demo: Demo, scheme: str, path: str, system: UnitSystem) -> str:
    return next(setting_text(leaf, system) for leaf in leaves(demo.schemes[scheme]) if leaf.path == path)


def _band(demo: Demo, scheme: str, system: UnitSystem) -> str:
    low, high = (_asked(demo, scheme, f"supply.dry_bulb.{end}", system) for end in ("low", "high"))
    return low if low == high else f"{low.partition(' ')[0]} to {high}"


def _colder(demo: Demo, scheme: str) -> str:
    own, first = (demo.schemes[name].supply.low for name in (scheme, SCHEMES[0]))
    return "colder " if own and first and min(own.values) < min(first.values) else ""


# the page


def _question(demo: Demo, system: UnitSystem) -> list[str]:
    flow, dew_point = (
        _asked(demo, SCHEMES[0], path, system) for path in ("airflow.outdoor_air", "supply.dew_point")
    )
    dry_bulb = _band(demo, SCHEMES[0], system)
    return _wrapped(
        f"Day and night the unit brings {flow} of outdoor air into a library, at {dry_bulb} and a dew point "
        f"of at most {dew_point}. To dry the air it must cool it further than the rooms can use, and then "
        f"heat it again: reheat. Which costs least, {' or '.join(_plain(name) for name in demo.ranked)}? "
        "All of this is synthetic: the owner, the sites, their weather and the prices."
    )


def _costs(demo: Demo, system: UnitSystem) -> list[str]:
    names = list(demo.schemes)
    heads = [_plain(name).split(maxsplit=1) for name in names]
    stars = ["" if name in demo.ranked else "*" for name in names]
    rows = [
        ["", "", "", *(head for head, _ in heads)],
        ["", "", "costs least", *(head + star for (_, head), star in zip(heads, stars, strict=True))],
    ]
    for site, climate in SITES.items():
        costs = [count(demo.cost(site, name)) for name in names]
        rows.append([_site(demo, site), climate, _plain(demo.best(site)), *costs])
    rows.append(["All six", "", _plain(_best_of_all(demo)), *(count(_total(demo, name)) for name in names)])
    rows.append(["", "CO2 equivalent, t", "", *(count(demo.co2e_kg(name) / 1000.0) for name in names)])
    lines = table(rows, "lll" + "r" * len(names))
    lines.insert(-2, "")
    asked = _band(demo, SCHEMES[0], system)
    for name in names:
        if name not in demo.ranked:
            lines += _wrapped(
                f"* Another duty, so not ranked: {_plain(name)} gives {_colder(demo, name)}air of "
                f"{_band(demo, name, system)}, the others of {asked}."
            )
    return lines + _wrapped(_factors(demo))


def _factors(demo: Demo) -> str:
    first = demo.schemes[SCHEMES[0]]
    prices, carbon = first.prices, first.carbon
    return (
        f"Invented, and flat: a kWh of electricity costs {prices.electricity:.2f} {prices.currency} and "
        f"emits {carbon.electricity:.2f} kg of CO2; a kWh of fuel {prices.fuel:.2f} and {carbon.fuel:.2f} kg."
    )


def _figures(demo: Demo, system: UnitSystem) -> list[str]:
    water = _water_unit(system)
    rows = [
        ["", "drying", "coil", "cooling", "reheat", "cost of", "water", "off"],
        ["", "", "cooling", "undone", "", "reheat", "drained", "target"],
        ["", "h", unit("cooling", system), "%", unit("heat", system), "%", water, "h"],
    ]
    for site in SITES:
        annual = _annual(demo, site)
        best = demo.best(site)
        rows.append(
            [
                _site(demo, site),
                count(annual.hours_drying),
                show("cooling", annual.coil_cooling_kwh, system),
                count(100.0 * _undone(annual)),
                show("heat", annual.reheat_kwh, system),
                count(100.0 * demo.reheat_cost(site, best) / demo.cost(site, best)),
                count(convert(annual.condensate_kg, "kg", water)),
                count(annual.hours_unmet),
            ]
        )
    return [
        *table(rows, "l" + "r" * 7),
        *paragraph(
            "Cooling undone: the share of the coil's cooling that reheat and fan heat put back. Cost of "
            "reheat: its share of the energy cost. Off target: hours in which the supply air is not as asked."
        ),
    ]


def _words(demo: Demo, system: UnitSystem) -> str:
    return " ".join([_on_cost(demo), _on_reheat(demo), _on_other_air(demo, system), _on_water(demo, system)])


def _ends(demo: Demo, values: Mapping[str, float], template: str) -> str:
    """The least and the most of a figure and where each is, as ``template`` words one of them."""
    low, high = min(values, key=values.__getitem__), max(values, key=values.__getitem__)
    least, most = (template.format(count(values[site]), _site(demo, site)) for site in (low, high))
    return f"from {least} to {most}"


def _on_cost(demo: Demo) -> str:
    best = _best_of_all(demo)
    everywhere = all(demo.best(site) == best for site in SITES)
    second = min((name for name in demo.ranked if name != best), key=lambda name: _total(demo, name))
    spared = {site: demo.cost(site, second) - demo.cost(site, best) for site in SITES}
    return (
        f"{_plain(best).capitalize()} costs least {'at every site' if everywhere else 'over all six sites'}. "
        f"Against {_plain(second)} it spares {count(sum(spared.values()))} {_currency(demo)} a year, "
        f"{_ends(demo, spared, '{} at {}')}: at most so much more may its equipment cost a year."
    )


def _on_reheat(demo: Demo) -> str:
    undone = {site: 100.0 * _undone(_annual(demo, site)) for site in SITES}
    text = f"Reheat and fan heat put back {_ends(demo, undone, '{} % ({})')} of what the coil cools."
    few = [site for site in SITES if _annual(demo, site).hours_drying < _FEW_HOURS]
    for site in few:
        hours = count(_annual(demo, site).hours_drying)
        text += f" {_site(demo, site)} needs drying in {hours} hours a year only: there, heating is the cost."
    return text


def _on_other_air(demo: Demo, system: UnitSystem) -> str:
    best = _best_of_all(demo)
    texts = []
    for name in demo.schemes:
        if name not in demo.ranked:
            less = _total(demo, best) - _total(demo, name)
            change = f"{count(abs(less))} {'less' if less > 0 else 'more'}"
            texts.append(
                f"{_plain(name).capitalize()} would cost {change}, but gives {_colder(demo, name)}air of "
                f"{_band(demo, name, system)}, for rooms that need cooling anyway."
            )
    return " ".join(texts)


def _on_water(demo: Demo, system: UnitSystem) -> str:
    water = {site: _annual(demo, site).condensate_kg for site in SITES}
    total, most = sum(water.values()), max(water, key=water.__getitem__)
    amount = f"{count(convert(total, 'kg', _water_unit(system)))} {_water_unit(system)}"
    return (
        f"The coils shed {amount} of water a year, {count(100.0 * water[most] / total)} % of it at "
        f"{_site(demo, most)}."
    )


def _cautions(demo: Demo) -> list[str]:
    said = dict.fromkeys(
        text for own in demo.results.values() for result in own.values() for text in result.cautions
    )
    first, *rest = said
    return [first, _PRICED, *rest]


def _contents(demo: Demo) -> list[tuple[str, str]]:
    best = _plain(demo.best(HOURS_OF))
    return [
        ("answer.txt", "this page"),
        ("annual.csv", "every annual figure of every site with every scheme, in SI units"),
        ("hours.csv", f"every hour of {_site(demo, HOURS_OF)} with {best}, in SI units"),
        ("years/*.json", "one file for each site with each scheme: the whole result"),
        ("*.toml", "the schemes, with the demo's prices at the end: edit them, run them again"),
    ]


def _next(demo: Demo, system: UnitSystem, folder: str) -> list[str]:
    own = "my.epw"
    unit_given = {
        "si": "--airflow 3m3/s --dew-point 11degC --dry-bulb 21degC",
        "ip": "--airflow 5000cfm --dew-point 52degF --dry-bulb 70degF",
    }[system]
    scheme = f"{folder}/{_best_of_all(demo)}.toml"
    if " " in scheme:
        scheme = f'"{scheme}"'
    steps = (
        (f"Your own site, where {own} is an EPW, TMY3 or TMY2 file:", f"weather {own}"),
        (
            "Your own unit at that site; what you leave out is assumed, and listed:",
            f"year {own} {unit_given}",
        ),
        (
            "The same with a scheme file, which you can edit:",
            f"year {own} --scheme {scheme}",
        ),
        ("One hour in full, to check by hand:", f'hour {HOURS_OF} --scheme starter --at "07-14 15:00"'),
    )
    return [line for label, command in steps for line in (f"  {label}", f"    dewledger {command}")]


# the files


def demo_files(demo: Demo, system: UnitSystem = "si", folder: str = "dewledger-demo") -> dict[str, str]:
    """Every file of the demo by its name in the folder; all but the page are in SI units."""
    files = {"answer.txt": demo_page(demo, system, folder), "annual.csv": _annual_csv(demo)}
    hours = io.StringIO()
    write_ledger(demo.results[HOURS_OF][demo.best(HOURS_OF)].year, hours)
    files["hours.csv"] = hours.getvalue()
    files |= {f"{name}.toml": text for name, text in demo.texts.items()}
    for site, own in demo.results.items():
        files |= {f"years/{site}-{name}.json": dumps(year_document(result)) for name, result in own.items()}
    return files


def _annual_csv(demo: Demo) -> str:
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    header: list[str] = []
    for site, climate in SITES.items():
        for name, result in demo.results[site].items():
            annual = year_document(result)["annual"]
            row = {
                "site": _site(demo, site),
                "climate": climate,
                "weather": "synthetic" if result.weather.synthetic else "",
                "scheme": name,
                "same_duty": int(demo.same_duty(name)),
                "costs_least": int(name == demo.best(site)),
                "currency": result.bill.currency,
                **{key: value for key, value in annual.items() if not isinstance(value, dict)},
            }
            if not header:
                header = list(row)
                writer.writerow(header)
            writer.writerow(["" if value is None else value for value in row.values()])
    return stream.getvalue()
