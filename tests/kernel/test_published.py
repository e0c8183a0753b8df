"""Published tables and theorems, each as a theorem that Coq proves from what was found.

The sources stand beside the tables in tests/published.
"""

from __future__ import annotations

import shutil
from collections.abc import Callable
from pathlib import Path

import igraph
import networkx
import pytest

from certify.checker import check_folder
from certify.claim.claim import read_claim
from certify.errors import ContradictionError
from certify.flow import prove
from certify.report.theorem.coq import find_coq, prove_theorems
from certify.report.theorem.sheet import Sheet, write_sheet
from certify.search.ladder import Limits
from tests.kernel.conftest import ROOT
from tests.published.test_boards import LEAPERS
from tests.published.test_sums import TABLES

DEMOS = [
    path.parent
    for path in sorted((ROOT / "proofs").glob("*/claim.toml"))
    if read_claim(path).growing is None
]
FLOWERS = (ROOT / "proofs" / "flower-rings" / "claim.toml").read_text()

Prove = Callable[[Path, str | None], Sheet]


@pytest.fixture
def prove_sheet(compiled: Path, tmp_path: Path) -> Prove:
    """Return a function that has Coq prove the theorems of a folder."""

    def run(folder: Path, wanted: str | None = None) -> Sheet:
        sheet = write_sheet(folder, wanted)
        coq = find_coq()
        assert coq is not None
        proved = prove_theorems(tmp_path / f"{sheet.name}.v", coq, sheet, compiled)
        assert list(proved.theorems) == sheet.theorems
        assert sheet.table
        assert not sheet.not_taken
        return sheet

    return run


def settle(folder: Path, text: str, graphs: bytes | None = None) -> Path:
    """Prove a claim in a folder of its own; the checker accepts it."""
    folder.mkdir()
    claim = folder / "claim.toml"
    claim.write_text(text)
    if graphs is not None:
        (folder / "graphs.g6").write_bytes(graphs)
    for _ in prove(claim).outcomes:
        pass
    check = check_folder(folder)
    assert all(verdict.accepted for verdict in check.verdicts())
    assert check.accepted
    return folder


def count(folder: Path, answer: str) -> int:
    check = check_folder(folder)
    list(check.verdicts())
    return check.answers[answer]


def test_all_finite_demos_are_here() -> None:
    assert [folder.name for folder in DEMOS] == [
        "canal-locks",
        "cubic-twelve",
        "knight-closed",
        "knight-open",
        "pentagonal-neighbours",
        "product-plus-one",
    ]


@pytest.mark.parametrize("folder", DEMOS, ids=lambda folder: folder.name)
def test_demo_claims(folder: Path, prove_sheet: Prove) -> None:
    """Each impossible instance has its theorem, and the whole table has one."""
    sheet = prove_sheet(folder, None)
    whole = ["count"] if folder.name == "cubic-twelve" else ["table"]
    assert sheet.theorems[-1:] == whole
    stated = [name for name in sheet.theorems if name.startswith("impossible_")]
    assert len(stated) == count(folder, "impossible") == len(sheet.theorems) - 1


@pytest.mark.parametrize("name", sorted(TABLES))
def test_tables_of_sums(name: str, prove_sheet: Prove, tmp_path: Path) -> None:
    """All that OEIS and papers say of sums, with neighbours adding up to squares to n = 60."""
    folder = settle(tmp_path / "claim", TABLES[name])
    assert prove_sheet(folder, None).theorems[-1] == "table"


@pytest.mark.parametrize("name", sorted(LEAPERS))
def test_tables_of_boards(name: str, prove_sheet: Prove, tmp_path: Path) -> None:
    """All boards of at most 64 cells."""
    folder = settle(tmp_path / "claim", LEAPERS[name])
    assert prove_sheet(folder, None).theorems[-1] == "table"


def famous(*names: str) -> bytes:
    """Return graphs of igraph's collection as graph6 lines."""
    lines = []
    for name in names:
        graph = networkx.Graph(igraph.Graph.Famous(name).get_edgelist())
        lines.append(networkx.to_graph6_bytes(graph, nodes=sorted(graph), header=False))
    return b"".join(lines)


