"""A claim as one HTML file that shows the evidence, and checks it where it is read.

The page holds everything: the files of the folder, the second checker, texts and
figures. It asks nothing of the net, and its security policy forbids it to. Everything that
comes from the files is escaped (html.py), so that a page does what this folder says alone.
"""

from __future__ import annotations

import base64
import hashlib
import tomllib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from html import escape
from pathlib import Path
from string import Template
from typing import Any
from urllib.parse import quote

from certify.checker import FolderCheck
from certify.errors import InputError
from certify.report.accepted import need_accepted
from certify.report.appendix import write_text
from certify.report.page.bundle import build_checker_script
from certify.report.page.contents import MOST_TOLD, Contents, Row, digest_of, read_contents
from certify.report.page.html import set_data
from certify.report.words import count_of

_HERE = Path(__file__).parent
_INDEX = "index.html"
_UNUSUAL = frozenset('\\/:*?"<>|')
_LABELS = {
    "structure": "What is asked for",
    "ends": "Ends",
    "required": "Required edges",
    "forbidden": "Forbidden edges",
    "graph.vertices": "Vertices",
    "graph.where": "Only vertices with",
    "graph.adjacent": "a and b are joined when",
    "graph.list": "Graphs of the file",
    "graph.format": "Format of the file",
    "instances.where": "Only instances with",
    "answers.exists": "It exists",
    "answers.impossible": "It is impossible",
}
_KINDS = {
    "witness": "the object itself, its vertices in order",
    "obstruction": "a property of the graph that rules the object out at once",
    "counting": "weights whose sum is larger than the edges allow",
    "cases": "a proof by cases, each closed by forced moves or by one of the above",
    "sweep": "a computation, repeated by the checker, in which no state is left",
    "clauses": "facts about edges, and a machine proof that they contradict each other",
    "endless": "a computation that repeats itself, and so settles all n",
    "none": "nothing was found within the limits of the search",
}


@dataclass(frozen=True)
class Page:
    """A finished page. name: of its file, without the ending. left_open: open instances."""

    name: str
    title: str
    summary: str
    text: str
    left_open: int


def render_page(folder: Path, *, back: bool = False) -> Page:
    """Return the page of a folder.

    back: whether the page links to the list of the site it belongs to.
    Errors: InputError when there is no evidence; ContradictionError when the checker does
    not accept it. Open instances are told, and do not prevent the page.
    Cost: that of the check and of the explanations.
    """
    return build_page(folder, need_accepted(folder, may_be_open=True), back=back)


def build_page(folder: Path, check: FolderCheck, *, back: bool) -> Page:
    """Return the page of a folder. check: the one that accepted it."""
    contents = read_contents(folder)
    title = contents.claim.title or "A claim and its evidence"
    text = compose_page(contents, contents.files, _tell_check(check), back=back)
    return Page(folder.resolve().name, title, _count(check), text, check.left_open)


def write_site(folders: Sequence[Path], site: Path) -> tuple[list[Path], int]:
    """Write the pages of some folders, and return the files and the number of open instances.

    One folder becomes `index.html`; of several each becomes a page with the folder's
    name, and `index.html` their list.
    Errors: as of `render_page`; InputError when two folders have one name, or the site cannot
    be written. Nothing is written before all folders are accepted.
    """
    several = len(folders) > 1
    if several:
        need_names(folders, taken=("index",))
    pages = [render_page(folder, back=several) for folder in folders]
    texts = {f"{page.name}.html": page.text for page in pages}
    texts = {_INDEX: render_list(pages), **texts} if several else {_INDEX: pages[0].text}
    try:
        site.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise InputError(f"{site}: cannot write here: {error.strerror}") from None
    for name, text in texts.items():
        write_text(site / name, text)
    return [site / name for name in texts], sum(page.left_open for page in pages)


def need_names(folders: Iterable[Path], *, taken: Iterable[str]) -> None:
    """Refuse folders whose last names are not different, also where case does not count.

    taken: names that no folder may have.
    Errors: InputError, also for names that not every system can give to a file.
    """
    seen = {name.casefold() for name in taken}
    for folder in folders:
        name = folder.resolve().name
        problem = ""
        if not name.isprintable() or name[:1] in ("", ".") or set(name) & _UNUSUAL:
            problem = "cannot be that of a file everywhere"
        elif name.casefold() in seen:
            problem = "is taken already"
        if problem:
            raise InputError(
                f"{folder}: the name {name!r} {problem}\n  next: rename or copy the folder"
            )
        seen.add(name.casefold())


