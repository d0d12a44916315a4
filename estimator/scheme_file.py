"""Scheme files: TOML in, a scheme out, with the origin of every setting; and the starter file.

The reader is strict: an unknown key, a missing unit, a value that is not allowed are errors, and all
errors of a file are told at once.
"""

from __future__ import annotations

import copy
import dataclasses
import tomllib
from collections.abc import Callable, Iterable, Mapping
from importlib import resources
from pathlib import Path
from typing import Any, Final

from estimator.airstream.airflow import Airflow, ScheduleRule
from estimator.airstream.coil import Coil
from estimator.airstream.fan import Fan
from estimator.airstream.heat import Preheat, ReheatSource
from estimator.airstream.supply import Supply
from estimator.calendar_words import names_to_days, names_to_months
from estimator.errors import InputError, SchemeError
from estimator.files import sha256
from estimator.plant import Plant
from estimator.quantities import likeliest, parse_value
from estimator.scheme import PATHS, Carbon, Origin, Prices, Scheme, Source
from estimator.settings import REQUIRED, Setpoint, Setting, settings_of

__all__ = [
    "bundled_schemes",
    "load_scheme",
    "parse_scheme",
    "read_scheme_text",
    "starter_text",
]

_SECTIONS: Final[dict[str, type]] = {
    "airflow": Airflow,
    "supply": Supply,
    "coil": Coil,
    "fan": Fan,
    "preheat": Preheat,
    "reheat": ReheatSource,
    "plant": Plant,
    "prices": Prices,
    "carbon": Carbon,
}
#: Sections that a scheme has even if its file does not name them.
_ALWAYS: Final = ("coil", "plant", "prices", "carbon")
_MOST_BYTES: Final = 1_000_000


def bundled_schemes() -> dict[str, str]:
    """Name and text of every scheme that comes with the program, sorted by name."""
    folder = resources.files("estimator") / "schemes"
    found = {
        entry.name.removesuffix(".toml"): entry.read_text(encoding="utf-8")
        for entry in folder.iterdir()
        if entry.name.endswith(".toml")
    }
    return dict(sorted(found.items()))


def read_scheme_text(name: str | Path) -> tuple[str, bytes]:
    """The shown name and the bytes of a scheme file, or of a bundled scheme by its name.

    Raises
    ------
    SchemeError
        There is neither such a file nor such a bundled scheme, or the file cannot be read.
    """
    path = Path(name)
    if path.is_file():
        try:
            data = path.read_bytes() if path.stat().st_size <= _MOST_BYTES else None
        except OSError as error:
            raise SchemeError(f"cannot be read ({error.strerror})", where=str(name)) from error
        if data is None:
            raise SchemeError(
                "is far too large for a scheme", where=str(name), allowed=f"{_MOST_BYTES} bytes"
            )
        return str(name), data
    bundled = bundled_schemes()
    if str(name) in bundled:
        return str(name), bundled[str(name)].encode()
    raise SchemeError(
        "is a folder" if path.is_dir() else "there is no such scheme",
        where=str(name),
        allowed=f"a TOML file, or one of the bundled schemes {', '.join(bundled)}",
        hint=likeliest(str(name), bundled)
        or "'dewledger scheme new my-scheme.toml' writes one to start from",
    )


def load_scheme(name: str | Path, settings: Mapping[str, Any] | None = None) -> Scheme:
    """Read a scheme file, or a bundled scheme by its name.

    Parameters
    ----------
    name
        Path of a TOML file, or the name of a bundled scheme.
    settings
        Overrides by path, each as it would stand in the file: ``{"coil.bypass_factor": 0.1}``.

    Raises
    ------
    SchemeError
        Every problem of the file and the overrides at once.
    """
    shown, data = read_scheme_text(name)
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise SchemeError(
            f"byte {error.start} is not UTF-8", where=shown, hint="save the file as UTF-8"
        ) from error
    return parse_scheme(text, shown, settings)


def parse_scheme(text: str, name: str = "scheme.toml", settings: Mapping[str, Any] | None = None) -> Scheme:
    """A scheme from the text of its file; ``name`` is what errors call it."""
    try:
        tables = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise SchemeError(
            f"is not TOML: {error}", where=name, hint="quote a value that has a unit"
        ) from error
    if not tables:
        raise SchemeError(
            "is empty", where=name, hint="'dewledger scheme new my-scheme.toml' writes one to start from"
        )
    reader = _Reader()
    tables = reader.override(tables, settings or {})
    scheme = reader.scheme(tables, Source(file=name, file_sha256=sha256(text.encode())))
    if reader.problems or scheme is None:
        raise SchemeError.collect(name, reader.problems)
    return scheme


