"""The checker in JavaScript beside the one in Python.

Both are written from FORMAT.md and share no code. They have to give the same verdict on
every instance of every folder, honest or corrupted, and to see the same in every claim.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Iterable
from dataclasses import replace
from itertools import combinations, permutations, product
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, Phase, given, settings
from hypothesis import strategies as st

from certify.flow import prove
from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.report.page.bundle import build_checker_script
from certify.search.ladder import Limits
from tests.checker.drawn import countings, obstructions, symmetric_questions, trees
from tests.checker.folders import (
    CLAIM,
    LIST,
    LIST_CLAIM,
    fitting_manifest,
    lines_of,
    make_folder,
    read_files,
    with_lines,
)
from tests.checker.strips import Rule
from tests.checker.test_endless import RULES
from tests.checker.test_strip import ODDITIES
from tests.checker.test_strip import rules as strip_rules
from tests.corrupt import corrupt_bytes, corrupt_json
from tests.page.node import (
    CHECKER,
    HERE,
    NODE,
    REFUSED,
    ROOT,
    by_node,
    by_python,
    claim_task,
    judge,
    list_task,
    node_reads,
    python_reads_claim,
    python_reads_list,
    run,
    write_files,
)
from tests.test_twins import BAD, FILES, FORM, G6, GOOD, RULE, reworded, rules, whole, words

pytestmark = pytest.mark.skipif(not NODE, reason="there is no `node` on the PATH: NOT TESTED")
generate_only = settings(
    phases=[Phase.generate], database=None, suppress_health_check=list(HealthCheck)
)
Files = dict[str, bytes]
EXTRA = {"graphs.g6": G6, "graphs.edges": b"x 1\n1 y\ny x\n"}
KINDS = {
    "cases": 'vertices = "1..n"\nadjacent = "abs(a - b) in {3, 5}"\n[instances]\nn = "9..12"',
    "sweep": 'vertices = "1..n"\nadjacent = "abs(a - b) in {3, 5}"\n[instances]\nn = "6..12"',
    "endless": 'vertices = "1..n"\nadjacent = "abs(a - b) in {1, 2+n%2}"\n[instances]\nn = "1.."',
    "counting": 'vertices = "1..n"\nadjacent = "square(a + b)"\n[instances]\nn = "6..13"',
}


def prove_all(claim: Path, out: Path, *kinds: str) -> Path:
    limits = Limits(kinds=frozenset(kinds)) if kinds else Limits()
    for _ in prove(claim, out=out, limits=limits).outcomes:
        pass
    return out


@pytest.fixture(scope="module")
def bases(tmp_path_factory: pytest.TempPathFactory) -> list[Files]:
    """Small honest folders; between them they have every kind of evidence."""
    top = tmp_path_factory.mktemp("bases")
    found = [
        make_folder(top / "rule", CLAIM),
        make_folder(top / "list", LIST_CLAIM, graphs_g6=LIST),
    ]
    for kind, graph in KINDS.items():
        claim = top / f"{kind}.toml"
        claim.write_text(f'structure = "hamiltonian-path"\n[graph]\n{graph}\n')
        kinds = () if kind == "endless" else ("witness", kind)
        found.append(prove_all(claim, top / kind, *kinds))
    files = [read_files(folder) for folder in found]
    seen = {record["kind"] for one in files for record in lines_of(one)}
    assert seen == {"endless", "witness", "obstruction", "counting", "cases", "sweep", "clauses"}
    return files


def demo_claims() -> list[Path]:
    return sorted((ROOT / "proofs").glob("*/claim.toml"))


@pytest.fixture(scope="module")
def demos(tmp_path_factory: pytest.TempPathFactory) -> list[Path]:
    top = tmp_path_factory.mktemp("demos")
    return [prove_all(path, top / path.parent.name) for path in demo_claims()]


def test_demo_folders_are_accepted_by_both(demos: list[Path]) -> None:
    assert len(demos) >= 6
    assert all(judge(demos))


def test_the_joined_script_gives_the_same_verdicts(
    demos: list[Path], bases: list[Files], tmp_path: Path
) -> None:
    script = tmp_path / "checker.js"
    script.write_text(build_checker_script())
    first, *_ = bases
    records = lines_of(first)
    records[1]["length"] += 1
    broken = write_files(tmp_path / "broken", signed(with_lines(first, records)))
    folders = [*demos[:3], write_files(tmp_path / "rule", first), broken]
    done = run([NODE, str(HERE / "bundled.mjs"), str(script), *map(str, folders)])
    assert done.returncode == 0, done.stderr
    expected = [
        [*(row[1:] for row in rows), "accepted" if accepted else "rejected"]
        for accepted, rows in by_node(folders).values()
    ]
    assert json.loads(done.stdout) == expected
    assert [items[-1] for items in expected] == ["accepted"] * (len(folders) - 1) + ["rejected"]


def signed(files: Files) -> Files:
    return {**files, "manifest.json": fitting_manifest(files)}


def fitting_length(kind: str, body: Any, other: int) -> int:
    """Return the reading length that the evidence has, so that it is not what is wrong."""
    if kind not in ("obstruction", "counting", "cases") or not isinstance(body, dict):
        return other
    nodes = body.get("nodes", [])
    return integers_in(body) + (len(nodes) if isinstance(nodes, list) else 0)


def integers_in(value: Any) -> int:
    if isinstance(value, dict):
        value = list(value.values())
    if isinstance(value, list):
        return sum(map(integers_in, value))
    return int(isinstance(value, int) and not isinstance(value, bool))


@st.composite
def corrupted(draw: st.DrawFn, files: Files) -> Files:
    """Draw a folder with one record, file or manifest changed; mostly with fitting digests."""
    records = lines_of(files)
    match draw(st.sampled_from(["record"] * 6 + ["evidence"] * 8 + ["lines", "file", "manifest"])):
        case "record":
            at = draw(st.integers(0, len(records) - 1))
            records[at] = draw(corrupt_json(records[at]))
        case "evidence":
            at = draw(st.integers(0, len(records) - 1))
            body = draw(corrupt_json(records[at]["evidence"]))
            if draw(st.booleans()) and isinstance(body, dict):
                body = draw(corrupt_json(body))
            length = records[at]["length"] + draw(st.sampled_from([0, 0, 0, -1, 1]))
            if draw(st.booleans()):
                length = fitting_length(records[at]["kind"], body, length)
            records[at] |= {"evidence": body, "length": length}
        case "lines":
            records = draw(corrupt_json(records))
            if not isinstance(records, list):
                records = []
        case "file":
            name = draw(st.sampled_from(sorted(files)))
            return signed({**files, name: draw(corrupt_bytes(files[name]))})
        case _:
            manifest = draw(corrupt_json(json.loads(files["manifest.json"])))
            return {**files, "manifest.json": json.dumps(manifest).encode()}
    return signed(with_lines(files, records))


def test_corrupted_twins_get_the_same_verdicts(bases: list[Files], tmp_path: Path) -> None:
    folders: list[Path] = []

    @settings(generate_only, max_examples=240)
    @given(st.sampled_from(bases).flatmap(corrupted))
    def collect(files: Files) -> None:
        folders.append(write_files(tmp_path / str(len(folders)), files))

    collect()
    accepted = judge(folders)
    assert accepted.count(False) > 120


def one_graph(n: int, edges: Iterable[Edge], required: Iterable[Edge], record: Any) -> Files:
    """Return a folder about cycles of one graph; the record is completed."""
    pairs = [[str(u), str(v)] for u, v in required]
    head = f'structure = "hamiltonian-cycle"\nrequired = {json.dumps(pairs)}\n'
    listed = "".join(f"{v}\n" for v in range(n)) + "".join(f"{u} {v}\n" for u, v in edges)
    record = {"instance": 1, "vertices": n, "edges": len({*edges}), **record}
    manifest = {"claim": "claim.toml", "format": 1, "sha256": {}}
    files = {
        "claim.toml": f'{head}[graph]\nlist = "g.edges"\n'.encode(),
        "g.edges": listed.encode(),
        "manifest.json": json.dumps(manifest).encode(),
        "evidence.jsonl": b"",
    }
    return signed(with_lines(files, [{"answer": "impossible", **record}]))


def test_drawn_evidence_is_judged_alike(tmp_path: Path) -> None:
    drawn = {"obstruction": obstructions, "counting": countings, "cases": trees}
    folders: list[Path] = []

    @settings(generate_only, max_examples=180)
    @given(st.data(), symmetric_questions(), st.sampled_from([*sorted(drawn), "cases"]))
    def collect(data: st.DataObject, question: Question, kind: str) -> None:
        body = data.draw(drawn[kind](question))
        record = {"kind": kind, "evidence": body, "length": fitting_length(kind, body, 0)}
        files = one_graph(question.n, question.edges, sorted(question.required), record)
        folders.append(write_files(tmp_path / str(len(folders)), files))

    collect()
    accepted = judge(folders)
    assert min(accepted.count(True), accepted.count(False)) > 20


def states_of(n: int, edges: list[tuple[int, int]], order: list[int]) -> list[list[str]]:
    """Return the states of a sweep by exhaustion, without those that close a cycle.

    For each step all sets of edges with a swept end, two at each swept vertex, that
    hold no cycle: this is the definition of the states, and needs no step by step.
    """
    found = []
    for k in range(1, n + 1):
        swept = set(order[:k])
        touched = [e for e in edges if swept & {*e}]
        frontier = sorted({v for e in touched for v in e} - swept)
        states: set[str] = set()
        for mask in product([False, True], repeat=len(touched)):
            chosen = [e for e, taken in zip(touched, mask, strict=True) if taken]
            degree = [sum(v in e for e in chosen) for v in range(n)]
            if any(degree[v] != 2 for v in swept) or max(degree) > 2:
                continue
            piece = list(range(n))
            for u, v in chosen:
                if piece[u] == piece[v]:
                    break
                piece = [piece[u] if p == piece[v] else p for p in piece]
            else:
                ends = [v for v in frontier if degree[v] == 1]
                mate = {u: v for u in ends for v in ends if u != v and piece[u] == piece[v]}
                values = [-1 if degree[v] == 2 else mate.get(v, v) for v in frontier]
                states.add(",".join(map(str, values)))
        found.append(sorted(states))
    return found


def test_sweeps_of_all_small_graphs_are_judged_alike(tmp_path: Path) -> None:
    # Where a cycle exists the sweep must be rejected, although its numbers and its digest
    # are those of the states that do not close it.
    folders, truths = [], []
    for n, picks in ((4, range(64)), (5, range(0, 1024, 9))):
        pairs = list(combinations(range(n), 2))
        rounds = [
            [(0, *rest)[i - 1 : i + 1] for i in range(1, n)] for rest in permutations(range(1, n))
        ]
        cycles = [{frozenset(e) for e in [*path, (path[-1][1], 0)]} for path in rounds]
        for pick in picks:
            edges = [e for i, e in enumerate(pairs) if pick >> i & 1]
            order = sorted(range(n), key=lambda v: (v * pick) % 7)
            states = states_of(n, edges, order)
            digest = hashlib.sha256("".join(";".join(s) + "\n" for s in states).encode())
            counts = [len(s) for s in states]
            body = {"order": order, "states": counts, "digest": digest.hexdigest()}
            record = {"kind": "sweep", "evidence": body, "length": sum(counts)}
            files = one_graph(n, edges, [], record)
            folders.append(write_files(tmp_path / f"{n}-{pick}", files))
            truths.append(any({frozenset(e) for e in edges} >= cycle for cycle in cycles))
    assert [not accepted for accepted in judge(folders)] == truths
    assert 20 < sum(truths) < len(truths) - 20


def by_hand() -> list[list[str]]:
    lines = (HERE / "by_hand.jsonl").read_text().splitlines()
    return [json.loads(line) for line in lines]


def test_claims_and_lists_made_by_hand_are_read_as_the_format_says() -> None:
    cases = by_hand()
    lists = {"g.g6": b"C~\nBw\n", "g.s6": b"C~\n:An\n", "g.col": b"p col 3 1\ne 1 3\n"}
    lists |= {"g.dimacs": b"p edge 3 1\ne 1 3\n", "g.txt": b"x y\n", "g.edges": b"x y\n"}
    lists |= dict.fromkeys(["g.G6", "g", "sub/g.g6", ".g6", "g.tar.g6", "g6"], b"C~\n")
    lists |= dict.fromkeys(["../g.g6", "/g.g6", "a//g.g6"], b"C~\n")
    lists["g.graphml"] = b'<graphml><graph edgedefault="undirected"/></graphml>'
    tasks, python = [], []
    for form, _, _, text in cases:
        data = text.encode("latin-1")
        if form == "claim":
            tasks.append(claim_task(data, lists))
            python.append(python_reads_claim(data, lists))
        else:
            tasks.append(list_task(data, form))
            python.append(python_reads_list(data, form))
    wrong = []
    for (form, name, expected, _), seen, other in zip(
        cases, node_reads(tasks), python, strict=True
    ):
        if ("refused" if seen == REFUSED else "read") != expected:
            wrong.append((form, name, "not", expected))
        if seen != other:
            wrong.append((form, name, seen, other))
    assert wrong == []


def compare_claims(claims: list[bytes]) -> int:
    """Assert that both checkers see the same in claims; return how many are read."""
    found = node_reads([claim_task(data, EXTRA) for data in claims])
    wrong = [
        (data.decode("latin-1"), seen, other)
        for data, seen in zip(claims, found, strict=True)
        if (other := python_reads_claim(data, EXTRA)) != seen
    ]
    assert wrong == []
    return sum(seen != REFUSED for seen in found)


def test_good_and_bad_claims_are_read_alike() -> None:
    assert compare_claims([text.encode() for text in GOOD.values()]) == len(GOOD)
    bad = [text if isinstance(text, bytes) else text.encode() for text in BAD.values()]
    # One of them, about a range without an end, is an endless claim.
    assert compare_claims(bad) <= 1


def test_damaged_and_reworded_claims_are_read_alike() -> None:
    claims: list[bytes] = []

    @settings(generate_only, max_examples=200)
    @given(
        st.sampled_from(sorted(GOOD)).flatmap(lambda name: corrupt_bytes(GOOD[name].encode())),
        reworded(),
    )
    def collect(damaged: bytes, other: str) -> None:
        claims.extend([damaged, other.encode()])

    collect()
    assert compare_claims(claims) > 20


def test_drawn_expressions_mean_the_same_to_both() -> None:
    claims: list[bytes] = []

    @settings(generate_only, max_examples=200)
    @given(rules, whole, whole)
    def collect(rule: str, low: str, high: str) -> None:
        low, high, answer = (words.sub("n", part) for part in (low, high, rule))
        head = f'structure = "hamiltonian-path"\nends = ["{low}"]\n[graph]\n'
        body = f"vertices = '-2..n'\nadjacent = '{rule}'\n[instances]\nn = '1..4'\nm = '1..2'\n"
        claims.append(f"{head}{body}[answers]\nimpossible = '{answer}'\n".encode())
        claims.append(RULE.replace('"1..n"', f'"{low}..{high}"').replace("3..14", "3..5").encode())

    collect()
    assert compare_claims(claims) > 50


def test_damaged_lists_are_read_alike() -> None:
    tasks: list[tuple[bytes, str]] = []
    letters = st.integers(63, 126) | st.sampled_from([63, 126])
    sizes = st.sampled_from([*range(63, 73), 79, 80, 126])

    @settings(generate_only, max_examples=300)
    @given(
        st.sampled_from(sorted(FILES)).flatmap(
            lambda name: st.tuples(corrupt_bytes(FILES[name]), st.just(FORM[name]))
        ),
        st.tuples(st.sampled_from([b"", b":"]), sizes, st.lists(letters, max_size=4)),
        st.sampled_from([b"\n", b"\r\n", b"\n\n", b""]),
    )
    def collect(damaged: tuple[bytes, str], line: tuple[bytes, int, list[int]], end: bytes) -> None:
        mark, size, rest = line
        tasks.extend([damaged, (mark + bytes([size, *rest]) + end, "graph6")])

    collect()
    found = node_reads([list_task(*task) for task in tasks])
    wrong = [
        (task, seen) for task, seen in zip(tasks, found, strict=True)
        if seen != python_reads_list(*task)
    ]  # fmt: skip
    assert wrong == []
    assert sum(seen != REFUSED for seen in found) > 50


def test_exit_codes(bases: list[Files], tmp_path: Path) -> None:
    good = write_files(tmp_path / "good", bases[0])
    records = lines_of(bases[0])
    records[0] |= {"answer": "open", "kind": "none", "evidence": {}, "length": 0}
    files = {name: data for name, data in bases[0].items() if "n=5." not in name}
    left_open = write_files(tmp_path / "open", signed(with_lines(files, records)))
    broken = write_files(tmp_path / "broken", signed(with_lines(bases[0], records[1:])))
    main = [NODE, str(CHECKER / "main.js")]
    codes = [
        ([good], 0), ([left_open], 4), ([broken], 3), ([left_open, broken], 3),
        ([broken, left_open, good], 3), ([good, left_open], 4), ([], 2), ([tmp_path / "none"], 2),
    ]  # fmt: skip
    for folders, code in codes:
        assert run([*main, *map(str, folders)]).returncode == code
        assert run([*main, "--json", *map(str, folders)]).returncode == code


def test_a_link_inside_the_folder_is_refused(bases: list[Files], tmp_path: Path) -> None:
    folder = write_files(tmp_path / "linked", bases[0])
    (folder / "claim.toml").rename(tmp_path / "claim.toml")
    (folder / "claim.toml").symlink_to(tmp_path / "claim.toml")
    assert by_node([folder]) == by_python([folder]) == {str(folder): (False, [])}


def test_the_files_of_the_checker_are_short() -> None:
    files = sorted(CHECKER.glob("*.js"))
    assert len(files) > 20
    for path in files:
        assert len(path.read_text().splitlines()) < 300, path


def family(rule: Rule) -> bytes:
    """Return the text of an endless claim."""
    where = f"where = {json.dumps(rule.where)}\n" if rule.where else ""
    head = f"structure = '{rule.structure}'\n[graph]\nvertices = {rule.vertices}\n{where}"
    adjacent = json.dumps(rule.adjacent)
    return f"{head}adjacent = {adjacent}\n[instances]\n{rule.instances}\n".encode()


def test_strips_are_recognised_alike() -> None:
    symmetric = [
        rule if rule.structure == "hamiltonian-cycle" else replace(rule, adjacent=both_ways(rule))
        for rule in [*RULES.values(), *ODDITIES]
    ]
    claims = [family(rule) for rule in [*RULES.values(), *ODDITIES, *symmetric]]

    @settings(generate_only, max_examples=150)
    @given(strip_rules())
    def collect(rule: Rule) -> None:
        claims.append(family(replace(rule, adjacent=both_ways(rule))))

    collect()
    found = node_reads([claim_task(data, EXTRA) for data in claims])
    other = [python_reads_claim(data, EXTRA) for data in claims]
    pairs = zip(claims, found, other, strict=True)
    wrong = [(data.decode(), seen, python) for data, seen, python in pairs if seen != python]
    assert wrong == []
    strips = [seen for seen in found if seen != REFUSED and REFUSED not in seen[1]]
    assert 20 < len(strips) < len(claims) - 20


def both_ways(rule: Rule) -> str:
    """Return a rule that is symmetric and asks what the given one asks."""
    other = words.sub(lambda word: "ba"["ab".index(word[0])], rule.adjacent)
    return f"({rule.adjacent}) == ({other})"
