"""The parts of an appendix for what is endless: theorem, proposition, proof and construction.

The proof is the argument of endless.py, in formulas. For the small n an
endless claim has items like any other claim (items.py), which appendix.py tells.
"""

from __future__ import annotations

from collections.abc import Sequence

from certify.claim.language import Expression
from certify.claim.periodic import PeriodicSet
from certify.evidence.endless import Recipe
from certify.report.answers import Shown
from certify.report.blocks import Block, Paragraph, Rows, mark
from certify.report.document import Heading, Part, Proof, Statement
from certify.report.endless import MOST_SHOWN, Argument
from certify.report.formula import name_symbol
from certify.report.inline import formula, refer
from certify.report.items import Family
from certify.report.maths import set_answers, set_maths
from certify.report.runs import AnyKey, Run, find_runs, set_values
from certify.report.statement import ClaimWords, state_claim
from certify.report.words import HOW_TO_CHECK, count_of, join, plural

_MOST_ROWS = 12
"""A theorem says no more answers than these."""
_SHORT_ANSWER = 40


class FamilyWords:
    """The wording for the rows of one endless claim. file: of the evidence, with its digest."""

    def __init__(
        self, words: ClaimWords, families: Sequence[Family], file: str, digest: str
    ) -> None:
        self.words, self.families, self.file, self.digest = words, families, file, digest
        self.names = {
            family.line: f"family:{number}" for number, family in enumerate(self._settled, 1)
        }

    @property
    def _settled(self) -> list[Family]:
        return [family for family in self.families if not family.is_open]

    def state(self) -> str:
        """Return the theorem, "" if nothing is settled: what is claimed, or what was found."""
        words, settled = self.words, self._settled
        truth = words.claim.answers.truth
        answers = [Argument(f.strip, f.body).answers for f in settled]
        yes = [f.key for f, found in zip(settled, answers, strict=True) if found.parts()]
        no = [f.key for f, found in zip(settled, answers, strict=True) if not _is_all(found)]
        found = {"exists": _runs(yes), "impossible": _runs(no), "open": self.open_runs()}
        if isinstance(truth, Expression) or not yes or not no:
            return state_claim(words, words.range(), found, {})
        where = f"Let {words.range()}"
        if found["open"]:
            where += f", but leave out {join([words.run(run) for run in found['open']])}"
        start = f"{where}. Then {words.any_graph} has a {words.structure}"
        if len(settled) > _MOST_ROWS:
            return f"{start} exactly where the propositions below say so."
        if len(settled) == 1:
            return f"{start} if and only if {self._set(settled[0], answers[0])}."
        parts = [
            f"for {self._row(f)} {self._say(f, found)}"
            for f, found in zip(settled, answers, strict=True)
        ]
        return f"{start} in exactly these cases: {'; '.join(parts)}."

    def outline(self) -> list[Block]:
        """Return the proof of the theorem from the table and the propositions."""
        settled, rows = self._settled, []
        for family in settled:
            low, first = family.strip.low, family.strip.first
            name = name_symbol(family.strip.growing)
            answers = Argument(family.strip, family.body).answers
            where = f"{self._row(family)}: " if self._row(family) else ""
            said = f"Proposition\xa0{refer(self.names[family.line])} settles "
            said += formula(rf"{name} \ge {first}")
            if family.small:
                said += f", and the table {formula(set_values(low, first - 1, name))}"
            rows.append((where, said, self._together(family, answers)))
        if len(rows) == 1:
            _, said, together = rows[0]
            return [Paragraph(f"{said}. {self._say_small()}{together}")]
        listed = tuple(
            (where.removesuffix(": "), f"{said}. {together}") for where, said, together in rows
        )
        return [Paragraph(f"{self._say_small()}One by one:"), Rows(listed)]

    def _say_small(self) -> str:
        answers = {i.record["answer"] for f in self._settled for i in f.small}
        thing, said = self.words.structure, []
        if "exists" in answers:
            said.append(f"Where the table says that a {thing} exists, one is listed below. ")
        if "impossible" in answers:
            where = "it" if said else "the table"
            said.append(f"Where {where} says none, the proposition named there proves it. ")
        return "".join(said)

    def _together(self, family: Family, answers: PeriodicSet) -> str:
        graph, thing = self.words.any_graph, self.words.structure
        if not answers.parts():
            return f"So {graph} never has a {thing}."
        if _is_all(answers):
            return f"So {graph} always has a {thing}."
        low = formula(rf"{name_symbol(family.strip.growing)} \ge {family.strip.low}")
        told = self._set(family, answers)
        return f"So for {low} the graph {graph} has a {thing} if and only if {told}."

    def open_runs(self) -> list[Run]:
        """Return the rows that are open."""
        return _runs([family.key for family in self.families if family.is_open])

    def _row(self, family: Family) -> str:
        """Return "m = 3", or "" for the only row."""
        strip = family.strip
        values = zip(strip.claim.parameters, strip.row, strict=True)
        return (
            formula(r",\ ".join(f"{name_symbol(k)} = {v}" for k, v in values if k != strip.growing))
            if len(strip.claim.parameters) > 1
            else ""
        )

    def _set(self, family: Family, answers: PeriodicSet) -> str:
        return set_answers(answers, family.strip.growing)

    def _say(self, family: Family, answers: PeriodicSet) -> str:
        if not answers.parts():
            return "never"
        return "always" if _is_all(answers) else f"if {self._set(family, answers)}"

    def _beyond(self, family: Family) -> PeriodicSet:
        """Return the answers from the first n of the strip on."""
        answers, first = Argument(family.strip, family.body).answers, family.strip.first
        return PeriodicSet.sample(first, answers.start, answers.period, answers.__contains__)

    def show(self, family: Family) -> Shown:
        """Return the last line of a row in the table."""
        if family.is_open:
            return Shown(family.key, family.record, "")
        beyond = self._beyond(family)
        if not beyond.parts() or _is_all(beyond):
            said = "exists" if beyond.parts() else "none"
        else:
            said = f"if {self._set(family, beyond)}"
            said = said if len(said) <= _SHORT_ANSWER else "both occur"
        record = {**family.record, "length": self._states(family)}
        return Shown(family.key, record, self.names[family.line], said)

    @staticmethod
    def _states(family: Family) -> int:
        return sum(sum(part["states"]) for part in family.body["classes"])

    def prove(self) -> list[Part]:
        """Return the propositions about all large n, with their proofs."""
        if not self._settled:
            return []
        parts: list[Part] = [Heading("The large graphs: why the answers repeat", 2)]
        for family in self._settled:
            parts.append(self._propose(family))
            parts.append(Proof(tuple(self._argue(family))))
        return parts

    def _propose(self, family: Family) -> Statement:
        graph, thing = self.words.any_graph, self.words.structure
        where = self.words.instance(family.key)
        beyond = self._beyond(family)
        if not beyond.parts() or _is_all(beyond):
            text = f"For {where} the graph {graph} has {'a' if beyond.parts() else 'no'} {thing}."
        else:
            told = self._set(family, beyond)
            text = f"Let {where}. Then {graph} has a {thing} if and only if {told}."
        states = self._states(family)
        note = f"by a computation{f' with {states} states' if states else ''}"
        return Statement("Proposition", self.names[family.line], text, note)

    def _argue(self, family: Family) -> list[Block]:
        """Return the proof; what the states are is told in the first one alone."""
        argument = Argument(family.strip, family.body, set_maths)
        first = self._settled[0]
        place = f"line {family.line} of {mark(f'`{self.file}`')}, under {mark('`classes`')}"
        numbers = f"The numbers of states and the answers found from them are in {place}."
        if family is not first:
            name = family.strip.growing
            return [
                *argument.say_strip(),
                Paragraph(
                    f"Let {set_maths(f'T({name})')} be as in the proof of Proposition\xa0"
                    f"{refer(self.names[first.line])} the set of the states that can be reached, "
                    f"here when {3 * family.strip.zone} layers are left. These sets repeat for "
                    "the same reason:"
                ),
                *argument.say_periods(),
                Paragraph(f"This computation, too, is for a machine. {numbers}"),
            ]
        return [
            *argument.say_strip(),
            *argument.say_states(),
            *argument.say_periods(),
            Paragraph(
                f"This computation is for a machine. {numbers} Whoever checks makes the sets "
                "again, finds where they repeat, and compares. The checker also derives from the "
                "rule what the first paragraph tells of it, as section 8 of its "
                f"{mark('`FORMAT.md`')} says. To repeat all this: {HOW_TO_CHECK}. The SHA-256 "
                "digest of the file is"
            ),
            Rows((("", mark(f"`{self.digest}`")),)),
        ]

    def construct(self) -> list[Part]:
        """Return how the object is written down for large n, where that is stored."""
        families = [family for family in self._settled if family.body["recipes"]]
        if not families:
            return []
        thing = self.words.structure
        parts: list[Part] = [Heading(f"{thing}s in the large graphs", 2)]
        for place, family in enumerate(families):
            argument = Argument(family.strip, family.body, set_maths)
            row = f"Let {self._row(family)}. " if self._row(family) else ""
            if place == 0 or row:
                parts.append(Paragraph(row + (argument.say_growth() if place == 0 else "")))
            parts += self._write_recipes(family, argument)
        names = [refer(self.names[family.line]) for family in families]
        parts.append(
            Paragraph(
                f"The checker does this for {formula('k = 1')} and {formula('k = 2')} and sees "
                f"that a {thing} comes out. {plural('Proposition', len(names))}\xa0{join(names)} "
                f"{'does' if len(names) == 1 else 'do'} not rest on it."
            )
        )
        return parts

    def _write_recipes(self, family: Family, argument: Argument) -> list[Part]:
        parts: list[Part] = []
        room, left = MOST_SHOWN, 0
        for body in family.body["recipes"]:
            room -= len(body["order"])
            if room < 0:
                left += 1
                continue
            recipe = Recipe(body["n"], body["cut"], body["step"], tuple(body["order"]))
            parts += argument.say_construction(recipe)
        if left:
            where = f"line {family.line} of {mark(f'`{self.file}`')}, under {mark('`recipes`')}"
            parts.append(Paragraph(f"{count_of(left, 'more recipe')} of this kind: {where}."))
        return parts


def _is_all(answers: PeriodicSet) -> bool:
    return not answers.complement().parts()


def _runs(keys: Sequence[AnyKey]) -> list[Run]:
    return find_runs(keys, lambda _: 0) if keys else []
