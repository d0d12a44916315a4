"""``docs/validation.md``: every check against an outside source, from what the published tests recorded."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from typing import Final

from generators.markdown import MARK, cell, paragraph, row
from published.checks import Cell, Row, Source, Validation

__all__ = ["Line", "differences", "lines_of", "page_of", "record"]

#: The chapters, by the module of the tests, in the order of the page.
_CHAPTERS: Final[Mapping[str, tuple[str, str]]] = {
    "test_moist_air": (
        "Moist air against printed tables",
        "The tables come from a real-gas formulation; the program's saturation is that of Hyland and Wexler "
        "with an enhancement factor, 0.02 to 0.04 % below them in humidity ratio. That known disagreement, "
        "not the digits printed, is what most tolerances allow for.",
    ),
    "test_moist_air_processes": (
        "Worked examples",
        "Airstream processes, taken through the program's own devices; mixing and the room, for which there "
        "is none, from the moist-air functions. Published answers were read off charts, which is what "
        "tolerances of 1 % and more allow for.",
    ),
    "test_moist_air_against_coolprop": (
        "Moist air against other programs",
        "Over -30..50 degC, 60..106 kPa and 0..100 % relative humidity, for which the program claims its "
        "accuracy, unless said otherwise.",
    ),
    "test_fit": (
        "The declared fits",
        "Enthalpy of moist air is a fit, and declared as one; its generator stands beside it.",
    ),
    "test_year_against_coolprop": (
        "Whole years against a separate computation",
        "Three real weather years hour by hour through a second program, written apart from this one, that "
        "asks CoolProp for every property and finds every coil surface by search.",
    ),
    "test_annual_published": (
        "Annual figures of the trade",
        "What others have published, or the trade knows, of the same real years.",
    ),
    "test_weather": (
        "Reading weather",
        "The weather files that come with pvlib, and formulas that reading them needs.",
    ),
    "test_coolprop_reference": (
        "The separate computation itself",
        "A reference that is wrong proves nothing: it is held against the same worked examples.",
    ),
    "test_water_reference": (
        "The references for ice",
        "What the tests compute of ice themselves, held against the check values of the releases.",
    ),
}

_INTRODUCTION: Final = (
    "What the program is held against outside itself, and how far it is from it. No figure on this page is "
    "written by hand, and no expected figure comes from the program: the tests in `tests/published` compare "
    "them, record what they compared, and fail when this page says something else.",
    "*Expected* is what the source says, *got* what the program computes, *difference* got less expected. A "
    "check fails when the difference exceeds the *tolerance*; each says why its tolerance is what it is. "
    "Where many figures are compared, the largest difference is given and the number of figures.",
)

_CONFIDENCE: Final = (
    "*Read in the source*: the figure was copied from the source named. *From memory*: nobody has yet held "
    "it against the source, and it should be before it is called a fact. *Common practice*: a convention or "
    "constant of the trade. *Computed*: by another program or apart from this one; that two computations "
    "agree is a cross-check, not a proof. Published tables are not freely licensed: the few figures here are "
    "quoted to be checked."
)


class Line:
    """A line of the page: a text, or the cells of a table whose numbers may move a little."""

    def __init__(self, content: str | Sequence[Cell]) -> None:
        self.cells = None if isinstance(content, str) else tuple(content)
        self.text = content if isinstance(content, str) else row(cell.text for cell in content)

    def matches(self, other: str) -> bool:
        """Whether the page's line says the same, apart from what another computer may change."""
        if self.text == other or self.cells is None:
            return self.text == other
        texts = [text.strip() for text in other.strip().strip("|").split("|")]
        return len(texts) == len(self.cells) and all(
            _same(cell, text) for cell, text in zip(self.cells, texts, strict=True)
        )


_NUMBER: Final = re.compile(r"-?\d+(?:\.\d+)?(?:e[+-]?\d+)?")


def _same(cell: Cell, text: str) -> bool:
    if cell.text == text:
        return True
    ours, theirs = _NUMBER.findall(cell.text), _NUMBER.findall(text)
    if not cell.slack or len(ours) != len(theirs) or _NUMBER.sub("#", cell.text) != _NUMBER.sub("#", text):
        return False
    return all(abs(float(a) - float(b)) <= cell.slack for a, b in zip(ours, theirs, strict=True))


def record() -> Mapping[str, Validation]:
    """Run the published tests in this process and give what they recorded."""
    import pytest
    from generators.markdown import ROOT
    from published import checks

    folder = ROOT / "tests" / "published"
    status = pytest.main(
        [str(folder), "-q", "-p", "no:cacheprovider", f"--ignore={folder / 'test_validation_page.py'}"]
    )
    if status != pytest.ExitCode.OK:
        raise SystemExit("a published test fails: the page is not made")
    return checks.RECORDED


