"""Claims: the file a claim is written in, its rules, its instances and answers.

`claim` reads the file, with `toml`, `keys`, `instances` and `parts`; `language`
reads a rule, with `syntax`, `names` and `predicates`, and `closures` with
`shapes` turn it into functions. Nothing here knows what a graph is.
"""
