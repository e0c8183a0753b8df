"""Endless claims: the answers for all n, and that nothing else is accepted."""

from __future__ import annotations

import copy
import json
from functools import cache
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.checker import check_line
from certify.checker.claims import Claim
from certify.checker.endless import check_endless, find_counterexample
from certify.checker.records import Verdict, check_record, measure
from certify.checker.strict import BadClaim, Rejected
from tests.checker.strips import (
    Rule,
    check_small,
    exists_in_whole,
    hops,
    settle_family,
    strip_of,
    write_body,
)
from tests.corrupt import corrupt_json, places

CYCLE = "hamiltonian-cycle"
KNIGHT = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
PETERSEN = (
    "abs(a.i - b.i) in {1, n - 1} if a.r == 0 and b.r == 0 else "
    "(a.i - b.i) % n in {2, n - 2} if a.r == b.r else a.i == b.i"
)
RULES = {
    "hops of 1 or 2": hops(1, 2),
    "hops of 2 or 3": hops(2, 3),
    "hops of 2 or 4": hops(2, 4),
    "round trips of 2 or 5": hops(2, 5, structure=CYCLE),
    "round trips of 3 or 4": hops(3, 4, structure=CYCLE),
    "first Z nearly all": Rule('"-3..n"', "abs(a - b) in {1, 3} and (a + b) % 4 != 2", CYCLE),
    "a ring with chords": Rule(
        '"0..n-1"', "(a - b) % n in {1, n - 1, 3, n - 3}", CYCLE, instances='n = "3.."'
    ),
    "a ring with a seam": Rule('"1..n"', "abs(a - b) in {2, n - 1, n - 2}"),
    "residues": Rule('"1..n"', "abs(a - b) in {1, 2, 5} and (a + b) % 3 != 1"),
    "residues of n": Rule('"1..n"', "abs(a - b) in {1, 3} and (n % 2 == 0 or (a + b) % 4 != 1)"),
    "some layers empty": Rule('"1..n"', "abs(a - b) in {1, 2, 3}", where="a % 3 != 1"),
    "the last layers full": Rule(
        '"1..n"', "abs(a - b) in {2, 4}", where="a % 2 == 0 or a + 2 > n"
    ),
    "generalised Petersen": Rule(
        '{ r = "0..1", i = "0..n-1" }', PETERSEN, CYCLE, instances='n = "5.."'
    ),
    "knights on three rows": Rule('{ x = "1..n", y = "1..3" }', KNIGHT, CYCLE),
    "knights on four rows": Rule('{ y = "1..4", x = "1..n" }', KNIGHT, CYCLE),
    "kings with a hole": Rule(
        '{ y = "1..2", x = "0..n+1" }',
        "max(abs(a.x - b.x), abs(a.y - b.y)) == 1",
        CYCLE,
        where="y == 1 or x % 2 == 0 and x < n",
    ),
}  # fmt: skip


@pytest.mark.parametrize("name", RULES)
def test_answers_are_those_of_whole_graphs(name: str) -> None:
    family = RULES[name].family()
    strip, settled = strip_of(family), settle_family(family)
    last = strip.first + 3 * strip.modulus + 12
    for n in range(strip.first, last):
        assert settled.exists(n) == exists_in_whole(family, n, strip.long), n


@settings(max_examples=40)
@given(
    st.frozensets(st.integers(1, 5), min_size=2, max_size=3),
    st.frozensets(st.integers(0, 2), max_size=2),
    st.integers(1, 3),
    st.integers(0, 2),
    st.booleans(),
)
def test_answers_of_random_families(
    near: frozenset[int], wrap: frozenset[int], k: int, rest: int, cycle: bool
) -> None:
    around = " or n - abs(a - b) in {" + ", ".join(map(str, sorted(wrap))) + "}" if wrap else ""
    text = f"(abs(a - b) in {{{', '.join(map(str, sorted(near)))}}}{around})"
    rule = Rule(
        '"0..n-1"',
        f"{text} and (a + b) % {k} != {rest}",
        CYCLE if cycle else "hamiltonian-path",
        instances='n = "3.."',
    )
    family = rule.family()
    strip, settled = strip_of(family), settle_family(family)
    for n in range(strip.first, strip.first + 2 * strip.modulus + 5):
        assert settled.exists(n) == exists_in_whole(family, n), n


def test_generalised_petersen_graphs() -> None:
    """GP(n, 2) has no Hamiltonian cycle exactly for n = 5 mod 6.

    Alspach, Journal of Combinatorial Theory B 34 (1983) 293-312.
    """
    family = RULES["generalised Petersen"].family()
    body = write_body(family)
    settled = check_endless(family, body, check_small)
    assert [n for n in range(5, 200) if not settled.exists(n)] == list(range(5, 200, 6))


