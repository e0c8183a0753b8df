"""Join the files of the second checker into one script.

The files in `checker/` are modules for Node. A Worker of a page that is opened from a
file can only run one plain script, so the modules are put one after another: each
becomes a function that is called once, its `export` line becomes what the function
returns, and its `import` lines go, because what they name is there already.
"""

from __future__ import annotations

import re
from pathlib import Path

__all__ = ["build_checker_script"]

FOLDER = Path(__file__).parent / "checker"
FRONT_DOOR = "folder.js"
IMPORT = re.compile(r'^import \{ ([\w, ]+) \} from "\./([a-z0-9]+\.js)";$')
EXPORT = re.compile(r"^export \{ ([\w, ]+) \};$")


def build_checker_script() -> str:
    """Return the script; at its top level it has what `folder.js` exports, and more.

    The same text every time: a file stands behind those it imports, in the order of
    its import lines. ValueError: a file is not in the fixed form, two files export
    one name, or files import each other.
    """
    parts: dict[str, str] = {}
    owners: dict[str, str] = {}
    _join(FRONT_DOOR, (), parts, owners)
    return '"use strict";\n' + "".join(parts.values())


def _join(name: str, users: tuple[str, ...], parts: dict[str, str], owners: dict[str, str]) -> None:
    """Add a file to `parts` after all that it imports; `owners` tells who exports a name."""
    if name in users:
        raise ValueError(f"{name} imports itself by way of {users}")
    if name in parts:
        return
    *lines, last = (FOLDER / name).read_text(encoding="utf-8").rstrip("\n").split("\n")
    body = []
    for number, line in enumerate(lines, 1):
        match = IMPORT.match(line)
        if match is None:
            if line.startswith(("import", "export")):
                raise ValueError(f"{name}:{number}: not the fixed form of an import or export")
            body.append(line)
            continue
        _join(match[2], (*users, name), parts, owners)
        for word in match[1].split(", "):
            if owners.get(word) != match[2]:
                raise ValueError(f"{name}:{number}: {match[2]} does not export {word}")
    exported = EXPORT.match(last)
    if exported is None:
        raise ValueError(f"{name}: the last line is no export")
    for word in exported[1].split(", "):
        if owners.setdefault(word, name) != name:
            raise ValueError(f"{name} and {owners[word]} both export {word}")
    text = "\n".join(body).strip("\n")
    parts[name] = (
        f"// ---- {name}\n"
        f"const {{ {exported[1]} }} = (() => {{\n{text}\nreturn {{ {exported[1]} }};\n}})();\n"
    )
