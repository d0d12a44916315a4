"""The settings of a scheme as text: value, unit, where it came from, and what it means."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any, Final

from estimator.calendar_words import DAYS, MONTHS, short
from estimator.quantities import QUANTITIES, UnitSystem, convert
from estimator.report.text import heading, page, pairs, paragraph
from estimator.scheme import Leaf, Scheme, leaves, resolved_sha256
from estimator.settings import Setpoint

__all__ = ["SHORT_HASH", "scheme_list", "scheme_page", "setting_text"]

#: Digits of a hash that are shown; a document has all of them.
SHORT_HASH: Final = 12

_ORIGINS: Final[Mapping[str, str]] = {"file": "file", "default": "default", "command": "--set"}


def setting_text(leaf: Leaf, system: UnitSystem = "si") -> str:
    """The value of one setting with its unit; ``not set`` where it has none."""
    value = leaf.value
    if value is None or value == "":
        return "not set"
    if isinstance(value, Setpoint):
        return _setpoint_text(leaf, value, system)
    if isinstance(value, tuple):
        return _calendar_text(leaf.path, value)
    if leaf.setting.quantity is None:
        return str(value)
    return _joined([_number(leaf, value, system)], _unit(leaf, system))


def _unit(leaf: Leaf, system: UnitSystem) -> str:
    assert leaf.setting.quantity is not None
    unit = leaf.setting.quantity.unit_for(system)
    return "" if unit == "1" else unit


def _number(leaf: Leaf, value: float, system: UnitSystem) -> str:
    quantity = leaf.setting.quantity
    assert quantity is not None
    # as it was written, not as results are rounded
    return f"{convert(value, quantity.unit, quantity.unit_for(system)):.6g}"


def _joined(numbers: Sequence[str], unit: str) -> str:
    return f"{', '.join(numbers)} {unit}".rstrip()


def _setpoint_text(leaf: Leaf, value: Setpoint, system: UnitSystem) -> str:
    text = _joined([_number(leaf, v, system) for v in value.values], _unit(leaf, system))
    if value.outdoor:
        dry_bulb = QUANTITIES["dry bulb"]
        to = dry_bulb.unit_for(system)
        nodes = [f"{convert(t, dry_bulb.unit, to):.6g}" for t in value.outdoor]
        return f"{text} at outdoor dry bulbs of {_joined(nodes, to)}"
    return f"{text} by month" if len(value.values) > 1 else text


def _calendar_text(path: str, numbers: tuple[int, ...]) -> str:
    kind = path.rpartition(".")[2]
    spans = []
    for first, last in _runs(numbers):
        if kind == "hours":
            spans.append(f"{first:02d}:00..{last + 1:02d}:00")
        else:
            names = [short(name) for name in (DAYS if kind == "days" else ("", *MONTHS))]
            spans.append(names[first] if first == last else f"{names[first]}..{names[last]}")
    return ", ".join(spans)


def _runs(numbers: Iterable[int]) -> list[tuple[int, int]]:
    runs: list[tuple[int, int]] = []
    for number in sorted(numbers):
        if runs and number == runs[-1][1] + 1:
            runs[-1] = (runs[-1][0], number)
        else:
            runs.append((number, number))
    return runs


def scheme_page(scheme: Scheme, system: UnitSystem = "si") -> str:
    """Every setting of a scheme: value, origin, what it means, and where a default comes from."""
    lines = heading(scheme.name)
    lines += pairs(
        [
            ("file", f"{scheme.source.file}, sha256 {(scheme.source.file_sha256 or '')[:SHORT_HASH]}"),
            (
                "resolved",
                f"sha256 {resolved_sha256(scheme)[:SHORT_HASH]}, the same for every way of writing it",
            ),
        ]
    )
    section = ""
    for leaf in leaves(scheme):
        own = leaf.path.rpartition(".")[0].removesuffix(".dry_bulb")
        if own != section:
            section = own
            lines += ["", f"[{section}]"]
        lines += _leaf_lines(leaf, section, system)
    return page(lines)


def _leaf_lines(leaf: Leaf, section: str, system: UnitSystem) -> list[str]:
    name = leaf.path.removeprefix(f"{section}.")
    text, origin = setting_text(leaf, system), _ORIGINS[leaf.origin]
    row = f"  {name:<26}  {text:<32}  {origin}"
    lines = [row] if len(text) <= 32 else paragraph(f"{text}  ({origin})", f"  {name:<26}  ", " " * 30)
    doc = leaf.setting.doc
    if leaf.origin == "default" and leaf.setting.source:
        doc = f"{doc} (default: {leaf.setting.source})"
    return [*lines, *paragraph(doc, "      ")]


def scheme_list(bundled: Mapping[str, str]) -> str:
    """The schemes that come with the program: name, what each is, and its full name."""
    import tomllib

    lines = []
    for name, text in bundled.items():
        head: Any = tomllib.loads(text).get("scheme", {})
        lines += paragraph(f"{name}: {head.get('name', '')}", "", "  ")
        comment = next((line for line in text.splitlines() if line.startswith("#")), "")
        lines += paragraph(comment.lstrip("# "), "  ")
    return page(lines)