def test_closed_knight_tours() -> None:
    """On 3 x n there is one for even n from 10 on, on 4 x n there is none.

    Schwenk, Mathematics Magazine 64 (1991) 325-332.
    """
    three = settle_family(RULES["knights on three rows"].family())
    four = settle_family(RULES["knights on four rows"].family())
    assert [n for n in range(1, 60) if three.exists(n)] == list(range(10, 60, 2))
    assert not any(four.exists(n) for n in range(1, 60))


# Records.

HOPS = Rule('"1..n"', "abs(a - b) in {2, 3}", answers='exists = "n == 1 or n >= 4"')


@cache
def record_of(rule: Rule) -> dict[str, Any]:
    body = write_body(rule.family())
    return {
        "instance": {rule.family().growing: f"{rule.family().lo}.."},
        "vertices": 0,
        "edges": 0,
        "answer": "settled",
        "kind": "endless",
        "evidence": body,
        "length": measure("endless", body),
    }


def check(rule: Rule, record: object) -> Verdict:
    claim = rule.claim()
    ((key, graph),) = claim.instances(lambda name: b"")
    line = json.dumps(record, sort_keys=True, separators=(",", ":")) + "\n"
    return check_record(claim, key, graph, line.encode(), lambda name: b"")


def with_answers(rule: Rule, answers: str) -> Rule:
    return Rule(rule.vertices, rule.adjacent, rule.structure, rule.where, rule.instances, answers)


def test_a_record_is_accepted_and_says_how_many_states_were_visited() -> None:
    record = record_of(HOPS)
    verdict = check(HOPS, record)
    states = sum(sum(part["states"]) for part in record["evidence"]["classes"])
    assert (verdict.accepted, verdict.answer, verdict.kind) == (True, "settled", "endless")
    assert verdict.reason == f"endless checked, {states} states"
    assert states > 0


def test_the_front_door_knows_endless_instances() -> None:
    line = json.dumps(record_of(HOPS), sort_keys=True, separators=(",", ":")) + "\n"
    text = (
        b'structure = "hamiltonian-path"\n[graph]\nvertices = "1..n"\n'
        b'adjacent = "abs(a - b) in {2, 3}"\n[instances]\nn = "1 .."\n'
    )
    assert check_line(text, {"n": "1.."}, line.encode(), {}).accepted
    for wrong in ({"n": "2.."}, {"n": 1}, {"n": "1..9"}, {"m": "1.."}):
        assert not check_line(text, wrong, line.encode(), {}).accepted


# What is inside the evidence of a small n is left to the tests of its kind: changed, it may
# still be true, as when another vertex is isolated too.
OUTSIDE_KINDS = [
    place
    for place in places(record_of(HOPS))[1:]
    if place[:2] != ("evidence", "small") or len(place) < 5
]


@pytest.mark.parametrize("place", OUTSIDE_KINDS, ids=str)
def test_every_changed_part_is_rejected(place: tuple[int | str, ...]) -> None:
    """Each number, text, list and object of the record, by the smallest change."""
    record = copy.deepcopy(record_of(HOPS))
    parent: Any = record
    for key in place[:-1]:
        parent = parent[key]
    old = parent[place[-1]]
    if isinstance(old, int):
        parent[place[-1]] = old + 1
    elif isinstance(old, str):
        parent[place[-1]] = old[:-1] + ("1" if old.endswith("0") else "0")
    elif isinstance(old, list):
        old.append(0)
    else:
        old["more"] = 0
    assert not check(HOPS, record).accepted


@given(st.data())
def test_corrupted_records_are_rejected(data: st.DataObject) -> None:
    record = copy.deepcopy(record_of(HOPS))
    twin = data.draw(corrupt_json(record))
    verdict = check(HOPS, twin)
    if verdict.accepted:
        # Another witness, read backwards or along other edges, is one too.
        for part in (*twin["evidence"]["small"], *record["evidence"]["small"]):
            part["evidence"] = {}
        assert twin["evidence"] == record["evidence"]


def test_the_states_are_not_told_later_than_they_repeat() -> None:
    record = copy.deepcopy(record_of(HOPS))
    part = record["evidence"]["classes"][0]
    later, twice = copy.deepcopy(part), copy.deepcopy(part)
    later["preperiod"] += 1
    twice["period"] *= 2
    for told, count in ((later, 1), (twice, part["period"])):
        again = part["states"][part["preperiod"] :][:count]
        told["states"] += again
        told["answers"] += part["answers"][part["preperiod"] :][:count]
        record["evidence"]["classes"][0] = told
        record["length"] = measure("endless", record["evidence"])
        assert "repeat before" in check(HOPS, record).reason


