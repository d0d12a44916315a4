"""The command line as a whole: what it costs to start, how it explains itself, what it does with errors."""

from __future__ import annotations

import os
import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

import estimator
from estimator.errors import BalanceError

COMMANDS = (
    ("demo",),
    ("weather",),
    ("year",),
    ("hour",),
    ("scheme", "new"),
    ("scheme", "list"),
    ("scheme", "show"),
)
HEAVY = {"pandas", "pvlib", "matplotlib", "scipy", "pint", "numpy"}
MAIN = "from estimator.cli import main; main()"


def process(*arguments: str, code: str = MAIN, **options) -> subprocess.CompletedProcess:
    environment = {
        **os.environ,
        "PYTHONPATH": str(Path(estimator.__file__).parent.parent),
        **options.pop("env", {}),
    }
    return subprocess.run(
        [sys.executable, "-W", "error", "-c", code, *arguments],
        capture_output=True,
        env=environment,
        check=False,
        **options,
    )


def test_the_package_and_its_help_load_nothing_heavy():
    show = "import sys; print(*sys.modules, file=sys.stderr)"
    code = f"import estimator, estimator.cli; {show}"
    loaded = {name.split(".")[0] for name in process(code=code).stderr.decode().split()}
    assert "estimator" in loaded
    assert not loaded & (HEAVY | {"typer"})
    code = f"import atexit, sys; atexit.register(lambda: exec({show!r})); {MAIN}"
    run = process("--help", code=code)
    assert b"Usage: dewledger" in run.stdout
    loaded = {name.split(".")[0] for name in run.stderr.decode().split()}
    assert "typer" in loaded
    assert not loaded & HEAVY


def test_the_version():
    run = process("--version")
    assert run.stdout.decode().splitlines() == [f"dewledger {estimator.__version__}"]
    assert (run.returncode, run.stderr) == (0, b"")


def test_help_names_every_command_and_the_exit_status(dewledger):
    text = dewledger("--help").stdout
    assert all(f"\n  {command[0]} " in text for command in COMMANDS)
    assert "Exit status: 0 done; 1 done, but something asked for fails; 2" in text
    assert "dewledger year sablewick-bay --scheme boiler-reheat" in text
    # each command says what it is for within its line
    assert "..." not in text.partition("\nCommands:\n")[2]


@pytest.mark.parametrize("command", COMMANDS, ids=" ".join)
def test_help_teaches(dewledger, command):
    result = dewledger(*command, "--help")
    assert result.exit_code == 0
    assert "Example" in result.stdout
    assert f"\n    dewledger {' '.join(command)}" in result.stdout
    assert max(map(len, result.stdout.splitlines())) <= 80
    assert "..." not in result.stdout.partition("\n\n")[2]


def test_help_has_no_colour_codes_and_no_boxes(dewledger):
    assert dewledger("year", "--help").stdout.isascii()
    assert b"\x1b" not in process("year", "--help", env={"FORCE_COLOR": "1"}).stdout


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("yeer", "x"), ("no such command 'yeer'", "did you mean 'year'?")),
        (("scheme", "shw"), ("no such command 'shw'", "did you mean 'show'?", "dewledger scheme --help")),
        (("year", "--schme", "x"), ("no such option --schme", "did you mean '--scheme'?")),
        (("year", "x.epw", "--airflw", "3"), ("no such option --airflw", "did you mean '--airflow'?")),
        (("dmo",), ("no such command 'dmo'", "did you mean 'demo'?", "dewledger --help")),
        (("demo", "--unit", "ip"), ("no such option --unit", "did you mean '--units'?")),
        (("year", "--scheme", "starter"), ("missing argument 'FILE'", "'dewledger year --help'")),
        (("--nonsense",), ("no such option --nonsense",)),
        (("weather", "a", "--json"), ("--json", "argument")),
        (("scheme", "show", "a", "b"), ("extra argument", "b")),
    ],
)
def test_a_command_line_that_cannot_be_read_is_told_in_one_line(refused, arguments, words):
    message = refused(*arguments)
    assert message.count("\n") == 1
    assert all(word in message for word in words), message