def page_of(recorded: Mapping[str, Validation]) -> str:
    """The page as text."""
    return "\n".join(line.text for line in lines_of(recorded)) + "\n"


def differences(recorded: Mapping[str, Validation], page: str) -> list[str]:
    """Where the page no longer says what the tests compared; nothing when it is up to date."""
    fresh, written = lines_of(recorded), page.removesuffix("\n").split("\n")
    found = [
        f"line {number}: {was!r} is now {line.text!r}"
        for number, (line, was) in enumerate(zip(fresh, written, strict=False), 1)
        if not line.matches(was)
    ]
    if len(fresh) != len(written):
        found.append(f"{len(written)} lines are now {len(fresh)}")
    return found


def lines_of(recorded: Mapping[str, Validation]) -> list[Line]:
    """The page, line by line."""
    known = {name: [v for v in recorded.values() if v.module == name] for name in _CHAPTERS}
    strange = {v.module for v in recorded.values()} - set(_CHAPTERS)
    if strange:
        raise KeyError(f"no chapter for {', '.join(sorted(strange))}: add one to {__name__}._CHAPTERS")
    lines: list[str | Sequence[Cell]] = [MARK, "", "# Validation", ""]
    for text in _INTRODUCTION:
        lines += paragraph(text)
    lines += _summary(known)
    lines += ["## Sources", "", *paragraph(_CONFIDENCE), *_sources(v for vs in known.values() for v in vs)]
    for name, (title, introduction) in _CHAPTERS.items():
        lines += [f"## {title}", "", *paragraph(introduction)]
        for validation in known[name]:
            lines += _validation(validation)
    while lines[-1] == "":
        lines.pop()
    return [Line(line) for line in lines]


def _summary(known: Mapping[str, Sequence[Validation]]) -> list[str]:
    lines = [row(("chapter", "checks", "figures compared")), row(["---"] * 3)]
    for name, (title, _) in _CHAPTERS.items():
        figures = sum(r.count for v in known[name] for r in v.rows)
        lines.append(row((title, str(len(known[name])), str(figures))))
    return [*lines, ""]


def _sources(validations: Iterable[Validation]) -> list[str]:
    used: dict[str, Source] = {}
    for validation in validations:
        for source in [validation.source, *(r.source for r in validation.rows)]:
            used.setdefault(source.name, source)
    lines = [row(("name below", "source", "confidence")), row(["---"] * 3)]
    lines += [row((s.name, cell(s.title), str(s.confidence))) for s in used.values()]
    return [*lines, ""]


def _validation(validation: Validation) -> list[str | Sequence[Cell]]:
    source = validation.source
    lines: list[str | Sequence[Cell]] = [f"### {validation.title}", ""]
    lines += paragraph(
        f"Source: {source.title}; {source.confidence}. Test: `tests/published/{validation.module}.py`, "
        f"`{validation.test}`."
    )
    for text in validation.text.split("\n\n"):
        lines += paragraph(text)
    rows = validation.rows
    lines += _table(
        [r for r in rows if r.kind in ("figure", "at most")],
        ["what", "unit", "expected", "got", "difference", "tolerance"],
    )
    lines += _table(
        [r for r in rows if r.kind == "largest"], ["what", "unit", "figures", "difference", "tolerance"]
    )
    return [*lines, *_grid([r for r in rows if r.kind == "grid"])]


def _table(rows: Sequence[Row], heads: list[str]) -> list[str | Sequence[Cell]]:
    if not rows:
        return []
    # named where it is not the same for all
    heads = heads + ["source"] * (len({r.source.name for r in rows}) > 1)
    shown = ["largest difference" if h == "difference" and "figures" in heads else h for h in heads]
    cells = [r.cells() for r in rows]
    return [row(shown), row(["---"] * len(heads)), *([c[h] for h in heads] for c in cells), ""]


def _grid(rows: Sequence[Row]) -> list[str | Sequence[Cell]]:
    """Largest differences with a column for each quantity; the tolerance is one for all."""
    if not rows:
        return []
    columns = list(dict.fromkeys(r.column for r in rows))
    cases: dict[str, dict[str, Row]] = {}
    for r in rows:
        cases.setdefault(r.case, {})[r.column] = r
    (tolerance,) = {r.cells()["tolerance"].text for r in rows}
    lines: list[str | Sequence[Cell]] = paragraph(f"Largest differences; tolerance {tolerance}.")
    lines += [row(("what", "figures", *columns)), row(["---"] * (len(columns) + 2))]
    for case, by_column in cases.items():
        figures = str(sum(r.count for r in by_column.values()))
        # a check that failed has not come to all of its columns
        held = [by_column[c].cells()["difference"] if c in by_column else Cell("") for c in columns]
        lines.append([Cell(case), Cell(figures), *held])
    return [*lines, ""]
