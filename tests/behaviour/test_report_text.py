"""Text for a terminal: numbers, tables and paragraphs."""

from __future__ import annotations

import pytest

from estimator.report.text import WIDTH, bullets, count, pairs, paragraph, show, table, unit


def test_thousands_are_marked_and_nothing_is_minus_zero():
    assert count(1234567.4) == "1 234 567"
    assert count(-1234.56, 1) == "-1 234.6"
    assert count(-0.004, 2) == "0.00"
    assert count(0.0) == "0"


@pytest.mark.parametrize(
    ("name", "value", "si", "ip"),
    [
        # conversions by their definitions: 12 000 Btu/h a ton, 1055.05585262 J a Btu, 7000 gr a lb,
        # 231 in3 a gallon, 0.3048 m a foot; water of 999.7 kg/m3, as at 10 degC
        ("cooling", 351_685.284, "351 685 kWh", "100 000 ton-h"),
        ("heat", 293_071.07, "293 071 kWh", "1 000.0 MMBtu"),
        ("humidity ratio", 0.01, "10.00 g/kg", "70.0 gr/lb"),
        ("relative humidity", 0.655, "65.5 %", "65.5 %"),
        ("dry bulb", -40.0, "-40.00 degC", "-40.0 degF"),
        ("airflow", 0.3048**3 / 60 * 10_000, "4.719 m3/s", "10 000 cfm"),
        ("water", 3.785411784e6 * 0.9997, "3 784 276 kg", "1 000 000 US gal"),
        ("fraction", 0.05, "0.050", "0.050"),
    ],
)
def test_values_in_both_unit_systems(name, value, si, ip):
    assert show(name, value, with_unit=True) == si
    assert show(name, value, "ip", with_unit=True) == ip


def test_a_pure_number_has_no_unit():
    assert unit("fraction", "si") == unit("fraction", "ip") == ""
    assert (unit("humidity ratio", "si"), unit("humidity ratio", "ip")) == ("g/kg", "gr/lb")


def test_what_is_not_determined_is_said_to_be():
    assert show("electricity", None, with_unit=True) == "not stated"


def test_columns_are_aligned():
    assert table([["a", "12", "x"], ["long", "3", "yy"]], "lrl") == ["  a     12  x", "  long   3  yy"]


def test_a_table_that_is_too_wide_gives_up_marks_gaps_and_the_tail_of_its_labels():
    row = ["label", *["123 456 789"] * 7]
    fitted = table([row], "l" + "r" * 7)
    assert len(fitted[0]) <= WIDTH
    assert fitted[0].split() == ["label", *["123456789"] * 7]
    narrow = table([["a season with a long name", *["123 456 789"] * 6]], "l" + "r" * 6)
    assert len(narrow[0]) <= WIDTH
    assert narrow[0].split("...")[1].split() == ["123456789"] * 6


def test_long_texts_wrap_and_long_words_break():
    for lines in (paragraph("word " * 60), bullets(["word " * 60]), pairs([("Label", "x" * 300)])):
        assert len(lines) > 1
        assert max(map(len, lines)) <= WIDTH
