"""Answers without a claim: for each graph of a list, or for one graph."""

from __future__ import annotations

import contextlib
from collections.abc import Iterator
from pathlib import Path
from typing import BinaryIO

from certify.claim.claim import Claim, build_claim
from certify.claim.toml import parse_document
from certify.engine.executors import Here
from certify.engine.open import open_workers
from certify.errors import InputError
from certify.evidence.source import ListSource
from certify.flow.outcome import Origin, Outcome
from certify.flow.proof import read_origins
from certify.flow.settle import PRELOAD, settle_all
from certify.flow.split import PARTS
from certify.flow.work import ClaimFile, make_job
from certify.graph.files import format_of, open_list
from certify.search.ladder import DEFAULTS, Limits


def decide_file(
    graphs: Path | str | BinaryIO,
    structure: str,
    *,
    form: str | None = None,
    limits: Limits = DEFAULTS,
    jobs: int = 1,
    cluster: str | None = None,
) -> Iterator[Outcome]:
    """Answer the question for each graph of a file, without a claim.

    graphs: a file, or one open for reading. form: its format; the ending of its name
    decides if None. limits, jobs, cluster: as of `prove`.
    Yields the outcomes in the order of the file; the evidence is checked as that of a
    survey over this list.
    Errors: InputError; GraphFileError, saying where.
    """
    shown = "standard input"
    with contextlib.ExitStack() as stack:
        if isinstance(graphs, Path | str):
            shown = str(graphs)
            form = form or format_of(Path(graphs))
            graphs = stack.enter_context(open_list(Path(graphs), form))
        elif form is None:
            raise InputError(f"{shown}: its format is not known; give it, as --format graph6")
        workers = stack.enter_context(open_workers(jobs, cluster, PRELOAD))
        claim = _survey(structure, form)
        file = ClaimFile.of(claim)
        source = ListSource(graphs, shown)
        origins = read_origins(claim, lambda: source)
        parts = PARTS if workers.batches else 0
        asked = ((origin, make_job(file, origin, limits, parts=parts)) for origin in origins)
        yield from settle_all(workers, asked)


def decide_graph(source: bytes, structure: str, form: str, *, limits: Limits = DEFAULTS) -> Outcome:
    """Answer the question for one graph, given as a text in a format of lists.

    Errors: InputError; RuntimeError for a fault of the program.
    """
    claim = _survey(structure, form)
    origin = Origin(claim, 1, source, "the graph")
    job = make_job(ClaimFile.of(claim), origin, limits)
    (outcome,) = settle_all(Here(), [(origin, job)])
    if outcome.error is not None:
        raise RuntimeError(outcome.error)
    return outcome


def _survey(structure: str, form: str) -> Claim:
    """Return the claim that says nothing of a list, and so asks about every graph."""
    text = f'structure = "{structure}"\n[graph]\nlist = "graphs"\nformat = "{form}"\n'
    return build_claim(parse_document(text.encode(), "the question"), "question.toml")
