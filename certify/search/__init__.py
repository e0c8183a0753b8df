"""The search: independent finders under a budget, and the ladder that calls them.

A finder takes a question and a budget and returns evidence, a Hamiltonian cycle,
or None. None never means that there is no cycle.
"""