def commands_of(group, way: tuple[str, ...] = ()) -> list[tuple[str, ...]]:
    """The program itself, its groups and its commands, each by the words that call it."""
    below = getattr(group, "commands", {})
    return [way, *(found for name, inner in below.items() for found in commands_of(inner, (*way, name)))]


def every_command() -> list[tuple[str, ...]]:
    import typer

    from estimator.cli.app import app

    return commands_of(typer.main.get_command(app))


def test_the_commands_here_are_all_there_are():
    assert {command for command in every_command() if command not in {(), ("scheme",)}} == set(COMMANDS)


def examples_in(text: str) -> list[str]:
    return re.findall(r"^    (dewledger .*)$", text.rpartition("\n  Examples:\n")[2], re.MULTILINE)


@pytest.mark.parametrize("command", every_command(), ids=lambda words: " ".join(words) or "dewledger")
def test_every_example_of_a_help_page_runs_as_printed_in_an_empty_folder(
    dewledger, tmp_path, monkeypatch, command
):
    text = dewledger(*command, "--help").stdout
    examples = examples_in(text)
    assert examples
    assert text.rstrip().endswith(examples[-1]), "examples end the page"
    for number, example in enumerate(examples):
        folder = tmp_path / str(number)
        folder.mkdir()
        monkeypatch.chdir(folder)
        program, *arguments = shlex.split(example)
        assert (program, tuple(arguments[: len(command)])) == ("dewledger", command)
        result = dewledger(*arguments)
        assert result.exit_code == 0, (example, result.stderr)


@pytest.mark.parametrize("arguments", [(), ("scheme",)])
def test_nothing_to_do_shows_the_help(dewledger, arguments):
    result = dewledger(*arguments)
    assert result.exit_code == 2
    assert result.stdout == ""
    assert "Usage: dewledger" in result.stderr


def test_a_defect_of_the_program_is_told_as_one(dewledger, years, monkeypatch):
    def broken(*_args, **_rest):
        raise BalanceError("heat does not balance at 01-01 00:00")

    monkeypatch.setattr("estimator.result.evaluate", broken)
    result = dewledger("year", years["humid"], "--scheme", "starter", "--json", "a.json", "--hours", "b.csv")
    assert (result.exit_code, result.stdout) == (3, "")
    assert "defect of the program, not of your input" in result.stderr
    assert "heat does not balance at 01-01 00:00" in result.stderr
    assert not list(Path().iterdir())


def test_an_unforeseen_error_keeps_its_trace_and_writes_nothing(dewledger, years, monkeypatch):
    monkeypatch.setattr("estimator.result.evaluate", lambda *_args: 1 / 0)
    result = dewledger("year", years["humid"], "--scheme", "starter", "--json", "a.json")
    assert (result.exit_code, result.stdout) == (3, "")
    assert "ZeroDivisionError" in result.stderr
    assert not list(Path().iterdir())


def test_an_interrupted_run_writes_nothing(dewledger, years, monkeypatch):
    def interrupt(*_args):
        raise KeyboardInterrupt

    monkeypatch.setattr("estimator.result.evaluate", interrupt)
    result = dewledger("year", years["humid"], "--scheme", "starter", "--json", "a.json")
    assert (result.exit_code, result.stdout, result.stderr) == (130, "", "dewledger: interrupted\n")
    assert not list(Path().iterdir())


def test_a_disk_that_is_full_is_told_and_leaves_nothing(dewledger, years, monkeypatch):
    def full(_descriptor):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    result = dewledger("year", years["humid"], "--scheme", "starter", "--json", "a.json", "--hours", "b.csv")
    assert (result.exit_code, result.stdout) == (2, "")
    assert "No space left on device" in result.stderr
    assert not list(Path().iterdir())


# completion


