"""Proofs that clauses contradict each other: reading, trimming, writing LRAT.

A *proof* is a list of steps, each a clause that follows from earlier ones: when
all its literals are false, the clauses named by its *hints* become unit one
after the other and the last one has all its literals false (reverse unit
propagation: Goldberg and Novikov, DATE 2003, 886-891; LRAT: Cruz-Filipe, Heule,
Hunt, Kaufmann and Schneider-Kamp, CADE 26 (2017), 220-236; both from memory).
The last step is the empty clause.

A solver's proof is longer than it has to be. Trimming walks backward from the
empty clause and keeps what is used (as Heule, Hunt and Wetzler do for DRAT,
FMCAD 2013, 181-188, from memory), then replays the rest and leaves out hints
and literals that play no part. Steps and clauses share one numbering from 0:
first the clauses, then the steps.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from itertools import count, islice

from certify.search.encoding import Clause

Step = tuple[Clause, tuple[int, ...]]

_MOST_USERS = 4
"""Up to how many users a step may have to be joined with them."""


@dataclass(frozen=True)
class Proof:
    """Steps that lead from `clauses` clauses to the empty clause.

    clauses: how many clauses come before the steps in the numbering.
    steps: (literals, hints), the last one and no other without literals.
    """

    clauses: int
    steps: tuple[Step, ...]

    @property
    def used_clauses(self) -> frozenset[int]:
        """Return the numbers of the clauses that hints name."""
        return frozenset(h for _, hints in self.steps for h in hints if h < self.clauses)

    def renumber(
        self, clauses: int, places: Mapping[int, int], variables: Mapping[int, int]
    ) -> Proof:
        """Return the same proof from a list of other clauses.

        clauses: the number of clauses there. places: the new number of every
        used clause. variables: the new variable, where it changes.
        """

        def place(hint: int) -> int:
            return places[hint] if hint < self.clauses else hint - self.clauses + clauses

        def literal(old: int) -> int:
            new = variables.get(abs(old), abs(old))
            return new if old > 0 else -new

        steps = (
            (tuple(map(literal, literals)), tuple(map(place, hints)))
            for literals, hints in self.steps
        )
        return Proof(clauses, tuple(steps))


def trim_proof(text: bytes, clauses: Sequence[Clause]) -> Proof | None:
    """Read the solver's proof and keep what the empty clause needs.

    text: LRAT with the solver's own numbers; deletions are passed over. The
    solver numbers clauses as they come and, in between, the steps by which it
    simplifies them: the clauses have the numbers that no step has.
    clauses: the clauses given to the solver, in that order; none is empty.
    None says that the text is no such proof: cut short, hints that lead to no
    contradiction, or a RAT step, which facts about a question never need.
    Cost: linear in the text; hints of steps that are not used are not read.
    """
    used = _read_used(text, len(clauses))
    return None if used is None else tidy_steps(used, clauses)


def join_steps(proof: Proof, clauses: Sequence[Clause]) -> Proof:
    """Leave out steps whose hints can stand where the step itself is a hint.

    That holds when the literals of the step that uses it, made false, let the hints
    of both propagate to a contradiction. A step with more than `_MOST_USERS`
    users stays. Joining goes on until nothing changes.
    clauses: those the proof starts from.
    Cost: quadratic in the hints of a step, which is why large proofs are better
    left alone; the hints grow little, since joined steps share them.
    """
    while True:
        joined = _join_once(proof, clauses)
        if len(joined.steps) == len(proof.steps):
            return proof
        proof = joined


def tidy_steps(
    steps: Iterable[tuple[int, Step]], clauses: Sequence[Clause], goal: Clause = ()
) -> Proof | None:
    """Replay numbered steps up to one whose literals are all in the goal, and keep what it needs.

    steps: each with its number, by which the hints of later ones name it; literals and
    hints that play no part are left out. clauses: those the proof starts from.
    None: no step leads to the goal, or hints lead to no contradiction.
    """
    replayed = _replay(steps, clauses, frozenset(goal))
    return None if replayed is None else _keep_used(len(clauses), replayed)


def write_lrat(proof: Proof) -> bytes:
    """Write the proof as LRAT: `ID LITERALS 0 HINTS 0` a line, IDs from 1 over the clauses."""
    lines = [
        " ".join(map(str, (number, *literals, 0, *(h + 1 for h in hints), 0)))
        for number, (literals, hints) in enumerate(proof.steps, start=proof.clauses + 1)
    ]
    return ("\n".join(lines) + "\n").encode("ascii")


def write_drat(proof: Proof) -> bytes:
    """Write the proof as DRAT: `LITERALS 0` a line, nothing deleted."""
    lines = [" ".join(map(str, (*literals, 0))) for literals, _ in proof.steps]
    return ("\n".join(lines) + "\n").encode("ascii")


def _read_used(text: bytes, clauses: int) -> list[tuple[int, Step]] | None:
    """Return the used steps with their numbers, in the numbering of this module.

    None: no empty clause, or a hint that names nothing earlier (a RAT step's are negative).
    """
    numbers: list[int] = []
    lines: list[bytes] = []
    for line in text.splitlines():
        number, _, rest = line.partition(b" ")
        if not rest.startswith(b"d"):
            numbers.append(int(number))
            lines.append(rest)
            if rest.startswith(b"0 "):
                break
    else:
        return None
    place = {number: clauses + i for i, number in enumerate(numbers)}
    free = (number for number in count(1) if number not in place)
    place.update(zip(islice(free, clauses), range(clauses), strict=True))
    used = bytearray(clauses + len(lines))
    used[-1] = True
    kept: list[tuple[int, Step]] = []
    for i in range(len(used) - 1, clauses - 1, -1):
        if not used[i]:
            continue
        parts = list(map(int, lines[i - clauses].split()))
        end = parts.index(0)
        hints = tuple(place.get(hint, i) for hint in parts[end + 1 : -1])
        if any(hint >= i for hint in hints):
            return None
        for hint in hints:
            used[hint] = True
        kept.append((i, (tuple(parts[:end]), hints)))
    return kept[::-1]


def _replay(
    used: Iterable[tuple[int, Step]], clauses: Sequence[Clause], goal: frozenset[int]
) -> list[Step] | None:
    """Replay the steps; leave out what plays no part, and steps that say nothing new."""
    sets = [frozenset(clause) for clause in clauses]
    known = {literals: i for i, literals in reversed(list(enumerate(sets)))}
    place = {i: i for i in range(len(sets))}
    steps: list[Step] = []
    for number, (literals, hints) in used:
        step = _propagate(literals, [place[hint] for hint in hints], sets)
        if step is None:
            return None
        left = frozenset(step[0])
        if left <= goal:
            return [*steps, step]
        place[number] = known.setdefault(left, len(sets))
        if place[number] == len(sets):
            sets.append(left)
            steps.append(step)
    return None


def _propagate(
    literals: Clause, hints: Iterable[int], sets: Sequence[frozenset[int]]
) -> Step | None:
    """Make the literals false, then hints unit, until a hint has all its literals false.

    Hints that are not unit in their turn are tried again after the others.
    sets: the clauses by number. Returns the step without the hints and literals
    that play no part, hints in the order of propagation; None when no hint
    becomes false.
    Cost: linear in the size of the hinted clauses when they are unit in turn.
    """
    false = set(literals)
    trail: list[tuple[int, int]] = []
    waiting, last = list(hints), -1
    while last < 0:
        later = []
        for hint in waiting:
            rest = sets[hint] - false
            if not rest:
                last = hint
                break
            if len(rest) > 1:
                later.append(hint)
                continue
            (unit,) = rest
            if -unit not in false:
                false.add(-unit)
                trail.append((hint, unit))
        if last < 0 and len(later) == len(waiting):
            return None
        waiting = later
    kept = [last]
    needed = set(sets[last])
    for hint, unit in reversed(trail):
        if -unit in needed:
            kept.append(hint)
            needed |= sets[hint]
    return tuple(x for x in literals if x in needed), tuple(reversed(kept))


def _keep_used(clauses: int, steps: Sequence[Step]) -> Proof:
    """Keep the steps that the last one needs, numbered on without gaps."""
    used = bytearray(clauses + len(steps))
    used[-1] = True
    for i in range(len(steps) - 1, -1, -1):
        if used[clauses + i]:
            for hint in steps[i][1]:
                used[hint] = True
    place = list(range(clauses))
    kept: list[Step] = []
    for i, (literals, hints) in enumerate(steps):
        place.append(clauses + len(kept))
        if used[clauses + i]:
            kept.append((literals, tuple(place[hint] for hint in hints)))
    return Proof(clauses, tuple(kept))


def _join_once(proof: Proof, clauses: Sequence[Clause]) -> Proof:
    """Go through the steps once, joining each with its users where that works."""
    first = proof.clauses
    steps = list(proof.steps)
    sets = [frozenset(literals) for literals in (*clauses, *(step[0] for step in steps))]
    users: list[set[int]] = [set() for _ in sets]
    for i, (_, hints) in enumerate(steps):
        for hint in hints:
            users[hint].add(i)
    for i in range(len(steps) - 1):
        if len(users[first + i]) > _MOST_USERS:
            continue
        changes: dict[int, Step] = {i: ((), ())}
        for user in sorted(users[first + i]):
            literals, hints = steps[user]
            mixed = (h for hint in hints for h in (steps[i][1] if hint == first + i else (hint,)))
            found = _propagate(literals, dict.fromkeys(mixed), sets)
            if found is None:
                break
            changes[user] = found
        else:
            for j, (literals, hints) in changes.items():
                for hint in steps[j][1]:
                    users[hint].discard(j)
                for hint in hints:
                    users[hint].add(j)
                steps[j] = literals, hints
                sets[first + j] = frozenset(literals)
    left = [(first + i, step) for i, step in enumerate(steps) if step[1]]
    joined = tidy_steps(left, clauses)
    return proof if joined is None else joined
