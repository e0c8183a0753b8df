"""The full texts of a few examples: what a reader sees, word for word."""

WITNESS = """\
For n = 15 the graph (15 vertices and 15 edges) has a Hamiltonian path.

It visits the 15 vertices in this order:

    8, 1, 15, 10, 6, 3, 13, 12, 4, 5, 11, 14, 2, 7, 9

Every vertex of the graph occurs exactly once, and any two consecutive ones are joined
by an edge.

This speaks of the graph for n = 15 alone, under the rule of the claim, and says nothing
about other instances.
"""

ENDS = """\
For n = 18 the graph (18 vertices and 18 edges) has no Hamiltonian path.

The vertices 16, 17 and 18 have only one neighbour each; the edges there are 7-18, 8-17
and 9-16. So each of the three would be an end of a Hamiltonian path, but a path has
only two ends.

This speaks of the graph for n = 18 alone, under the rule of the claim, and says nothing
about other instances.
"""

SEPARATOR = """\
For m = 4, n = 4 the graph (16 vertices and 24 edges) has no Hamiltonian path.

Remove the four vertices (2, 2), (2, 3), (3, 2) and (3, 3). Six pieces are left: the
single vertices (1, 1), (1, 4), (4, 1) and (4, 4), {(1, 2), (2, 4), (3, 1), (4, 3)}, and
{(1, 3), (2, 1), (3, 4), (4, 2)}.

A path from which four vertices are removed falls into at most five parts, and each part
lies within one piece. So no path visits all six pieces. (This is Chvátal's toughness
condition, for paths: removing s vertices may leave at most s + 1 pieces.)

This speaks of the graph for m = 4, n = 4 alone, under the rule of the claim, and says
nothing about other instances.
"""

COLOURS = """\
The graph (11 vertices and 18 edges) has no Hamiltonian cycle.

The graph is bipartite: every edge joins one of the six vertices a, c, f, g, i and j to
one of the other five. A cycle alternates between the two classes, so it needs equally
many vertices of both classes; but the classes have six and five vertices.

This speaks of this one graph alone and says nothing about others.
"""

COUNTING_CYCLE = """\
For m = 3, n = 4 the graph (12 vertices and 14 edges) has no Hamiltonian cycle.

Give weights to the vertices as follows; the others have weight 0.

  weight 1   (2, 4), (3, 1)
  weight -1  (1, 2)

Give a weight to this set of vertices too.

  A, weight 1  {(1, 1), (1, 2), (2, 3), (2, 4), (3, 1), (3, 2)}

The score of an edge is the sum of the weights of its two ends, plus the weight of A if
the edge leaves A. (An edge leaves a set when exactly one of its two vertices is in it.)

Take any Hamiltonian cycle, and add up the scores of its edges. Every vertex weight is
then counted exactly twice. The weight of A is counted at least twice, because the cycle
leaves the set and comes back. The vertex weights add up to 1, so the sum is at least
2 · 1 + 2 · 1 = 4.

On the other hand, only these edges have a positive score:

  score 1  (1,3)-(3,2), (2,3)-(3,1), (2,4)-(3,2)

So the edges bring at most 3 · 1 = 3. That is less than 4: a contradiction.

This speaks of the graph for m = 3, n = 4 alone, under the rule of the claim, and says
nothing about other instances.
"""

COUNTING_PATH = """\
For n = 22 the graph (22 vertices and 26 edges) has no Hamiltonian path.

Give weights to the vertices as follows; the others have weight 0.

  weight 1   2, 9, 11, 18, 22
  weight -1  7, 14

The score of an edge is the sum of the weights of its two vertices. The end value of a
vertex is its own weight.

Take any Hamiltonian path, and add up the scores of its edges and the end values of its
two ends. Every vertex weight is then counted exactly twice: an inner vertex lies on two
edges of the path, and an end lies on one and counts once more as an end. The vertex
weights add up to 3, so the sum is exactly 2 · 3 = 6.

On the other hand, only these edges have a positive score:

  score 1  3-22, 5-11, 9-16

So the edges bring at most 3 · 1 = 3. No possible end has an end value above 1, so the
two ends bring at most 2. Together this is at most 3 + 2 = 5, less than 6: a
contradiction.

This speaks of the graph for n = 22 alone, under the rule of the claim, and says nothing
about other instances.
"""

