"""What was assumed where no scheme was named: every setting that the user did not give."""

from __future__ import annotations

import dataclasses

from estimator.quantities import UnitSystem
from estimator.report.scheme import setting_text
from estimator.report.text import heading, page, pairs, paragraph
from estimator.result import YearResult
from estimator.scheme import Scheme, leaves

__all__ = ["assumed_page", "with_caution"]


def assumed_page(scheme: Scheme, system: UnitSystem = "si") -> str:
    """Every setting that did not come from the command line, with its value; it ends the page of a result."""
    rows: list[tuple[str, str]] = []
    absent: list[str] = []
    for leaf in leaves(scheme):
        if leaf.origin == "command":
            continue
        text = setting_text(leaf, system)
        if text == "not set":
            absent.append(leaf.path)
        else:
            rows.append((leaf.path, text))
    return "\n" + page(
        [
            *heading("Assumed"),
            *paragraph(
                "No scheme was named. These settings were not given; they are those of the bundled scheme "
                f"{scheme.source.file}, and may not fit your unit:"
            ),
            "",
            *pairs(rows),
            "",
            *paragraph(f"Not set, that is without limit or not stated: {', '.join(absent)}."),
            *paragraph(
                "Give one with --set, such as --set coil.bypass_factor=0.1, or all of them in a file: "
                "'dewledger scheme new my-scheme.toml' writes one to edit."
            ),
        ]
    )


def with_caution(result: YearResult) -> YearResult:
    """The result with a caution before its others that says how much of its scheme is assumed."""
    given = [leaf.path for leaf in leaves(result.scheme) if leaf.origin == "command"]
    caution = (
        f"No scheme was named: all settings but {', '.join(given)} are assumed, from the bundled scheme "
        f"{result.scheme.source.file}."
    )
    return dataclasses.replace(result, cautions=(caution, *result.cautions))