class _Reader:
    """Reads tables into settings; notes every problem and every origin on the way."""

    def __init__(self) -> None:
        self.problems: list[InputError] = []
        self.origins: dict[str, Origin] = {}
        self.commanded: set[str] = set()

    def refuse(self, where: str, problem: str, allowed: str = "", hint: str = "") -> None:
        self.problems.append(SchemeError(problem, where=where, allowed=allowed, hint=hint))

    # overrides

    def override(self, tables: dict[str, Any], settings: Mapping[str, Any]) -> dict[str, Any]:
        """A copy of the tables with every override put in its place."""
        tables = copy.deepcopy(tables)
        for path, text in settings.items():
            self._put(tables, path, _literal(text))
        return tables

    def _put(self, tables: dict[str, Any], path: str, value: Any) -> None:
        *way, key = path.split(".")
        here: Any = tables
        for i, step in enumerate(way):
            if isinstance(here, dict) and step in ("reheat", "schedule"):
                here.setdefault(step, [])
            elif isinstance(here, dict) and not isinstance(here.get(step), dict | list):
                given = here.get(step)
                # one dry bulb stands for both ends of the band until one end is set by itself
                both = (
                    {"low": given, "high": given}
                    if (way[: i + 1] == ["supply", "dry_bulb"] and given)
                    else {}
                )
                here[step] = both
            here = here[step] if isinstance(here, dict) else self._item(here, step, path)
            if here is None:
                return
        if not isinstance(here, dict) or not way:
            self.refuse(path, "is not the path of a setting", hint=self._near(path))
            return
        here[key] = value
        self.commanded.add(path)

    def _item(self, items: Any, step: str, path: str) -> Any:
        if isinstance(items, list):
            for number, item in enumerate(items, 1):
                if isinstance(item, dict) and step in (item.get("source"), str(number)):
                    return item
            names = [str(item.get("source", n)) for n, item in enumerate(items, 1) if isinstance(item, dict)]
            self.refuse(path, f"there is no {step!r} in this scheme", allowed=", ".join(names))
        return None

    def _near(self, path: str) -> str:
        return likeliest(path, _known_paths())

    # tables

    def scheme(self, tables: dict[str, Any], source: Source) -> Scheme | None:
        """The scheme, or None after problems."""
        name = self._head(tables)
        for key in tables:
            if key != "scheme" and key not in _SECTIONS:
                self.refuse(
                    key,
                    "is not a section of a scheme",
                    allowed=", ".join(("scheme", *_SECTIONS)),
                    hint=likeliest(key, ("scheme", *_SECTIONS)) or self._elsewhere(key),
                )
        parts: dict[str, Any] = {"reheat": self._reheat(tables)}
        for key, read in (("airflow", self._airflow), ("supply", self._supply)):
            if key in tables:
                parts[key] = read(tables)
            else:
                self.refuse(
                    f"[{key}]", "is missing", hint="'dewledger scheme new' writes a file to start from"
                )
        for key in ("coil", "fan", "preheat", "plant", "prices", "carbon"):
            if key in tables or key in _ALWAYS:
                parts[key] = self.section(key, _SECTIONS[key], self._table(tables, key))
        if self.problems:
            return None
        try:
            return Scheme(
                name=name,
                source=Source(file=source.file, file_sha256=source.file_sha256, origins=self.origins),
                **parts,
            )
        except InputError as error:
            self.problems.append(error)
            return None

    def _head(self, tables: dict[str, Any]) -> str:
        head = self._table(tables, "scheme")
        for key in head:
            if key != "name":
                self.refuse(f"scheme.{key}", "is not a setting", "name", likeliest(key, ["name"]))
        name = head.get("name")
        if not isinstance(name, str) or not name.strip():
            problem = "is missing" if name is None else f"{name!r} is not a name"
            self.refuse("scheme.name", problem, "a text")
        return str(name)

    def _table(self, tables: dict[str, Any], key: str) -> dict[str, Any]:
        table = tables.get(key, {})
        if isinstance(table, dict):
            return table
        self.refuse(key, f"{table!r} is not a section", allowed=f"[{key}] with settings below it")
        return {}

    def section(
        self, path: str, section: type, table: dict[str, Any], ready: Mapping[str, Any] | None = None
    ) -> Any:
        """One section's settings; ``ready`` holds what has been read by other means already."""
        before = len(self.problems)
        known = {name: s for name, s in settings_of(section) if not ready or name not in ready}
        for key in table:
            if key not in known and key not in (ready or {}):
                self.refuse(
                    f"{path}.{key}",
                    "is not a setting",
                    allowed=", ".join(_keys(path, section)),
                    hint=likeliest(key, _keys(path, section)) or self._elsewhere(key),
                )
        values = dict(ready or {})
        for name, rule in known.items():
            place = f"{path}.{name}"
            if name in table:
                values[name] = self.value(place, rule, table[name])
            elif rule.default is REQUIRED:
                self.refuse(place, "is missing", hint=f"write for example {name} = {_quoted(rule.example)}")
        if len(self.problems) > before:
            return None
        try:
            return section(**values)
        except InputError as error:
            self.problems.append(error.at(f"{path}.{error.where}" if error.where else path))
            return None

    def value(self, place: str, rule: Setting, given: Any) -> Any:
        """One setting, checked against what it allows."""
        self._origin(place)
        if rule.schedulable:
            return self._setpoint(place, rule, given)
        if rule.quantity is None:
            if not isinstance(given, str) or rule.refuses(given):
                hint = likeliest(given, rule.choices) if isinstance(given, str) else ""
                self.refuse(place, f"{given!r} is not allowed", rule.allowed(), hint)
                return None
            return given
        return self._number(place, rule, given)

    def _number(self, place: str, rule: Setting, given: Any) -> float | None:
        assert rule.quantity is not None
        own = dataclasses.replace(rule.quantity, least=rule.lowest, most=rule.highest)
        try:
            number = parse_value(given, own, where=place)
        except InputError as error:
            self.problems.append(error)
            return None
        if rule.refuses(number):
            self.refuse(place, f"{given!r} is out of range", rule.allowed())
        return number

    def _origin(self, place: str) -> None:
        commanded = any(
            place == p or place.startswith(f"{p}.") or p.startswith(f"{place}.") for p in self.commanded
        )
        self.origins[place] = "command" if commanded else "file"

    def _setpoint(self, place: str, rule: Setting, given: Any) -> Setpoint | None:
        outdoor: list[float | None] = []
        forms = "one value, { by_month = [12 values] } or { outdoor = [...], value = [...] }"
        if not isinstance(given, dict):
            if isinstance(given, list):
                self.refuse(place, "is a bare list", forms)
                return None
            numbers = [self._number(place, rule, given)]
        elif set(given) == {"by_month"}:
            numbers = self._numbers(f"{place}.by_month", rule, given["by_month"])
        elif set(given) == {"outdoor", "value"}:
            numbers = self._numbers(f"{place}.value", rule, given["value"])
            outdoor = self._numbers(f"{place}.outdoor", _OUTDOOR, given["outdoor"])
        else:
            self.refuse(place, f"has the keys {', '.join(given) or 'none'}", forms)
            return None
        if None in numbers or None in outdoor or not numbers:
            return None
        try:
            return Setpoint(values=tuple(numbers), outdoor=tuple(o for o in outdoor if o is not None))
        except InputError as error:
            self.problems.append(error.at(place))
            return None

    def _numbers(self, place: str, rule: Setting, given: Any) -> list[float | None]:
        if not isinstance(given, list) or not given:
            self.refuse(place, f"{given!r} is not a list", "a list of values, each with its unit")
            return []
        return [self._number(f"{place}[{i}]", rule, item) for i, item in enumerate(given, 1)]

    def _elsewhere(self, key: str) -> str:
        """Where a key of this name does stand."""
        homes = [path for path in _known_paths() if path.rpartition(".")[2] == key]
        return f"it belongs to {' or '.join(homes)}" if homes else ""

    # the sections with a shape of their own

    def _airflow(self, tables: dict[str, Any]) -> Any:
        table = self._table(tables, "airflow")
        rules: list[Any] = []
        given = table.get("schedule", [])
        if not isinstance(given, list) or not all(isinstance(rule, dict) for rule in given):
            self.refuse(
                "airflow.schedule", f"{given!r} is not a list of rules", "[[airflow.schedule]] tables"
            )
            given = []
        for number, rule in enumerate(given, 1):
            rules.append(self._rule(f"airflow.schedule.{number}", rule))
        return self.section("airflow", Airflow, table, {"schedule": tuple(rules)})

    def _rule(self, path: str, table: dict[str, Any]) -> Any:
        readers = (("days", names_to_days), ("months", names_to_months))
        ready: dict[str, Any] = {}
        for key, read in readers:
            if key in table:
                self._origin(f"{path}.{key}")
                ready[key] = self._names(f"{path}.{key}", read, table[key])
        if "hours" in table:
            self._origin(f"{path}.hours")
            ready["hours"] = self._clock(f"{path}.hours", table["hours"])
        for key in ("days", "hours", "months"):
            ready.setdefault(key, ScheduleRule.__dataclass_fields__[key].default)
        return self.section(path, ScheduleRule, table, ready)

    def _names(self, place: str, read: Callable[[Any], tuple[int, ...]], given: Any) -> tuple[int, ...]:
        try:
            return read(given)
        except InputError as error:
            self.problems.append(error.at(place))
            return ()

    def _clock(self, place: str, given: Any) -> tuple[int, ...]:
        try:
            start, end = (_full_hour(part) for part in str(given).split(".."))
        except ValueError:
            self.refuse(place, f"{given!r} is not a span of hours", "'HH:00..HH:00', such as '07:00..19:00'")
            return ()
        if start == end:
            self.refuse(place, f"{given!r} is empty", "two different hours; '00:00..24:00' is the whole day")
        return tuple(sorted((start + i) % 24 for i in range((end - start) % 24 or 24)))

    def _supply(self, tables: dict[str, Any]) -> Any:
        table = dict(self._table(tables, "supply"))
        given = table.pop("dry_bulb", None)
        rules = dict(settings_of(Supply))
        ready: dict[str, Any] = {"low": None, "high": None}
        for key in set(table) & {"low", "high"}:
            self.refuse(f"supply.{key}", "is not a setting", hint=f"did you mean 'supply.dry_bulb.{key}'?")
            table.pop(key)
        if given is None:
            self.refuse("supply.dry_bulb", "is missing", hint='write for example dry_bulb = "20 degC"')
        elif not isinstance(given, dict) or set(given) & {"by_month", "outdoor", "value"}:
            both = self.value("supply.dry_bulb", rules["low"], given)
            ready = {"low": both, "high": both}
            origin = self.origins.pop("supply.dry_bulb")
            self.origins |= {"supply.dry_bulb.low": origin, "supply.dry_bulb.high": origin}
        elif not given or set(given) - {"low", "high"}:
            self.refuse("supply.dry_bulb", f"has the keys {', '.join(given) or 'none'}", "low, high")
        else:
            for key, value in given.items():
                ready[key] = self.value(f"supply.dry_bulb.{key}", rules[key], value)
        return self.section("supply", Supply, table, ready)

    def _reheat(self, tables: dict[str, Any]) -> tuple[Any, ...]:
        given = tables.get("reheat", [])
        if not isinstance(given, list) or not all(isinstance(item, dict) for item in given):
            self.refuse("reheat", "is not a list of sources", "[[reheat]] tables, one a source")
            return ()
        return tuple(
            self.section(f"reheat.{item.get('source', number)}", ReheatSource, item)
            for number, item in enumerate(given, 1)
        )


