"""Every command and option explains itself, with an example that parses."""

from __future__ import annotations

import re
import shlex
import shutil

import pytest
from typer.main import get_command

from revinf.cli.app import app

GROUP = get_command(app)
COMMANDS = dict(GROUP.commands)
OPTIONS = [(name, parameter) for name, command in COMMANDS.items() for parameter in command.params]
each_command = pytest.mark.parametrize("name", list(COMMANDS))


def example_of(name):
    """Return the words of a command's example, without the program."""
    words = shlex.split(re.search(r"Example: (revinf .*)", COMMANDS[name].help)[1])
    assert words[:2] == ["revinf", name]
    return words[2:]


def test_commands_are_those_of_the_design():
    assert {"check", "profile", "build", "inspect", "terms", "tabulate", "demo"} <= set(COMMANDS)


@each_command
def test_help_of_a_command_begins_with_one_sentence_and_has_one_example(name):
    first, *rest = COMMANDS[name].help.strip().splitlines()
    assert re.fullmatch(r"[A-Z].*[.?]", first)
    assert len([line for line in rest if line.strip().startswith("Example: revinf")]) == 1


@each_command
def test_help_is_printed_with_the_example(name, revinf):
    done = revinf(name, "--help")
    assert (done.exit_code, done.stderr) == (0, "")
    assert f"Example: revinf {name}" in " ".join(done.stdout.split())


@pytest.mark.parametrize(("name", "parameter"), OPTIONS, ids=lambda item: getattr(item, "name", item))
def test_every_option_has_help_that_is_a_sentence(name, parameter):
    assert re.search(r"[.\]]$", parameter.help.strip()), f"{name} {parameter.name}"
    assert len(parameter.help) > 12


@pytest.mark.parametrize(
    ("name", "parameter"),
    [item for item in OPTIONS if item[1].name in {"radius", "peak", "lattice"}],
    ids=lambda item: getattr(item, "name", item),
)
def test_lengths_say_their_unit(name, parameter):
    assert "mm" in f"{parameter.help} {parameter.metavar}".lower(), name


@each_command
def test_defaults_are_shown(name, revinf):
    text = " ".join(revinf(name, "--help").stdout.split())
    for parameter in COMMANDS[name].params:
        if isinstance(parameter.default, (str, float)) and parameter.default and parameter.show_default:
            assert f"[default: {parameter.default}]" in text, parameter.name


@each_command
def test_example_parses(name):
    context = COMMANDS[name].make_context(name, example_of(name))
    assert context.info_name == name


@pytest.mark.parametrize("name", ["check", "profile", "terms", "demo"])
def test_example_that_needs_no_files_runs(name, revinf, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    done = revinf(name, *example_of(name))
    assert (done.exit_code, done.stderr) == (0, "")
    assert len(done.stdout) > 50


@pytest.mark.parametrize("name", ["build", "inspect"])
def test_example_that_needs_files_runs_beside_them(name, revinf, demo, tmp_path, monkeypatch):
    shutil.copytree(demo, tmp_path / "demo")
    monkeypatch.chdir(tmp_path / "demo")
    done = revinf(name, *example_of(name))
    assert (done.exit_code, done.stderr) == (0, "")


def test_example_of_tabulate_runs_beside_a_small_literature(revinf, invented_literature, tmp_path, monkeypatch):
    shutil.copytree(invented_literature.folder, tmp_path / "literature")
    monkeypatch.chdir(tmp_path)
    done = revinf("tabulate", *example_of("tabulate"))
    assert done.exit_code == 0
    assert re.fullmatch(r"[\d,]+ rows for [\d,]+ places written to table\.csv\.gz", done.stdout.strip())


def test_help_of_the_program_lists_every_command(revinf):
    done = revinf("--help")
    assert (done.exit_code, done.stderr) == (0, "")
    for name in COMMANDS:
        assert re.search(rf"^\W*{name}\b", done.stdout, re.MULTILINE)
    assert "never of a person" in " ".join(re.sub(r"[│╭╮╰╯─]", " ", done.stdout).split())


def test_version_is_the_package_version(revinf):
    from revinf import __version__

    done = revinf("--version")
    assert (done.exit_code, done.stdout, done.stderr) == (0, f"revinf {__version__}\n", "")
