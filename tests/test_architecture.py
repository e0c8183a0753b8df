"""The flow of imports, read from the code itself."""

from __future__ import annotations

import ast
import sys
from pathlib import Path

import certify

ROOT = Path(certify.__file__).parent
FLOW = ["claim", "graph", "evidence", "search", "report"]
FRONT_DOOR = {"certify.checker", "certify.checker.__main__"}


def imported(path: Path) -> set[str]:
    """Return the modules that a file imports, relative ones with their full name."""
    found: set[str] = set()
    package = ["certify", *path.relative_to(ROOT).parent.parts]
    for node in ast.walk(ast.parse(path.read_text())):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            base = package[: len(package) - node.level + 1] if node.level else []
            name = ".".join([*base, *([node.module] if node.module else [])])
            found |= {name} if node.module else {f"{name}.{alias.name}" for alias in node.names}
    return found


def files(folder: str) -> list[Path]:
    return sorted((ROOT / folder).rglob("*.py"))


def test_nothing_imports_backwards() -> None:
    for place, folder in enumerate(FLOW):
        later = {f"certify.{name}" for name in FLOW[place + 1 :]}
        top = {"certify.flow", "certify.commands", "certify.interface"}
        top |= {"certify.guard", "certify.recheck"}
        for path in files(folder):
            for name in imported(path):
                parts = ".".join(name.split(".")[:2])
                assert parts not in later | top, f"{path} imports {name}"


def test_the_engine_knows_nothing_of_what_it_runs() -> None:
    assert files("engine")
    for path in files("engine"):
        ours = {name for name in imported(path) if name.split(".")[0] == "certify"}
        assert all(name == "certify.errors" or name.startswith("certify.engine.") for name in ours)


def test_the_search_knows_nothing_of_where_it_runs() -> None:
    for folder in (*FLOW, "checker"):
        for path in files(folder):
            assert not {name for name in imported(path) if name.startswith("certify.engine")}, path


def test_the_guard_leans_on_little() -> None:
    """What people trust in CI needs the checker, the reader of claims, and files."""
    allowed = {"certify.checker", "certify.errors", "certify.evidence.disk"}
    outside = {"filelock", "pytest"}
    assert files("guard")
    for path in files("guard"):
        for name in imported(path):
            own = ".".join(name.split(".")[:2]) in ("certify.guard", "certify.claim")
            known = name.split(".")[0] in sys.stdlib_module_names | outside
            assert own or known or name in allowed | {"certify"}, f"{path} imports {name}"


def test_the_checker_imports_the_standard_library_and_itself_alone() -> None:
    assert files("checker")
    for path in files("checker"):
        for name in imported(path):
            own = name == "certify.checker" or name.startswith("certify.checker.")
            assert own or name.split(".")[0] in sys.stdlib_module_names, f"{path} imports {name}"


def test_the_rest_uses_the_checker_through_its_front_door() -> None:
    for path in sorted(ROOT.rglob("*.py")):
        if path.parent.name != "checker":
            inner = {name for name in imported(path) if name.startswith("certify.checker")}
            assert inner <= FRONT_DOOR, f"{path} imports {inner - FRONT_DOOR}"


def test_files_can_be_read_in_one_go() -> None:
    for path in sorted(ROOT.rglob("*.py")):
        most = 250 if path.parent.name == "checker" else 400
        assert len(path.read_text().splitlines()) <= most, path


def test_nobody_prints_but_the_command_line_and_the_checkers_front_door() -> None:
    for path in sorted(ROOT.rglob("*.py")):
        calls = {
            node.func.id
            for node in ast.walk(ast.parse(path.read_text()))
            if isinstance(node, ast.Call) and isinstance(node.func, ast.Name)
        }
        if path != ROOT / "checker" / "__main__.py":
            assert not calls & {"print", "eval", "exec", "compile", "__import__"}, path
        assert not calls & {"eval", "exec", "compile", "__import__"}, path


def test_every_kind_has_its_file_in_every_folder() -> None:
    for kind in ("witness", "obstruction", "counting", "cases", "sweep", "clauses"):
        for folder in ("search", "evidence", "checker", "report"):
            assert (ROOT / folder / f"{kind}.py").is_file(), (folder, kind)


def test_importing_the_package_imports_nothing_heavy() -> None:
    """So that the checker runs where nothing but Python is installed."""
    assert imported(ROOT / "__init__.py") <= {
        "__future__",
        "importlib",
        "typing",
        "certify.interface",  # under TYPE_CHECKING
    }
