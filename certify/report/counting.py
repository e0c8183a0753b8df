"""What is said about a counting argument: under its classical name, or with its weights.

The weights, what they make of edges and ends, the sum that a Hamiltonian path or cycle
reaches, and the sum that it cannot exceed (balance.py).
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from typing import Any

from certify.graph.graph import Edge
from certify.report.balance import Balance, CrossedSet, weigh
from certify.report.blocks import Block, Paragraph, Rows
from certify.report.classical import name_classical
from certify.report.obstruction import render_obstruction
from certify.report.structure import certain_ends
from certify.report.words import Words, join, plural

_MOST_LISTED = 80
"""So many edges are listed with their scores; of more, only how many have each score."""


def render_counting(words: Words, body: dict[str, Any]) -> list[Block]:
    """Return the counting argument as a proof to be followed with a pencil.

    Errors: ContradictionError when the numbers do not collide.
    """
    classical = name_classical(words.question, body)
    if classical is not None:
        return render_obstruction(words, classical)
    balance = weigh(words.question, body)
    if balance.need <= balance.offer + balance.end_offer:
        raise words.fail("the numbers do not collide")
    blocks = _list_weights(words, balance)
    blocks.append(Paragraph(_define_scores(words, balance)))
    blocks.append(Paragraph(_say_need(words, balance)))
    blocks += _say_offer(words, balance)
    return blocks


def _list_weights(words: Words, balance: Balance) -> list[Block]:
    blocks: list[Block] = []
    if balance.weight:
        grouped: dict[int, list[int]] = defaultdict(list)
        for v, y in balance.weight.items():
            grouped[y].append(v)
        rest = "; the others have weight 0" if len(balance.weight) < words.order else ""
        blocks.append(Paragraph(f"Give weights to the vertices as follows{rest}."))
        blocks.append(
            Rows(
                tuple(
                    (f"weight {y}", words.sequence(grouped[y]))
                    for y in sorted(grouped, reverse=True)
                )
            )
        )
    for is_cut in (True, False):
        chosen = [item for item in balance.sets if item.is_cut == is_cut]
        if not chosen:
            continue
        these = "these sets" if len(chosen) > 1 else "this set"
        give = f"{'Give' if len(chosen) > 1 else 'Give a'} {plural('weight', len(chosen))}"
        said = f"{give} to {these} of vertices{' too' if blocks else ''}"
        if not is_cut:
            ends = " or vertices in it, as ends of the path," if words.is_path else ""
            each = "it" if len(chosen) == 1 else "each"
            said += f", and mark an odd number of edges that leave {each}{ends} as follows"
        blocks.append(Paragraph(f"{said}."))
        blocks.append(Rows(tuple(_row(words, item) for item in chosen)))
    return blocks


def _row(words: Words, item: CrossedSet) -> tuple[str, str]:
    marked = "" if item.is_cut else f"; marked: {_name_marked(words, item)}"
    return f"{item.name}, weight {item.weight}", f"{words.members(item.vertices)}{marked}"


def _name_marked(words: Words, item: CrossedSet) -> str:
    parts = []
    if item.marked:
        parts.append(f"the {words.edges(item.marked)}")
    if item.marked_ends:
        parts.append(f"{words.names(item.marked_ends)} as {_ends(len(item.marked_ends))}")
    return join(parts)


def _ends(count: int) -> str:
    return "an end" if count == 1 else "ends"


def _define_scores(words: Words, balance: Balance) -> str:
    cuts = [item.name for item in balance.sets if item.is_cut]
    odd = [item.name for item in balance.sets if not item.is_cut]
    vertex = "the weights of its two vertices" if words.is_path else "the weights of its two ends"
    said = f"The score of an edge is the sum of {vertex}" if balance.weight else ""
    value = "The end value of a vertex is its own weight" if balance.weight else ""
    if cuts:
        which = cuts[0] if len(cuts) == 1 else f"each of {join(cuts)}"
        if len(cuts) == 1:
            leaves, holds = f"if the edge leaves {which}", f"if {which} contains it"
        else:
            leaves, holds = "that the edge leaves", "that contains it"
        plus = ", plus" if balance.weight else "The score of an edge is"
        said += f"{plus} the weight of {which} {leaves}"
        plus = ", plus" if balance.weight else "The end value of a vertex is"
        value += f"{plus} the weight of {which} {holds}"
    said = f"{said or 'The score of an edge starts at 0'}."
    if cuts or odd:
        said += " (An edge leaves a set when exactly one of its two vertices is in it.)"
    if odd:
        said += (
            f" An edge that leaves {join(odd, 'or')} scores its weight in addition, or minus its "
            "weight if it is marked there."
        )
    if not words.is_path:
        return said
    said += f" {value or 'The end value of a vertex starts at 0'}."
    if odd:
        said += (
            f" A vertex in {join(odd, 'or')} adds that weight to its end value, or takes it away "
            "if it is marked there as an end."
        )
    return said


def _say_need(words: Words, balance: Balance) -> str:
    cuts = [item for item in balance.sets if item.is_cut]
    odd = [item for item in balance.sets if not item.is_cut]
    thing = words.thing
    said = []
    if words.is_path:
        said.append(
            "Take any Hamiltonian path, and add up the scores of its edges and the end values of "
            "its two ends."
        )
        if balance.weight:
            said.append(
                "Every vertex weight is then counted exactly twice: an inner vertex lies on two "
                "edges of the path, and an end lies on one and counts once more as an end."
            )
        if cuts:
            said.append(
                f"{_weights_of(cuts)} counted at least twice: a path with no end in the set enters "
                "it and leaves it, a path with one end in it leaves it at least once, and both "
                "ends count when both are in it."
            )
    else:
        said.append("Take any Hamiltonian cycle, and add up the scores of its edges.")
        if balance.weight:
            said.append("Every vertex weight is then counted exactly twice.")
        if cuts:
            said.append(
                f"{_weights_of(cuts)} counted at least twice, because the cycle leaves the set "
                "and comes back."
            )
    if odd:
        ends = " together with the ends inside it" if words.is_path else ""
        said.append(
            f"For {join([item.name for item in odd])}: the edges of the {thing} that leave "
            f"the set{ends} are even in number, so they are not exactly the marked ones. Hence "
            "they miss a marked one or take an unmarked one, and those taken that are not marked "
            "minus those taken that are marked number at least 1 minus the number of marked ones."
        )
    exact = "is exactly" if not balance.sets else "is at least"
    total = sum(balance.weight.values())
    so = f"The vertex weights add up to {total}, so" if balance.weight else "So"
    said.append(f"{so} the sum {exact} {_sum_need(balance)}.")
    return " ".join(said)


def _weights_of(cuts: Sequence[CrossedSet]) -> str:
    if len(cuts) == 1:
        return f"The weight of {cuts[0].name} is"
    return f"Each of the weights of {join([item.name for item in cuts])} is"


def _times(left: int, right: int) -> str:
    """Return a product; its blanks do not break a line."""
    return f"{_signed(left)}\xa0·\xa0{_signed(right)}"


def _sum_need(balance: Balance) -> str:
    parts = []
    total = sum(balance.weight.values())
    if balance.weight:
        parts.append(_times(2, total))
    parts += [
        _times(2, item.weight) if item.is_cut else _times(item.weight, 1 - item.odd)
        for item in balance.sets
    ]
    return f"{' + '.join(parts)} = {balance.need}"


def _signed(value: int) -> str:
    return f"({value})" if value < 0 else str(value)


def _say_offer(words: Words, balance: Balance) -> list[Block]:
    required = words.question.required
    positive: dict[int, list[Edge]] = defaultdict(list)
    costly: dict[int, list[Edge]] = defaultdict(list)
    for edge, score in sorted(balance.score.items()):
        if score > 0:
            positive[score].append(edge)
        elif score < 0 and edge in required:
            costly[score].append(edge)
    listed = sum(map(len, positive.values())) <= _MOST_LISTED
    left = " that are left" if words.in_case else ""
    blocks: list[Block] = []
    if positive:
        blocks.append(
            Paragraph(f"On the other hand, only these edges{left} have a positive score:")
        )
        blocks.append(_score_rows(words, positive, listed))
        gain = " + ".join(_times(len(positive[s]), s) for s in sorted(positive, reverse=True))
        most = sum(s * len(edges) for s, edges in positive.items())
        said = [f"So the edges bring at most {gain} = {most}."]
    else:
        said = [f"On the other hand, none of the edges{left} has a positive score."]
        said.append("So the edges bring at most 0.")
    if costly:
        blocks.append(Paragraph(" ".join(said)))
        blocks.append(
            Paragraph(
                f"These edges have a negative score, but they are {words.demanded} and so count "
                "in any case:"
            )
        )
        blocks.append(_score_rows(words, costly, True))
        loss = " + ".join(_times(len(costly[s]), s) for s in sorted(costly, reverse=True))
        start = f"{most} + " if positive else ""
        said = [f"This leaves at most {start}{loss} = {balance.offer} for the edges."]
    if words.is_path:
        said.append(_say_ends(words, balance))
        if balance.end_offer != 0 or balance.offer != 0:
            total = balance.offer + balance.end_offer
            said.append(
                f"Together this is at most {balance.offer} + {_signed(balance.end_offer)} = "
                f"{total}, less than {balance.need}: a contradiction."
            )
        else:
            said.append(f"That is less than {balance.need}: a contradiction.")
    else:
        said.append(f"That is less than {balance.need}: a contradiction.")
    blocks.append(Paragraph(" ".join(said)))
    return blocks


def _score_rows(words: Words, grouped: dict[int, list[Edge]], listed: bool) -> Rows:
    return Rows(
        tuple(
            (
                f"score {score}",
                ", ".join(words.edge(e) for e in grouped[score])
                if listed
                else f"{len(grouped[score])} edges",
            )
            for score in sorted(grouped, reverse=True)
        )
    )


def _say_ends(words: Words, balance: Balance) -> str:
    """Return what the two ends bring at most."""
    certain = certain_ends(words.question)
    p, q = balance.ends
    value = balance.end_value
    if len(certain) == 2:
        return (
            f"The ends {words.names(balance.ends)} have the end values {value[p]} and {value[q]}."
        )
    if len(certain) == 1:
        return (
            f"The end {words.name(p)} has the end value {value[p]}, and no other possible end has "
            f"more than {value[q]}."
        )
    if value[p] == value[q]:
        return (
            f"No possible end has an end value above {value[p]}, so the two ends bring at most "
            f"{2 * value[p]}."
        )
    return (
        f"The two largest end values are {value[p]} (at {words.name(p)}) and {value[q]}, so the "
        f"two ends bring at most {balance.end_offer}."
    )