RING = RULES["a ring with chords"]


@pytest.mark.parametrize(
    ("rule", "answers", "reason"),
    [
        (HOPS, "exists = true", "claim says exists for n = 2, and the evidence shows impossible"),
        (HOPS, "impossible = true", "says impossible for n = 1, and the evidence shows exists"),
        (HOPS, 'exists = "n == 1 or n > 4"', "says impossible for n = 4, "),
        (HOPS, 'exists = "(n == 1 or n >= 4) and n != 5000"', "says impossible for n = 5000, "),
        (HOPS, 'exists = "(n == 1 or n > 3) and n % 59 != 16 % n"', "says impossible for n = 75, "),
        (HOPS, 'impossible = "1 < n < 4 or n > 90 and n % 7 == 0"', "says impossible for n = 91, "),
        (HOPS, 'exists = "not prime(n)"', "is not covered"),
        (HOPS, 'exists = "n*n > 20"', "is not covered"),
        (HOPS, 'exists = "n != 10**9"', "more than 1000000 values of n"),
        (RING, 'exists = "n % 2 == 0"', "for n = 3, "),
    ],
)  # fmt: skip
def test_a_wrong_claim_is_rejected_with_the_smallest_counterexample(
    rule: Rule, answers: str, reason: str
) -> None:
    verdict = check(with_answers(rule, answers), record_of(rule))
    assert not verdict.accepted
    assert reason in verdict.reason


@pytest.mark.parametrize(
    "answers",
    [
        "",
        'impossible = "n in {2, 3}"',
        'exists = "n < 2 or n > 3"',
        'exists = "n == 1 or n >= 4 and n % 6 in {n % 2, n % 2 + 2, n % 2 + 4}"',
        'exists = "abs(2*n - 5) > 1"',
    ],
)
def test_true_claims_are_accepted_in_every_form(answers: str) -> None:
    assert check(with_answers(HOPS, answers), record_of(HOPS)).accepted


@given(st.integers(1, 30), st.integers(1, 12), st.integers(0, 12), st.booleans())
def test_counterexamples_are_found_by_looking_far(
    start: int, k: int, rest: int, below: bool
) -> None:
    text = f"n {'<' if below else '>'} {start} and n % {k} == {rest} or n >= 4 or n == 1"
    rule = with_answers(HOPS, f'exists = "{text}"')
    family = rule.family()
    settled = check_endless(family, record_of(HOPS)["evidence"], check_small)
    says = family.says
    assert says is not None
    wrong = (n for n in range(1, 500) if says(n) != settled.exists(n))
    assert find_counterexample(family, settled) == next(wrong, None)


# Claims.


@pytest.mark.parametrize(
    ("more", "instances", "reason"),
    [
        ("ends = [1]", 'n = "1.."', "no ends"),
        ("required = []", 'n = "1.."', "no required"),
        ("", 'n = "1.."\nm = "1.."', "two ranges have no end"),
        ("", 'n = "1.."\nm = "1..n"', "unknown name 'n'"),
        ("", 'm = 1\nn = "m.."\nwhere = "n > 1"', "unknown name 'n'"),
        ("", 'n = ".."', "not an expression"),
        ("", 'n = "1..."', "not an expression"),
        ("", 'n = "x.."', "unknown name 'x'"),
    ],
)
def test_claims_that_are_not_endless_claims(more: str, instances: str, reason: str) -> None:
    text = (
        f'structure = "hamiltonian-path"\n{more}\n[graph]\nvertices = "1..n"\n'
        f'adjacent = "abs(a - b) == 1"\n[instances]\n{instances}\n'
    )
    with pytest.raises(BadClaim, match=reason):
        Claim(text.encode())


@pytest.mark.parametrize(
    "high",
    [
        "n + 0*(1 // (0 if n > 60 else 1))",
        "n + 0*(1 // (n % 3))",
        "n if n > 0 else n",
        "n + 0*min(n, 5)",
    ],
)
def test_bounds_that_could_be_an_error_for_large_n_only(high: str) -> None:
    """The first two divide by zero for some n of which no graph is built."""
    with pytest.raises(BadClaim, match="no strip: the bounds ask for more"):
        strip_of(Rule(f'"1..{high}"', "abs(a - b) in {1, 2}", instances='n = "13.."').family())


