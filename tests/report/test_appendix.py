"""The appendix: read aloud, refused where it has to be, and compiled where LaTeX is."""

from __future__ import annotations

import json
import re
import shutil
import subprocess
from pathlib import Path

import pytest

from certify.errors import ContradictionError, InputError
from certify.report.appendix import render_appendix
from certify.report.latex import set_latex_text, set_plain_text
from certify.report.names import Name, read_name
from certify.report.tex import escape_tex
from certify.report.words import mark
from tests.checker.folders import lines_of, read_files
from tests.flow.conftest import Command, certify
from tests.report import folders

__all__ = ["certify"]  # the fixture

DEMOS = sorted(Path(__file__).parents[2].glob("proofs/*/claim.toml"))
ALLOWED_OVERFULL = 3.0
"""In points."""

TEXTS = {
    "hops": (folders.HOPS, {}),
    "squares": (folders.SQUARES, {}),
    "boards": (folders.BOARDS, {}),
    "rings": (folders.RINGS, {}),
    "names": (folders.NAMES, {"names__edges": folders.NAMES_EDGES}),
}
KINDS = ("sweep", "clauses", "cases", "witness")


@pytest.fixture(scope="module")
def proved(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    """Folders of evidence: of the claims above, and the Petersen graph by each kind alone."""
    root = tmp_path_factory.mktemp("proved")
    found = {
        name: folders.prove_text(root / name, text, **files)
        for name, (text, files) in TEXTS.items()
    }
    for kind in KINDS:
        folder = root / kind
        folder.mkdir()
        (folder / "petersen.g6").write_text(f"{folders.PETERSEN}\n{folders.PETERSEN}\n")
        (folder / "claim.toml").write_text(folders.PETERSENS)
        found[kind] = folders.prove_file(folder / "claim.toml", folder, kinds={kind})
    return found


def latex(folder: Path) -> str:
    return render_appendix(folder, "latex").text


def one_line(text: str) -> str:
    return " ".join(text.split())


def test_the_claim_is_a_definition_and_a_theorem(proved: dict[str, Path]) -> None:
    text = one_line(latex(proved["hops"]))
    assert (
        r"For an integer $n$ let $G(n)$ be the graph whose vertices are the integers "
        r"$1, 2, \dots, n$. Two different vertices $a$ and $b$ are adjacent if and only if "
        r"$\left|{a - b}\right| \in \{3, 5\}$."
    ) in text
    assert (
        r"Let $1 \le n \le 14$. Then $G(n)$ has a Hamiltonian path if and only if $n = 1$ or "
        r"$7 \le n \le 10$ or $n \ge 12$."
    ) in text
    assert r"Hops of three or five \& more" in text


def test_a_survey_states_what_was_found(proved: dict[str, Path]) -> None:
    # The n up to 25 for which 1, ..., n can be ordered so: OEIS A090461 (15, 16, 17, 23, 25, ...).
    assert (
        r"Then $G(n)$ has a Hamiltonian path if and only if $15 \le n \le 17$ or "
        r"$n \in \{23, 25\}$."
    ) in one_line(latex(proved["squares"]))


def test_boards_and_rings_have_coordinates(proved: dict[str, Path]) -> None:
    boards, rings = one_line(latex(proved["boards"])), one_line(latex(proved["rings"]))
    assert (
        r"the pairs $(\mathrm{row}, \mathrm{column})$ of integers with "
        r"$1 \le \mathrm{row} \le m$ and $1 \le \mathrm{column} \le n$"
    ) in boards
    assert r"Let $3 \le m \le 4$ and $m \le n \le 8$. Then $G(m, n)$ has no" in boards
    assert r"$a = (r_a, i_a)$ and $b = (r_b, i_b)$ are adjacent if and only if" in rings
    assert r"Let $5 \le n \le 11$ and $n \equiv 5 \pmod{6}$." in rings


def test_a_list_is_named_by_its_file(proved: dict[str, Path]) -> None:
    text = one_line(latex(proved["cases"]))
    assert (
        r"Let $G_k$ be the $k$-th graph of the file \texttt{petersen.\allowbreak g6}, in the "
        r"format graph6. Its vertices are numbered $0, 1, 2, \dots$."
    ) in text
    assert r"Let $1 \le k \le 2$. Then $G_k$ has no Hamiltonian cycle." in text
    assert r"\evidencecase{2}{Case~1.1.}{" in text


def test_prescribed_ends_and_edges_are_part_of_the_definition(proved: dict[str, Path]) -> None:
    text = one_line(latex(proved["names"]))
    assert (
        r"Here a \emph{Hamiltonian path} of this graph means one that joins \textup{K\"{o}ln} to "
        r"\textup{a\_1}, contains the edge from \textup{b\textasciicircum{}2} to \textup{c\%3} and "
        r"avoids the edge from \textup{a\_1} to \textup{``e\{5\}''}."
    ) in text
    assert "The graph $G_1$ has no Hamiltonian path." in text
    assert text.isascii()


def test_a_lasting_reason_is_told_once_with_what_differs(proved: dict[str, Path]) -> None:
    text = latex(proved["squares"])
    assert r"For $7 \le n \le 13$ the graph $G(n)$ has no Hamiltonian path." in text
    assert "We write it down for $n = 7$. (See Figure" in text
    assert (
        r"\item[{$n = 8$}] three pieces: $\{$$2$, $7$$\}$, $\{$$4$, $5$$\}$, and "
        r"$\{$$1$, $3$, $6$, $8$$\}$."
    ) in text


def test_the_table_joins_runs_and_names_the_propositions(proved: dict[str, Path]) -> None:
    text = latex(proved["hops"])
    prefix = re.findall(r"\\label\{(evidence:[0-9a-f]{8}:)claim\}", text)[0]
    rows = re.findall(r"^\$.* & (?:exists|none) & .*$", text, re.MULTILINE)
    assert rows[0] == r"$1$ & exists & a path & 1 &  \\"
    assert rows[1].startswith(r"$2, \dots, 6$ & none & an obstruction & 1")
    assert rf"Prop.~\ref{{{prefix}none:1}}" in rows[1]
    assert len(rows) == 5


def test_the_grid_has_a_mark_for_every_instance(proved: dict[str, Path]) -> None:
    text = latex(proved["boards"])
    grid = text.split(r"\begin{tabular}")[1].split(r"\end{tabular}")[0].splitlines()
    assert grid[1] == r"$m \backslash n$ & $3$ & $4$ & $5$ & $6$ & $7$ & $8$ \\ \hline"
    assert grid[3] == r"$4$ &  & o & o & o & o & o \\"


@pytest.mark.parametrize("name", [*TEXTS, *KINDS])
def test_every_impossible_instance_has_a_proposition_with_a_proof(
    proved: dict[str, Path], name: str
) -> None:
    text = latex(proved[name])
    labels = re.findall(r"\\label\{([^}]*)\}", text)
    assert len(labels) == len(set(labels))
    assert set(re.findall(r"\\ref\{([^}]*)\}", text)) <= set(labels)
    propositions = text.count(r"\begin{evidenceproposition}")
    theorems = text.count(r"\begin{evidencetheorem}")
    assert text.count(r"\begin{proof}") == propositions + theorems
    lines = lines_of(read_files(proved[name]))
    impossible = sum(line["answer"] == "impossible" for line in lines)
    assert (propositions > 0) == (impossible > 0)
    assert propositions <= impossible


@pytest.mark.parametrize("form", ["latex", "markdown"])
@pytest.mark.parametrize("name", [*TEXTS, *KINDS])
def test_no_mark_and_no_object_of_the_program_is_left_in_the_text(
    proved: dict[str, Path], name: str, form: str
) -> None:
    text = render_appendix(proved[name], form).text
    assert not re.search("[\ue000-\uf8ff]", text)
    assert not re.search(r"None|\bdict\b|'\w+':|apex|Traceback", text)
    assert text == render_appendix(proved[name], form).text


def test_computations_are_pointed_to(proved: dict[str, Path]) -> None:
    digests = json.loads((proved["clauses"] / "manifest.json").read_text())["sha256"]
    plain = latex(proved["clauses"]).replace(r"\allowbreak ", "")
    assert all(digest in plain for digest in digests.values())
    line = lines_of(read_files(proved["sweep"]))[1]
    sweep = latex(proved["sweep"]).replace(r"\allowbreak ", "")
    assert line["evidence"]["digest"] in sweep
    assert r"in line 2 of \texttt{evidence.jsonl.gz}" in sweep
    assert "For two instances the proof is a computation that only a machine repeats." in sweep


def test_what_is_open_is_said_to_be_open(certify: Command, proved: dict[str, Path]) -> None:
    appendix = render_appendix(proved["witness"], "latex")
    assert appendix.left_open == 2
    assert r"For $k \in \{1, 2\}$ neither a Hamiltonian cycle nor a reason" in appendix.text
    assert r"\begin{evidencetheorem}" not in appendix.text
    assert "accepted 0 of 2 instances (0 exist, 0 impossible; 2 are open)" in appendix.text
    result = certify("appendix", proved["witness"])
    assert result.code == 4
    assert "left open: 2 instances" in result.err


def test_limits_are_told(proved: dict[str, Path]) -> None:
    text = one_line(latex(proved["hops"]))
    assert "accepted 14 of 14 instances (8 exist, 6 impossible)" in text
    assert r"\texttt{python -m certify.\allowbreak checker FOLDER}" in text
    assert "about the 14 instances of the table alone" in text


def test_rejected_evidence_is_no_appendix(
    certify: Command, proved: dict[str, Path], tmp_path: Path
) -> None:
    folder = tmp_path / "bent"
    shutil.copytree(proved["hops"], folder)
    path = folder / "evidence.jsonl"
    path.write_bytes(path.read_bytes().replace(b'"vertex":0', b'"vertex":1', 1))
    with pytest.raises(ContradictionError, match="rejected, so nothing is written"):
        render_appendix(folder, "latex")
    target = tmp_path / "bent.tex"
    assert certify("appendix", folder, "--out", target).code == 3
    assert not target.exists()


def test_a_folder_without_evidence_and_a_bad_target_are_usage(
    certify: Command, proved: dict[str, Path], tmp_path: Path
) -> None:
    with pytest.raises(InputError):
        render_appendix(tmp_path, "latex")
    assert certify("appendix", tmp_path).code == 2
    assert certify("appendix", proved["rings"], "--out", tmp_path / "no" / "x.tex").code == 2


def test_the_command_writes_both_forms(
    certify: Command, proved: dict[str, Path], tmp_path: Path
) -> None:
    target = tmp_path / "rings.tex"
    assert certify("appendix", proved["rings"], "--out", target).code == 0
    assert target.read_text(encoding="utf-8") == latex(proved["rings"])
    printed = certify("appendix", proved["hops"], "--format", "markdown")
    assert printed.code == 0
    assert "**Theorem 2.** Let $1 \\le n \\le 14$." in printed.out
    assert "*Proof.* Vertex 1 has no neighbour" in printed.out


def test_names_are_told_apart() -> None:
    assert read_name("-3") == Name("vertex", ("-3",))
    assert read_name("3-6") == Name("edge", ("3", "6"))
    assert read_name("(1,-2)-(3,3)") == Name("edge", ("(1, -2)", "(3, 3)"))
    assert read_name("{-1, 2}") == Name("set", ("-1", "2"))
    assert read_name('{(1, 2), "a, b"}') == Name("set", ("(1, 2)", '"a, b"'))
    assert read_name('"a-b"') == Name("vertex", ('"a-b"',))
    assert read_name("`certify check FOLDER`") == Name("code", ("certify check FOLDER",))


def test_texts_for_latex() -> None:
    assert escape_tex("50% of {a_b} & $x^2$ #1 ~\\<") == (
        r"50\% of \{a\_b\} \& \$x\textasciicircum{}2\$ \#1 \textasciitilde{}\textbackslash{}$<$"
    )
    assert escape_tex("Chvátal, Gödel, ł, \u4eac") == (
        r"Chv\'{a}tal, G\"{o}del, \l{}, \texttt{[U+4EAC]}"
    )
    assert set_plain_text("2\xa0·\xa0(-3) + 2\xa0·\xa01 = -4, score -1, leaves A, A path") == (
        r"$2 \cdot (-3) + 2 \cdot 1 = -4$, score $-1$, leaves $A$, A path"
    )
    assert set_plain_text("removing s vertices may leave at most s + 1 pieces") == (
        "removing $s$ vertices may leave at most $s + 1$ pieces"
    )
    assert set_latex_text(f"edge {mark('(1,2)-(3,3)')}") == r"edge \mbox{$(1, 2)$--$(3, 3)$}"


def compile_tex(path: Path) -> str:
    """Compile a file twice and return the log.

    Skips when there is no LaTeX, and fails when it reports an error.
    """
    program = shutil.which("pdflatex")
    if program is None:
        pytest.skip("pdflatex is not on the PATH: that appendices compile was NOT tested")
    for draft in (["-draftmode"], []):
        run = subprocess.run(
            [program, *draft, "-interaction=nonstopmode", "-halt-on-error", path.name],
            cwd=path.parent,
            capture_output=True,
            check=False,
        )
        assert run.returncode == 0, run.stdout.decode(errors="replace")[-2000:]
    return path.with_suffix(".log").read_text(errors="replace")


def check_log(log: str) -> None:
    too_wide = [float(points) for points in re.findall(r"Overfull \\hbox \((\d+\.\d+)pt", log)]
    assert [points for points in too_wide if points > ALLOWED_OVERFULL] == []
    assert "undefined" not in log
    assert "multiply defined" not in log


@pytest.mark.parametrize("name", ["rings", "names", "clauses"])
def test_an_appendix_compiles_on_its_own(
    proved: dict[str, Path], name: str, tmp_path: Path
) -> None:
    path = tmp_path / f"{name}.tex"
    path.write_text(latex(proved[name]))
    check_log(compile_tex(path))


def test_a_paper_can_read_several_appendices(proved: dict[str, Path], tmp_path: Path) -> None:
    for name in ("hops", "boards"):
        (tmp_path / f"{name}.tex").write_text(latex(proved[name]))
    path = tmp_path / "paper.tex"
    path.write_text(
        r"""\documentclass[twocolumn]{article}
\usepackage{amsmath,amsthm,longtable,tikz}
\begin{document}
Text.
\onecolumn\appendix
\input{hops}
\input{boards}
\end{document}
"""
    )
    log = compile_tex(path)
    check_log(log)
    assert "hops.tex" in log
    assert "boards.tex" in log


@pytest.mark.parametrize("claim", DEMOS, ids=[path.parent.name for path in DEMOS])
def test_the_appendix_of_every_demo_compiles(claim: Path, tmp_path: Path) -> None:
    if shutil.which("pdflatex") is None:
        pytest.skip("pdflatex is not on the PATH: that appendices compile was NOT tested")
    folder = claim.parent
    if not (folder / "manifest.json").exists():
        folder = folders.prove_file(claim, tmp_path / "proved")
    path = tmp_path / "demo.tex"
    path.write_text(latex(folder))
    check_log(compile_tex(path))
