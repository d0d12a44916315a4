"""The documentation: its examples run, its links lead somewhere, its generated pages are up to date."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Iterator

import pytest
from generators.examples import blocks, elsewhere, refreshed, scheme_text
from generators.make_docs import GENERATED, generated
from generators.markdown import DOCS, MARK, ROOT, anchor
from generators.validation_page import differences, page_of
from published import checks

from estimator.scheme import PATHS
from estimator.scheme_file import _SECTIONS, parse_scheme
from estimator.settings import REQUIRED, settings_of

PAGES = [ROOT / "README.md", *sorted(DOCS.glob("*.md"))]
AGAIN = "run python tests/generators/make_docs.py"


def name_of(path) -> str:
    return path.relative_to(ROOT).as_posix()


@pytest.mark.parametrize("path", PAGES, ids=name_of)
def test_examples_run_and_show_what_they_print(path, home, tmp_path, monkeypatch):
    monkeypatch.setenv("DEWLEDGER_HOME", str(home))
    text = path.read_text(encoding="utf-8")
    fresh, problems = refreshed(text, tmp_path)
    assert not problems, "\n".join(problems)
    assert fresh == text, AGAIN


@pytest.mark.parametrize("name", sorted(set(GENERATED) - {"validation"}))
def test_a_generated_page_is_up_to_date(name):
    """That of the validation page stands behind the published tests."""
    text = (DOCS / f"{name}.md").read_text(encoding="utf-8")
    assert text == generated(name), AGAIN
    assert text.startswith(MARK)


@pytest.mark.parametrize("path", PAGES, ids=name_of)
def test_a_block_that_is_not_run_says_why(path):
    for block in blocks(path.read_text(encoding="utf-8")):
        if elsewhere(block):
            assert block.mark.startswith(("not run: ", "job: ", "own: ", "tests: "))
            assert len(block.mark) > len("not run: ") + 10 or ": posix" in block.mark
        assert block.language in ("sh", "python", "toml", "text"), block.line


# links

FENCED = re.compile(r"^```.*?^```", re.MULTILINE | re.DOTALL)
LINK = re.compile(r"(?<!!)\[[^\]\[]*(?:`[^`]*`)?[^\]\[]*\]\(([^)\s]+)\)")


def links(text: str) -> list[str]:
    return LINK.findall(FENCED.sub("", text))


def anchors(text: str) -> set[str]:
    """What may stand behind a #, as a forge makes it of headings: repeated ones get a number."""
    found: dict[str, int] = {}
    names = set()
    for heading in re.findall(r"^#{1,6} (.*)$", FENCED.sub("", text), re.MULTILINE):
        name = anchor(heading)
        count = found.get(name, 0)
        found[name] = count + 1
        names.add(f"{name}-{count}" if count else name)
    return names | set(re.findall(r'<a id="([^"]+)">', text))


@pytest.mark.parametrize("path", [*PAGES, ROOT / "DEVELOPERS.md"], ids=name_of)
def test_links_lead_somewhere(path):
    for link in links(path.read_text(encoding="utf-8")):
        assert not link.startswith(("http:", "/")), link
        if link.startswith("https://"):
            continue
        file, _, place = link.partition("#")
        target = (path.parent / file).resolve() if file else path
        assert target.exists(), f"{link}: no such file"
        if place:
            assert place in anchors(target.read_text(encoding="utf-8")), f"{link}: no such heading"


def test_a_link_is_found_whatever_stands_in_it():
    text = "[a](b.md) and [`c`](#c) and\n[two\nwords](d.md#e)\n```text\n[no](no.md)\n```\n"
    assert links(text) == ["b.md", "#c", "d.md#e"]
    assert anchors("# A `b` c\n## Year document\n## Year document\n") == {
        "a-b-c",
        "year-document",
        "year-document-1",
    }


def test_every_page_is_in_the_index():
    index = (DOCS / "index.md").read_text(encoding="utf-8")
    listed = {link.partition("#")[0] for link in links(index)}
    assert {path.name for path in DOCS.glob("*.md")} - {"index.md"} <= listed


# nothing is left out


def commands() -> Iterator[tuple[str, list[str]]]:
    """Every command with its options, from what the command line itself is run with."""
    from typer.main import get_command

    from estimator.cli.app import app

    def walk(command, path):
        if not command.hidden:
            options = [o for p in command.params for o in (*p.opts, *p.secondary_opts) if o.startswith("-")]
            yield path, options
            for name, inner in getattr(command, "commands", {}).items():
                yield from walk(inner, f"{path} {name}")

    yield from walk(get_command(app), "dewledger")


@pytest.mark.parametrize(
    ("command", "options"), list(commands()), ids=lambda x: x if isinstance(x, str) else ""
)
def test_every_command_and_option_is_documented(command, options):
    page = (DOCS / "command-reference.md").read_text(encoding="utf-8")
    sections = {part.split("\n", 1)[0]: part for part in re.split(r"^## ", page, flags=re.MULTILINE)}
    assert command in sections
    assert {o for o in options if f"`{o}`" not in sections[command]} <= {"--help", "-h"}


