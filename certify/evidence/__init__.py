"""Evidence: its kinds as values, records as bytes, and the folder on disk.

Finders make the values, so this folder comes before `search` in the flow of
imports although the store is used after it.
"""
