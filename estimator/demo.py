"""The demo: one invented owner, six sample sites, three ways of treating the same outdoor air.

Owner, places, weather, prices and carbon factors are all made up. The prices stand in the schemes' own text,
so that whoever runs one of these texts on the same weather gets the same figures again.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Final

from estimator import pricing
from estimator.errors import InputError
from estimator.result import YearResult, evaluate
from estimator.samples import samples
from estimator.scheme import Scheme
from estimator.scheme_file import bundled_schemes, parse_scheme
from estimator.weather import read_weather

__all__ = ["OWNER", "SCHEMES", "SITES", "Demo", "run_demo", "scheme_texts"]

OWNER: Final = "Marrowby Libraries"

#: The sample years of the owner's sites, and the kind of climate of each in two or three words.
SITES: Final[Mapping[str, str]] = {
    "port-quellin": "equatorial coast",
    "sablewick-bay": "hot, humid coast",
    "ondavari": "monsoon, inland",
    "millbrandt": "continental, frost",
    "alto-serrone": "dry highland",
    "cape-wendle": "cool maritime",
}

#: The bundled schemes that are compared. The first sets the duty; one that asks for other air is not ranked.
SCHEMES: Final = ("electric-reheat", "boiler-reheat", "cold-supply")

_PRICES: Final = """
# Invented for the demo, as are the carbon factors: put your own in their place.
[prices]
currency = "crowns"
electricity = "0.20 /kWh"
fuel = "0.07 /kWh"

[carbon]
electricity = "0.40 kg/kWh"
fuel = "0.20 kg/kWh"
"""

_YEAR: Final = range(1, 13)


@dataclass(frozen=True, kw_only=True, eq=False)
class Demo:
    """Every scheme at every site."""

    #: the text of each scheme's file, by name
    texts: Mapping[str, str]
    schemes: Mapping[str, Scheme]
    #: by site, then by scheme, in the order of ``SITES`` and ``SCHEMES``
    results: Mapping[str, Mapping[str, YearResult]]

    def same_duty(self, scheme: str) -> bool:
        """Whether a scheme asks for the same supply air, and as much of it, as the first one does."""
        first, own = self.schemes[SCHEMES[0]], self.schemes[scheme]
        return own.supply == first.supply and own.airflow == first.airflow

    @property
    def ranked(self) -> tuple[str, ...]:
        """The schemes of the same duty."""
        return tuple(name for name in self.schemes if self.same_duty(name))

    def ranking(self, site: str) -> list[str]:
        """The schemes of the same duty, best first: fewest hours off target, then the least cost."""
        return sorted(
            self.ranked,
            key=lambda name: (self.results[site][name].totals.annual.hours_unmet, self.cost(site, name)),
        )

    def best(self, site: str) -> str:
        """The scheme that costs least of those that deliver the same air."""
        return self.ranking(site)[0]

    def cost(self, site: str, scheme: str) -> float:
        """Cost of a year's energy."""
        return _stated(self.results[site][scheme].bill.cost(_YEAR))

    def co2e_kg(self, scheme: str) -> float:
        """Carbon of a year's energy at all sites together, kg CO2 equivalent."""
        return sum(_stated(own[scheme].bill.co2e_kg(_YEAR)) for own in self.results.values())

    def reheat_cost(self, site: str, scheme: str) -> float:
        """Cost of the energy that is bought for reheat."""
        result = self.results[site][scheme]
        rows = [row for row in result.totals.energy if row.purpose == "reheat"]
        bill = pricing.bill(rows, result.scheme.prices, result.scheme.carbon)
        return _stated(bill.cost(_YEAR)) if rows else 0.0


def _stated(value: float | None) -> float:
    # the schemes of the demo set whatever a sum needs
    assert value is not None
    return value


def scheme_texts() -> dict[str, str]:
    """The text of each scheme of the demo: a bundled one, with the demo's prices at its end."""
    bundled = bundled_schemes()
    return {name: bundled[name] + _PRICES for name in SCHEMES}


def run_demo(advance: Callable[[str], None] | None = None) -> Demo:
    """Take the air of every site through every scheme; ``advance`` is told what comes next.

    Raises
    ------
    InputError
        The sample weather is not there.
    """
    texts = scheme_texts()
    schemes = {name: parse_scheme(text, f"{name}.toml") for name, text in texts.items()}
    known = samples()
    missing = [site for site in SITES if site not in known]
    if missing:
        raise InputError(
            f"the sample weather {', '.join(missing)} is missing from this installation",
            where="demo",
            hint="install the package again",
        )
    results = {}
    for number, site in enumerate(SITES, 1):
        if advance is not None:
            advance(f"{known[site].site}, {number} of {len(SITES)}")
        weather = read_weather(known[site].path)
        results[site] = {name: evaluate(weather, scheme) for name, scheme in schemes.items()}
    return Demo(texts=texts, schemes=schemes, results=results)
