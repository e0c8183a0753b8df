"""What a reader of the paper sees: the reason for an instance, in mathematical English.

    explain.py      render_reason: one record in, text out
    witness.py ...  one module a kind of evidence: what is said about it
    words.py        shared wording: names of vertices and edges, lists, numbers
    structure.py    the few facts about a question that the wording needs
    room.py         too many pieces, too many independent vertices
    balance.py      a counting argument in the language of the graph
    classical.py    counting arguments that have a classical name
    moves.py        forced moves retold, for cases.py
    symmetry.py     a symmetry told, for cases.py
    blocks.py       what is said: paragraphs and rows, with vertices marked
    plain.py        how it is set: plain text of 88 columns

Other ways of setting the same blocks go beside plain.py. A path question is told
in the language of paths; the apex of its normal form is never mentioned. The
texts are for people: whether evidence holds is decided by the checker alone.
"""