def render_list(pages: Sequence[Page]) -> str:
    """Return the page that lists the others."""
    items = [
        f'<li><a href="{escape(quote(page.name))}.html">{escape(page.title)}</a>'
        f"<p>{page.summary}</p></li>"
        for page in pages
    ]
    style = _read("page.css")
    return Template(_read("site.html")).substitute(
        style=style, style_hash=_hash(style), claims="\n".join(items)
    )


def compose_page(
    contents: Contents, files: Mapping[str, bytes], summary: str, *, back: bool = False
) -> str:
    """Return the page that shows some contents, and holds these files.

    files: by name; those of the folder. Nothing is checked here. Cost: linear.
    """
    claim, rows = contents.claim, contents.rows
    style, script = _read("page.css"), _read("page.js")
    data = {name: base64.b64encode(content).decode("ascii") for name, content in files.items()}
    checker = build_checker_script()
    statement = "".join(f"<p>{escape(part)}</p>" for part in claim.statement.split("\n\n"))
    return Template(_read("page.html")).substitute(
        title=escape(claim.title or "A claim and its evidence"),
        back=f'<p class="back"><a href="{_INDEX}">All claims</a></p>\n' if back else "",
        statement=statement if claim.statement else "",
        style=style,
        style_hash=_hash(style),
        script=script,
        script_hash=_hash(script),
        summary=summary,
        formal=_set_formal(tomllib.loads(claim.raw.decode())),
        claim_name=escape(claim.name),
        raw=escape(claim.raw.decode()),
        limits=_set_limits(rows),
        answers=_set_options(row.record["answer"] for row in rows),
        kinds=_set_options(row.record["kind"] for row in rows),
        rows="\n".join(_set_row(place, row) for place, row in enumerate(rows)),
        legend=_set_legend(rows),
        reasons=_set_reasons(rows),
        files="\n".join(_set_file(name, content) for name, content in files.items()),
        data="\n".join(
            set_data(name, value)
            for name, value in (
                ("files", data),
                ("checker", checker),
                ("worker", _read("worker.js")),
            )
        ),
    )


def _read(name: str) -> str:
    return (_HERE / name).read_text(encoding="utf-8")


def _hash(text: str) -> str:
    """Return how a security policy names a script or a style."""
    digest = hashlib.sha256(text.encode()).digest()
    return f"sha256-{base64.b64encode(digest).decode('ascii')}"


def _count(check: FolderCheck) -> str:
    """Return how many instances have which answer, in words."""
    answers = check.answers
    if answers["settled"]:
        return f"{count_of(answers['settled'], 'row')} settled for every value of the parameter"
    left = f", {check.left_open} left open" if check.left_open else ""
    total = answers.total() + check.left_open
    return (
        f"{count_of(total, 'instance')}: {answers['exists']} exist, "
        f"{answers['impossible']} impossible{left}"
    )


def _tell_check(check: FolderCheck) -> str:
    what = "all that is not open" if check.left_open else "all of it"
    return (
        f"Before this page was made, the checker of certify, in Python, read these files and "
        f"accepted {what} ({_count(check)}). A second checker, written on its own "
        "in JavaScript, is part of this page: it rebuilds every graph from the claim and "
        "checks all evidence from the files inside the page. Nothing is fetched, nothing is sent."
    )


def _set_formal(document: Mapping[str, Any]) -> str:
    items = []
    for key, value in _flatten(document):
        if key in ("title", "statement"):
            continue
        label = _LABELS.get(key, "")
        if not label:
            name = key.rpartition(".")[2]
            sort = "Parameter" if key.startswith("instances.") else "Coordinate"
            label = f"{sort} {name}"
        items.append(f"<div><dt>{escape(label)}</dt><dd><code>{_show(value)}</code></dd></div>")
    if not any(key.startswith("answers.") for key, _ in _flatten(document)):
        items.append("<div><dt>Answers</dt><dd>none claimed: a survey</dd></div>")
    return f'<dl class="formal">{"".join(items)}</dl>'


def _flatten(table: Mapping[str, Any], prefix: str = "") -> list[tuple[str, Any]]:
    found: list[tuple[str, Any]] = []
    for key, value in table.items():
        found += _flatten(value, f"{prefix}{key}.") if isinstance(value, dict) else [
            (prefix + key, value)
        ]  # fmt: skip
    return found