CASES = """\
The graph (10 vertices and 15 edges) has no Hamiltonian path that joins 1 and 2.

Suppose there is a Hamiltonian path that joins 1 and 2. Call an edge used if the path
uses it, and unused otherwise. There are three cases to close.

1-2 is unused, because then 1, 2 would be the whole path. The path ends at 1 with 1-5 or
1-6.

  Case 1: 1-5 is used and 1 is an end of the path. Then 1-6 is unused; 6 is not an end
  and has only the edges 6-8 and 6-9 left, so both are used. The path ends at 2 with 2-3
  or 2-7.

    Case 1.1: 2-3 is used and 2 is an end of the path. Then 2-7 is unused; 7 is not an
    end and has only the edges 7-9 and 7-10 left, so 7-9 is used; 6-9 and 7-9 are used,
    so 4-9 is unused; 4 is not an end and has only the edges 3-4 and 4-5 left, so both
    are used. Now the path 1, 5, 4, 3, 2 is complete from end to end, and misses the
    other vertices: a contradiction.

    Case 1.2: 2-7 is used and 2 is an end of the path. Then 2-3 is unused; 3 is not an
    end and has only the edges 3-4 and 3-8 left, so both are used; 4-9 is unused,
    because it would close the path 4, 3, 8, 6, 9 to a cycle that misses other vertices;
    4 is not an end and has only the edges 3-4 and 4-5 left, so 4-5 is used; 9 is not an
    end and has only the edges 6-9 and 7-9 left, so 7-9 is used. Now the path 1, 5, 4,
    3, 8, 6, 9, 7, 2 is complete from end to end, and misses the other vertices: a
    contradiction.

  Case 2: 1-6 is used and 1 is an end of the path. By symmetry this is like Case 1: the
  symmetry (4 8) (5 6) (9 10) of the graph turns what holds here (1-6 is used and 1 is
  an end of the path) into what was assumed there (1-5 is used and 1 is an end of the
  path).

Every case is closed, so there is no such path.

This speaks of this one graph alone and says nothing about others.
"""

SWEEP = """\
For m = 3, n = 3 the graph (9 vertices and 8 edges) has no Hamiltonian path.

This was settled by a complete computation, which a machine can repeat; it is no
argument to be read. The vertices were taken one after the other in this order:

    (3, 3), (1, 2), (2, 1), (3, 1), (1, 3), (2, 3), (3, 2), (1, 1), (2, 2)

The ends of the path that were not settled yet were chosen once (1, 1) was taken.

At each vertex all possible choices of edges of the path were made. Two sets of choices
were treated as one state when they look the same to the vertices still to come: the
same of these have no, one or two chosen edges, and the same pairs of them are joined by
a piece of the path. A Hamiltonian path would run through a state at every step.

There were 24 states in all, and at most four at a time, at step 2 (vertex (1, 2)). The
last states existed at step 7 (vertex (3, 2)), where there was one; none of them could
be continued at step 8 (vertex (1, 1)). So there is no Hamiltonian path.

To repeat it: `certify check FOLDER`, or without the rest of the program
`python -m certify.checker FOLDER`. Both sweep again in this order and compare the
number of states at every step, and the SHA-256 digest of all states, which begins with
caac072afe99.

This speaks of the graph for m = 3, n = 3 alone, under the rule of the claim, and says
nothing about other instances.
"""

CLAUSES = """\
Graph 17 of the list (31 vertices and 44 edges) has no Hamiltonian cycle.

This was settled by a proof in propositional logic, which a machine can check; it is no
argument to be read. It starts from facts that hold for every Hamiltonian cycle of this
graph: two about degrees (exactly two edges are used at a vertex) and one about cuts
(some edge leaves a given set of vertices). Written as clauses, with one variable for
every edge, these facts contradict each other. So there is no Hamiltonian cycle.

The files:

  clauses/17.cnf.gz   the facts and their 40 clauses (DIMACS)
  clauses/17.lrat.gz  the proof, twelve steps (LRAT)
  clauses/17.drat.gz  the same proof without hints (DRAT), for other proof checkers

To check it: `certify check FOLDER`, or without the rest of the program
`python -m certify.checker FOLDER`. Both derive the facts from the graph, compare the
clauses with them, and follow the proof step by step.

This speaks of graph 17 of the list alone and says nothing about other graphs.
"""

OPEN = """\
For n = 40 it is left open whether the graph (40 vertices and 65 edges) has a
Hamiltonian path that has an end at 1.

The search ended with neither a path nor a reason against one, so nothing is claimed
here.
"""
