"""A scheme: one configured way of treating the air, as frozen settings."""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, Literal

import numpy as np

from estimator.airstream.airflow import Airflow, ScheduleRule
from estimator.airstream.coil import Coil
from estimator.airstream.fan import Fan
from estimator.airstream.heat import Preheat, ReheatSource
from estimator.airstream.order import Unit
from estimator.airstream.supply import Supply
from estimator.errors import SchemeError
from estimator.files import canonical_json, sha256
from estimator.plant import Plant
from estimator.settings import Setpoint, Setting, Settings, setting, settings_of

__all__ = ["Carbon", "Leaf", "Origin", "Prices", "Scheme", "Source", "leaves", "resolved_sha256", "stack"]

Origin = Literal["file", "default", "command"]


@dataclass(frozen=True, kw_only=True)
class Prices(Settings):
    """Flat prices of bought energy, in any currency; absent: cost is not stated."""

    currency: str = setting(default="", doc="a label, shown beside costs", example='"EUR"')
    electricity: float | None = setting(
        "price", default=None, doc="price of electricity", example="0.18 /kWh"
    )
    fuel: float | None = setting("price", default=None, doc="price of fuel", example="0.07 /kWh")
    heat: float | None = setting("price", default=None, doc="price of district heat", example="0.09 /kWh")


@dataclass(frozen=True, kw_only=True)
class Carbon(Settings):
    """Flat carbon factors of bought energy, CO2 equivalent; absent: carbon is not stated."""

    electricity: float | None = setting(
        "carbon factor", default=None, doc="carbon factor of electricity", example="0.35 kg/kWh"
    )
    fuel: float | None = setting(
        "carbon factor", default=None, doc="carbon factor of fuel", example="0.20 kg/kWh"
    )
    heat: float | None = setting(
        "carbon factor", default=None, doc="carbon factor of district heat", example="0.15 kg/kWh"
    )


@dataclass(frozen=True, kw_only=True)
class Source:
    """Where a scheme came from: file, its hash, and the origin of every setting by path."""

    file: str = ""
    file_sha256: str | None = None
    origins: Mapping[str, Origin] = field(default_factory=dict)


@dataclass(frozen=True, kw_only=True)
class Scheme:
    """One configured way of treating the air.

    Every number is in the SI unit of its quantity. A section that is None is a device that is absent.
    """

    name: str
    airflow: Airflow
    supply: Supply
    coil: Coil = field(default_factory=Coil)
    fan: Fan | None = None
    preheat: Preheat | None = None
    reheat: tuple[ReheatSource, ...] = ()
    plant: Plant = field(default_factory=Plant)
    prices: Prices = field(default_factory=Prices)
    carbon: Carbon = field(default_factory=Carbon)
    source: Source = field(default_factory=Source, compare=False)

    def __post_init__(self) -> None:
        names = [source.source for source in self.reheat]
        for name in names:
            if names.count(name) > 1:
                raise SchemeError(
                    f"reheat source {name!r} stands twice", where="reheat", allowed="each source once"
                )

    @cached_property
    def variants(self) -> tuple[int, ...]:
        """The leading axis of a stack: (variants,), or () for a scheme of plain numbers."""
        parts = (part for leaf in leaves(self) for part in _numbers(leaf.value))
        return np.broadcast_shapes(*(np.shape(part)[:-1] for part in parts))

    @property
    def unit(self) -> Unit:
        """The sections that stand in the airstream."""
        return Unit(
            airflow=self.airflow,
            supply=self.supply,
            coil=self.coil,
            fan=self.fan,
            preheat=self.preheat,
            reheat=self.reheat,
        )


@dataclass(frozen=True, kw_only=True)
class Leaf:
    """One setting of a scheme by its path, with its value in SI."""

    path: str
    setting: Setting
    value: Any
    origin: Origin


def sections(scheme: Scheme) -> Iterator[tuple[str, Any]]:
    """The sections that a scheme has, by path; reheat sources are addressed by name."""
    for name in ("airflow", "supply", "coil", "fan", "preheat"):
        section = getattr(scheme, name)
        if section is not None:
            yield name, section
        if name == "airflow":
            for number, rule in enumerate(scheme.airflow.schedule, 1):
                yield f"airflow.schedule.{number}", rule
    for source in scheme.reheat:
        yield f"reheat.{source.source}", source
    for name in ("plant", "prices", "carbon"):
        yield name, getattr(scheme, name)


