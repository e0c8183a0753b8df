"""The two methods this tool is measured against.

Both get the same question (a Hamiltonian cycle through every required edge), one
thread and a fixed seed. Neither keeps the limit itself: the process in which it
runs is ended from outside (see `child`). The clock starts before the model is built and stops
when the solver has answered; whatever comes after (reading the cycle and checking
it, reading the proof) is not counted.
"""

from __future__ import annotations

from itertools import combinations

from ortools.sat.python import cp_model
from pysat.solvers import Cadical195

from benchmark.outcome import Outcome, WrongCycleError, check_cycle, processor_seconds
from certify.graph.question import Question

SEED = 1


def run_constraint_solver(question: Question, _limit: float) -> Outcome:
    """Decide with CP-SAT: one circuit constraint over two arcs for each edge.

    Raises WrongCycleError when the solver's cycle is none.
    """
    start = processor_seconds()
    model = cp_model.CpModel()
    arcs = {}
    for u, v in question.edges:
        arcs[u, v] = model.new_bool_var("")
        arcs[v, u] = model.new_bool_var("")
        if (u, v) in question.required:
            model.add_bool_or(arcs[u, v], arcs[v, u])
    if any(not near for near in question.neighbours):
        # The circuit constraint knows vertices from their arcs, so it would skip this one.
        model.add_bool_or([])
    if arcs:
        model.add_circuit([(u, v, used) for (u, v), used in arcs.items()])
    solver = cp_model.CpSolver()
    solver.parameters.num_workers = 1
    solver.parameters.random_seed = SEED
    status = solver.solve(model)
    seconds = processor_seconds() - start
    if status == cp_model.INFEASIBLE:
        return Outcome("impossible", seconds, kind="no proof")
    if status not in (cp_model.OPTIMAL, cp_model.FEASIBLE):
        return Outcome("open", seconds, kind=solver.status_name(status).lower())
    after = {u: v for (u, v), used in arcs.items() if solver.boolean_value(used)}
    order = [0]
    while len(order) < question.n:
        order.append(after[order[-1]])
    check_cycle(question, order)
    return Outcome("exists", seconds, kind="cycle")


def textbook_clauses(question: Question) -> list[list[int]]:
    """Build the textbook clauses: vertex v stands at position p of a cycle.

    Variable v*n + p + 1. Every vertex has exactly one position and every position
    exactly one vertex (pairwise clauses); vertices that are not joined do not
    stand at consecutive positions, the last and the first included; a required
    edge has its ends at consecutive positions. Vertex 0 stands at position 0.
    Cost: about n^3 clauses, which is what makes it the textbook encoding.
    """
    n = question.n
    places = range(n)
    rows = [[v * n + p + 1 for p in places] for v in places]
    columns = [[row[p] for row in rows] for p in places]
    clauses = [[rows[0][0]]]
    for line in (*rows, *columns):
        clauses.append(list(line))
        clauses += [[-a, -b] for a, b in combinations(line, 2)]
    for u, v in combinations(places, 2):
        if not question.has_edge(u, v):
            clauses += [[-rows[u][p], -rows[v][p - 1]] for p in places]
            clauses += [[-rows[v][p], -rows[u][p - 1]] for p in places]
    for u, v in sorted(question.required):
        clauses += [[-rows[u][p], rows[v][p - 1], rows[v][(p + 1) % n]] for p in places]
    return clauses


def run_textbook(question: Question, _limit: float) -> Outcome:
    """Decide with the textbook clauses and CaDiCaL 1.9.5, which writes its proof.

    Raises WrongCycleError when the solver's cycle is none.
    """
    n = question.n
    start = processor_seconds()
    with Cadical195(bootstrap_with=textbook_clauses(question), with_proof=True) as solver:
        satisfied = solver.solve()
        seconds = processor_seconds() - start
        if not satisfied:
            return Outcome("impossible", seconds, kind="proof", proof_steps=len(solver.get_proof()))
        true = [literal - 1 for literal in solver.get_model() if 0 < literal <= n * n]
    order = [v for _, v in sorted((place % n, place // n) for place in true)]
    if len(true) != n:
        raise WrongCycleError(f"{len(true)} places taken for {n} vertices")
    check_cycle(question, order)
    return Outcome("exists", seconds, kind="cycle")
