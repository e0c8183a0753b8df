"""What is said when there are too many pieces or vertices for a path or cycle.

Two arguments of the same build: removed vertices cut a path or cycle into so many
parts at most, and the other vertices leave so many gaps at most for an independent set
(structure.py counts both).
"""

from __future__ import annotations

from certify.report.blocks import Block, Paragraph
from certify.report.structure import Independence, Separation
from certify.report.words import Words, capital, count_of, join, number, plural


def render_separation(words: Words, found: Separation) -> list[Block]:
    """Return why the pieces are more than a path or cycle can visit.

    Errors: ContradictionError when they are not.
    """
    if not found.holds:
        raise words.fail("the removed vertices do not leave enough pieces")
    if not found.removed:
        return _disconnected(words, found)
    size = len(found.removed)
    if found.parts < 1 and found.joined and not (found.inside and found.must):
        return _closed_off(words, found)
    pieces = len(found.pieces)
    are = plural("is", pieces)
    leaves = f"{number(pieces)} {plural('piece', pieces)} {are} left: {words.pieces(found.pieces)}."
    first = f"Remove {_the_vertices(words, found.removed)}. {capital(leaves)}"
    if size == 1 and not found.ends and not found.inside:
        v = capital(words.vertex(found.removed[0]))
        first = (
            f"{v} is a cut vertex: without it {number(pieces)} {plural('piece', pieces)} {are} "
            f"left, {words.pieces(found.pieces)}."
        )
    return [Paragraph(first), Paragraph(" ".join(_count_parts(words, found)))]


def _the_vertices(words: Words, vertices: tuple[int, ...]) -> str:
    if len(vertices) == 1:
        return words.vertex(vertices[0])
    return f"the {count_of(len(vertices), 'vertex')} {words.names(vertices)}"


def _disconnected(words: Words, found: Separation) -> list[Block]:
    if len(found.pieces) == 1:
        return [Paragraph("No vertex may be an end of the path, but a path has two ends.")]
    graph = "What is left of the graph" if words.in_case else "The graph"
    return [
        Paragraph(
            f"{graph} is disconnected. It has {number(len(found.pieces))} pieces: "
            f"{words.pieces(found.pieces)}. A {words.thing} stays within one of them."
        )
    ]


def _closed_off(words: Words, found: Separation) -> list[Block]:
    """Say that the required edges inside the set leave no way out of it."""
    size, edges = len(found.removed), len(found.joined)
    between = f"the {count_of(size, 'vertex')} {words.names(found.removed)}"
    known = f"The {words.edges(found.joined)} {plural('is', edges)} {words.demanded}"
    if edges < size:
        return [
            Paragraph(
                f"{known}, and the path has its ends at {words.names(found.ends)}. So it is "
                f"complete on {between}, and misses the other vertices."
            )
        ]
    alone = "" if words.is_path else " that visits other vertices too"
    return [
        Paragraph(
            f"{known}. That is {count_of(edges, 'edge')} between {between}, but a {words.thing}"
            f"{alone} uses at most {number(size - 1)} between them."
        )
    ]


def _count_parts(words: Words, found: Separation) -> list[str]:
    """Return the sentences that bound the number of parts, and the conclusion."""
    if found.inside:
        return _count_inner_parts(words, found)
    size, thing, pieces = len(found.removed), words.thing, len(found.must)
    most = size + words.is_path
    removed = f"{count_of(size, 'vertex')} {plural('is', size)} removed"
    said = [
        f"A {thing} from which {removed} falls into at most {count_of(most, 'part')}, and each "
        "part lies within one piece."
    ]
    cost = _costs(words, found)
    if cost:
        said.append(f"Here it is at most {count_of(found.parts, 'part')}, since {join(cost)}.")
    all_pieces = "both pieces" if pieces == 2 else f"all {number(pieces)} pieces"
    said.append(f"So no {thing} visits {all_pieces if pieces > 1 else 'it'}.")
    if size > 1 and not cost and not words.in_case:
        rule = "s + 1" if words.is_path else "s"
        said.append(
            f"(This is Chvátal's toughness condition{', for paths' if words.is_path else ''}: "
            f"removing s vertices may leave at most {rule} pieces.)"
        )
    return said


