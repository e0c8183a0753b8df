"""What comes out for one instance, and where the instance comes from."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from certify.checker import Verdict
from certify.claim.claim import Claim
from certify.claim.instances import Key, name_key
from certify.claim.parts import GraphList
from certify.evidence.endless import write_endless_record
from certify.evidence.record import Record, write_record
from certify.graph.build import build_graph, build_labels, build_question
from certify.graph.files import format_of, read_source
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.report.lasting import Settled


@dataclass(frozen=True)
class Origin:
    """An instance before its graph is built.

    key: of an endless claim it holds the text of the endless range, and no arithmetic is
    done with it. source: for a graph of a list, a file of the list's format that holds it
    alone; None for a rule. shown: the list's file, as messages name it.
    """

    claim: Claim
    key: Key
    source: bytes | None = None
    shown: str = ""

    @property
    def name(self) -> str:
        """Return the key as one word."""
        return name_key(self.key)

    def build_graph(self) -> Graph:
        """Build the graph; it is empty for a row of an endless claim. Errors: InputError."""
        graphs = self.claim.graphs
        if isinstance(graphs, GraphList):
            position = self.key if isinstance(self.key, int) else 1
            return read_source(self.source or b"", form_of(graphs), self.shown, position)
        if self.claim.growing is not None or isinstance(self.key, int):
            return Graph((), ())
        return build_graph(self.claim, self.key)

    def build_labels(self) -> Graph:
        """Build the graph of a rule without its edges, for the names of its vertices."""
        if self.claim.growing is not None or isinstance(self.key, int):
            return Graph((), ())
        return Graph(build_labels(self.claim, self.key), ())

    def write_open(self) -> Record:
        """Return the record that says that nothing is known of the instance.

        Errors: InputError when the instance has no graph.
        """
        if self.claim.growing is not None and not isinstance(self.key, int):
            return write_endless_record({**self.key}, None)
        return write_record(self.key, self.build_graph(), None)


@dataclass(frozen=True)
class Outcome:
    """What came out for one instance. Its graph is built anew each time it is asked for.

    record: what is stored. verdict: what the checker said of these bytes.
    stored: it was there already and only checked again.
    error: what went wrong in this instance, which is open therefore; None if nothing did.
    """

    record: Record
    verdict: Verdict
    origin: Origin
    stored: bool = False
    error: str | None = None

    @property
    def name(self) -> str:
        """Return the instance as messages write it."""
        return name_key(self.record.key)

    @property
    def graph(self) -> Graph:
        """Return the graph of the instance. Cost: that of building it."""
        return self.origin.build_graph()

    @property
    def question(self) -> Question:
        """Return the question asked of the graph. Cost: that of building both."""
        return build_question(self.origin.claim, self.origin.key, self.graph)

    @property
    def settled(self) -> Settled:
        """Return what `find_lasting` asks for, the names of the vertices among it."""
        return Settled(self.record.content, self.origin.build_labels())

    @property
    def contradicts(self) -> bool:
        """Return whether the evidence shows the opposite of what is claimed."""
        return self.verdict.holds and not self.verdict.accepted


def form_of(graphs: GraphList) -> str:
    """Return the format of a claim's list. Errors: GraphFileError for an unknown ending."""
    return graphs.format or format_of(Path(graphs.name))
