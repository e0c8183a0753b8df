"""What an author deposits: one archive with the evidence and all that is needed to check it.

    README.md          what this is, and the one command to run
    FORMAT.md          what the files mean, exactly
    checker.pyz        the checker; it needs Python alone
    NAME/              for each folder of evidence its files, and no others
    appendix/NAME.*    the claim and its proofs, for a paper
    page/NAME.html     the same as a page that checks itself

The same folders give the same bytes, with one version of Python's zlib: times, order,
permissions and level are fixed.
"""

from __future__ import annotations

import io
import zipfile
from collections.abc import Mapping, Sequence
from pathlib import Path

import certify.checker
from certify.checker import FolderCheck
from certify.claim.claim import read_claim
from certify.evidence.disk import write_given
from certify.evidence.lines import claim_name
from certify.report.accepted import need_accepted
from certify.report.appendix import render_appendix
from certify.report.page.contents import digest_of, read_files
from certify.report.page.page import build_page, need_names, render_list
from certify.report.words import plural

_TIME = (1980, 1, 1, 0, 0, 0)
_LEVEL = 9
_READABLE = 0o100644
_UNIX = 3
_ENDINGS = {"latex": "tex", "markdown": "md"}
_TAKEN = ("appendix", "page", "index", "checker.pyz", "format.md", "readme.md")
_MAIN = b"import checker.__main__\n\nchecker.__main__.run()\n"


def write_pack(folders: Sequence[Path], archive: Path) -> list[str]:
    """Write the archive of some folders, and return the names of the files in it.

    Errors: InputError when there is no evidence, two folders have one name, or the
    archive cannot be written; ContradictionError when a folder is rejected; OpenError when
    something in it is left open. Nothing is written then.
    Cost: that of checking each folder, and of its appendix and page.
    """
    need_names(folders, taken=_TAKEN)
    files = build_files({folder: need_accepted(folder, may_be_open=False) for folder in folders})
    write_given(archive, zip_files(files))
    return list(files)


def build_files(folders: Mapping[Path, FolderCheck]) -> dict[str, bytes]:
    """Return the files of the archive by name. folders: with the checks that accepted them."""
    files = {
        "FORMAT.md": (_checker_folder() / "FORMAT.md").read_bytes(),
        "checker.pyz": build_checker(),
    }
    for folder in folders:
        name = folder.resolve().name
        files |= {f"{name}/{part}": data for part, data in read_files(folder).items()}
        files |= _build_appendix(folder, name)
    several = len(folders) > 1
    pages = [build_page(folder, check, back=several) for folder, check in folders.items()]
    if several:
        files["page/index.html"] = render_list(pages).encode()
    files |= {f"page/{page.name}.html": page.text.encode() for page in pages}
    files["README.md"] = _tell(list(folders), files).encode()
    return dict(sorted(files.items()))


def build_checker() -> bytes:
    """Return `checker.pyz`: the checker alone, as the standard zipapp module lays it out.

    The standard module would write the times of the files and drop the exit code.
    """
    modules = {f"checker/{path.name}": path.read_bytes() for path in _checker_folder().glob("*.py")}
    return zip_files({"__main__.py": _MAIN, **modules})


def zip_files(files: Mapping[str, bytes]) -> bytes:
    """Return an archive of files by name, sorted; the same bytes each time. Cost: linear."""
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED, compresslevel=_LEVEL) as archive:
        for name, data in sorted(files.items()):
            entry = zipfile.ZipInfo(name, _TIME)
            entry.create_system = _UNIX
            entry.external_attr = _READABLE << 16
            entry.compress_type = zipfile.ZIP_DEFLATED
            archive.writestr(entry, data, compresslevel=_LEVEL)
    return buffer.getvalue()


def _checker_folder() -> Path:
    return Path(certify.checker.__file__).parent


def _build_appendix(folder: Path, name: str) -> dict[str, bytes]:
    """Return the appendix in all forms."""
    return {
        f"appendix/{name}.{ending}": render_appendix(folder, form).text.encode()
        for form, ending in _ENDINGS.items()
    }


def _tell(folders: Sequence[Path], files: Mapping[str, bytes]) -> str:
    """Return the README, for referees."""
    claims = []
    for folder in folders:
        name = folder.resolve().name
        title = read_claim(folder / claim_name(folder)).title
        title = " ".join(title.split()).replace("`", "'")
        shown = [f"page/{name}.html", f"appendix/{name}.tex", f"appendix/{name}.md"]
        places = ", ".join(f"`{place}`" for place in shown if place in files)
        claims.append(f"* `{name}/`{f': {title}' if title else ''} (to read: {places})")
    digests = "\n".join(f"{digest_of(data)}  {name}" for name, data in sorted(files.items()))
    noun = plural("claim", len(folders))
    return f"""\
# Evidence for {len(folders)} {noun}, and how to check it

With Python 3.11 or later, and nothing else installed, run here:

    python -I checker.pyz .

It reads the files below alone, rebuilds every graph from its claim, and prints one line a
folder. Exit code 0: every claim is accepted; 3: something is rejected, and the line
says where and why; 4: something is left open.

{chr(10).join(claims)}

A folder holds the claim, a TOML file short enough to read (which graphs, which instances,
which answers), `evidence.jsonl` (a line an instance; of a list of
graphs compressed, as `evidence.jsonl.gz`), `clauses/` where a proof is
bulky, and `manifest.json` (the SHA-256 of each). `FORMAT.md` says exactly what they mean
and when they may be accepted, so that anyone can write another checker; the
pages hold a second one, in JavaScript, and need no server and no net.

What is checked is that the answers in the claim are right for the graphs that its rule
gives, in the instances that it lists. Whether the rule says what the paper means is
for its readers to judge, and nothing is said about other instances.

SHA-256 of the files:

```
{digests}
```
"""
