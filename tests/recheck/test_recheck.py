"""The command recheck, from the table to the evidence of every row."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from certify.checker import check_folder
from tests.flow.conftest import folder_bytes
from tests.recheck.conftest import BOUNDED, RULE, Command, Write, table


def test_a_table_that_agrees(certify: Command, write: Write) -> None:
    done = certify("recheck", write("t.csv", table()), "--claim", write("c.toml", RULE))
    assert (done.code, done.err) == (0, "")
    assert done.out == "14 rows: 14 agree, 0 disagree, 0 open\n"


@pytest.mark.parametrize("claim", [RULE, BOUNDED])
@pytest.mark.parametrize("wrong", [11, 12])
def test_exactly_the_wrong_row_is_named(
    wrong: int, claim: str, certify: Command, write: Write, tmp_path: Path
) -> None:
    out = tmp_path / "out"
    arguments = [write("t.csv", table(wrong)), "--claim", write("c.toml", claim)]
    done = certify("recheck", *arguments, "--out", out)
    assert done.code == 3
    first, *_ = done.out.splitlines()
    says = "exists, and it is impossible" if wrong == 11 else "impossible, and it exists"
    assert f"t.csv:{wrong + 1}: n={wrong}: disagrees: the table says {says}" in first
    assert done.out.count("disagrees: ") == 1
    assert "14 rows: 13 agree, 1 disagrees, 0 open" in done.out
    shown = "has no Hamiltonian path" if wrong == 11 else "has a Hamiltonian path"
    assert f"For n = {wrong} the graph" in done.out
    assert shown in done.out
    # The evidence is that of any claim: it can be checked, explained, printed, guarded.
    check = check_folder(out)
    assert [verdict.instance for verdict in check.verdicts()] == [{"n": n} for n in range(1, 15)]
    assert check.accepted
    assert f"certify explain {out} n={wrong}" in done.err
    assert shown in certify("explain", out, f"n={wrong}").out
    assert certify("appendix", out).code == 0
    assert certify("guard", out).code == 0
    before = folder_bytes(out)
    assert certify("recheck", *arguments, "--out", out).out == done.out
    assert folder_bytes(out) == before


def test_more_jobs_say_the_same(certify: Command, write: Write, tmp_path: Path) -> None:
    arguments = [write("t.csv", table(11)), "--claim", write("c.toml", RULE), "--json"]
    alone = certify("recheck", *arguments, "--out", tmp_path / "one")
    assert certify("recheck", *arguments, "--out", tmp_path / "two", "--jobs", "2").out == alone.out
    assert folder_bytes(tmp_path / "one") == folder_bytes(tmp_path / "two")


def test_rows_in_any_order_and_with_gaps(certify: Command, write: Write, tmp_path: Path) -> None:
    text = "n,source,claimed\n12,a,no\n7,b,yes\n11,c,no\n2,d,no\n"
    out = tmp_path / "out"
    arguments = [write("t.csv", text), "--claim", write("c.toml", RULE)]
    done = certify("recheck", *arguments, "--out", out, "--json")
    assert done.code == 3
    assert [(row["line"], row["result"]) for row in done.rows] == [
        (5, "agrees"),
        (3, "agrees"),
        (4, "agrees"),
        (2, "disagrees"),
    ]
    assert "has a Hamiltonian path" in done.rows[-1]["reason"]
    assert 'not used: "source"' in done.err
    check = check_folder(out)
    assert [verdict.instance["n"] for verdict in check.verdicts()] == [2, 7, 11, 12]  # type: ignore[index, call-overload]
    assert check.accepted


def test_what_the_budget_leaves_open(certify: Command, write: Write, tmp_path: Path) -> None:
    """The graph is one that no finder settles in a moment."""
    rule = RULE.replace("{3, 5}", "{31, 37, 53}")
    report = tmp_path / "r.md"
    done = certify(
        "recheck",
        write("t.csv", "n,claimed\n250,no\n"),
        *("--claim", write("c.toml", rule), "--budget", "0.000001", "--report", report),
    )
    assert done.code == 4
    assert "n=250: open: the table says impossible, and neither is known" in done.out
    assert "1 row: 0 agree, 0 disagree, 1 open" in done.out
    assert "* line 2: n=250 (the table says impossible)" in report.read_text()


def test_reports(certify: Command, write: Write, tmp_path: Path) -> None:
    arguments = [write("t.csv", table(11)), "--claim", write("c.toml", RULE), "--report"]
    assert certify("recheck", *arguments, tmp_path / "r.md").code == 3
    text = (tmp_path / "r.md").read_text()
    assert "## Line 12: n=11" in text
    assert "14 rows: 13 agree, 1 disagrees, 0 open" in text
    assert "has no Hamiltonian path" in text
    assert certify("recheck", *arguments, tmp_path / "r.csv").code == 3
    with (tmp_path / "r.csv").open(newline="") as file:
        (row,) = csv.DictReader(file)
    assert (row["line"], row["n"], row["claimed"], row["found"]) == (
        "12", "11", "exists", "impossible",
    )  # fmt: skip
    assert "has no Hamiltonian path" in row["reason"]
    wrong = certify("recheck", *arguments, tmp_path / "r.pdf")
    assert wrong.code == 2
    assert "ends in .md or .csv" in wrong.err


@pytest.mark.parametrize(
    ("claim", "rows", "said"),
    [
        (BOUNDED, "n,claimed\n5,no\n15,yes\n", "t.csv:3: n=15 is not among the [instances] of"),
        (BOUNDED, "k,claimed\n5,no\n", 't.csv: there is no column "n"'),
        (RULE, "k,claimed\n5,no\n", 'c.toml:4: [graph] vertices: last value: column 1 at "n"'),
        (RULE.replace("abs", "ab"), "n,claimed\n5,no\n", "c.toml:5:"),
        (RULE.replace("hops", "").replace("-path", ""), "n,claimed\n5,no\n", "c.toml:2:"),
        (RULE, "n,claimed\n5000,no\n", "4,000"),
        (RULE, "n,claimed\n-7,no\n", "n=-7"),
        (RULE.replace("5}", "n // (n - 5)}"), "n,claimed\n6,no\n5,no\n", "c.toml:"),
        (RULE.replace("[graph]", "[graf]"), "n,claimed\n5,no\n", "graf"),
        ("[", "n,claimed\n5,no\n", "c.toml:1:"),
    ],
)
def test_bad_input_is_told_and_nothing_is_written(
    claim: str, rows: str, said: str, certify: Command, write: Write, tmp_path: Path
) -> None:
    out = tmp_path / "out"
    done = certify("recheck", write("t.csv", rows), "--claim", write("c.toml", claim), "--out", out)
    assert done.code == 2, done.err
    assert said in done.err
    assert "/tmp/tmp" not in done.err
    assert not (out / "manifest.json").exists()


def test_a_folder_with_another_claim_is_refused(
    certify: Command, write: Write, tmp_path: Path
) -> None:
    claim, out = write("c.toml", RULE), tmp_path / "out"
    assert certify("recheck", write("t.csv", table()), "--claim", claim, "--out", out).code == 0
    before = folder_bytes(out)
    fewer = write("fewer.csv", table(last=9))
    done = certify("recheck", fewer, "--claim", claim, "--out", out)
    assert done.code == 2
    assert "give a new folder with --out" in done.err
    assert folder_bytes(out) == before


def test_an_endless_claim_bounds_its_rows_from_below(certify: Command, write: Write) -> None:
    claim = write("c.toml", BOUNDED.split("[answers]")[0].replace("1..14", "8.."))
    rows = write("t.csv", table(first=8))
    assert certify("recheck", rows, "--claim", claim).code == 0
    low = certify("recheck", write("t.csv", table(first=7)), "--claim", claim)
    assert low.code == 2
    assert "t.csv:2: n=7 is not among the [instances]" in low.err


def test_a_claim_without_parameters_has_one_row(certify: Command, write: Write) -> None:
    claim = write("c.toml", RULE.replace("1..n", "1..11"))
    assert certify("recheck", write("t.csv", "claimed\nno\n"), "--claim", claim).code == 0
    assert certify("recheck", write("t.csv", "claimed\nyes\n"), "--claim", claim).code == 3
    assert certify("recheck", write("t.csv", "claimed\nno\nyes\n"), "--claim", claim).code == 2


LIST = 'structure = "hamiltonian-cycle"\n[graph]\nlist = "some.g6"\n'
GRAPHS = b">>graph6<<Bw\nC~\nDQc\n:Bc\nBw"
"""A triangle, the complete graph on four vertices, a path on five, an edge of three, a triangle."""


@pytest.mark.parametrize("positions", [[1, 2, 3, 4, 5], [3, 5]])
def test_lists_by_position(
    positions: list[int], certify: Command, write: Write, tmp_path: Path
) -> None:
    write("some.g6", GRAPHS)
    rows = "".join(f"{p},{'no' if p in (1, 3, 4) else 'yes'}\n" for p in positions)
    out = tmp_path / "out"
    done = certify(
        "recheck",
        write("t.csv", "position,claimed\n" + rows),
        *("--claim", write("c.toml", LIST), "--out", out, "--json"),
    )
    wrong = [row["instance"] for row in done.rows if row["result"] != "agrees"]
    assert wrong == [p for p in positions if p == 1]
    assert done.code == (3 if wrong else 0)
    assert [row["evidence"]["instance"] for row in done.rows] == [
        str(k) for k in range(1, len(positions) + 1)
    ]
    check = check_folder(out)
    assert len(list(check.verdicts())) == len(positions)
    assert check.accepted


def test_a_position_that_is_not_there(certify: Command, write: Write) -> None:
    write("some.g6", GRAPHS)
    for position in ("0", "6", "-1"):
        done = certify(
            "recheck",
            write("t.csv", f"position,claimed\n3,no\n{position},no\n"),
            *("--claim", write("c.toml", LIST)),
        )
        assert done.code == 2
        assert f"t.csv:3: there is no graph {position};" in done.err
        assert "has 5, counted from 1" in done.err


def test_many_rows_without_a_pattern_go_into_parts(
    certify: Command, write: Write, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("certify.recheck.rows.MAX_ROWS_TRIED", 5)
    out = tmp_path / "out"
    done = certify(
        "recheck",
        write("t.csv", table(11)),
        *("--claim", write("c.toml", RULE), "--out", out, "--json"),
    )
    assert done.code == 3
    parts = sorted(path.name for path in out.iterdir())
    assert parts == ["part-1", "part-2", "part-3", "part-4", "part-5"][: len(parts)]
    assert len(parts) > 1
    (wrong,) = (row for row in done.rows if row["result"] == "disagrees")
    where = wrong["evidence"]
    assert "has no Hamiltonian path" in certify("explain", out / where["part"], "n=11").out
    assert f"certify explain {out / where['part']} n=11" in done.err
    assert certify("check", out).code == 0
    assert certify("guard", out).code == 0


def test_ends_and_odd_texts_are_carried_over(
    certify: Command, write: Write, tmp_path: Path
) -> None:
    """What the claim demands beside the graph must be in the claim that is stored."""
    claim = (
        'title = "a \\"quoted\\" \\u007f \\\\ \\t title"\n'
        'statement = "not carried over"\n'
        'structure = "hamiltonian-path"\n'
        'ends = [["i", 1]]\n'
        'forbidden = [[[1, 1], ["1", 2]]]\n'
        "[graph]\n"
        'vertices = { x = "1..2", y = "1..n" }\n'
        'where = "x <= 2"\n'
        "adjacent = '''(abs(a.x - b.x) + abs(a.y - b.y)\n == 1)'''\n"
    )
    # A ladder without the first edge of one rail: from that corner there is a path, from
    # the corner beside it none, and a third corner there is not.
    out = tmp_path / "out"
    done = certify(
        "recheck",
        write("t.csv", "x,i,n,claimed\n9,1,3,yes\n9,2,3,no\n9,3,3,no\n"),
        *("--claim", write("c.toml", claim), "--out", out, "--json"),
    )
    assert done.code == 0, done.err
    assert [row["answer"] for row in done.rows] == ["exists", "impossible", "impossible"]
    assert "statement" not in (out / "claim.toml").read_text()
    assert 'not used: "x"' in done.err
    check = check_folder(out)
    list(check.verdicts())
    assert check.accepted
    assert 'ends = [["i", 1]]' in (out / "claim.toml").read_text()
