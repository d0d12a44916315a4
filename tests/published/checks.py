"""Checks against sources outside the project: what a test compares is also told on the validation page.

A test says with ``validates`` what it checks and against which source, its docstring says which tolerance
and why, and its ``check`` fixture compares the figures. The same call asserts and records, so that the
page holds nothing that no test holds.
"""

from __future__ import annotations

import inspect
import math
from collections.abc import Callable
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any, Final, TypeVar

import numpy as np
import pytest

__all__ = ["RECORDED", "Confidence", "Recorder", "Row", "Source", "Validation", "validates"]

Test = TypeVar("Test", bound=Callable[..., None])


class Confidence(StrEnum):
    """How the expected figures came here."""

    READ = "read in the source"
    MEMORY = "from memory, to be verified"
    PRACTICE = "common practice"
    COMPUTED = "computed: a cross-check, not a source"


@dataclass(frozen=True)
class Source:
    """Where expected figures are from; ``name`` is what the tables of the page call it."""

    name: str
    title: str
    confidence: Confidence


_HANDBOOK: Final = "ASHRAE Handbook Fundamentals 2021 (SI), chapter 1"
TABLE_1: Final = Source("table 1", f"{_HANDBOOK}, table 1, standard atmosphere", Confidence.READ)
TABLE_2: Final = Source("table 2", f"{_HANDBOOK}, table 2, moist air at 101.325 kPa", Confidence.READ)
TABLE_3: Final = Source("table 3", f"{_HANDBOOK}, table 3, water at saturation", Confidence.READ)
TABLE_3_MEMORY: Final = Source(
    "table 3, whole degrees", f"{_HANDBOOK}, table 3, rows between the multiples of 5 degC", Confidence.MEMORY
)
CHARTS: Final = Source("charts", f"{_HANDBOOK}, charts 1 and 6", Confidence.READ)
EXAMPLES: Final = Source("section 10", f"{_HANDBOOK}, section 10, worked examples", Confidence.READ)
INCH_POUND: Final = Source(
    "inch-pound edition", "the same worked examples in the inch-pound edition", Confidence.MEMORY
)
DESIGN: Final = Source(
    "design conditions",
    "ASHRAE Handbook Fundamentals, climatic design information, rounded",
    Confidence.MEMORY,
)
TEXTBOOK_COIL: Final = Source(
    "textbook, coil",
    "a textbook of refrigeration and air conditioning, worked example of a coil with bypass and reheat "
    "(its states read, its statement from memory)",
    Confidence.READ,
)
TEXTBOOK: Final = Source(
    "textbook", "textbooks of refrigeration and air conditioning, problems with answers", Confidence.MEMORY
)
CONSTANTS: Final = Source(
    "textbook constants", "specific heats 1.006, 1.86 and 4.19 kJ/(kg K), 2501 kJ/kg", Confidence.PRACTICE
)
ICE: Final = Source(
    "IAPWS R10-06",
    "IAPWS R10-06 (2009), ice; its coefficients reproduce the check values of the release",
    Confidence.MEMORY,
)
SUBLIMATION: Final = Source(
    "IAPWS R14-08",
    "IAPWS R14-08 (2011), sublimation pressure; its coefficients reproduce the release's check value",
    Confidence.MEMORY,
)
COOLPROP: Final = Source(
    "CoolProp", "CoolProp's humid air, a real-gas formulation, and its water, IAPWS-95", Confidence.COMPUTED
)
PSYCHROLIB: Final = Source(
    "psychrolib", "psychrolib: perfect-gas formulas on the same saturation pressure", Confidence.COMPUTED
)
APART: Final = Source(
    "computed apart",
    "figures worked out once, apart from this program, to the digits given",
    Confidence.COMPUTED,
)
LOAD_INDEX: Final = Source(
    "load index",
    "Harriman, Plager, Kosar, ASHRAE Journal, November 1997 (the definition read; reference state, factors "
    "and the two figures from memory)",
    Confidence.MEMORY,
)
COLLECTION: Final = Source(
    "condensate sum",
    "Lawrence, Perry, Dempsey, ASHRAE Transactions 116(2), 2010 (title read): condensate is the sum of the "
    "moisture removed",
    Confidence.MEMORY,
)
VAPORISATION: Final = Source(
    "heat of vaporisation", "2450 kJ/kg at 20 degC, and what cooler water takes", Confidence.PRACTICE
)
PENALTY: Final = Source("1.08 rule", "1.08 Btu/h per cfm and degF", Confidence.PRACTICE)
FILE_TEXT: Final = Source(
    "the file's text", "real weather files, read here again column by column from their text", Confidence.READ
)
ALMANAC: Final = Source("almanac", "extremes of the equation of time in almanacs", Confidence.MEMORY)
SMITHSONIAN: Final = Source(
    "Smithsonian tables", "Smithsonian meteorological tables (Goff and Gratch)", Confidence.MEMORY
)


