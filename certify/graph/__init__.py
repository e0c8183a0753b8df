"""Graphs and questions: from a claim's instance to the question in normal form.

`build` makes the graph of an instance from a rule, or takes it from a list that
`files` reads (with a module for each family of formats), and turns graph and
claim into a `question`. Only this folder knows what a structure asks of a graph.
"""
