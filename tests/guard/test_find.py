"""Which files are taken for claims."""

from __future__ import annotations

from pathlib import Path

import pytest

from certify.guard.allowances import fits
from certify.guard.find import find, holds_evidence, is_claim
from tests.guard.conftest import HOPS


@pytest.mark.parametrize(
    "text",
    [
        HOPS.encode(),
        b'structur = "x"\n[graph]\nvertices = "1..n"\nadjacent = "a < b"\n',
        b'structure = "hamiltonian-pat"\n',
        b"structure = 1\ngraph = 2\n",
        HOPS.encode().replace(b'"Hops"', b'"Hops'),  # no TOML any more
        b"<<<<<<< ours\n" + HOPS.encode(),  # a merge that was not finished
        HOPS.encode("utf-16"),
        b"\xef\xbb\xbf" + HOPS.encode(),
        HOPS.encode() + b"#" * (1 << 20),  # larger than a claim may be
    ],
)
def test_claims_and_what_was_meant_as_one(text: bytes, tmp_path: Path) -> None:
    path = tmp_path / "some.toml"
    path.write_bytes(text)
    assert is_claim(path)


@pytest.mark.parametrize(
    "text",
    [
        b"",
        b'[build-system]\nrequires = ["hatchling"]\n',
        b'[graph]\nnodes = 3\n[other]\nstructure = "tree"\n',
        b'structure = "flat"\n',
        b"[[[ no TOML at all",
        b'[tool.x]\nstructure = "hamiltonian-path"\n[tool.x.graph]\nadjacent = 1\n',
    ],
)
def test_other_files_are_left_alone(text: bytes, tmp_path: Path) -> None:
    path = tmp_path / "pyproject.toml"
    path.write_bytes(text)
    assert not is_claim(path)


def test_a_claim_file_by_name_counts_whatever_is_in_it(tmp_path: Path) -> None:
    (tmp_path / "claim.toml").write_bytes(b"")
    found = find(tmp_path)
    assert found.claims == [tmp_path / "claim.toml"]


def test_hidden_files_and_those_of_another_ending_are_no_claims(tmp_path: Path) -> None:
    for name in (".claim.toml", "claim.toml.bak", "claim.txt"):
        (tmp_path / name).write_text(HOPS)
    assert find(tmp_path).claims == []


@pytest.mark.parametrize("name", ["guard.toml", "Guard.toml", "GUARD.TOML"])
def test_allowances_are_no_claim_but_a_claim_of_their_name_is_one(
    name: str, tmp_path: Path
) -> None:
    (tmp_path / name).write_text('open = ["n=31"]\n')
    assert find(tmp_path).claims == []
    (tmp_path / name).write_text(HOPS)
    assert find(tmp_path).claims == [tmp_path / name]


def test_links_to_folders_of_folders(tmp_path: Path) -> None:
    """A claim far behind a link is told at the link; each folder is looked into once."""
    root, outside = tmp_path / "root", tmp_path / "outside"
    for folder in (root, outside / "a" / "b", outside / "c"):
        folder.mkdir(parents=True)
    (outside / "a" / "b" / "claim.toml").write_text(HOPS)
    (outside / "a" / "round").symlink_to(outside)
    (root / "to-c").symlink_to(outside / "c")
    assert find(root).troubles == []
    (outside / "c" / "to-a").symlink_to(outside / "a")
    (trouble,) = find(root).troubles
    assert trouble.path == root / "to-c" / "to-a"
    (root / "up").symlink_to(tmp_path)
    assert {trouble.path.name for trouble in find(root).troubles} <= {"up", "to-a"}
    assert find(root).claims == []


@pytest.mark.parametrize(
    ("text", "is_ours"),
    [
        (b'{"claim": "claim.toml", "format": 1, "sha256": {}}', True),
        (b'{"claim": "claim.toml", "sha256": {', True),
        (b'<<<<<<<\n"claim" "sha256"', True),
        (b'{"name": "page", "icons": []}', False),
        (b"", False),
    ],
)
def test_manifests_of_others(text: bytes, is_ours: bool, tmp_path: Path) -> None:
    (tmp_path / "manifest.json").write_bytes(text)
    assert holds_evidence(tmp_path) == is_ours


@pytest.mark.parametrize(
    ("name", "pattern", "fit"),
    [
        ("a.tex", "*.tex", True),
        ("b/a.tex", "*.tex", False),
        ("b/a.tex", "b/*", True),
        ("b/c/a.tex", "b/*", False),
        ("b/c/a.tex", "b/**", True),
        ("b", "b/**", False),
        ("x/y", "**", True),
        ("A.tex", "a.tex", False),
    ],
)
def test_patterns(name: str, pattern: str, fit: bool) -> None:
    assert fits(name, pattern) == fit
