"""The guard: everything below a folder is checked again, and nothing is passed over.

What people put into CI and trust, so it leans on little: the checker through its
front door, the reader of claims, and files. Words used here:

    claim file        a TOML file that says what is claimed (module `find`)
    evidence folder   a folder with a manifest, or with a file of evidence
    case              one instance of a claim with its verdict
    trouble           what is wrong with a claim or a folder as a whole
    allowance         what a file `guard.toml` permits: instances left open, further files

Flow: find -> (allowances, files) -> check -> report; `cache` remembers what was accepted,
`junit` and `annotations` say it to a CI, `pytest_plugin` to pytest.
"""
