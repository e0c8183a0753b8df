"""The definition of the pre-commit hook, and the CI file that README shows.

Their forms are common practice, no source.
"""

from __future__ import annotations

import re
from pathlib import Path

import pytest

import certify
from certify.commands.guard import guard_command
from certify.commands.registry import MODULES
from certify.guard.allowances import read_allowances

TOP = Path(certify.__file__).parents[1]
HOOKS = (TOP / ".pre-commit-hooks.yaml").read_text()
README = (TOP / "README.md").read_text()


def entries() -> dict[str, str]:
    """Return the keys of the one hook; the file is flat, so this is all its structure."""
    lines = HOOKS.splitlines()
    assert lines[0].startswith("- ")
    assert all(line.startswith("  ") for line in lines[1:])
    return dict(line[2:].split(": ", 1) for line in lines)


def test_the_hook_runs_a_command_that_there_is() -> None:
    hook = entries()
    assert {"id", "name", "entry", "language"} <= set(hook)
    assert hook["id"] == "certify-guard"
    assert hook["language"] == "python"
    assert hook["pass_filenames"] == "false"
    program, command = hook["entry"].split()
    assert program == "certify"
    assert command in MODULES


def test_the_hook_runs_at_every_commit() -> None:
    """Also at one that only deletes files, which pre-commit passes to no hook (from memory)."""
    assert entries()["always_run"] == "true"
    assert "files" not in entries()


def test_a_reader_of_yaml_reads_the_same() -> None:
    yaml = pytest.importorskip("yaml")
    (hook,) = yaml.safe_load(HOOKS)
    flat = entries()
    assert hook == {**flat, "pass_filenames": False, "always_run": True}


def blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", README.split("## In CI")[1], re.DOTALL)


def test_the_ci_file_of_the_readme() -> None:
    workflow = blocks("yaml")[0]
    for line in ("on:", "jobs:", "runs-on:", "actions/checkout@", "actions/setup-python@"):
        assert line in workflow
    options = {name for option in guard_command.params for name in option.opts}
    (call,) = re.findall(r"certify guard (.*)", workflow)
    assert set(re.findall(r"--\w+", call)) <= options
    yaml = pytest.importorskip("yaml")
    read = yaml.safe_load(workflow)
    (job,) = read["jobs"].values()
    assert all(len(set(step) & {"uses", "run"}) == 1 for step in job["steps"])


def test_the_allowances_of_the_readme(tmp_path: Path) -> None:
    (tmp_path / "guard.toml").write_text(blocks("toml")[0])
    allowed = read_allowances(tmp_path)
    assert allowed.open == ("n=31",)
    assert allowed.files == ("notes/*.tex",)


def test_the_hook_of_the_readme_is_the_one_defined() -> None:
    assert f"id: {entries()['id']}" in README.split("## In CI")[1]
