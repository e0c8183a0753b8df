"""What is said about a witness: the object itself."""

from __future__ import annotations

from typing import Any

from certify.report.blocks import Block, Paragraph, Rows
from certify.report.words import Words, count_of


def render_witness(words: Words, body: dict[str, Any]) -> list[Block]:
    """Return the vertices in the order in which the path or cycle visits them."""
    order = body["order"]
    if len(order) == 1:
        return [Paragraph(f"The path consists of {words.vertex(order[0])} alone.")]
    close = "" if words.is_path else ", and so are the last and the first"
    return [
        Paragraph(f"It visits the {count_of(len(order), 'vertex')} in this order:"),
        Rows((("", words.sequence(order)),)),
        Paragraph(
            "Every vertex of the graph occurs exactly once, and any two consecutive ones are "
            f"joined by an edge{close}."
        ),
    ]
