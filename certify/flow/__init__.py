"""The one flow: claim -> graphs -> search -> evidence -> checker.

Nothing leaves this package as an answer unless the checker, through its front door
and on the very bytes that are to be stored, has said that the evidence holds.

    outcome     an instance before and after it is settled
    work        what a worker does for one instance
    split       hard instances in parts
    settle      instances through the engine, in order
    proof       a claim, into its evidence folder
    decide      answers without a claim
    stored      what a folder holds
"""

from certify.flow.decide import decide_file, decide_graph
from certify.flow.outcome import Outcome
from certify.flow.proof import Run, prove
from certify.flow.stored import find_outcome, read_stored_claim

__all__ = [
    "Outcome",
    "Run",
    "decide_file",
    "decide_graph",
    "find_outcome",
    "prove",
    "read_stored_claim",
]