def decimals_for(resolution: float) -> int:
    """Decimals that show ``resolution``."""
    return max(0, math.ceil(-math.log10(resolution) - 1e-9))


def shown(value: float, decimals: int) -> str:
    """A number without minus zero, in powers of ten where it would be all zeros."""
    text = f"{value:.{decimals}f}"
    if decimals > 9:
        text = f"{value:.1e}"
    return text.lstrip("-") if not any(c in "123456789" for c in text) else text


@dataclass(frozen=True)
class Cell:
    """A cell of a table: its text, and by how much a number in it may move before the page is stale."""

    text: str
    slack: float = 0.0


#: A page is stale once a figure has moved by this share of the tolerance it is held to: less is another
#: version of a library or another computer.
_STALE: Final = 0.1
#: Digits are shown down to this share of the tolerance.
_RESOLVED: Final = 0.05
#: A tolerance below this, as a share, is one for rounding; what rounding does differs between computers.
_ROUNDING: Final = 1e-8


@dataclass(kw_only=True)
class Row:
    """One comparison, or the largest difference of many."""

    kind: str
    case: str
    unit: str
    source: Source
    #: as a share of the expected figure where ``relative``, else in the unit
    tolerance: float
    relative: bool
    difference: float
    expected: float = math.nan
    found: float = math.nan
    count: int = 1
    column: str = ""

    def cells(self) -> dict[str, Cell]:
        """What a table may show of it, by the head of the column."""
        scale = 100.0 if self.relative else 1.0
        unit = " %" if self.relative else ""
        allowed, held = scale * self.tolerance, scale * self.difference
        if self.tolerance == 0.0:
            tolerance, difference = Cell("exact"), Cell(f"{held:g}")
        elif self.kind == "at most":
            tolerance, difference = Cell("a limit"), Cell("")
        else:
            tolerance = Cell(f"{allowed:.3g}{unit}")
            difference = Cell(f"{shown(held, decimals_for(_RESOLVED * allowed))}{unit}", _STALE * allowed)
        if self.relative and 0.0 < self.tolerance < _ROUNDING:
            difference = Cell("rounding")
        return {
            "what": Cell(self.case),
            "unit": Cell(self.unit),
            **self._figures(),
            "figures": Cell(str(self.count)),
            "difference": difference,
            "tolerance": tolerance,
            "source": Cell(self.source.name),
        }

    def _figures(self) -> dict[str, Cell]:
        if math.isnan(self.expected):
            return {}
        absolute = self.tolerance * abs(self.expected) if self.relative else self.tolerance
        limit = "at most " if self.kind == "at most" else ""
        if absolute == 0.0 or (self.relative and self.tolerance < _ROUNDING):
            found = f"{self.found:.7g}"
        else:
            found = shown(self.found, decimals_for(_RESOLVED * absolute))
        return {
            "expected": Cell(f"{limit}{self.expected:.7g}", _STALE * absolute),
            "got": Cell(found, _STALE * absolute),
        }


