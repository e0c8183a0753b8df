"""The demo claims, and small folders of our own, whose pages are tested."""

from __future__ import annotations

import re
from pathlib import Path

from tests.checker.folders import Files, evidence_in, read_files, with_evidence

DEMOS = sorted(Path(__file__).parents[2].glob("proofs/*/manifest.json"))
NAMES = [path.parent.name for path in DEMOS]
EVIL = """</title></script><script>window.ran=1</script><img src=x onerror=window.ran=1>\
<!--"'&amp;${title}$title"""
CLAIM = """\
title = '''%s'''
statement = '''%s'''
structure = "hamiltonian-cycle"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {2, 3}"
[instances]
n = "5..9"
[answers]
exists = "n <= 5"
"""


def lines_of(folder: Path) -> list[bytes]:
    return evidence_in(read_files(folder)).splitlines()


def corrupt(files: Files) -> Files:
    """Return the files with a witness in which two vertices have changed places."""
    lines = evidence_in(files)
    found = re.search(rb'"order":\[(\d+),(\d+)', lines)
    assert found is not None
    swapped = b'"order":[%s,%s' % (found[2], found[1])
    return with_evidence(files, lines.replace(found[0], swapped, 1))