SETTINGS = [(section, name, known) for section, m in _SECTIONS.items() for name, known in settings_of(m)]


@pytest.mark.parametrize(
    ("section", "name", "known"), SETTINGS, ids=lambda x: x if isinstance(x, str) else ""
)
def test_every_setting_is_documented(section, name, known):
    page = (DOCS / "scheme-reference.md").read_text(encoding="utf-8")
    part = re.split(rf"^## {section}$", page, flags=re.MULTILINE)[1].split("\n## ", 1)[0]
    key = PATHS.get(f"{section}.{name}", f"{section}.{name}").removeprefix(f"{section}.")
    (row,) = re.findall(rf"^\| `{re.escape(key)}` \|.*$", part, re.MULTILINE)
    assert known.doc in row
    assert ("**required**" in row) == (known.default is REQUIRED)
    assert known.quantity is None or known.quantity.unit == "1" or f"{known.highest:g}" in row


# the recorder behind the validation page


@pytest.fixture
def recorder(monkeypatch):
    monkeypatch.setattr("published.checks.RECORDED", {})

    @checks.validates("Length of a rod", checks.CHARTS)
    def test_rod():
        """Why the tolerance is what it is."""

    test_rod.__module__ = "published.test_moist_air"
    return checks.Recorder(test_rod)


def test_a_check_fails_outside_its_tolerance_and_is_recorded(recorder):
    recorder("short", 1.009, 1.0, "m", rel=0.01)
    with pytest.raises(AssertionError, match="long"):
        recorder("long", 1.011, 1.0, "m", rel=0.01)
    with pytest.raises(AssertionError, match="many"):
        recorder.largest("many", [1.0, 2.0], [1.0, 2.3], "m", within=0.2)
    with pytest.raises(AssertionError, match="none"):
        recorder.largest("none", [float("nan")], [1.0], "m", within=0.2)
    with pytest.raises(AssertionError, match="high"):
        recorder.at_most("high", 2.0, 1.9, "m")
    with pytest.raises(AssertionError, match="twice"):
        recorder("short", 1.0, 1.0, "m", rel=0.01)


def test_the_largest_difference_of_all_that_share_a_case_counts(recorder):
    recorder.largest("rods", [1.0, 2.0], [1.0, 2.1], "m", within=0.2)
    recorder.largest("rods", 3.0, 3.15, "m", within=0.2)
    recorder.largest("nothing", [0.0, 1e-4], [0.0, 0.0], "kWh", rel=0.01, floor=1.0)
    page = page_of(checks.RECORDED)
    assert "| rods | m | 3 | 0.15 | 0.2 |" in page
    assert "| nothing | kWh | 2 | 0.01 % | 1 % |" in page


@pytest.mark.parametrize(("found", "stale"), [(1.004, False), (1.0045, False), (1.0065, True)])
def test_the_validation_page_is_stale_once_a_figure_moves_by_a_tenth_of_its_tolerance(recorder, found, stale):
    recorder("short", 1.004, 1.0, "m", rel=0.01)
    page = page_of(checks.RECORDED)
    assert "| short | m | 1 | 1.0040 | 0.40 % | 1 % |" in page
    assert "Why the tolerance is what it is." in page
    checks.RECORDED.clear()
    recorder._into.rows.clear()
    checks.RECORDED["rod"] = recorder._into
    recorder("short", found, 1.0, "m", rel=0.01)
    told = differences(checks.RECORDED, page)
    assert bool(told) == stale, told
    assert differences(checks.RECORDED, page.replace("Why the", "Why a"))
    assert differences(checks.RECORDED, page.replace("| 1 % |", "| 2 % |"))


NEEDED = {
    "fan": 'total_pressure = "900 Pa"\nefficiency = 0.6\n',
    "preheat": 'dry_bulb = "4 degC"\nsource = "boiler"\n',
    "reheat": 'source = "boiler"\n',
    "airflow": 'outdoor_air = "1 m3/s"\n',
    "supply": 'dew_point = "11 degC"\ndry_bulb = "20 degC"\n',
}


@pytest.mark.parametrize(
    ("section", "name", "known"), SETTINGS, ids=lambda x: x if isinstance(x, str) else ""
)
def test_every_example_of_a_setting_is_accepted(section, name, known):
    page = (DOCS / "scheme-reference.md").read_text(encoding="utf-8")
    part = re.split(rf"^## {section}$", page, flags=re.MULTILINE)[1].split("\n## ", 1)[0]
    key = PATHS.get(f"{section}.{name}", f"{section}.{name}").removeprefix(f"{section}.")
    (example,) = re.findall(rf"^\| `{re.escape(key)}` \|.* `([^`]*)` \|$", part, re.MULTILINE)
    head = "[[reheat]]" if section == "reheat" else f"[{section}]"
    others = [
        line for line in NEEDED.get(section, "").splitlines() if line.split(" ")[0] != key.split(".")[0]
    ]
    text = "\n".join([head, *others, f"{key} = {example}"])
    tomllib.loads(text)
    parse_scheme(scheme_text(text))