LIST = 'structure = "hamiltonian-{}"\n[graph]\nlist = "graphs.g6"\n[answers]\nimpossible = true\n'


def test_famous_graphs_without_a_cycle(prove_sheet: Prove, tmp_path: Path) -> None:
    """Petersen (1898), Tutte (1946), Coxeter (Tutte 1960), Herschel, Meredith (1973)."""
    graphs = famous("Petersen", "Tutte", "Coxeter", "Herschel", "Meredith")
    folder = settle(tmp_path / "claim", LIST.format("cycle"), graphs)
    theorems = [f"impossible_{i}" for i in range(1, 6)]
    assert prove_sheet(folder, None).theorems == [*theorems, "count"]


def test_the_hypotraceable_graph_of_thomassen(prove_sheet: Prove, tmp_path: Path) -> None:
    """Thomassen, Discrete Mathematics 9 (1974) 91-96: without a Hamiltonian path."""
    folder = settle(tmp_path / "claim", LIST.format("path"), famous("Thomassen"))
    assert prove_sheet(folder, None).theorems == ["impossible_1", "count"]


def test_a_flower_of_404_vertices(prove_sheet: Prove, tmp_path: Path) -> None:
    """Isaacs, American Mathematical Monthly 82 (1975) 221-239; built from the rule by Coq."""
    text = FLOWERS.replace('"3.."', "101")
    assert text != FLOWERS
    sheet = prove_sheet(settle(tmp_path / "claim", text), None)
    assert sheet.theorems == ["impossible_n_101", "table"]


def test_proofs_by_clauses(prove_sheet: Prove, tmp_path: Path) -> None:
    """The same facts by the kind that is for machines, mirrors included."""
    folder = tmp_path / "claim"
    folder.mkdir()
    claim = folder / "claim.toml"
    claim.write_text(LIST.format("cycle"))
    (folder / "graphs.g6").write_bytes(famous("Petersen", "Tutte", "Coxeter", "Herschel"))
    limits = Limits(kinds=frozenset({"clauses"}))
    kinds = [outcome.record.kind for outcome in prove(claim, limits=limits).outcomes]
    assert kinds == ["clauses"] * 4
    prove_sheet(folder, None)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("[6; 8; 9; 11; 17]", "[6; 8; 9; 12; 17]"),  # a set that leaves fewer pieces
        ("(Q 16) certificate_n_16", "(Q 17) certificate_n_16"),  # of another instance
        ("[4; 7]", "[4; 6]"),  # of another rule
        ("1 <= n <= 60", "1 <= n <= 61"),  # of a longer table
        ("range 1 60", "range 1 59"),  # an instance without a row
        ("(n =? 1)", "(n =? 2)"),  # another answer claimed
        ("~ exists h, ham_path (Q 16) h", "~ exists h, ham_path (Q 17) h"),
        ("ham_path (Q n) h) <-> claimed n = true", "ham_cycle (Q n) h) <-> claimed n = true"),
    ],
)
def test_what_is_not_so_does_not_compile(
    old: str, new: str, compiled: Path, tmp_path: Path
) -> None:
    """n = 17 has a path, so nothing of it may be proved."""
    sheet = write_sheet(ROOT / "proofs" / "canal-locks")
    assert old in sheet.text
    sheet.text = sheet.text.replace(old, new)
    with pytest.raises(ContradictionError, match="Coq refuses it"):
        prove_theorems(tmp_path / "it.v", shutil.which("coqc") or "", sheet, compiled)


def test_what_rests_on_an_axiom_is_refused(compiled: Path, tmp_path: Path) -> None:
    sheet = write_sheet(ROOT / "proofs" / "canal-locks", "n=16")
    sheet.text = sheet.text.replace(
        "Theorem impossible_n_16 : ~ exists h, ham_path (Q 16) h.",
        "Axiom easy : ~ exists h, ham_path (Q 16) h.\n"
        "Theorem impossible_n_16 : ~ exists h, ham_path (Q 16) h.\nProof. exact easy. Qed.\n"
        "Theorem unused : ~ exists h, ham_path (Q 16) h.",
    )
    with pytest.raises(ContradictionError, match=r"assumes something: Axioms:\seasy"):
        prove_theorems(tmp_path / "it.v", shutil.which("coqc") or "", sheet, compiled)
