"""Plain text for a terminal: numbers in the units asked for, aligned tables, paragraphs, 80 columns."""

from __future__ import annotations

import textwrap
from collections.abc import Iterable, Sequence
from typing import Final

from estimator.quantities import QUANTITIES, UnitSystem, count

__all__ = [
    "NOT_STATED",
    "WIDTH",
    "bullets",
    "count",
    "heading",
    "page",
    "pairs",
    "paragraph",
    "show",
    "table",
    "unit",
]

#: No line is longer.
WIDTH: Final = 80
#: Stands where a value is not fully determined.
NOT_STATED: Final = "not stated"


def unit(name: str, system: UnitSystem) -> str:
    """The unit in which the quantity ``name`` is shown; empty for a pure number."""
    own = QUANTITIES[name].unit_for(system)
    return "" if own == "1" else own


def show(
    name: str,
    value: float | None,
    system: UnitSystem = "si",
    *,
    with_unit: bool = False,
    decimals: int | None = None,
) -> str:
    """``value``, given in the SI unit of the quantity ``name``, as text; ``NOT_STATED`` for None."""
    if value is None:
        return NOT_STATED
    return QUANTITIES[name].show(value, system, with_unit=with_unit, decimals=decimals)


def heading(text: str) -> list[str]:
    """The heading of a section, with an empty line before it."""
    return ["", text, "-" * len(text)]


def paragraph(text: str, indent: str = "  ", hanging: str | None = None) -> list[str]:
    """A text wrapped to the width; ``hanging`` indents every line but the first."""
    after = indent if hanging is None else hanging
    return textwrap.wrap(
        text, WIDTH, initial_indent=indent, subsequent_indent=after, break_on_hyphens=False
    ) or [indent.rstrip()]


def bullets(items: Iterable[str]) -> list[str]:
    """Each item as a paragraph with a dash before it."""
    return [line for item in items for line in paragraph(item, "  - ", "    ")]


def pairs(rows: Iterable[tuple[str, str]], least: int = 0) -> list[str]:
    """A label and a text beside it; long texts wrap in their own column."""
    kept = list(rows)
    width = max([least, *(len(label) for label, _ in kept)])
    return [
        line for label, text in kept for line in paragraph(text, f"  {label:<{width}}  ", " " * (width + 4))
    ]


def table(rows: Sequence[Sequence[str]], align: str, indent: int = 2) -> list[str]:
    """Rows of cells as aligned columns; ``align`` has 'l' or 'r' for each.

    What is too wide gives up, in this order, wide gaps, thousands marks, and the tail of its first column.
    """
    fitted = _aligned(rows, align, indent, 2)
    if _too_wide(fitted):
        bare = [[row[0], *(_unmarked(cell) for cell in row[1:])] for row in rows]
        fitted = _aligned(bare, align, indent, 2)
        if _too_wide(fitted):
            fitted = _aligned(bare, align, indent, 1)
        over = max(map(len, fitted)) - WIDTH
        if over > 0:
            first = max(len(row[0]) for row in rows) - over
            fitted = _aligned([[_cut(row[0], first), *row[1:]] for row in bare], align, indent, 1)
    return fitted


def _too_wide(lines: Iterable[str]) -> bool:
    return any(len(line) > WIDTH for line in lines)


def _unmarked(cell: str) -> str:
    bare = cell.replace(" ", "")
    return bare if bare.replace(".", "").lstrip("-").isdigit() else cell


def _cut(text: str, length: int) -> str:
    if len(text) <= length:
        return text
    return text[: max(length - 3, 1)].rstrip() + "..."


def _aligned(rows: Sequence[Sequence[str]], align: str, indent: int, gap: int) -> list[str]:
    widths = [max(len(row[i]) for row in rows) for i in range(len(align))]
    lines = []
    for row in rows:
        cells = (
            cell.rjust(width) if side == "r" else cell.ljust(width)
            for cell, width, side in zip(row, widths, align, strict=True)
        )
        lines.append((" " * indent + (" " * gap).join(cells)).rstrip())
    return lines


def page(lines: Iterable[str]) -> str:
    """The lines as one text that ends in a line feed, without empty lines at its start."""
    return "\n".join(lines).lstrip("\n") + "\n"
