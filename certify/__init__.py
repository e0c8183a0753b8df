"""Checkable evidence that a Hamiltonian path or cycle exists, or does not.

    import certify
    decision = certify.decide(graph, "hamiltonian-cycle")     # a networkx graph
    decision.answer, decision.kind, decision.reason

The words, one for each idea:

    claim       a file that says for which instances the object exists
    instance    one row of the claim's table; it has one graph
    question    the graph in normal form: a Hamiltonian cycle through required edges
    finder      looks for one kind of evidence
    evidence    a witness, or a reason why there is none
    checker     accepts or rejects evidence, and believes nothing but files
    answer      exists, impossible, or open
    verdict     accepted, or rejected

Flow: claim/ -> graph/ -> evidence/ -> search/ -> checker/ -> report/. Importing
this package imports none of them, so that the checker runs alone.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from certify.interface import Decision, check, decide, explain, prove

__all__ = ["Decision", "check", "decide", "explain", "prove"]


def __getattr__(name: str) -> object:
    """Import the interface when it is first used."""
    if name not in __all__:
        raise AttributeError(f"module 'certify' has no attribute {name!r}")
    return getattr(import_module("certify.interface"), name)
