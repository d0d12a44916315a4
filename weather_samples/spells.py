"""Seeded chance and the weather made from it: drifts, air masses, showers.

Everything starts from the raw output of one bit generator, which numpy promises never to change; its
ready-made normal numbers carry no such promise. Sums of whole numbers stand in for them, so that the draws
are the same to the last bit everywhere.
"""
# ruff: noqa: INP001 - a neighbour of a script that is run by its path, not a package

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

__all__ = ["Chance", "air_masses", "drift", "long_tailed", "relaxed", "showers"]

Array = NDArray[np.float64]

_TERMS: Final = 12
#: Hours that are thrown away, so that no process starts from nothing.
_SETTLING: Final = 20 * 24
#: How much warmer and moister an air mass is at its end than at its start, in standard deviations: it is
#: modified slowly and replaced quickly.
_MODIFICATION: Final = 0.9
#: Time in which one air mass replaces the other, h.
_PASSAGE: Final = 2.5


class Chance:
    """Random numbers from a seed (PCG64, O'Neill 2014)."""

    def __init__(self, seed: int) -> None:
        self._bits = np.random.Generator(np.random.PCG64(seed)).bit_generator

    def _whole(self, count: int) -> NDArray[np.uint64]:
        return np.asarray(self._bits.random_raw(count), dtype=np.uint64) >> np.uint64(32)

    def uniform(self, count: int) -> Array:
        """Numbers between 0 and 1, shape (count,)."""
        return (self._whole(count).astype(np.float64) + 0.5) / 2.0**32

    def normal(self, count: int) -> Array:
        """Nearly normal numbers, shape (count,): the sum of twelve uniform ones less six, within -6..6."""
        total = self._whole(count * _TERMS).reshape(count, _TERMS).sum(axis=1)
        return total.astype(np.float64) / 2.0**32 - _TERMS / 2.0


def relaxed(forcing: Array, hours: float, start: float = 0.0) -> Array:
    """What follows ``forcing`` with a delay of ``hours``, shape (hours,)."""
    keep = float(np.exp(-1.0 / hours))
    out = np.empty_like(forcing)
    value = start
    for i, target in enumerate(forcing.tolist()):
        value = keep * value + (1.0 - keep) * target
        out[i] = value
    return out


def drift(chance: Chance, count: int, slow: float, fast: float = 0.0) -> Array:
    """A process of mean 0 and variance 1 that forgets within ``slow`` hours, smooth over ``fast`` hours."""
    shocks = chance.normal(count + _SETTLING)
    a = float(np.exp(-1.0 / slow))
    out = relaxed(shocks, slow) * np.sqrt((1.0 + a) / (1.0 - a))
    if fast:
        b = float(np.exp(-1.0 / fast))
        variance = (1.0 - b) ** 2 / (1.0 - b * b) * (1.0 + a * b) / (1.0 - a * b)
        out = relaxed(out, fast) / np.sqrt(variance)
    return np.asarray(out[_SETTLING:])


def air_masses(chance: Chance, count: int, life: float, rows: int) -> Array:
    """Levels of mean 0 and variance 1 that last 0.4 to 1.6 times ``life`` hours, shape (rows, count).

    The rows change in the same hours and are otherwise independent.
    """
    total = count + _SETTLING
    number = int(total / life * 2.0) + 10
    lengths = np.rint(life * (0.4 + 1.2 * chance.uniform(number))).astype(int)
    levels = chance.normal(rows * number).reshape(rows, number)
    age = np.concatenate([(np.arange(n) + 0.5) / n for n in lengths])
    course = np.repeat(levels, lengths, axis=1) + _MODIFICATION * (age - 0.5)
    course /= np.sqrt(1.0 + _MODIFICATION**2 / 12.0)
    return np.array([relaxed(row[:total], _PASSAGE) for row in course])[:, _SETTLING:]


def long_tailed(values: Array, skew: float) -> Array:
    """Standard normal values bent to a long lower tail, mean 0 and variance 1 (a lognormal, mirrored)."""
    spread = np.sqrt((np.exp(skew**2) - 1.0) * np.exp(skew**2))
    return np.asarray((np.exp(skew**2 / 2.0) - np.exp(-skew * values)) / spread)


def showers(chance: Chance, odds: Array, noon: float) -> tuple[Array, Array]:
    """Afternoon showers: whether it rains, and how far the ground is still cooled by it, both 0..1.

    ``odds`` is the chance of one on each day, shape (days,); ``noon`` the clock of solar noon, h.
    """
    days = len(odds)
    happens = chance.uniform(days) < odds
    start = np.rint(noon + 2.5 + 1.8 * chance.normal(days)).astype(int)
    length = 1 + np.floor(3.0 * chance.uniform(days) ** 2).astype(int)
    strength = 0.4 + 0.6 * chance.uniform(days)
    rain = np.zeros(days * 24)
    for day in np.flatnonzero(happens):
        first = max(24 * day + start[day], 0)
        rain[first : first + length[day]] = strength[day]
    cooled = np.empty_like(rain)
    value = 0.0
    for i, now in enumerate(rain.tolist()):
        value = max(0.6 * value, now)
        cooled[i] = value
    return rain, cooled
