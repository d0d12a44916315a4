"""What bought energy costs and emits: a pure function of a finished year's energy table."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Protocol

from estimator.scheme import Carbon, Prices

__all__ = ["Bill", "bill"]


class Row(Protocol):
    """What is needed of a row of an energy table."""

    @property
    def carrier(self) -> str: ...
    @property
    def monthly_kwh(self) -> tuple[float, ...] | None: ...


@dataclass(frozen=True, kw_only=True)
class Bill:
    """Cost and carbon by month, January first; None where a price, a factor or an amount is not known."""

    currency: str
    monthly_cost: tuple[float, ...] | None
    monthly_co2e_kg: tuple[float, ...] | None

    def cost(self, months: Iterable[int]) -> float | None:
        """Cost of the months given, 1 to 12, in ``currency``."""
        return _sum(self.monthly_cost, months)

    def co2e_kg(self, months: Iterable[int]) -> float | None:
        """Carbon of the months given, 1 to 12, kg CO2 equivalent."""
        return _sum(self.monthly_co2e_kg, months)


def _sum(monthly: tuple[float, ...] | None, months: Iterable[int]) -> float | None:
    return None if monthly is None else sum(monthly[month - 1] for month in months)


def bill(rows: Iterable[Row], prices: Prices, carbon: Carbon) -> Bill:
    """Flat prices and carbon factors on an energy table; never a partial sum."""
    table = list(rows)
    return Bill(
        currency=prices.currency,
        monthly_cost=_weighted(table, prices),
        monthly_co2e_kg=_weighted(table, carbon),
    )


def _weighted(rows: list[Row], factors: Prices | Carbon) -> tuple[float, ...] | None:
    totals = [0.0] * 12
    for row in rows:
        factor = getattr(factors, row.carrier)
        if factor is None or row.monthly_kwh is None:
            return None
        totals = [total + kwh * factor for total, kwh in zip(totals, row.monthly_kwh, strict=True)]
    return tuple(totals) if rows else None
