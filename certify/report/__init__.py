"""What a reader of the paper sees: the reason for an instance, in mathematical English.

    explain.py      render_reason: one record in, text out
    witness.py ...  one module a kind of evidence: obstruction, counting, cases, sweep, clauses
    endless.py      the argument that settles every n of an endless claim
    words.py        shared wording: names of vertices and edges, lists, numbers
    structure.py    the few facts about a question that the wording needs
    room.py         too many pieces, too many independent vertices
    balance.py      a counting argument in the language of the graph
    classical.py    counting arguments that have a classical name
    moves.py        forced moves retold, for cases.py
    symmetry.py     a symmetry told, for cases.py
    lasting.py      runs of instances with one reason
    blocks.py       what is said: paragraphs and rows, with vertices marked
    plain.py        how it is set: plain text of 88 columns
    table.py        the table of all instances for the terminal
    referee.py      another program's opinion on clauses

The appendix of a paper is made of the same blocks:

    appendix.py     render_appendix: a folder in, a document set in LaTeX or Markdown out
    accepted.py     the gate: only what the checker accepts goes out
    items.py        what is told of: instances, and the families of an endless claim
    statement.py    the definition and the theorem; formula.py, maths.py: their formulas
    answers.py      the table; runs.py: which instances are told as one
    joint.py        one reason for several instances
    families.py     theorem, proposition and construction for what is endless
    limits.py       what was checked, and what is not claimed
    drawing.py ...  figures: layout.py, reason.py, figure.py, and svg.py, tikz.py to draw them
    document.py     the parts; inline.py, names.py: the marks inside a text
    latex.py        how it is set, with preamble.py and tex.py; or markdown.py

page/ makes a page for browsers. A path question is told in the language of paths; the
apex of its normal form is never mentioned. The texts are for people: whether evidence
holds is decided by the checker alone.
"""
