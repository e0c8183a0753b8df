"""What is said about a sweep: honestly, that it is a computation to be repeated."""

from __future__ import annotations

from typing import Any

from certify.report.blocks import Block, Paragraph, Rows
from certify.report.words import HOW_TO_CHECK, Words, count_of, number


def render_sweep(words: Words, body: dict[str, Any]) -> list[Block]:
    """Return what was swept, how large it grew and how to repeat it."""
    order, states = body["order"], body["states"]
    thing = words.thing
    last = next((i for i, count in enumerate(states) if count == 0), len(states) - 1)
    largest = max(states)
    peak = states.index(largest)
    total = sum(states)
    blocks: list[Block] = [
        Paragraph(
            "This was settled by a complete computation, which a machine can repeat; it is no "
            "argument to be read. The vertices were taken one after the other in this order:"
        ),
        Rows((("", words.sequence(v for v in order if v != words.apex)),)),
    ]
    if words.apex is not None:
        place = order.index(words.apex)
        taken = order[:place]
        when = f"once {words.name(taken[-1])} was taken" if taken else "before the first was taken"
        blocks.append(
            Paragraph(f"The ends of the path that were not settled yet were chosen {when}.")
        )
    blocks.append(
        Paragraph(
            f"At each vertex all possible choices of edges of the {thing} were made. Two sets of "
            "choices were treated as one state when they look the same to the vertices still to "
            "come: the same of these have no, one or two chosen edges, and the same pairs of them "
            f"are joined by a piece of the {thing}. A Hamiltonian {thing} would run through a "
            "state at every step."
        )
    )
    if largest == 0:
        blocks.append(Paragraph(f"Already at {_step(words, order, 0)} no choice was possible."))
    else:
        first = f" at {_step(words, order, last - 1)}" if last else ""
        was = "was one" if states[last - 1] == 1 else f"were {number(states[last - 1])}"
        blocks.append(
            Paragraph(
                f"There were {count_of(total, 'state')} in all, and at most {number(largest)} at a "
                f"time, at {_step(words, order, peak)}. The last states existed{first}, where "
                f"there {was}; none of them could be continued at {_step(words, order, last)}. "
                f"So there is no Hamiltonian {thing}."
            )
        )
    blocks.append(
        Paragraph(
            f"To repeat it: {HOW_TO_CHECK}. Both sweep again in this order and compare the "
            "number of states at every step, and the SHA-256 digest of all states, which begins "
            f"with {body['digest'][:12]}."
        )
    )
    return blocks


def _step(words: Words, order: list[int], index: int) -> str:
    """Return which step of the sweep it is."""
    if order[index] == words.apex:
        return f"step {index + 1}, the choice of the ends"
    return f"step {index + 1} ({words.vertex(order[index])})"
