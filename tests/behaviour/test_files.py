"""Files are complete or absent, and hashes do not depend on how a thing was written."""

from __future__ import annotations

import sys

import pytest

from estimator.errors import InputError
from estimator.files import canonical_json, replacing, sha256, user_folder, write_text


def test_a_file_is_replaced_whole(tmp_path):
    path = tmp_path / "a.txt"
    write_text(path, "one\n")
    write_text(path, "two\n")
    assert path.read_bytes() == b"two\n"
    assert list(tmp_path.iterdir()) == [path]


def test_a_failure_half_way_leaves_what_was_there_and_nothing_else(tmp_path):
    path = tmp_path / "a.txt"
    write_text(path, "kept\n")

    def fail_half_way() -> None:
        with replacing(path, "w") as stream:
            stream.write("half")
            raise ArithmeticError

    with pytest.raises(ArithmeticError):
        fail_half_way()
    assert path.read_text() == "kept\n"
    assert list(tmp_path.iterdir()) == [path]


@pytest.mark.parametrize("name", ["", "missing/a.txt"])
def test_a_place_that_cannot_be_written_is_told(tmp_path, name):
    with pytest.raises(InputError, match=r"cannot be written|not a regular file"):
        write_text(tmp_path / name, "x")
    assert list(tmp_path.iterdir()) == []


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no such rights")
def test_a_new_file_has_the_rights_of_a_plain_open(tmp_path):
    write_text(tmp_path / "a", "x")
    (tmp_path / "b").write_text("x")
    assert (tmp_path / "a").stat().st_mode == (tmp_path / "b").stat().st_mode


def test_canonical_json_is_one_spelling():
    assert canonical_json({"b": 1.5, "a": ["é", None]}) == '{"a":["é",null],"b":1.5}'.encode()
    assert sha256(canonical_json({"a": 1, "b": 2})) == sha256(canonical_json({"b": 2, "a": 1}))
    with pytest.raises(ValueError, match="JSON"):
        canonical_json({"a": float("nan")})


def test_the_users_folder_can_be_moved(monkeypatch, tmp_path):
    monkeypatch.setenv("DEWLEDGER_HOME", str(tmp_path))
    assert user_folder() == tmp_path
    monkeypatch.delenv("DEWLEDGER_HOME")
    assert "dewledger" in str(user_folder())