def _count_inner_parts(words: Words, found: Separation) -> list[str]:
    """Return the sentences for a set that does not count the parts with the path's ends."""
    size, must = len(found.removed), len(found.must)
    them = "it" if must == 1 else "each of them"
    if must < len(found.pieces):
        contain = plural("contains", must)
        said = [f"Of these, {words.pieces(found.must)} {contain} no possible end of the path."]
    elif must == 1:
        said = ["It contains no possible end of the path."]
    else:
        said = ["None of them contains a possible end of the path."]
    if size == 1:
        v = words.vertex(found.removed[0])
        said.append(f"A path could only get to {them} and away again by visiting {v} twice.")
        return said
    said.append(
        f"So the path visits {them} between two of the removed vertices. Between these it has at "
        f"most {count_of(size - 1, 'part')}, one between each and the next."
    )
    cost = _costs(words, found)
    if cost:
        said.append(f"Here it is at most {count_of(found.parts, 'part')}, since {join(cost)}.")
    said.append(f"That is too few for {count_of(must, 'piece')}.")
    return said


def _costs(words: Words, found: Separation) -> list[str]:
    """Return why there are fewer parts than the number of removed vertices allows."""
    cost = []
    if found.joined:
        verb = "join" if len(found.joined) > 1 else "joins"
        cost.append(
            f"the {words.demanded} {words.edges(found.joined)} {verb} removed vertices without a "
            "part in between"
        )
    if found.ends:
        how = "is an end" if len(found.ends) == 1 else "are ends"
        cost.append(f"{words.names(found.ends)} {how} of the path and removed as well")
    return cost


def render_independence(words: Words, found: Independence | None) -> list[Block]:
    """Return why a path or cycle has no room for so many pairwise not joined vertices.

    Errors: ContradictionError when it has, or when two of them are joined (None).
    """
    if found is None or not found.holds:
        raise words.fail("the vertices are joined, or there is room for them")
    size, others = len(found.chosen), found.others
    if found.bipartite and not found.joined and not found.ends and others:
        return _colour_classes(words, found)
    them = f"{count_of(size, 'vertex')} {words.names(found.chosen)}"
    none = f"The {them} are not" if size == 2 else f"No two of the {them} are"
    cost = []
    if found.ends:
        how = "is an end" if len(found.ends) == 1 else "are ends"
        cost.append(f"{words.names(found.ends)} {how} of the path")
    if found.joined:
        verb = "join" if len(found.joined) > 1 else "joins"
        cost.append(
            f"the {words.demanded} {words.edges(found.joined)} {verb} two of the others directly"
        )
    if not words.is_path:
        most = others
        room = f"On a cycle the other {number(others)} leave {count_of(most, 'gap')} between them"
    elif found.inside:
        most = others - 1
        room = (
            "None of them may be an end of the path, so they lie in the gaps between the other "
            f"{number(others)}, of which there are {number(most)}"
        )
    else:
        most = others + 1
        room = (
            f"On a path the other {number(others)} leave {count_of(most, 'gap')}, those before the "
            "first and after the last included"
        )
    fits = f", and each gap has room for one of the {number(size)} at most."
    fit = max(found.room, 0)
    so = f"So at most {number(fit)} of them {'fits' if fit == 1 else 'fit'}."
    if cost:
        so = f"Here {number(most - found.room)} of the gaps stay empty, since {join(cost)}. {so}"
    return [
        Paragraph(f"{none} joined{' by an edge that is left' if words.in_case else ''}."),
        Paragraph(f"{room}{fits} {so}"),
    ]


def _colour_classes(words: Words, found: Independence) -> list[Block]:
    size, others = len(found.chosen), found.others
    if not words.is_path:
        rule = "so it needs equally many vertices of both classes"
    elif found.inside:
        rule = (
            "and it must begin and end in the second class, so it needs one vertex more of that "
            "class than of the first"
        )
    else:
        rule = "so their sizes could differ by one at most"
    graph = "What is left of the graph" if words.in_case else "The graph"
    return [
        Paragraph(
            f"{graph} is bipartite: every edge joins one of the {count_of(size, 'vertex')} "
            f"{words.names(found.chosen)} to one of the other {number(others)}. "
            f"A {words.thing} alternates between the two classes, {rule}; but the classes have "
            f"{number(size)} and {number(others)} vertices."
        )
    ]