#: Fields of the model that a file and a command address by another path.
PATHS: Mapping[str, str] = {"supply.low": "supply.dry_bulb.low", "supply.high": "supply.dry_bulb.high"}


def leaves(scheme: Scheme) -> Iterator[Leaf]:
    """Every setting of a scheme, in the order of the file."""
    for section_path, section in sections(scheme):
        if isinstance(section, ScheduleRule):
            yield from _rule_leaves(scheme, section_path, section)
        for name, known in settings_of(type(section)):
            path = f"{section_path}.{name}"
            path = PATHS.get(path, path)
            origin = scheme.source.origins.get(path, "default")
            yield Leaf(path=path, setting=known, value=getattr(section, name), origin=origin)


def _rule_leaves(scheme: Scheme, path: str, rule: ScheduleRule) -> Iterator[Leaf]:
    for name in ("days", "hours", "months"):
        origin = scheme.source.origins.get(f"{path}.{name}", "default")
        known = Setting(doc=f"{name} in which the rule applies")
        yield Leaf(path=f"{path}.{name}", setting=known, value=getattr(rule, name), origin=origin)


def _numbers(value: Any) -> tuple[Any, ...]:
    return value.values if isinstance(value, Setpoint) else (value,)


def plain(value: Any) -> Any:
    """A setting's value in the terms of JSON."""
    if isinstance(value, Setpoint):
        if value.outdoor:
            return {"outdoor": list(value.outdoor), "value": list(value.values)}
        return value.values[0] if len(value.values) == 1 else list(value.values)
    return list(value) if isinstance(value, tuple) else value


def resolved_sha256(scheme: Scheme) -> str:
    """Hash of what the scheme means: every setting in SI, however it was written and wherever it stood.

    The name is not part of it, nor is the origin of a setting.
    """
    # a list, since the order of the reheat sources means something
    return sha256(canonical_json([[leaf.path, plain(leaf.value)] for leaf in leaves(scheme)]))


def stack(schemes: Sequence[Scheme]) -> Scheme:
    """One scheme whose differing numbers are arrays of shape (variants, 1): the leading axis of a run.

    Raises
    ------
    SchemeError
        The schemes differ in more than numbers: in their devices, words, schedules or kinds of setpoint.
    """
    if not schemes:
        raise SchemeError("no scheme to stack", allowed="at least one")
    parts = {
        part.name: _stacked(part.name, [getattr(scheme, part.name) for scheme in schemes])
        for part in dataclasses.fields(Scheme)
        if part.name not in ("name", "source")
    }
    return Scheme(name=schemes[0].name, source=schemes[0].source, **parts)


def _stacked(path: str, values: list[Any]) -> Any:
    """One section, or a list of sections, with its differing numbers stacked."""
    first = values[0]
    if all(value == first for value in values):
        return first
    if all(isinstance(value, tuple) for value in values) and len({len(value) for value in values}) == 1:
        items = enumerate(zip(*values, strict=True), 1)
        return tuple(_stacked(f"{path}.{number}", list(item)) for number, item in items)
    if not isinstance(first, Settings) or len({type(value) for value in values}) > 1:
        raise _differ(path)
    kind: Any = type(first)
    known = dict(settings_of(kind))
    parts: dict[str, Any] = {}
    for name in kind.__dataclass_fields__:
        each, place = [getattr(value, name) for value in values], f"{path}.{name}"
        if name in known and known[name].quantity is not None:
            parts[name] = _stacked_numbers(place, each)
        elif name == "schedule":
            parts[name] = _stacked(place, each)
        elif any(value != each[0] for value in each):
            raise _differ(place)
        else:
            parts[name] = each[0]
    return kind(**parts)


def _stacked_numbers(path: str, values: list[Any]) -> Any:
    first = values[0]
    if all(value == first for value in values):
        return first
    if all(isinstance(value, Setpoint) for value in values):
        if any(v.outdoor != first.outdoor or len(v.values) != len(first.values) for v in values):
            raise _differ(path)
        nodes = zip(*(value.values for value in values), strict=True)
        return Setpoint(
            values=tuple(_stacked_numbers(path, list(node)) for node in nodes), outdoor=first.outdoor
        )
    if not all(isinstance(value, int | float) for value in values):
        raise _differ(path)
    return np.array(values, dtype=float)[:, None]


def _differ(path: str) -> SchemeError:
    return SchemeError(
        "the schemes differ in more than a number", where=path, allowed="schemes of one shape in a stack"
    )
