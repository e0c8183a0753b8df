"""The benchmark: speed as ratios of methods measured side by side in one run.

Method `a` is this tool (search and check), `b` a general constraint solver
with its circuit constraint, `c` the textbook vertex-by-position clauses with a
SAT solver that writes a proof. Seconds differ from machine to machine; the
ratios, and which instances a method cannot decide, are what is read. Every time is
processor time, so that a busy machine does not blur them.
"""
