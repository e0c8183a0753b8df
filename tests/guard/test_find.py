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


def test_our_own_allowances_and_hidden_files_are_no_claims(tmp_path: Path) -> None:
    for name in ("guard.toml", ".claim.toml", "claim.toml.bak", "claim.txt"):
        (tmp_path / name).write_text(HOPS)
    assert find(tmp_path).claims == []


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