def completed(shell: str, line: str, home: Path) -> list[str]:
    """What a shell is offered for the last word of a line."""
    environment = {"_DEWLEDGER_COMPLETE": f"complete_{shell}", "DEWLEDGER_HOME": str(home)}
    if shell == "bash":
        environment |= {"COMP_WORDS": line, "COMP_CWORD": str(line.count(" "))}
    else:
        environment |= {"_TYPER_COMPLETE_ARGS": line, "_TYPER_COMPLETE_FISH_ACTION": "get-args"}
    run = process(env=environment, cwd=home)
    assert run.stderr == b""
    return run.stdout.decode().split()


@pytest.mark.parametrize(
    ("line", "expected"),
    [
        ("dewledger ho", {"hour"}),
        ("dewledger scheme sh", {"show"}),
        ("dewledger year --dew", {"--dew-point"}),
        ("dewledger year sa", {"sablewick-bay"}),
        ("dewledger weather ondavari ca", {"cape-wendle"}),
        ("dewledger hour x --scheme boil", {"boiler-reheat"}),
        ("dewledger scheme show sta", {"starter"}),
        ("dewledger demo --units i", {"ip"}),
        # nothing of ours begins so, and the shell offers files
        ("dewledger year my-own", set()),
    ],
)
def test_completion_offers_commands_options_and_names(home, line, expected):
    assert set(completed("bash", line, home)) == expected


def test_completion_in_other_shells(home):
    assert "sablewick-bay" in " ".join(completed("zsh", "dewledger year sa", home))
    assert completed("fish", "dewledger year sa", home) == ["sablewick-bay"]


def test_completion_can_be_shown_and_installed(dewledger):
    text = dewledger("--help").stdout
    assert "--install-completion" in text
    assert "--show-completion" in text


# in a process of its own


def test_a_bad_file_in_a_process_of_its_own(tmp_path):
    run = process("year", "nowhere.epw", "--scheme", "starter", "--json", "a.json", cwd=tmp_path)
    assert (run.returncode, run.stdout) == (2, b"")
    assert run.stderr.decode().splitlines() == [
        "dewledger: nowhere.epw: no such file; check the name and the folder"
    ]
    assert not list(tmp_path.iterdir())


def test_a_reader_that_has_had_enough_is_no_error(years, home, tmp_path):
    command = [sys.executable, "-c", MAIN, "year", years["humid"], "-s", "starter", "--hours", "-"]
    environment = {
        **os.environ,
        "PYTHONPATH": str(Path(estimator.__file__).parent.parent),
        "DEWLEDGER_HOME": str(home),
    }
    with subprocess.Popen(
        command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, env=environment, cwd=tmp_path
    ) as running:
        assert running.stdout is not None
        assert running.stderr is not None
        assert running.stdout.readline().startswith(b"hour,")
        running.stdout.close()
        message = running.stderr.read()
    assert (running.returncode, message) == (0, b"")


@pytest.mark.parametrize("encoding", ["ascii", "cp1252", "utf-8"])
def test_a_console_that_lacks_a_letter_shows_a_question_mark(tmp_path, encoding):
    text = 'name = "Süd-Ωst \\u001b[31m"\n'
    starter = Path(estimator.__file__).parent / "schemes" / "starter.toml"
    lines = starter.read_text(encoding="utf-8").splitlines(keepends=True)
    named = [text if line.startswith("name =") else line for line in lines]
    (tmp_path / "s.toml").write_text("".join(named), encoding="utf-8")
    run = process("scheme", "show", "s.toml", cwd=tmp_path, env={"PYTHONIOENCODING": encoding})
    assert (run.returncode, run.stderr) == (0, b"")
    shown = {"ascii": "S?d-?st ?[31m", "cp1252": "Süd-?st ?[31m", "utf-8": "Süd-Ωst ?[31m"}
    assert run.stdout.decode(encoding).splitlines()[0] == shown[encoding]
    run = process("scheme", "show", "s.toml", "--json", "-", cwd=tmp_path, env={"PYTHONIOENCODING": encoding})
    assert run.stdout.isascii()
    assert b"S\\u00fcd-\\u03a9st \\u001b[31m" in run.stdout