def _show(value: object) -> str:
    if isinstance(value, str):
        return escape(value.strip())
    if isinstance(value, list):
        return f"({', '.join(_show(part) for part in value)})"
    return str(value).lower() if isinstance(value, bool) else escape(str(value))


def _set_limits(rows: Sequence[Row]) -> str:
    left = [row for row in rows if row.record["answer"] == "open"]
    said = [
        "For each instance marked <i>accepted</i> the answer is proved: there is the object "
        "itself, or a reason why there is none, and a checker has gone through all of it.",
        "It says nothing about graphs that are not in the table, and whether the rule above "
        "is what the paper means is for its readers to judge.",
        "A page can be altered by whoever passes it on. The digests at its end tell its files; "
        "those who do not trust the script of this page check the files with a program of "
        "their own: <code>certify check FOLDER</code>, or Python alone with "
        "<code>checker.pyz</code> of the authors' archive.",
    ]
    if left:
        names = ", ".join(escape(row.name) for row in left[:12])
        more = f" and {len(left) - 12} more" if len(left) > 12 else ""
        said.append(f"Left open, and so not claimed: {names}{more}.")
    else:
        said.append("Nothing is left open.")
    return f"<ul>{''.join(f'<li>{text}</li>' for text in said)}</ul>"


def _set_options(names: Iterable[str]) -> str:
    options = [escape(name) for name in dict.fromkeys(names)]
    return "".join(f'<option value="{name}">{name}</option>' for name in options)


def _state(tag: str, classes: str = "") -> str:
    """Return an element that page.js fills with the verdict. classes: an attribute, or ""."""
    shape = '<span aria-hidden="true">\u25cb</span>'
    return f'<{tag}{classes} data-state="waiting">{shape} not yet checked here</{tag}>'


_BY = {
    "witness": "shown in full",
    "obstruction": "by an obstruction",
    "counting": "by counting",
    "cases": "by cases",
    "sweep": "by a sweep",
    "clauses": "by clauses",
    "endless": "by a sweep that repeats itself",
}
"""How a reason is announced."""


def _set_row(place: int, row: Row) -> str:
    record = row.record
    answer, kind = escape(record["answer"]), escape(record["kind"])
    name = escape(row.name)
    link = f'<a href="#reason-{place}">{name}</a>' if row.reason else name
    noted = f'<td class="noted">{answer}; {row.note}</td>' if row.note else f"<td>{answer}</td>"
    state = _state("td", ' class="state"')
    return (
        f'<tr data-instance="{escape(row.key)}" data-answer="{answer}" data-kind="{kind}">'
        f'<th scope="row">{link}</th>{state}{noted}<td>{kind}</td>'
        f'<td class="number">{int(record["length"])}</td></tr>'
    )


def _set_legend(rows: Sequence[Row]) -> str:
    kinds = dict.fromkeys(row.record["kind"] for row in rows)
    said = "; ".join(f"<i>{kind}</i>: {_KINDS[kind]}" for kind in kinds if kind in _KINDS)
    return (
        f'<p class="legend">Kinds: {said}. The length tells how long the evidence is to read: '
        "its integers, or the states or steps of a computation.</p>"
    )


def _set_reasons(rows: Sequence[Row]) -> str:
    state = _state("span", ' class="state"')
    items = []
    for place, row in enumerate(rows):
        if row.reason:
            by = _BY.get(row.record["kind"], "no reason was found")
            head = f"<b>{escape(row.name)}</b>: {escape(row.record['answer'])}, {by}"
            items.append(
                f'<details class="reason" id="reason-{place}" data-row="{place}">'
                f"<summary>{state}{head}</summary>\n{row.reason}\n</details>"
            )
    if len(rows) > MOST_TOLD:
        items.append(
            f"<p>The reasons of the first {MOST_TOLD} instances are written out here; "
            "<code>certify explain FOLDER INSTANCE</code> tells the others.</p>"
        )
    return "\n".join(items)


def _set_file(name: str, content: bytes) -> str:
    button = f'<button type="button" data-save="{escape(name)}">Save</button>'
    return (
        f'<tr><th scope="row"><code>{escape(name)}</code></th><td class="number">{len(content)}'
        f"</td><td><code>{digest_of(content)}</code></td>"
        f"<td data-scripted hidden>{button}</td></tr>"
    )