@dataclass
class Validation:
    """What one test checks, and every figure of it."""

    title: str
    module: str
    test: str
    source: Source
    text: str
    rows: list[Row] = field(default_factory=list)


#: What the checks of this process have compared, by test.
RECORDED: Final[dict[str, Validation]] = {}


def validates(title: str, source: Source) -> Callable[[Test], Test]:
    """Mark a test as a check against an outside source, the source of all its figures unless they say."""

    def mark(test: Test) -> Test:
        test.validates = (title, source)
        return test

    return mark


class Recorder:
    """Compares and records; the ``check`` fixture of a test that ``validates`` something."""

    def __init__(self, test: Callable[..., None]) -> None:
        title, source = test.validates
        module = test.__module__.rpartition(".")[2]
        fresh = Validation(title, module, test.__name__, source, inspect.cleandoc(test.__doc__ or ""))
        self._into = RECORDED.setdefault(f"{module}::{test.__name__}", fresh)

    def __call__(
        self,
        case: str,
        found: Any,
        expected: float,
        unit: str,
        *,
        rel: float | None = None,
        within: float | None = None,
        source: Source | None = None,
    ) -> None:
        """One figure against its expected value."""
        found = float(found)
        relative = rel is not None
        off = found - expected
        self._add(
            Row(
                kind="figure",
                case=case,
                unit=unit,
                source=source or self._into.source,
                tolerance=_one_of(rel, within),
                relative=relative,
                difference=off / abs(expected) if relative else off,
                expected=expected,
                found=found,
            )
        )
        assert found == pytest.approx(expected, rel=rel, abs=0.0 if relative else within), case

    def largest(
        self,
        case: str,
        found: Any,
        expected: Any,
        unit: str,
        *,
        rel: float | None = None,
        within: float | None = None,
        floor: float = 0.0,
        column: str = "",
        source: Source | None = None,
    ) -> None:
        """Many figures against theirs, recorded as the largest difference of all that share the case.

        A relative difference counts from ``floor`` where the expected figure is smaller.
        """
        found, expected = np.asarray(found, dtype=float), np.asarray(expected, dtype=float)
        off = np.abs(found - expected)
        if rel is not None:
            size = np.maximum(np.abs(expected), floor)
            # nothing expected and nothing found
            off = np.divide(off, size, out=np.where(off == 0.0, 0.0, np.inf), where=size > 0.0)
        worst, count = float(off.max()), int(np.broadcast(found, expected).size)
        row = Row(
            kind="grid" if column else "largest",
            case=case,
            unit=unit,
            source=source or self._into.source,
            tolerance=_one_of(rel, within),
            relative=rel is not None,
            difference=worst,
            count=count,
            column=column,
        )
        known = next((r for r in self._into.rows if _key(r) == _key(row)), None)
        if known is None:
            self._add(row)
        else:
            known.difference = max(known.difference, worst)
            known.count += count
        assert worst <= row.tolerance, f"{case} {column}: {worst:.4g}"

    def at_most(self, case: str, found: Any, limit: float, unit: str) -> None:
        """A figure that must not exceed a limit."""
        self._add(
            Row(
                kind="at most",
                case=case,
                unit=unit,
                source=self._into.source,
                tolerance=0.1,
                relative=True,
                difference=math.nan,
                expected=limit,
                found=float(found),
            )
        )
        assert float(found) <= limit, case

    def _add(self, row: Row) -> None:
        assert _key(row) not in map(_key, self._into.rows), f"{row.case!r} is recorded twice"
        self._into.rows.append(row)


def _key(row: Row) -> tuple[str, ...]:
    return row.kind, row.case, row.column, row.source.name


def _one_of(rel: float | None, absolute: float | None) -> float:
    assert (rel is None) != (absolute is None), "one tolerance"
    return rel if rel is not None else float(absolute or 0.0)
