"""What a setting is: the metadata that one field of a frozen dataclass carries.

A device, a plant or a price list declares its settings once, as the fields of a ``Settings`` class made
with ``setting(...)``. Reading a scheme file, checking a value, listing defaults, writing the starter and
overriding from the command line all work from that declaration.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, Final

import numpy as np

from estimator.errors import SchemeError
from estimator.moist_air import Array
from estimator.quantities import QUANTITIES, Quantity

__all__ = ["REQUIRED", "Setpoint", "Setting", "Settings", "setting", "settings_of"]


class _Required:
    def __repr__(self) -> str:
        return "REQUIRED"


#: The default of a setting that has none.
REQUIRED: Final = _Required()


@dataclass(frozen=True, kw_only=True)
class Setting:
    """What is known of one setting besides its value."""

    doc: str
    #: None for a word or a text
    quantity: Quantity | None = None
    default: Any = REQUIRED
    least: float | None = None
    most: float | None = None
    #: the least value itself is refused too
    above: bool = False
    #: the words allowed, for a setting that is a word
    choices: tuple[str, ...] = ()
    #: may follow the month or the outdoor dry bulb
    schedulable: bool = False
    #: shown in the starter file, in the units of a scheme file
    example: str = ""
    #: where the default comes from
    source: str = ""

    def allowed(self) -> str:
        """What the setting takes, in words."""
        if self.choices:
            return ", ".join(repr(choice) for choice in self.choices)
        if self.quantity is None:
            return "a text"
        unit = "" if self.quantity.unit == "1" else f" {self.quantity.unit}"
        return f"{'above ' if self.above else ''}{self.lowest:g} to {self.highest:g}{unit}"

    @property
    def lowest(self) -> float:
        """The least value allowed, or the bound itself where the setting must lie above it."""
        assert self.quantity is not None
        return self.quantity.least if self.least is None else self.least

    @property
    def highest(self) -> float:
        """The most that is allowed."""
        assert self.quantity is not None
        return self.quantity.most if self.most is None else self.most

    def refuses(self, value: Any) -> bool:
        """Whether ``value``, in SI, lies outside what is allowed; an array if any element does."""
        if value is None:
            return False
        if isinstance(value, Setpoint):
            return any(self.refuses(v) for v in value.values)
        if self.choices:
            return value not in self.choices
        if self.quantity is None:
            return False
        number = np.asarray(value, dtype=float)
        low = number <= self.lowest if self.above else number < self.lowest
        return bool(np.any(low | (number > self.highest) | ~np.isfinite(number)))


def setting(quantity: str | None = None, *, default: Any = REQUIRED, **rest: Any) -> Any:
    """A dataclass field that carries a ``Setting``."""
    known = Setting(quantity=None if quantity is None else QUANTITIES[quantity], default=default, **rest)
    metadata = {"setting": known}
    if default is REQUIRED:
        return dataclasses.field(metadata=metadata)
    return dataclasses.field(default=default, metadata=metadata)


@dataclass(frozen=True, kw_only=True, eq=False)
class Setpoint:
    """A target that is constant, follows the month, or follows the outdoor dry bulb.

    ``values`` holds 1 number, or 12 (January first), or one for each node of ``outdoor``, between which
    it is interpolated and beyond which it is held. Numbers may be arrays of shape (variants, 1).
    """

    values: tuple[Any, ...]
    outdoor: tuple[float, ...] = ()

    def __post_init__(self) -> None:
        if self.outdoor:
            if len(self.outdoor) < 2 or len(self.outdoor) != len(self.values):
                raise SchemeError(
                    f"{len(self.outdoor)} outdoor temperatures stand beside {len(self.values)} values",
                    allowed="as many values as outdoor temperatures, at least two",
                )
            if any(b <= a for a, b in zip(self.outdoor, self.outdoor[1:], strict=False)):
                raise SchemeError("outdoor temperatures do not rise", allowed="rising temperatures")
        elif len(self.values) not in (1, 12):
            raise SchemeError(f"{len(self.values)} values", allowed="1, or 12 (one a month, January first)")

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Setpoint) and self.outdoor == other.outdoor and self.values == other.values

    def __hash__(self) -> int:
        return hash((self.values, self.outdoor))

    def at(self, month: np.ndarray[Any, Any], outdoor: Array) -> Any:
        """The target in every hour: a number where it is constant, else an array (..., hours)."""
        if self.outdoor:
            nodes = np.asarray(self.outdoor)
            segment = np.clip(np.searchsorted(nodes, outdoor) - 1, 0, len(nodes) - 2)
            share = np.clip((outdoor - nodes[segment]) / np.diff(nodes)[segment], 0.0, 1.0)
            return (1.0 - share) * self._pick(segment) + share * self._pick(segment + 1)
        if len(self.values) == 12:
            return self._pick(month - 1)
        return self.values[0]

    def _pick(self, index: np.ndarray[Any, Any]) -> Any:
        values = np.broadcast_arrays(*self.values)
        table = np.concatenate([np.atleast_1d(v) for v in values], axis=-1)
        return table[..., index]


class Settings:
    """Base of a section of settings: a value outside what is allowed cannot be constructed."""

    def __post_init__(self) -> None:
        for name, known in settings_of(type(self)):
            value = getattr(self, name)
            if known.schedulable and isinstance(value, int | float):
                value = Setpoint(values=(float(value),))
                object.__setattr__(self, name, value)
            if known.refuses(value):
                raise SchemeError(f"{value!r} is out of range", where=name, allowed=known.allowed())


def settings_of(section: type) -> Iterator[tuple[str, Setting]]:
    """The settings of a section, in the order in which they are declared."""
    for field in dataclasses.fields(section):
        known = field.metadata.get("setting")
        if known is not None:
            yield field.name, known
