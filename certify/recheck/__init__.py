"""Somebody else's table against a rule: row by row it agrees, disagrees, or is open.

table.py     reads the CSV file
rows.py      says in the language of claims which rows there are
parts.py     makes claims of which the instances are exactly the rows
compare.py   searches, and compares
report.py    the differences, for readers
"""