@pytest.mark.parametrize("high", ["n + 0*max(0, (n - 60) % 1)", "2*n - n", "n if 1 < 2 else n"])
def test_bounds_that_are_the_same_for_every_n(high: str) -> None:
    assert strip_of(Rule(f'"1..{high}"', "abs(a - b) in {1, 2}").family()).shift == 0


def test_long_displays_are_read_as_their_members_are() -> None:
    """Many comparisons at once, and the zone that the farthest two members need."""
    left = ", ".join(f"a - b + {k % 7}" for k in range(40))
    right = ", ".join(f"n % 2 - {k % 9}" for k in range(40))
    rule = Rule('"1..n"', f"{{{left}}} == {{{right}}} or abs(a - b) == 1")
    assert strip_of(rule.family()).zone == 6 + 8 + 1


def test_counts_are_no_answers_to_an_endless_claim() -> None:
    with pytest.raises(BadClaim, match="no counts"):
        with_answers(HOPS, "exists = 3").claim()


def test_other_parameters_make_rows() -> None:
    claim = Rule('"1..n"', "abs(a - b) in {1, m}", instances='m = "2..3"\nn = "m + 2.."').claim()
    keys = [key for key, _ in claim.instances(lambda name: b"")]
    assert keys == [{"m": 2, "n": "4.."}, {"m": 3, "n": "5.."}]
    families = [claim.family(key) for key in keys]
    assert [(family.lo, strip_of(family).zone) for family in families] == [(4, 3), (5, 4)]


# Recipes.


def test_recipes_are_lengthened_and_checked() -> None:
    rule = hops(1, 2, structure=CYCLE, lo=3)
    record = copy.deepcopy(record_of(rule))
    # There along the odd numbers, back along the even ones.
    order = [*range(0, 20, 2), *reversed(range(1, 20, 2))]
    good = {"cut": 9, "n": 20, "order": order, "step": 2}
    record["evidence"]["recipes"] = [good]
    assert check(rule, record).accepted
    for key, value in [
        ("step", 0), ("step", 30), ("cut", -1), ("cut", 18), ("n", 21), ("n", 5),
        ("order", list(range(20))), ("order", [0]), ("more", 1),
    ]:  # fmt: skip
        record["evidence"]["recipes"] = [good, {**good, key: value}]
        assert not check(rule, record).accepted, (key, value)


def test_recipes_go_around_a_ring() -> None:
    rule = Rule('"0..n-1"', "(a - b) % n in {1, n - 1}", CYCLE, instances='n = "3.."')
    record = copy.deepcopy(record_of(rule))
    record["evidence"]["recipes"] = [{"cut": 5, "n": 13, "order": [*range(13)], "step": 4}]
    assert check(rule, record).accepted
    record["evidence"]["recipes"][0]["order"][3:5] = [4, 3]
    assert not check(rule, record).accepted


def test_too_many_states_are_rejected(monkeypatch: pytest.MonkeyPatch) -> None:
    family = HOPS.family()
    body = record_of(HOPS)["evidence"]
    monkeypatch.setattr("certify.checker.layers.MOST_STATES", 20)
    with pytest.raises(Rejected, match="more than 20 states"):
        check_endless(family, body, check_small)


def test_too_many_states_in_too_many_sets_are_rejected(monkeypatch: pytest.MonkeyPatch) -> None:
    body = record_of(HOPS)["evidence"]
    monkeypatch.setattr("certify.checker.classes.MOST_BITS", 10)
    with pytest.raises(Rejected, match="too many"):
        check_endless(HOPS.family(), body, check_small)


def test_too_many_recipes_are_rejected() -> None:
    order = [*range(0, 20, 2), *reversed(range(1, 20, 2))]
    rule = hops(1, 2, structure=CYCLE, lo=3)
    record = copy.deepcopy(record_of(rule))
    recipe = {"cut": 9, "n": 20, "order": order, "step": 2}
    for count, accepted in [(20, True), (21, False)]:
        record["evidence"]["recipes"] = [recipe] * count
        assert check(rule, record).accepted is accepted


def test_small_instances_have_no_files() -> None:
    record = copy.deepcopy(record_of(HOPS))
    names = {form: f"clauses/n=1...{form}.gz" for form in ("cnf", "lrat", "drat")}
    record["evidence"]["small"][1] = {
        "answer": "impossible", "kind": "clauses", "evidence": {"clauses": 1, "steps": 1, **names},
    }  # fmt: skip
    assert "no files" in check(HOPS, record).reason