def _keys(path: str, section: type) -> list[str]:
    """The keys of a section as its file spells them."""
    names = [field.name for field in dataclasses.fields(section)]
    spelled = (PATHS.get(f"{path}.{name}", f"{path}.{name}") for name in names)
    return list(dict.fromkeys(full.removeprefix(f"{path}.").partition(".")[0] for full in spelled))


_OUTDOOR: Final = Setting(
    doc="outdoor dry bulb",
    quantity=dict(settings_of(Coil))["lockout_below"].quantity,
    least=-60.0,
    most=60.0,
)


def _full_hour(text: str) -> int:
    hour, _, minute = text.strip().partition(":")
    if minute != "00" or not 0 <= int(hour) <= 24:
        raise ValueError(text)
    return int(hour)


def _literal(text: Any) -> Any:
    """An override's text as the file would hold it: a table or a list is TOML, all else is a text."""
    if not isinstance(text, str):
        return text
    stripped = text.strip()
    if stripped.startswith(("{", "[", '"')):
        try:
            return tomllib.loads(f"value = {stripped}")["value"]
        except tomllib.TOMLDecodeError:
            return stripped
    return stripped


def _quoted(example: str) -> str:
    plain = example.startswith('"') or example.replace(".", "", 1).isdigit()
    return example if plain else f'"{example}"'


def _known_paths() -> Iterable[str]:
    for section, model in _SECTIONS.items():
        for name, _ in settings_of(model):
            yield PATHS.get(f"{section}.{name}", f"{section}.{name}")
    yield "supply.dry_bulb"


def starter_text() -> str:
    """A commented scheme file to start from: every section and every setting of the program."""
    return bundled_schemes()["starter"]
