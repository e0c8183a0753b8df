"""Corrupted twins: what a hostile or careless hand can do to evidence.

`corrupt_json` changes one place of a JSON value, `corrupt_bytes` a file. Both are
drawn by hypothesis, so a twin that slips through is shrunk to the smallest one.
"""

from __future__ import annotations

import copy
from typing import Any

from hypothesis import strategies as st

Path = tuple[int | str, ...]


def places(value: Any, path: Path = ()) -> list[Path]:
    """Return the path of every part of a JSON value, the whole first."""
    found = [path]
    items: Any = ()
    if isinstance(value, dict):
        items = sorted(value.items())
    elif isinstance(value, list):
        items = enumerate(value)
    for key, part in items:
        found += places(part, (*path, key))
    return found


@st.composite
def corrupt_json(draw: st.DrawFn, value: Any) -> Any:
    """Draw a copy of a JSON value with one part changed, dropped, doubled or moved."""
    twin = copy.deepcopy(value)
    path = draw(st.sampled_from(places(twin)[1:] or [()]))
    if not path:
        return draw(_atoms)
    parent = twin
    for key in path[:-1]:
        parent = parent[key]
    key = path[-1]
    old = parent[key]
    actions = ["replace", "drop", "retype"]
    if isinstance(old, int) and not isinstance(old, bool):
        actions += ["nudge", "nudge", "negate"]
    if isinstance(parent, list):
        actions += ["double", "swap"]
    if isinstance(old, list) and old:
        actions += ["reverse", "empty"]
    match draw(st.sampled_from(actions)):
        case "replace":
            parent[key] = draw(_atoms)
        case "drop":
            del parent[key]
        case "retype":
            parent[key] = draw(st.sampled_from([str(old), [old], {"x": old}, None, True, 1.0]))
        case "nudge":
            parent[key] = old + draw(st.sampled_from([-2, -1, 1, 2]))
        case "negate":
            parent[key] = -old
        case "double":
            parent.insert(key, copy.deepcopy(old))
        case "swap":
            other = draw(st.integers(0, len(parent) - 1))
            parent[key], parent[other] = parent[other], parent[key]
        case "reverse":
            parent[key] = old[::-1]
        case "empty":
            parent[key] = []
    return twin


_atoms = st.one_of(
    st.integers(-3, 12),
    st.sampled_from([None, True, False, 0.0, 1.5, 10**30, -(10**30), "", "x", [], {}]),
)


@st.composite
def corrupt_bytes(draw: st.DrawFn, data: bytes) -> bytes:
    """Draw a copy of a file with a byte flipped, a piece dropped, doubled or moved, or a line."""
    if not data:
        return b"x"
    at = draw(st.integers(0, len(data) - 1))
    size = draw(st.integers(1, max(1, min(40, len(data) - at))))
    match draw(st.sampled_from(["flip", "drop", "double", "cut", "lines", "insert"])):
        case "flip":
            return data[:at] + bytes([data[at] ^ (1 << draw(st.integers(0, 7)))]) + data[at + 1 :]
        case "drop":
            return data[:at] + data[at + size :]
        case "double":
            return data[: at + size] + data[at:]
        case "cut":
            return data[:at]
        case "insert":
            return data[:at] + draw(st.binary(min_size=1, max_size=8)) + data[at:]
        case _:
            lines = data.splitlines(keepends=True)
            order = draw(st.permutations(range(len(lines)))) if len(lines) < 50 else [0]
            return b"".join(lines[i] for i in order)
